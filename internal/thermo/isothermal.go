package thermo

import "math"

// Isothermal is a pair at one temperature with all that does not depend on the
// composition worked out: for many evaluations in a row.
type Isothermal struct {
	tau12, tau21, g12, g21 float64
	molarRatio             float64 // of the solvent to water
}

// At prepares the pair at tK, as it was fitted: a Shift is given each time.
func (m *Mixture) At(tK float64) Isothermal {
	tau, g := m.NRTL.factors(tK)
	return Isothermal{
		tau12: tau[0][1], tau21: tau[1][0], g12: g[0][1], g21: g[1][0],
		molarRatio: m.Solvent.MolarMassKgPerMol / m.Water.MolarMassKgPerMol,
	}
}

// LnActivity is the logarithm of the water activity of a solution of ratio kg of
// water per kg of solvent, shift the value of a Shift at the temperature:
//
//	ln gamma_1 = x2^2 (tau21 (G21/(x1 + x2 G21))^2 + tau12 G12/(x2 + x1 G12)^2) + shift x2^2
//
// slope is d ln a/d ln(ratio) of the dilute solution, 1 - x1.
func (i *Isothermal) LnActivity(lnRatio, shift float64) (lnA, slope float64) {
	mol := math.Exp(lnRatio) * i.molarRatio
	x1 := mol / (1 + mol)
	x2 := 1 - x1
	first := i.g21 / (x1 + x2*i.g21)
	second := x2 + x1*i.g12
	lnGamma := x2 * x2 * (i.tau21*first*first + i.tau12*i.g12/(second*second) + shift)
	return math.Log(x1) + lnGamma, x2
}

// LnRatioAt is the solution in which water has the activity, found from the dilute
// side. ok is false where there is none below leave kg/kg.
func (i *Isothermal) LnRatioAt(lnActivity, shift, leave float64) (lnRatio float64, ok bool) {
	at, slope := i.LnActivity(math.Log(1e-12), shift)
	lnRatio = math.Log(1e-12) + (lnActivity-at)/slope
	lnLeave := math.Log(leave)
	for range 60 {
		lnRatio = math.Min(lnRatio, lnLeave)
		const step = 1e-5
		f, _ := i.LnActivity(lnRatio, shift)
		next, _ := i.LnActivity(lnRatio+step, shift)
		d := (lnActivity - f) * step / (next - f)
		if !(next > f) {
			return lnRatio, false
		}
		if math.Abs(d) < 1e-9 {
			return lnRatio, true
		}
		lnRatio += math.Max(-2, math.Min(2, d))
	}
	return lnRatio, false
}
