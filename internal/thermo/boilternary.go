package thermo

import (
	"fmt"
	"math"
)

// Boiling is a boiling liquid of three components and its vapour.
type Boiling struct {
	TempK float64
	Y     Fractions    // vapour, mole fractions
	Split TernarySplit // the liquid boils as two layers where Split.Exists
}

// Boil returns the boiling point and the vapour of a liquid of overall mole
// fractions x, as one liquid or, where that is not stable, as two layers whose
// partial pressures add up to pressurePa. near is a neighbouring result (or
// none) to start from; it only saves time.
func (m *Ternary) Boil(x Fractions, pressurePa float64, near Boiling) (Boiling, error) {
	x = lifted(x)
	if near.Split.Exists && near.Split.outer {
		if b, err := m.boilLayers(x, pressurePa, near.TempK, near.Split); err == nil && b.Split.Exists {
			return b, nil
		}
	}
	tK, y, err := m.bubble(&x, pressurePa, near.TempK)
	if err != nil {
		return m.boilApart(x, pressurePa, err)
	}
	split, err := m.split(x, tK, TernarySplit{})
	if err != nil {
		return Boiling{}, err
	}
	if split.Exists {
		b, err := m.boilLayers(x, pressurePa, tK, split)
		if err != nil || b.Split.Exists {
			return b, err
		}
	}
	return Boiling{TempK: tK, Y: y}, nil
}

// boilApart boils a liquid so unstable that as one liquid it would boil far
// outside the range of the model: as two layers, from half-way up that range.
func (m *Ternary) boilApart(x Fractions, pressurePa float64, failed error) (Boiling, error) {
	const startK = 330
	split, err := m.split(x, startK, TernarySplit{})
	if err != nil || !split.Exists {
		return Boiling{}, failed
	}
	b, err := m.boilLayers(x, pressurePa, startK, split)
	if err != nil || !b.Split.Exists {
		return Boiling{}, failed
	}
	return b, nil
}

// boilLayers solves for the temperature at which two layers boil together, from
// a guess at which they exist. The result has no layers if they merge on the way.
func (m *Ternary) boilLayers(x Fractions, pressurePa, guessK float64, split TernarySplit) (Boiling, error) {
	var failed error
	excess := func(t float64) float64 {
		s, err := m.follow(x, t, split)
		if err != nil {
			failed = err
			return math.NaN()
		}
		split = s
		liquid := x
		if s.Exists {
			liquid = s.Organic
		}
		_, sum := m.partials(&liquid, t)
		return math.Log(sum / pressurePa)
	}
	tK, ok := risingRoot(excess, guessK)
	if !ok && failed == nil {
		var err error
		lo, hi := m.searchRange()
		if tK, err = Brent(excess, lo, hi, 1e-8); err != nil && failed == nil {
			return Boiling{}, fmt.Errorf("%s at %.4g kPa: two boiling layers: %w", m.name(), pressurePa/1e3, err)
		}
	}
	if failed != nil {
		return Boiling{}, failed
	}
	if !split.Exists {
		return Boiling{}, nil
	}
	partial, sum := m.partials(&split.Organic, tK)
	b := Boiling{TempK: tK, Split: split}
	for i := range b.Y {
		b.Y[i] = partial[i] / sum
	}
	return b, nil
}

// follow is the split of the same liquid at a temperature close by.
func (m *Ternary) follow(x Fractions, tK float64, near TernarySplit) (TernarySplit, error) {
	if near.Exists {
		l := m.at(tK)
		s, err := l.refine(&x, lnRatio(&near.Aqueous, &near.Organic), flashSoon)
		if s.outer = near.outer; err == nil && s.Exists && (!s.outer || s.trusted()) {
			return s, nil
		}
	}
	return m.split(x, tK, TernarySplit{})
}

// TernaryAzeotrope is the lowest-boiling mixture of three components.
type TernaryAzeotrope struct {
	Kind  AzeotropeKind // NoAzeotrope: the lowest-boiling mixture lacks a component
	TempK float64
	Y     Fractions // mole fractions of vapour and liquid together
	Split TernarySplit
}

const (
	azeotropeStages    = 1000
	azeotropeTolerance = 1e-8
	absentFraction     = 1e-4 // a component below it is not part of an azeotrope
)

