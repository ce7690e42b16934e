package thermo

import "math"

// OrganicLayer is a correlation of the water in the organic layer of an alcohol,
// a carrier and water, in mass fractions w of that layer:
//
//	r = w_alcohol/(w_alcohol + w_carrier),  w_water = W0 + exp(P0 + P1 ln r + P2 ln^2 r)
//
// Fitted for this project to tie-lines of the IUPAC-NIST Solubility Data Series
// (volume 69) at 15 to 35 °C. Outside RMin to RMax, and in a hot layer (where
// published water is 0.8 to 2.6 times as much), it does not hold.
type OrganicLayer struct {
	W0, P0, P1, P2 float64
	RMin, RMax     float64
	Factor         float64 // published against computed, root mean square, as a factor
}

// Temperatures between which an OrganicLayer holds.
const (
	OrganicLayerLowestK  = 288.15
	OrganicLayerHighestK = 308.15
)

// Water returns the mass fraction of water at r and tK; ok is false outside the range.
func (o *OrganicLayer) Water(r, tK float64) (water float64, ok bool) {
	if o == nil || !(r >= o.RMin && r <= o.RMax) || tK < OrganicLayerLowestK || tK > OrganicLayerHighestK {
		return math.NaN(), false
	}
	ln := math.Log(r)
	return o.W0 + math.Exp(o.P0+ln*(o.P1+o.P2*ln)), true
}

// Rewet moves water between the layers of a split until the organic layer holds
// what the correlation gives, times factor, and the aqueous layer keeps its
// composition. Where the correlation does not hold, the water that the split
// gives is multiplied by factor. known reports whether the correlation was used.
// A liquid that cannot supply the water is one layer.
func (m *Ternary) Rewet(s TernarySplit, z Fractions, tK float64, o *OrganicLayer, factor float64) (wet TernarySplit, known bool) {
	if !s.Exists {
		return s, false
	}
	organic := m.Mass(s.Organic)
	_, known = o.Water(alcoholShare(organic), tK)
	if !known && factor == 1 {
		return s, false
	}
	goal := func(w Fractions) float64 {
		if water, ok := o.Water(alcoholShare(w), tK); ok && known {
			return factor * water
		}
		return factor * organic[InWater]
	}
	feed := m.Mass(z)
	aqueous := m.Mass(s.Aqueous)
	excess := func(share float64) float64 { // of water in what is left when a mass share of aqueous layer is taken
		left := without(feed, aqueous, share)
		return math.Log(left[InWater] / goal(left))
	}
	most := feed[InWater] / aqueous[InWater] * (1 - 1e-12)
	for i := range feed {
		most = math.Min(most, feed[i]/aqueous[i]*(1-1e-12))
	}
	if !(excess(0) > 0) {
		return TernarySplit{}, known
	}
	share, err := Brent(excess, 0, most, 1e-12)
	if err != nil {
		return s, false
	}
	wet = TernarySplit{Exists: true, Organic: m.Mole(without(feed, aqueous, share)), Aqueous: s.Aqueous}
	wet.AqueousShare = share / m.MolarMass(s.Aqueous) * m.MolarMass(z)
	return wet, known
}

// alcoholShare is alcohol/(alcohol + carrier) by mass.
func alcoholShare(w Fractions) float64 { return w[InSolvent] / (w[InSolvent] + w[InCarrier]) }

// without takes a mass share of a layer out of a feed, in mass fractions.
func without(feed, layer Fractions, share float64) (left Fractions) {
	for i := range feed {
		left[i] = (feed[i] - share*layer[i]) / (1 - share)
	}
	return left
}
