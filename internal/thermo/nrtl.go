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
func (m *NRTL) LnGamma(x [MaxComponents]float64, tK float64) (lnGamma [MaxComponents]float64) {
	var tau, g [MaxComponents][MaxComponents]float64
	for i := range m.N {
		for j := range m.N {
			g[i][j] = 1
			if i != j {
				tau[i][j] = m.A[i][j] + m.B[i][j]/tK
				g[i][j] = math.Exp(-m.Alpha[i][j] * tau[i][j])
			}
		}
	}
	var s, c [MaxComponents]float64 // s_j = sum_k x_k G_kj, c_j = sum_k x_k tau_kj G_kj
	for j := range m.N {
		for k := range m.N {
			s[j] += x[k] * g[k][j]
			c[j] += x[k] * tau[k][j] * g[k][j]
		}
	}
	for i := range m.N {
		lnGamma[i] = c[i] / s[i]
		for j := range m.N {
			lnGamma[i] += x[j] * g[i][j] / s[j] * (tau[i][j] - c[j]/s[j])
		}
	}
	return lnGamma
}

// Pair returns ln gamma of water and of the solvent in a binary mixture with
// water mole fraction xWater.
func (m *NRTL) Pair(xWater, tK float64) (lnWater, lnSolvent float64) {
	lg := m.LnGamma([MaxComponents]float64{xWater, 1 - xWater}, tK)
	return lg[0], lg[1]
}