// FindAzeotrope climbs, stage by stage at total reflux (each vapour condensed
// and boiled again), from several liquids to the lowest-boiling mixture near
// them. It finds a ternary azeotrope only if that is a minimum of temperature.
// A climb that does not settle is a *NotConverged error; the lowest-boiling
// mixture met is then returned with it, as no azeotrope.
func (m *Ternary) FindAzeotrope(pressurePa float64) (TernaryAzeotrope, error) {
	if err := m.CheckPressure(pressurePa); err != nil {
		return TernaryAzeotrope{}, err
	}
	lowest := TernaryAzeotrope{Kind: NoAzeotrope, TempK: math.Inf(1)}
	var failed error
	for _, start := range []Fractions{{0.3, 0.3, 0.4}, {0.3, 0.1, 0.6}, {0.1, 0.6, 0.3}} {
		a, err := m.climb(start, pressurePa)
		if err != nil {
			failed = err
		}
		if a.TempK < lowest.TempK-1e-4 {
			lowest = a
		}
	}
	return lowest, failed
}

func (m *Ternary) climb(x Fractions, pressurePa float64) (TernaryAzeotrope, error) {
	lowest := Boiling{TempK: math.Inf(1)}
	var b Boiling
	var change float64
	for i := range azeotropeStages {
		var err error
		if b, err = m.Boil(x, pressurePa, b); err != nil {
			return TernaryAzeotrope{TempK: math.Inf(1)}, err
		}
		if change = apart(&b.Y, &x); change < azeotropeTolerance {
			return azeotropeOf(b), nil
		}
		if b.TempK < lowest.TempK {
			lowest = b
		}
		if i%20 == 19 {
			if a, ok := m.closeIn(b, pressurePa); ok {
				return azeotropeOf(a), nil
			}
		}
		x = b.Y
	}
	best := azeotropeOf(lowest)
	best.Kind = NoAzeotrope
	return best, fmt.Errorf("%s at %.4g kPa: %w", m.name(), pressurePa/1e3,
		&NotConverged{"the climb to the lowest-boiling mixture", azeotropeStages, change})
}

func azeotropeOf(b Boiling) TernaryAzeotrope {
	a := TernaryAzeotrope{TempK: b.TempK, Y: b.Y, Split: b.Split, Kind: Homogeneous}
	switch {
	case math.Min(b.Y[0], math.Min(b.Y[1], b.Y[2])) < absentFraction:
		a.Kind = NoAzeotrope
	case b.Split.Exists:
		a.Kind = Heterogeneous
	}
	return a
}

// closeIn finishes the climb by Newton's method on ln(y_i/x_i) = ln(y_c/x_c)
// with ln(x_i/x_c) of water and solvent as unknowns.
func (m *Ternary) closeIn(near Boiling, pressurePa float64) (Boiling, bool) {
	u, v := math.Log(near.Y[0]/near.Y[2]), math.Log(near.Y[1]/near.Y[2])
	b := near
	residual := func(u, v float64) (f, g float64, ok bool) {
		x := Fractions{math.Exp(u), math.Exp(v), 1}
		next, err := m.Boil(x, pressurePa, b)
		if err != nil {
			return 0, 0, false
		}
		b = next
		return math.Log(b.Y[0]/b.Y[2]) - u, math.Log(b.Y[1]/b.Y[2]) - v, true
	}
	const h, longest = 1e-6, 0.3
	for range 8 {
		f, g, ok := residual(u, v)
		if !ok {
			return b, false
		}
		if math.Max(math.Abs(f), math.Abs(g)) < azeotropeTolerance {
			return b, true
		}
		fu, gu, ok1 := residual(u+h, v)
		fv, gv, ok2 := residual(u, v+h)
		a, c, d, e := (fu-f)/h, (fv-f)/h, (gu-g)/h, (gv-g)/h
		det := a*e - c*d
		du, dv := -(f*e-c*g)/det, -(a*g-d*f)/det
		if !ok1 || !ok2 || !(math.Max(math.Abs(du), math.Abs(dv)) < longest) {
			return b, false
		}
		u, v = u+du, v+dv
	}
	return b, false
}
