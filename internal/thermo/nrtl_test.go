package thermo_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/thermo"
)

// The parameter sets and the ln gamma come from the same fit of this project,
// evaluated by another program; they check the equation, not the fit.
var vectors = []struct {
	system  string
	model   thermo.NRTL
	tK      float64
	x       [3]float64
	lnGamma []float64
}{
	{"water + toluene", thermo.BinaryNRTL(6.29733, 497.4, -3.35758, 2539.32, 0.28), 350, [3]float64{0.001, 0.999}, []float64{4.76337431, 0.00001166}},
	{"water + 1-butanol", thermo.BinaryNRTL(4.40866, -284.882, -2.29243, 1105.56, 0.45), 330, [3]float64{0.4, 0.6}, []float64{0.80411050, 0.22637032}},
	{"water + ethanol", thermo.BinaryNRTL(1.56736, -15.0743, 0.112054, 36.1265, 0.47), 351, [3]float64{0.2, 0.8}, []float64{0.72329484, 0.02717582}},
	{"water + ethyl acetate", thermo.BinaryNRTL(6.03935, -781.005, -1.21698, 865.49, 0.35), 340, [3]float64{0.1, 0.9}, []float64{1.91121195, 0.02202481}},
	{"water + tetrahydrofuran", thermo.BinaryNRTL(1.76116, -59.7597, 1.32865, 59.9106, 0.4), 337, [3]float64{0.1, 0.9}, []float64{1.79051173, 0.02838799}},
	{"water + dimethylformamide", thermo.BinaryNRTL(1.6469, 47.0165, 0.99738, -723.553, 0.3), 373, [3]float64{0.3, 0.7}, []float64{0.12630881, -0.00280885}},
	{"water + ethanol + cyclohexane", waterEthanolCyclohexane(), 335, [3]float64{0.1, 0.4, 0.5}, []float64{2.11421177, 0.39136745, 0.69449600}},
}

func waterEthanolCyclohexane() thermo.NRTL {
	m := thermo.NRTL{N: 3}
	set := func(i, j int, aij, bij, aji, bji, alpha float64) {
		m.A[i][j], m.B[i][j], m.A[j][i], m.B[j][i] = aij, bij, aji, bji
		m.Alpha[i][j], m.Alpha[j][i] = alpha, alpha
	}
	set(0, 1, 1.56736, -15.0743, 0.112054, 36.1265, 0.47)
	set(0, 2, 7.86421, 608.388, -5.81264, 3795.72, 0.23)
	set(1, 2, -4.43239, 1950.53, 0.690411, 525.621, 0.47)
	return m
}

// The parameters are printed to six significant digits while the vectors were
// made with all of them, so each vector is held to the bound that follows from
// half a unit in the last digit of every parameter (at most 3e-5 here).
func TestActivityCoefficients(t *testing.T) {
	for _, v := range vectors {
		got := v.model.LnGamma(v.x, v.tK)
		bound := roundingBound(v.model, v.x, v.tK)
		for i, want := range v.lnGamma {
			if d := math.Abs(got[i] - want); !(d <= bound[i]+1e-8) {
				t.Errorf("%s: ln gamma %d = %.8f, want %.8f within %.1g", v.system, i+1, got[i], want, bound[i])
			}
		}
	}
}

// roundingBound adds up how far each ln gamma moves when each parameter moves
// by half a unit of its sixth significant digit.
func roundingBound(m thermo.NRTL, x [3]float64, tK float64) (bound [3]float64) {
	halfUnit := func(v float64) float64 {
		if v == 0 {
			return 0
		}
		return 0.5 * math.Pow(10, math.Floor(math.Log10(math.Abs(v)))-5)
	}
	base := m.LnGamma(x, tK)
	for i := range m.N {
		for j := range m.N {
			for _, p := range []*float64{&m.A[i][j], &m.B[i][j]} {
				kept := *p
				*p += halfUnit(kept)
				moved := m.LnGamma(x, tK)
				*p = kept
				for k := range m.N {
					bound[k] += math.Abs(moved[k] - base[k])
				}
			}
		}
	}
	return bound
}

// The binary form as printed by Renon & Prausnitz, AIChE J. 14 (1968) 135,
// equations 15 and 16, to 1e-12.
func TestActivityCoefficientsAgainstTheBinaryForm(t *testing.T) {
	for _, v := range vectors[:6] {
		m, x1, x2 := v.model, v.x[0], v.x[1]
		tau12 := m.A[0][1] + m.B[0][1]/v.tK
		tau21 := m.A[1][0] + m.B[1][0]/v.tK
		g12, g21 := math.Exp(-m.Alpha[0][1]*tau12), math.Exp(-m.Alpha[0][1]*tau21)
		ln1 := x2 * x2 * (tau21*math.Pow(g21/(x1+x2*g21), 2) + tau12*g12/math.Pow(x2+x1*g12, 2))
		ln2 := x1 * x1 * (tau12*math.Pow(g12/(x2+x1*g12), 2) + tau21*g21/math.Pow(x1+x2*g21, 2))
		got1, got2 := m.Pair(x1, v.tK)
		if math.Abs(got1-ln1) > 1e-12 || math.Abs(got2-ln2) > 1e-12 {
			t.Errorf("%s: %.12f and %.12f, want %.12f and %.12f", v.system, got1, got2, ln1, ln2)
		}
	}
}

// Gibbs and Duhem: sum x_i d ln gamma_i = 0 at constant temperature.
func TestActivityCoefficientsObeyGibbsDuhem(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := rapid.SampledFrom(vectors[:6]).Draw(t, "system").model
		x := rapid.Float64Range(0.01, 0.99).Draw(t, "x")
		tK := rapid.Float64Range(280, 380).Draw(t, "T")
		const h = 1e-5
		w1, s1 := m.Pair(x-h, tK)
		w2, s2 := m.Pair(x+h, tK)
		sum := x*(w2-w1) + (1-x)*(s2-s1)
		if math.Abs(sum) > 1e-7*math.Max(1, math.Abs(w2-w1)/h) {
			t.Fatalf("x = %g, T = %g: sum x d ln gamma = %g", x, tK, sum)
		}
	})
}

func TestBrentFindsRoots(t *testing.T) {
	for _, c := range []struct {
		f          func(float64) float64
		lo, hi, at float64
	}{
		{func(x float64) float64 { return x*x - 2 }, 0, 2, math.Sqrt2},
		{func(x float64) float64 { return math.Cos(x) - x }, 0, 1, 0.7390851332151607}, // fixed point of the cosine
		{func(x float64) float64 { return math.Exp(-50*x) - 1e-9 }, 0, 1, math.Log(1e9) / 50},
	} {
		got, err := thermo.Brent(c.f, c.lo, c.hi, 1e-13)
		if err != nil || math.Abs(got-c.at) > 1e-12 {
			t.Errorf("root = %.15f, %v; want %.15f", got, err, c.at)
		}
	}
	if _, err := thermo.Brent(func(x float64) float64 { return 1 + x*x }, -1, 1, 1e-9); err == nil {
		t.Error("no sign change, yet no error")
	}
}
