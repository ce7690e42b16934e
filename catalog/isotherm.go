package catalog

import (
	"math"

	"parch/internal/thermo"
)

// LoadingKgPerKg is the water held at equilibrium with water vapour of
// partialPressurePa (in a liquid: activity times the vapour pressure of water) at
// tK, in kg per kg of dry agent:
//
//	q = sum_i qs_i b_i p/(1 + b_i p),  b_i = b0_i exp(Q_i/(R T))
//
// Multi-site Langmuir isotherm. Range, origin and grade of the constants stand
// in Origin; outside the range of the data the form goes to Henry's law below and
// to the sum of the capacities above. The 3A set reproduces its data with an rms
// of 0.106 in ln q.
func (i *Isotherm) LoadingKgPerKg(partialPressurePa, tK float64) float64 {
	var q float64
	for _, site := range i.Sites {
		bp := site.B0PerPa * math.Exp(site.HeatJPerMol/(thermo.GasConstant*tK)) * partialPressurePa
		q += site.CapacityKgPerKg * bp / (1 + bp)
	}
	return q
}
