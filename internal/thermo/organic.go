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

// taper is the part of the range of ln r, at each end, over which the correlation is
// phased in, so that a split does not jump where its range ends.
const taper = 0.05

// weight of the correlation at r: 1 inside its range, 0 outside.
func (o *OrganicLayer) weight(r, tK float64) float64 {
	if _, ok := o.Water(r, tK); !ok {
		return 0
	}
	edge := taper * math.Log(o.RMax/o.RMin)
	return math.Min(1, math.Min(math.Log(r/o.RMin), math.Log(o.RMax/r))/edge)
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
	weight := o.weight(alcoholShare(organic), tK)
	if weight == 0 && factor == 1 {
		return s, false
	}
	lnGoal := func(w Fractions) float64 {
		ln := math.Log(factor * organic[InWater])
		if weight > 0 {
			water, _ := o.Water(math.Max(o.RMin, math.Min(o.RMax, alcoholShare(w))), tK)
			ln += weight * math.Log(water/organic[InWater])
		}
		return ln
	}
	feed := m.Mass(z)
	aqueous := m.Mass(s.Aqueous)
	excess := func(share float64) float64 { // of water in what is left when a mass share of aqueous layer is taken
		left := without(feed, aqueous, share)
		return math.Log(left[InWater]) - lnGoal(left)
	}
	most := 1.0
	for i := range feed {
		most = math.Min(most, feed[i]/aqueous[i])
	}
	if !(excess(0) > 0) {
		return TernarySplit{}, weight > 0
	}
	share, err := Brent(excess, 0, most*(1-1e-12), 1e-12)
	if err != nil {
		return s, false
	}
	wet = s
	wet.Organic = m.Mole(without(feed, aqueous, share))
	wet.AqueousShare = share / m.MolarMass(s.Aqueous) * m.MolarMass(z)
	return wet, weight > 0
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
