package thermo

import (
	"fmt"
	"math"
)

// AzeotropeKind names the kinds of azeotrope.
type AzeotropeKind string

// Heterogeneous: two boiling layers. Homogeneous: one. NoAzeotrope: none.
const (
	Heterogeneous AzeotropeKind = "heterogeneous"
	Homogeneous   AzeotropeKind = "homogeneous"
	NoAzeotrope   AzeotropeKind = "none"
)

// Azeotrope of water and a solvent at one pressure.
type Azeotrope struct {
	Kind   AzeotropeKind
	TempK  float64 // NaN where there is none
	YWater float64 // mole fraction of water in the vapour
	Layers Split   // boiling layers of a heterogeneous azeotrope
}

// FindAzeotrope solves for the azeotrope of water and the solvent at pressurePa.
//
// Heterogeneous: the layers at T, with sum x_i' gamma_i' Psat_i = P and
// x_w' <= y_w <= x_w”. If the vapour lies outside the gap, or there is no gap,
// a homogeneous one is sought where the relative volatility is one.
func (m *Mixture) FindAzeotrope(pressurePa float64) (Azeotrope, error) {
	if a, ok, err := m.heterogeneous(pressurePa); err != nil || ok {
		return a, err
	}
	return m.homogeneous(pressurePa)
}

func (m *Mixture) heterogeneous(pressurePa float64) (Azeotrope, bool, error) {
	hot, err := m.hottest(pressurePa)
	if err != nil {
		return Azeotrope{}, false, err
	}
	var failed error
	excess := func(t float64) float64 {
		s, err := m.SplitAt(t)
		if err != nil {
			failed = err
			return math.NaN()
		}
		if !s.Exists {
			return math.NaN()
		}
		w, o := m.partials(s.XOrganic, t)
		return math.Log((w + o) / pressurePa)
	}
	cold := hot - 60
	if !(excess(hot) > 0) { // no layers at the hot end: look for the top of the gap below
		for ; hot > cold; hot -= 2 {
			if excess(hot) > 0 {
				break
			}
		}
	}
	failed = nil
	t, err := Brent(excess, cold, hot, 1e-7)
	if failed != nil {
		return Azeotrope{}, false, failed
	}
	if err != nil {
		return Azeotrope{}, false, nil
	}
	s, err := m.SplitAt(t)
	if err != nil || !s.Exists {
		return Azeotrope{}, false, err
	}
	w, o := m.partials(s.XOrganic, t)
	y := w / (w + o)
	if y < s.XOrganic || y > s.XAqueous {
		return Azeotrope{}, false, nil
	}
	return Azeotrope{Heterogeneous, t, y, s}, true, nil
}

// hottest is a little above the lower of the two pure boiling points, an upper
// bound for a heteroazeotrope.
func (m *Mixture) hottest(pressurePa float64) (float64, error) {
	tw, err := Boil(m.Water, pressurePa)
	if err != nil {
		return 0, err
	}
	ts, err := Boil(m.Solvent, pressurePa)
	if err != nil {
		return 0, err
	}
	return math.Min(tw, ts) + 0.5, nil
}

// homogeneous seeks the composition outside the gap at which vapour and liquid
// are alike: ln(gamma1 Psat1) = ln(gamma2 Psat2).
func (m *Mixture) homogeneous(pressurePa float64) (Azeotrope, error) {
	none := Azeotrope{Kind: NoAzeotrope, TempK: math.NaN(), YWater: math.NaN()}
	var failed error
	guess := 0.0
	lnVolatility := func(logit float64) float64 {
		x := 1 / (1 + math.Exp(-logit))
		v, err := m.BubbleFrom(x, pressurePa, guess)
		if err != nil {
			failed = err
			return math.NaN()
		}
		guess = v.TempK
		lnW, lnS := m.NRTL.Pair(x, v.TempK)
		return lnW - lnS + math.Log(m.Water.VapourPressurePa.At(v.TempK)/m.Solvent.VapourPressurePa.At(v.TempK))
	}
	const edge, steps = 7.0, 140
	last := lnVolatility(-edge)
	for i := 1; i <= steps; i++ {
		logit := -edge + 2*edge*float64(i)/steps
		next := lnVolatility(logit)
		if failed != nil {
			return none, failed
		}
		if (last > 0) != (next > 0) {
			root, err := Brent(lnVolatility, logit-2*edge/steps, logit, 1e-10)
			if err != nil {
				return none, fmt.Errorf("water + %s: azeotrope: %w", m.Solvent.Called(), err)
			}
			a, stable, err := m.stableAzeotrope(1/(1+math.Exp(-root)), pressurePa)
			if err != nil || stable {
				return a, err
			}
		}
		last = next
	}
	return none, nil
}

// stableAzeotrope rejects a composition that lies inside a gap.
func (m *Mixture) stableAzeotrope(x, pressurePa float64) (Azeotrope, bool, error) {
	v, err := m.Bubble(x, pressurePa)
	if err != nil {
		return Azeotrope{}, false, err
	}
	s, err := m.SplitAt(v.TempK)
	if err != nil {
		return Azeotrope{}, false, err
	}
	if s.Exists && x > s.XOrganic && x < s.XAqueous {
		return Azeotrope{}, false, nil
	}
	return Azeotrope{Kind: Homogeneous, TempK: v.TempK, YWater: v.YWater}, true, nil
}
