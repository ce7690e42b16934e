package thermo

import "math"

// Isothermal is a pair at one temperature with all that does not depend on the
// composition worked out: for many evaluations in a row.
type Isothermal struct {
	tau12, tau21, g12, g21 float64
	molarRatio             float64 // of the solvent to water
	lnMolarRatio           float64
}

// At prepares the pair at tK, as it was fitted: a Shift is given each time.
func (m *Mixture) At(tK float64) Isothermal {
	tau, g := m.NRTL.factors(tK)
	molarRatio := m.Solvent.MolarMassKgPerMol / m.Water.MolarMassKgPerMol
	return Isothermal{
		tau12: tau[0][1], tau21: tau[1][0], g12: g[0][1], g21: g[1][0],
		molarRatio: molarRatio, lnMolarRatio: math.Log(molarRatio),
	}
}

// LnActivity is the logarithm of the water activity of a solution of exp(lnRatio) kg
// of water per kg of solvent, shift the value of a Shift at the temperature:
//
//	ln gamma_1 = x2^2 (tau21 (G21/(x1 + x2 G21))^2 + tau12 G12/(x2 + x1 G12)^2) + shift x2^2
//
// slope is d ln a/d ln(ratio).
func (i *Isothermal) LnActivity(lnRatio, shift float64) (lnA, slope float64) {
	return i.LnActivityOf(math.Exp(lnRatio), shift)
}

// LnActivityOf is LnActivity of a ratio itself. With dx1/d ln(ratio) = x1 x2
//
//	d ln a/d ln(ratio) = x2 (1 + x1 d ln gamma_1/dx1)
func (i *Isothermal) LnActivityOf(ratio, shift float64) (lnA, slope float64) {
	mol := ratio * i.molarRatio
	x1 := mol / (1 + mol)
	x2 := 1 - x1
	first := i.g21 / (x1 + x2*i.g21)
	second := 1 / (x2 + x1*i.g12)
	a, b := i.tau21*first*first, i.tau12*i.g12*second*second
	sum := a + b + shift
	perX1 := -2*x2*sum + 2*x2*x2*(b*second*(1-i.g12)-a*first*(1-i.g21)/i.g21)
	return math.Log(x1) + x2*x2*sum, x2 * (1 + x1*perX1)
}

// Dilute is the ln ratio at which water has the activity if the solution is so thin
// that its activity coefficient is that at infinite dilution.
func (i *Isothermal) Dilute(lnActivity, shift float64) (lnRatio float64) {
	return lnActivity - i.tau21 - i.tau12*i.g12 - shift - i.lnMolarRatio
}

// LnRatioAt is the solution in which water has the activity, found from the dilute
// side. ok is false where there is none below leave kg/kg.
func (i *Isothermal) LnRatioAt(lnActivity, shift, leave float64) (lnRatio float64, ok bool) {
	lnRatio = i.Dilute(lnActivity, shift)
	lnLeave := math.Log(leave)
	for range 60 {
		lnRatio = math.Min(lnRatio, lnLeave)
		f, slope := i.LnActivity(lnRatio, shift)
		if !(slope > 0) {
			return lnRatio, false
		}
		d := (lnActivity - f) / slope
		if math.Abs(d) < 1e-9 {
			return lnRatio, true
		}
		lnRatio += math.Max(-2, math.Min(2, d))
	}
	return lnRatio, false
}
