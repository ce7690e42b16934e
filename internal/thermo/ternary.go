package thermo

import (
	"fmt"
	"math"
)

// Places of the components in a Ternary.
const (
	InWater = iota
	InSolvent
	InCarrier
)

// Ternary is water (component 0), a solvent (1) and a carrier (2).
type Ternary struct {
	Pure  [MaxComponents]*Pure
	NRTL  NRTL
	Extra TernaryTerm // zero: the three pairs alone

	Limits []Limit // where the model must not be used
	// Below SpuriousGapBelowK the solvent-carrier set shows a gap that the
	// liquids do not have; 0: it never does.
	SpuriousGapBelowK float64
	// MixAboveK is a temperature above which solvent and carrier mix whatever
	// their shares, so that a nearly dry liquid is one; 0: not known.
	MixAboveK float64
	// ContractionM3PerMol is by how much water and solvent shrink on mixing, over
	// the product of their mole fractions; it tells the layers apart in Settle.
	ContractionM3PerMol float64
}

// TernaryTerm is added to the excess Gibbs energy of the three pairs and
// vanishes in each of them. In mole fractions of water w, alcohol a and carrier c,
//
//	gE/RT += p F,  p = x_w x_a x_c,  F = L0 + L1 (298.15 K/T - 1) + L2 x_a + L3 x_c
//
// Fitted for this project with the three pairs it belongs to: the term and its
// pairs must be used together.
type TernaryTerm struct{ L0, L1, L2, L3 float64 }

// JoinPairs builds the three-component set from water-solvent, water-carrier
// and solvent-carrier sets, the first-named being component 0 of its set.
func JoinPairs(waterSolvent, waterCarrier, solventCarrier NRTL) NRTL {
	m := NRTL{N: MaxComponents}
	put := func(i, j int, pair *NRTL) {
		m.A[i][j], m.A[j][i] = pair.A[0][1], pair.A[1][0]
		m.B[i][j], m.B[j][i] = pair.B[0][1], pair.B[1][0]
		m.Alpha[i][j], m.Alpha[j][i] = pair.Alpha[0][1], pair.Alpha[1][0]
	}
	put(InWater, InSolvent, &waterSolvent)
	put(InWater, InCarrier, &waterCarrier)
	put(InSolvent, InCarrier, &solventCarrier)
	return m
}

// LnGamma returns the logarithms of the activity coefficients at mole fractions
// x (which sum to one) and tK.
func (m *Ternary) LnGamma(x Fractions, tK float64) Fractions {
	l := m.at(tK)
	return l.lnGamma(&x)
}

// liquid is the model at one temperature.
type liquid struct {
	g, tg square // G and tau G
	extra TernaryTerm
	slope float64 // 298.15 K/T - 1
	mix   bool    // solvent and carrier mix
}

func (m *Ternary) at(tK float64) liquid {
	l := liquid{extra: m.Extra, slope: 298.15/tK - 1, mix: m.MixAboveK > 0 && tK > m.MixAboveK}
	tau, g := m.NRTL.factors(tK)
	l.g, l.tg = g, weighted(&tau, &g)
	return l
}

func (l *liquid) lnGamma(x *Fractions) Fractions {
	ln := lnGamma(MaxComponents, &l.g, &l.tg, x)
	if l.extra == (TernaryTerm{}) {
		return ln
	}
	w, a, c := x[InWater], x[InSolvent], x[InCarrier]
	p := w * a * c
	f := l.extra.L0 + l.extra.L1*l.slope + l.extra.L2*a + l.extra.L3*c
	d := Fractions{a * c * f, w*c*f + p*l.extra.L2, w*a*f + p*l.extra.L3}
	mean := w*d[0] + a*d[1] + c*d[2]
	for i := range ln {
		ln[i] += p*f + d[i] - mean
	}
	return ln
}

// gibbs is the Gibbs energy of mixing over RT, per mole.
func (l *liquid) gibbs(x *Fractions) (g float64) {
	ln := l.lnGamma(x)
	for i, xi := range x {
		if xi > 0 {
			g += xi * (math.Log(xi) + ln[i])
		}
	}
	return g
}

// partials are the partial pressures over a liquid and their sum, Pa.
func (m *Ternary) partials(x *Fractions, tK float64) (partialPa Fractions, sumPa float64) {
	l := m.at(tK)
	ln := l.lnGamma(x)
	for i := range x {
		partialPa[i] = x[i] * math.Exp(ln[i]) * m.Pure[i].VapourPressurePa.At(tK)
		sumPa += partialPa[i]
	}
	return partialPa, sumPa
}

