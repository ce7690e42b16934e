package thermo

import (
	"fmt"
	"math"
)

// GasConstant is the molar gas constant, J/(mol K) (SI 2019, exact to the digits given).
const GasConstant = 8.314462618

// Equation names the published form of a correlation.
type Equation string

// The published forms, T in kelvin. tau = 1 - T/Tc, Tr = T/Tc.
const (
	// DIPPR101: ln Y = c1 + c2/T + c3 ln T + c4 T^c5.
	DIPPR101 Equation = "DIPPR101"
	// Antoine10: log10 Y = c1 - c2/(T + c3).
	Antoine10 Equation = "ANTOINE10"
	// AntoineLn: ln Y = c1 - c2/(T + c3).
	AntoineLn Equation = "ANTOINE_LN"
	// Wagner25: ln(Y/c6) = (c1 tau + c2 tau^1.5 + c3 tau^2.5 + c4 tau^5)/Tr, Tc = c5.
	Wagner25 Equation = "WAGNER25"
	// Wagner36: ln(Y/c6) = (c1 tau + c2 tau^1.5 + c3 tau^3 + c4 tau^6)/Tr, Tc = c5.
	Wagner36 Equation = "WAGNER36"
	// DIPPR106: Y = c1 tau^(c2 + c3 Tr + c4 Tr^2 + c6 Tr^3), Tc = c5.
	DIPPR106 Equation = "DIPPR106"
	// PPDS12: Y = R Tc (c1 tau^(1/3) + c2 tau^(2/3) + c3 tau + c4 tau^2 + c5 tau^6), Tc = c6.
	PPDS12 Equation = "PPDS12"
	// Watson: Y = c1 ((1 - T/c4)/(1 - c2/c4))^c3.
	Watson Equation = "WATSON"
	// DIPPR100: Y = c1 + c2 T + c3 T^2 + c4 T^3 + c5 T^4.
	DIPPR100 Equation = "DIPPR100"
	// DIPPR114: Y = c1^2/tau + c2 - 2 c1 c3 tau - c1 c4 tau^2 - c3^2 tau^3/3 - c3 c4 tau^4/2 - c4^2 tau^5/5, Tc = c5.
	DIPPR114 Equation = "DIPPR114"
	// CubicR: Y = R (c1 + c2 t + c3 t^2 + c4 t^3), t = T/100.
	CubicR Equation = "CUBIC_R"
	// Linear298: Y = c1 + c2 (T - 298.15).
	Linear298 Equation = "LINEAR298"
	// DIPPR105: Y = c1 / c2^(1 + (1 - T/c3)^c4).
	DIPPR105 Equation = "DIPPR105"
	// VDI106: Y = c6 + c1 tau^0.35 + c2 tau^(2/3) + c3 tau + c4 tau^(4/3), Tc = c5.
	VDI106 Equation = "VDI106"
	// QuadRho: Y = c1 + c2 T + c3 T^2.
	QuadRho Equation = "QUADRHO"
	// PPDS9: Y = c5 exp(c1 x^(1/3) + c2 x^(4/3)), x = (c3 - T)/(T - c4), real cube root.
	PPDS9 Equation = "PPDS9"
	// VN3: Y = 1e-3 10^(c1 + c2/(c3 - T)).
	VN3 Equation = "VN3"
	// Andrade: ln Y = c1 + c2/T.
	Andrade Equation = "ANDRADE"
)

// Correlation is one property as a function of temperature.
type Correlation struct {
	Equation     Equation
	C            [7]float64
	Scale        float64 // factor from the printed unit to SI
	TMinK, TMaxK float64 // range of the fit; 0 where the source prints none
}

// Known reports whether the equation is one of the published forms above.
func (e Equation) Known() bool {
	_, ok := evaluate(e, &[7]float64{}, 300)
	return ok
}

// Check reports a correlation that cannot be evaluated.
func (c Correlation) Check() error {
	if !c.Equation.Known() {
		return fmt.Errorf("equation %q is not known", c.Equation)
	}
	if c.Scale == 0 {
		return fmt.Errorf("equation %s has no unit", c.Equation)
	}
	return nil
}

// At returns the property at tK in SI units. Outside the physical range of the
// form (above the critical temperature, say) the result is NaN.
func (c Correlation) At(tK float64) float64 {
	value, _ := evaluate(c.Equation, &c.C, tK)
	return c.Scale * value
}

// Extrapolated reports whether tK lies outside the range of the fit.
func (c Correlation) Extrapolated(tK float64) bool {
	return (c.TMinK > 0 && tK < c.TMinK) || (c.TMaxK > 0 && tK > c.TMaxK)
}

