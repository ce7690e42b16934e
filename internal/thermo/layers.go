package thermo

import (
	"fmt"
	"math"
)

// TernaryLayers are the layers in a receiver and what it must do with them.
type TernaryLayers struct {
	TernarySplit
	OrganicKgPerM3, AqueousKgPerM3 float64
	Return                         Returns
	Reason                         string // why Return is None
}

// Settle says which layer of a split goes back to the pot, from the densities of
// the layers at tK, or why a receiver cannot part them.
func (m *Ternary) Settle(s TernarySplit, tK float64) TernaryLayers {
	l := TernaryLayers{TernarySplit: s, Return: None}
	if !s.Exists {
		l.Reason = fmt.Sprintf("the condensate is one liquid at %.1f °C", tK-273.15)
		return l
	}
	l.OrganicKgPerM3, l.AqueousKgPerM3 = m.Density(s.Organic, tK), m.Density(s.Aqueous, tK)
	switch difference := l.DensityDifference(); {
	case difference < LeastDensityDifference:
		l.Reason = fmt.Sprintf("the layers' densities differ by %.1f %% only and do not settle", 100*difference)
	case l.OrganicKgPerM3 < l.AqueousKgPerM3:
		l.Return = Light
	default:
		l.Return = Heavy
	}
	return l
}

// DensityDifference is how far the density of the organic layer is from that of
// the aqueous one, as a share of the latter.
func (l *TernaryLayers) DensityDifference() float64 {
	return math.Abs(l.OrganicKgPerM3/l.AqueousKgPerM3 - 1)
}

// CheckReceiver refuses a receiver in which water, the carrier (the main
// component of the organic layer) or the model would freeze or fail.
func (m *Ternary) CheckReceiver(tK float64) error {
	for _, p := range []*Pure{m.Pure[InWater], m.Pure[InCarrier]} {
		if tK <= p.MeltingK {
			return fmt.Errorf("%s freezes at %.1f °C, the receiver is at %.1f °C", p.Called(), p.MeltingK-273.15, tK-273.15)
		}
	}
	return m.CheckTemperature(tK)
}