// bubble is the boiling point of x taken as one liquid, and its vapour:
//
//	sum x_i gamma_i Psat_i = P,  y_i = x_i gamma_i Psat_i / P
//
// Newton's method on ln P; Brent takes over if it stalls.
func (m *Ternary) bubble(x *Fractions, pressurePa, guessK float64) (tK float64, y Fractions, err error) {
	excess := func(t float64) float64 {
		_, sum := m.partials(x, t)
		return math.Log(sum / pressurePa)
	}
	tK, ok := risingRoot(excess, guessK)
	if !ok {
		lo, hi := m.searchRange()
		if tK, err = Brent(excess, lo, hi, temperatureToleranceK); err != nil {
			return math.NaN(), y, fmt.Errorf("%s, x = %.4g, %.4g kPa: no bubble point: %w", m.name(), *x, pressurePa/1e3, err)
		}
	}
	partial, sum := m.partials(x, tK)
	for i := range y {
		y[i] = partial[i] / sum
	}
	return tK, y, nil
}

// risingRoot finds the root of a function that rises with temperature by about
// a few per cent per kelvin, by the secant method from a guess (0: none). The first
// step rests on a slope that is only typical: it is the last one only where it is
// shorter by far.
func risingRoot(f func(float64) float64, guessK float64) (tK float64, ok bool) {
	const typicalSlope, longestStepK = 0.035, 40.0
	lastStepK := 1e-8
	t := guessK
	if !(t > 0) {
		t = 350
	}
	value := f(t)
	slope := typicalSlope
	for range 30 {
		if math.Abs(value) < 1e-12 {
			return t, true
		}
		step := math.Max(-longestStepK, math.Min(longestStepK, -value/slope))
		t += step
		if math.Abs(step) < lastStepK {
			return t, true
		}
		lastStepK = 1e-6
		next := f(t)
		slope = (next - value) / step
		if !(slope > 0) {
			return math.NaN(), false
		}
		value = next
	}
	return math.NaN(), false
}

// searchRange is where all three vapour pressure curves may be evaluated.
func (m *Ternary) searchRange() (lo, hi float64) {
	lo, hi = searchRange(m.Pure[0])
	for _, p := range m.Pure[1:] {
		_, h := searchRange(p)
		hi = math.Min(hi, h)
	}
	return lo, hi
}

func (m *Ternary) name() string {
	return fmt.Sprintf("water + %s + %s", m.Pure[InSolvent].Called(), m.Pure[InCarrier].Called())
}

// Mass turns mole fractions into mass fractions.
func (m *Ternary) Mass(x Fractions) (w Fractions) {
	total := m.MolarMass(x)
	for i := range x {
		w[i] = x[i] * m.Pure[i].MolarMassKgPerMol / total
	}
	return w
}

// Mole turns mass fractions (or masses) into mole fractions.
func (m *Ternary) Mole(w Fractions) (x Fractions) {
	var total float64
	for i := range w {
		x[i] = w[i] / m.Pure[i].MolarMassKgPerMol
		total += x[i]
	}
	for i := range x {
		x[i] /= total
	}
	return x
}

// MolarMass of a mixture in kg/mol.
func (m *Ternary) MolarMass(x Fractions) (kgPerMol float64) {
	for i := range x {
		kgPerMol += x[i] * m.Pure[i].MolarMassKgPerMol
	}
	return kgPerMol
}

// MolarVolume of a liquid in m3/mol, from additive volumes of the pure liquids.
// The shrinking of alcohol and water on mixing, up to 4 %, is left out.
func (m *Ternary) MolarVolume(x Fractions, tK float64) (m3PerMol float64) {
	for i := range x {
		if x[i] > 0 {
			m3PerMol += x[i] * m.Pure[i].MolarMassKgPerMol / m.Pure[i].DensityKgPerM3.At(tK)
		}
	}
	return m3PerMol
}

// Density of a liquid in kg/m3, with the shrinking of alcohol and water: by
// additive volumes half water and half ethanol is 4 % too light, more than layers
// differ, and the wrong one would go back to the pot.
func (m *Ternary) Density(x Fractions, tK float64) float64 {
	return m.MolarMass(x) / (m.MolarVolume(x, tK) - m.ContractionM3PerMol*x[InWater]*x[InSolvent])
}
