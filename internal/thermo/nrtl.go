package thermo

import "math"

// NRTL holds the interaction parameters of n components.
//
//	tau_ij = A_ij + B_ij/T,  G_ij = exp(-Alpha_ij tau_ij)
//
// Renon & Prausnitz, AIChE J. 14 (1968) 135. B in kelvin.
type NRTL struct {
	N           int
	A, B, Alpha [MaxComponents][MaxComponents]float64
	Shift       Shift // of a pair, from what was fitted
}

// Shift moves the activity coefficients of a pair off the fitted ones by a
// one-parameter Margules term, which keeps to the Gibbs-Duhem equation:
//
//	ln gamma_w += s(T) x_s^2,  ln gamma_s += s(T) x_w^2
//	s(T) = Ln25 + LnTrend (1/298.15 K - 1/T)/(1/298.15 K - 1/373.15 K)
//
// Ln25 is the logarithm of the factor on water at infinite dilution at 25 °C,
// LnTrend what comes to it at 100 °C. The zero Shift changes nothing.
type Shift struct{ Ln25, LnTrend float64 }

// At is s(T).
func (s Shift) At(tK float64) float64 {
	const span = 1/298.15 - 1/373.15
	return s.Ln25 + s.LnTrend*(1/298.15-1/tK)/span
}

// MaxComponents is water, a solvent and a carrier.
const MaxComponents = 3

// BinaryNRTL returns the parameters of a pair; water is component 0 in water pairs.
func BinaryNRTL(a12, b12, a21, b21, alpha float64) NRTL {
	m := NRTL{N: 2}
	m.A[0][1], m.A[1][0] = a12, a21
	m.B[0][1], m.B[1][0] = b12, b21
	m.Alpha[0][1], m.Alpha[1][0] = alpha, alpha
	return m
}

// LnGamma returns the logarithms of the activity coefficients at mole fractions
// x (which sum to one) and tK.
func (m *NRTL) LnGamma(x Fractions, tK float64) Fractions {
	tau, g := m.factors(tK)
	tg := weighted(&tau, &g)
	return lnGamma(m.N, &g, &tg, &x)
}

// Fractions are mole (or, where said, mass) fractions of water, solvent and carrier.
type Fractions = [MaxComponents]float64

type square = [MaxComponents][MaxComponents]float64

// factors are tau and G at one temperature.
func (m *NRTL) factors(tK float64) (tau, g square) {
	for i := range m.N {
		for j := range m.N {
			g[i][j] = 1
			if i != j {
				tau[i][j] = m.A[i][j] + m.B[i][j]/tK
				g[i][j] = math.Exp(-m.Alpha[i][j] * tau[i][j])
			}
		}
	}
	return tau, g
}

// weighted are tau_ij G_ij.
func weighted(tau, g *square) (tg square) {
	for i := range tg {
		for j := range tg[i] {
			tg[i][j] = tau[i][j] * g[i][j]
		}
	}
	return tg
}

// lnGamma is sum_j tau_ji G_ji x_j/s_i + sum_j x_j G_ij/s_j (tau_ij - c_j/s_j) with
// s_j = sum_k x_k G_kj and c_j = sum_k x_k tau_kj G_kj.
func lnGamma(n int, g, tg *square, x *Fractions) (ln Fractions) {
	var share, mean Fractions // x_j/s_j, c_j/s_j
	for j := range n {
		var s, c float64
		for k := range n {
			s += x[k] * g[k][j]
			c += x[k] * tg[k][j]
		}
		share[j], mean[j] = x[j]/s, c/s
	}
	for i := range n {
		ln[i] = mean[i]
		for j := range n {
			ln[i] += share[j] * (tg[i][j] - g[i][j]*mean[j])
		}
	}
	return ln
}

// Pair returns ln gamma of water and of the solvent in a binary mixture with
// water mole fraction xWater.
func (m *NRTL) Pair(xWater, tK float64) (lnWater, lnSolvent float64) {
	lg := m.LnGamma([MaxComponents]float64{xWater, 1 - xWater}, tK)
	if m.Shift == (Shift{}) {
		return lg[0], lg[1]
	}
	s := m.Shift.At(tK)
	return lg[0] + s*(1-xWater)*(1-xWater), lg[1] + s*xWater*xWater
}
