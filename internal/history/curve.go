package history

import (
	"sort"

	"parch/catalog"
)

// ActivatedAt is the water (kg/kg) that a sieve holds after an activation at tK
// with ordinary handling, interpolated linearly between the catalog's histories.
// key names the history at that very temperature, or is empty. ok is false outside
// the range from lowK to highK.
func ActivatedAt(all []catalog.History, tK float64) (kgPerKg float64, key string, lowK, highK float64, ok bool) {
	curve := Activations(all)
	if len(curve) == 0 {
		return 0, "", 0, 0, false
	}
	const rounding = 1e-6
	lowK, highK = curve[0].TemperatureK, curve[len(curve)-1].TemperatureK
	if tK < lowK-rounding || tK > highK+rounding {
		return 0, "", lowK, highK, false
	}
	at := sort.Search(len(curve), func(i int) bool { return curve[i].TemperatureK >= tK-rounding })
	high := curve[at]
	if high.TemperatureK-tK < rounding {
		return high.ResidualKgPerKg.SI, high.Key, lowK, highK, true
	}
	low := curve[at-1]
	share := (tK - low.TemperatureK) / (high.TemperatureK - low.TemperatureK)
	return low.ResidualKgPerKg.SI + share*(high.ResidualKgPerKg.SI-low.ResidualKgPerKg.SI), "", lowK, highK, true
}

// Activations sorts the histories that have a temperature. Where two share one,
// that which leaves more water counts: it is the ordinary handling.
func Activations(all []catalog.History) []catalog.History {
	var curve []catalog.History
	for _, h := range all {
		if h.TemperatureK > 0 {
			curve = append(curve, h)
		}
	}
	sort.SliceStable(curve, func(i, j int) bool {
		if curve[i].TemperatureK != curve[j].TemperatureK {
			return curve[i].TemperatureK < curve[j].TemperatureK
		}
		return curve[i].ResidualKgPerKg.SI > curve[j].ResidualKgPerKg.SI
	})
	var distinct []catalog.History
	for _, h := range curve {
		if len(distinct) == 0 || distinct[len(distinct)-1].TemperatureK != h.TemperatureK {
			distinct = append(distinct, h)
		}
	}
	return distinct
}