// evaluate applies an equation to its coefficients; ok is false where it is not known.
func evaluate(e Equation, c *[7]float64, t float64) (value float64, ok bool) {
	switch e {
	case DIPPR101:
		return dippr101(c, t), true
	case Antoine10:
		return antoine10(c, t), true
	case AntoineLn:
		return antoineLn(c, t), true
	case Wagner25:
		return wagner25(c, t), true
	case Wagner36:
		return wagner36(c, t), true
	case DIPPR106:
		return dippr106(c, t), true
	case PPDS12:
		return ppds12(c, t), true
	case Watson:
		return watson(c, t), true
	case DIPPR100:
		return dippr100(c, t), true
	case DIPPR114:
		return dippr114(c, t), true
	case CubicR:
		return cubicR(c, t), true
	case Linear298:
		return linear298(c, t), true
	case DIPPR105:
		return dippr105(c, t), true
	case VDI106:
		return vdi106(c, t), true
	case QuadRho:
		return quadRho(c, t), true
	case PPDS9:
		return ppds9(c, t), true
	case VN3:
		return vn3(c, t), true
	case Andrade:
		return andrade(c, t), true
	}
	return math.NaN(), false
}

func dippr101(c *[7]float64, t float64) float64 {
	return math.Exp(c[0] + c[1]/t + c[2]*math.Log(t) + c[3]*power(t, c[4]))
}

func antoine10(c *[7]float64, t float64) float64 { return math.Pow(10, c[0]-c[1]/(t+c[2])) }

func antoineLn(c *[7]float64, t float64) float64 { return math.Exp(c[0] - c[1]/(t+c[2])) }

func wagner25(c *[7]float64, t float64) float64 {
	tr := t / c[4]
	u := 1 - tr
	return c[5] * math.Exp((c[0]*u+c[1]*math.Pow(u, 1.5)+c[2]*math.Pow(u, 2.5)+c[3]*math.Pow(u, 5))/tr)
}

func wagner36(c *[7]float64, t float64) float64 {
	tr := t / c[4]
	u := 1 - tr
	return c[5] * math.Exp((c[0]*u+c[1]*math.Pow(u, 1.5)+c[2]*u*u*u+c[3]*math.Pow(u, 6))/tr)
}

func dippr106(c *[7]float64, t float64) float64 {
	tr := t / c[4]
	return c[0] * math.Pow(1-tr, c[1]+tr*(c[2]+tr*(c[3]+tr*c[5])))
}

func ppds12(c *[7]float64, t float64) float64 {
	u := 1 - t/c[5]
	return GasConstant * c[5] * (c[0]*math.Cbrt(u) + c[1]*math.Cbrt(u*u) + u*(c[2]+u*c[3]) + c[4]*math.Pow(u, 6))
}

func watson(c *[7]float64, t float64) float64 {
	return c[0] * math.Pow((1-t/c[3])/(1-c[1]/c[3]), c[2])
}

func dippr100(c *[7]float64, t float64) float64 {
	return c[0] + t*(c[1]+t*(c[2]+t*(c[3]+t*c[4])))
}

func dippr114(c *[7]float64, t float64) float64 {
	u := 1 - t/c[4]
	return c[0]*c[0]/u + c[1] - u*(2*c[0]*c[2]+u*(c[0]*c[3]+u*(c[2]*c[2]/3+u*(c[2]*c[3]/2+u*c[3]*c[3]/5))))
}

func cubicR(c *[7]float64, t float64) float64 {
	h := t / 100
	return GasConstant * (c[0] + h*(c[1]+h*(c[2]+h*c[3])))
}

func linear298(c *[7]float64, t float64) float64 { return c[0] + c[1]*(t-298.15) }

func dippr105(c *[7]float64, t float64) float64 {
	return c[0] / math.Pow(c[1], 1+math.Pow(1-t/c[2], c[3]))
}

func vdi106(c *[7]float64, t float64) float64 {
	u := 1 - t/c[4]
	return c[5] + c[0]*math.Pow(u, 0.35) + c[1]*math.Cbrt(u*u) + u*(c[2]+c[3]*math.Cbrt(u))
}

func quadRho(c *[7]float64, t float64) float64 { return c[0] + t*(c[1]+t*c[2]) }

func ppds9(c *[7]float64, t float64) float64 {
	x := (c[2] - t) / (t - c[3])
	return c[4] * math.Exp(math.Cbrt(x)*(c[0]+c[1]*x))
}

func vn3(c *[7]float64, t float64) float64 { return 1e-3 * math.Pow(10, c[0]+c[1]/(c[2]-t)) }

func andrade(c *[7]float64, t float64) float64 { return math.Exp(c[0] + c[1]/t) }

// power is t^n, exact and quick for the whole exponents that the tables use.
func power(t, n float64) float64 {
	switch n {
	case 0:
		return 1
	case 1:
		return t
	case 2:
		return t * t
	case 6:
		cube := t * t * t
		return cube * cube
	}
	return math.Pow(t, n)
}
