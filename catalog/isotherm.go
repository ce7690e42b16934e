package catalog

import (
	"math"

	"parch/internal/thermo"
)

// Isotherm is the water on an agent as a function of the partial pressure of
// water vapour and the temperature. One of Sites, Toth and Terms is set.
type Isotherm struct {
	Sites        []Site
	Toth         *Toth
	Terms        *Terms
	TMinK, TMaxK float64 // of the data; 0 where none is stated
	LowestPa     float64 // of the data; below it the form extrapolates
	HighestPa    float64
	Origin
}

// Site is one term of a Langmuir isotherm.
type Site struct {
	CapacityKgPerKg float64
	B0PerPa         float64
	HeatJPerMol     float64
}

// Toth holds the constants of w = ws b p/(1 + (b p)^n)^(1/n), b = b0 exp(Qs/T),
// n = n0 + c/T. For silica gel ws is a constant of the fit and no capacity.
type Toth struct {
	CapacityKgPerKg float64 // ws
	B0PerPa         float64
	HeatK           float64 // Qs
	N0              float64
	CK              float64
}

// Terms holds the constants of the two-term form for alumina,
//
//	q = q1 k a/(1 + k a) + q2 a^m,  a = p exp(H/R (1/T - 1/298.15))/p0
type Terms struct {
	FirstKgPerKg, Affinity   float64 // q1, k
	SecondKgPerKg, Exponent  float64 // q2, m
	HeatJPerMol, ReferencePa float64 // H, p0
}

// LoadingKgPerKg is the water held at equilibrium with water vapour of
// partialPressurePa (in a liquid: activity times the vapour pressure of water) at
// tK, in kg per kg of dry agent. The multi-site Langmuir form is
//
//	q = sum_i qs_i b_i p/(1 + b_i p),  b_i = b0_i exp(Q_i/(R T))
//
// The others stand with Toth and Terms. Range, origin and grade of the constants
// stand in the Isotherm. Outside the range of the data Langmuir and Toth go to
// Henry's law below and to their capacity above. The 3A set reproduces its data
// with an rms of 0.106 in ln q, the Toth sets with 0.042 to 0.064; alumina is
// good to 40 %.
func (i *Isotherm) LoadingKgPerKg(partialPressurePa, tK float64) float64 {
	switch {
	case i.Toth != nil:
		return i.Toth.loading(partialPressurePa, tK)
	case i.Terms != nil:
		return i.Terms.loading(partialPressurePa, tK)
	}
	var q float64
	for _, site := range i.Sites {
		bp := site.B0PerPa * math.Exp(site.HeatJPerMol/(thermo.GasConstant*tK)) * partialPressurePa
		q += site.CapacityKgPerKg * bp / (1 + bp)
	}
	return q
}

// Extrapolated reports whether a state lies outside the data of the isotherm.
func (i *Isotherm) Extrapolated(partialPressurePa, tK float64) bool {
	return i.TMaxK > 0 && (tK < i.TMinK || tK > i.TMaxK) ||
		i.HighestPa > 0 && (partialPressurePa < i.LowestPa || partialPressurePa > i.HighestPa)
}

func (t *Toth) loading(pPa, tK float64) float64 {
	if pPa <= 0 {
		return 0
	}
	bp := t.B0PerPa * math.Exp(t.HeatK/tK) * pPa
	n := t.N0 + t.CK/tK
	// (1 + bp^n)^(1/n) in logarithms: n may be as small as 0.07 and the power large.
	return t.CapacityKgPerKg * math.Exp(math.Log(bp)-math.Log1p(math.Pow(bp, n))/n)
}

func (t *Terms) loading(pPa, tK float64) float64 {
	a := pPa * math.Exp(t.HeatJPerMol/thermo.GasConstant*(1/tK-1/298.15)) / t.ReferencePa
	return t.FirstKgPerKg*t.Affinity*a/(1+t.Affinity*a) + t.SecondKgPerKg*math.Pow(a, t.Exponent)
}
