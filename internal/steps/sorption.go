package steps

import (
	"cmp"
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// Sorbent is a bed of beads, or a powder, and what it still holds.
type Sorbent struct {
	Key, Name       string                                      // Name: "" is Key
	Loading         func(partialPressurePa, tK float64) float64 // kg water per kg, at equilibrium
	Uptakes         *Uptakes                                    // Loading as a table, where there is one already; nil: there is none
	DataFromPa      float64                                     // below this water pressure Loading extrapolates; 0: not stated
	ResidualKgPerKg float64                                     // from the sieve's history
	CapacityShare   float64                                     // of a new sieve's capacity
	PoreShare       float64                                     // of the pores left to water beside a small solvent; 0: all
	Unfit           string                                      // why Loading must not be used with this solvent; "": it may

	BeadDiameterM  float64
	BeadKgPerM3    float64 // of the bead with its pores
	Porosity       float64 // macropores of the bead
	Tortuosity     float64
	DispersionPerS float64 // fastest rate of a powder that is hard to keep suspended; 0 for beads

	HeatOfSorptionJPerMol float64 // released per mole of water from vapour; 0: unknown
	HeatCapacityJPerKgK   float64
	HoldUpM3PerKg         float64 // solvent kept on drained beads
	MinDoseKgPerM3        float64 // charged even where less would do; 0: none
	MaxDoseKgPerM3        float64
}

// called is the sorbent's name for the reader.
func (s Sorbent) called() string { return cmp.Or(s.Name, s.Key) }

// Errors that say why a sorbent is not put to work.
var (
	ErrWetSieve = errors.New("the sieve is wetter than the solvent")
	ErrUnfit    = errors.New("the sorbent does not suit the solvent")
	ErrNoSense  = errors.New("outside physical sense")
)

// sorption is the equilibrium of a lot with a sorbent at one temperature.
type sorption struct {
	m         *thermo.Mixture
	sorbent   Sorbent
	feed      Lot
	tempK     float64
	psatWater float64
	pair      thermo.Isothermal
	shift     float64 // of the pair's model at tempK
}

func newSorption(m *thermo.Mixture, feed Lot, sorbent Sorbent, tempK float64) sorption {
	return sorption{m, sorbent, feed, tempK, m.Water.VapourPressurePa.At(tempK), m.At(tempK), m.NRTL.Shift.At(tempK)}
}

// pressure of water over a solution. Free water beside the solution holds the
// activity at one.
func (s *sorption) pressure(water float64) float64 {
	lnA, _ := s.pair.LnActivityOf(water/(1-water), s.shift)
	return math.Exp(math.Min(0, lnA)) * s.psatWater
}

// loading of the sorbent in equilibrium with a solution of water (kg/kg).
func (s *sorption) loading(water float64) float64 {
	return s.sorbent.CapacityShare * orOne(s.sorbent.PoreShare) * s.sorbent.Loading(s.pressure(water), s.tempK)
}

const leastWater = 1e-20 // kg/kg, the lower end of every search

var lnLeastWater = math.Log(leastWater)

// floor is the solution in equilibrium with the sorbent's residual loading,
// which no dose and no time can pass.
func (s *sorption) floor() (float64, error) {
	lnResidual := math.Log(s.sorbent.ResidualKgPerKg) // nearly straight over ln(water)
	return s.balanced(math.Log(0.5), func(w float64) float64 { return math.Log(s.loading(w)) - lnResidual })
}

// balanced is the water at which a surplus that grows with the water is zero.
func (s *sorption) balanced(lnHighest float64, surplus func(w float64) float64) (float64, error) {
	if surplus(leastWater) >= 0 {
		return leastWater, nil
	}
	lnW, err := thermo.Brent(func(lnW float64) float64 { return surplus(math.Exp(lnW)) }, lnLeastWater, lnHighest, 1e-13)
	if err != nil {
		return math.NaN(), s.wetter()
	}
	return math.Exp(lnW), nil
}

func (s *sorption) wetter() error {
	return fmt.Errorf("%w: %s holding %.3g g/100 g against %s; activate it anew or take a fresh charge", ErrWetSieve, s.sorbent.called(), 100*s.sorbent.ResidualKgPerKg, quantity.FormatWater(s.feed.Water()))
}

// check refuses a pair that has no equilibrium to rest on and a temperature at
// which the solvent is not a liquid in an open vessel.
func (s *sorption) check() error {
	if s.sorbent.Unfit != "" {
		return fmt.Errorf("%w: %s in %s: %s", ErrUnfit, s.sorbent.called(), s.m.Solvent.Called(), s.sorbent.Unfit)
	}
	return checkLiquid(s.m.Solvent, s.tempK)
}

const atmospherePa = 101325

// checkLiquid refuses a temperature at which a solvent freezes or boils.
func checkLiquid(solvent *thermo.Pure, tempK float64) error {
	switch {
	case !(tempK > solvent.MeltingK):
		return fmt.Errorf("%w: %s is not liquid at %.1f °C; it melts at %.1f °C", ErrNoSense, solvent.Called(), tempK-273.15, solvent.MeltingK-273.15)
	case !(solvent.VapourPressurePa.At(tempK) < atmospherePa):
		return fmt.Errorf("%w: %s boils below %.1f °C at 1013 hPa", ErrNoSense, solvent.Called(), tempK-273.15)
	}
	return nil
}

// checkAmount refuses a number that is not finite or lies outside its bounds.
// held is the isotherm of a sieve that may have lost some of its capacity.
func (s Sorbent) held(waterPa, tK float64) float64 {
	return orOne(s.CapacityShare) * s.Loading(waterPa, tK)
}

func checkAmount(what, unit string, value, low, high float64) error {
	if value >= low && value <= high {
		return nil
	}
	return fmt.Errorf("%w: %s of %.6g %s; allowed: %.4g to %.4g %s", ErrNoSense, what, value, unit, low, high, unit)
}
