package thermo

import (
	"fmt"
	"math"
)

// TernarySplit is a liquid of three components as it stands: one layer or two.
type TernarySplit struct {
	Exists           bool
	Organic, Aqueous Fractions // mole fractions; Aqueous is the layer with more water
	AqueousShare     float64   // of all moles
	outer            bool      // found from outside: a sound start for a neighbour
}

// NotConverged says how far an iteration got.
type NotConverged struct {
	What       string
	Iterations int
	Residual   float64
}

func (e *NotConverged) Error() string {
	return fmt.Sprintf("%s did not converge: residual %.2g after %d iterations", e.What, e.Residual, e.Iterations)
}

const (
	smallestFraction     = 1e-20 // a missing component, so that its logarithm exists
	leastLayerDifference = 1e-4  // in mole fraction, below which two layers are one
)

// Flash splits a liquid of overall mole fractions z at tK. Its stability is
// tested first; the layers are refined by successive substitution, then by
// Newton's method, and taken only if the balance closes, both layers exist,
// they differ and their Gibbs energy lies below that of one liquid. The split is
// sought from outside, from a dry and a watery layer: several sets show a false
// liquid between the two, on which a search from within may end.
func (m *Ternary) Flash(z Fractions, tK float64) (TernarySplit, error) {
	return m.FlashFrom(z, tK, TernarySplit{})
}

// FlashFrom is Flash with a neighbouring split as a first guess. The guess only
// saves time: where it leads nowhere the stability test decides.
func (m *Ternary) FlashFrom(z Fractions, tK float64, guess TernarySplit) (TernarySplit, error) {
	if err := m.CheckTemperature(tK); err != nil {
		return TernarySplit{}, err
	}
	s, err := m.split(z, tK, guess)
	if err != nil {
		err = fmt.Errorf("%s at %.2f K: %w", m.name(), tK, err)
	}
	return s, err
}

// split is FlashFrom without the limits, which concern cold layers.
func (m *Ternary) split(z Fractions, tK float64, guess TernarySplit) (TernarySplit, error) {
	z = lifted(z)
	l := m.at(tK)
	search := splitSearch{liquid: &l, z: z}
	if guess.Guides() && search.try(&guess.Aqueous, &guess.Organic, flashSoon) {
		if search.best.outer = search.best.trusted(); search.best.outer {
			return search.best, nil
		}
		search.best = TernarySplit{}
	}
	if !l.isUnstable(&z) {
		return TernarySplit{}, nil
	}
	dry, watery := outside(&z)
	if search.try(&watery, &dry, flashSoon) {
		search.best.outer = search.best.trusted()
		return search.best, nil
	}
	starts := l.unstable(&z)
	if wet, dry, ok := starts.extremes(); ok && search.try(&wet, &dry, flashSoon) {
		return search.best, nil
	}
	for i := range starts.n {
		search.try(&starts.found[i], &z, flashPatience)
	}
	if !search.best.Exists {
		return TernarySplit{}, search.failed
	}
	return search.best, nil
}

// trusted reports whether a split may be the guess for a neighbour's. With too little
// water or too much carrier in its aqueous layer it may be a false pair of layers: a
// search from there could stay on it where a watery layer exists, and the result would
// depend on where it came from.
func (s *TernarySplit) trusted() bool {
	const leastWater, mostCarrier = 0.15, 0.15 // mole fractions
	return s.Aqueous[InWater] > leastWater && s.Aqueous[InCarrier] < mostCarrier
}

// Guides reports whether a split is a guess for a neighbour's: others are passed over.
func (s *TernarySplit) Guides() bool { return s.Exists && s.outer }

// outside are a layer without water and one that is nearly all water.
func outside(z *Fractions) (dry, watery Fractions) {
	dry, watery = *z, *z
	dry[InWater] *= 0.01
	watery[InSolvent] *= 0.05
	watery[InCarrier] *= 0.001
	return lifted(dry), lifted(watery)
}

// splitSearch keeps the split of lowest Gibbs energy.
type splitSearch struct {
	*liquid
	z      Fractions
	best   TernarySplit
	energy float64
	failed error
}

// try refines a split from the ratios of two trial layers.
func (s *splitSearch) try(a, b *Fractions, outsideFor int) (better bool) {
	found, err := s.refine(&s.z, lnRatio(a, b), outsideFor)
	if err != nil {
		s.failed = err
	}
	if err != nil || !found.Exists {
		return false
	}
	energy := (1-found.AqueousShare)*s.gibbs(&found.Organic) + found.AqueousShare*s.gibbs(&found.Aqueous)
	if s.best.Exists && energy > s.energy-1e-12 {
		return false
	}
	s.best, s.energy = found, energy
	return true
}

// lifted gives a missing component a trace and makes the fractions sum to one.
func lifted(z Fractions) Fractions {
	var sum float64
	for i := range z {
		z[i] = math.Max(z[i], smallestFraction)
		sum += z[i]
	}
	for i := range z {
		z[i] /= sum
	}
	return z
}

func lnRatio(a, b *Fractions) (ln Fractions) {
	for i := range ln {
		ln[i] = math.Log(math.Max(a[i], smallestFraction) / math.Max(b[i], smallestFraction))
	}
	return ln
}
