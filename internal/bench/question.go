// Package bench answers one question at the bench: what one step does to a lot,
// without a job file and without prices.
package bench

import (
	"math"

	"parch/catalog"
	"parch/internal/steps"
	"parch/internal/thermo"
)

// Request is a step as somebody asks for it.
type Request struct {
	Kind    string
	Solvent *catalog.Solvent  // nil where it was not found, which is told elsewhere
	Flags   map[string]string // as typed, by name; a flag that was not given is not in it
	Stirred bool
	Powder  bool // of a soak, in place of beads
}

// Question is a request that was read, in SI units. NaN stands for what was not
// given.
type Question struct {
	Kind    steps.Kind
	Solvent *catalog.Solvent
	Agent   *catalog.Agent // nil where the step takes none
	Stirred bool
	Powder  bool
	Carrier *catalog.Solvent // of a trap, or nil
	Stages  int              // of the column of a forerun, or of a trap with a carrier
	Charges int              // of sorbent, one after the other; 0 where the step takes none

	Water, Goal           float64 // kg/kg
	VolumeM3, FreeWaterM3 float64
	RinseM3               float64 // fresh solvent over the cake of a salt
	TempK                 float64
	DoseKgPerM3, TimeS    float64
	HeightM, HeaterW      float64
	ReceiverK, PressurePa float64
	Receiver              *catalog.Apparatus // of a trap; nil: the first that fits
	PeroxideKgPerM3       float64
	ReagentMol            float64 // used in the whole volume
	Activation            Activation
	Notes                 []string // how something was read that is not plain
	water                 *thermo.Pure
	inFahrenheit          bool
}

// Mistake is something in a request that has to be put right.
type Mistake struct{ Message, Hint string }

func (m *Mistake) Error() string { return m.Message }

// KgPerM3 is the density of the solvent with a water content (kg/kg) at the
// temperature of the lot, from additive volumes.
func (q *Question) KgPerM3(water float64) float64 {
	return 1 / (water/q.water.DensityKgPerM3.At(q.TempK) + (1-water)/q.Solvent.Pure.DensityKgPerM3.At(q.TempK))
}

func given(x float64) bool { return !math.IsNaN(x) }

// InFahrenheit reports whether a temperature was given in °F.
func (q *Question) InFahrenheit() bool { return q.inFahrenheit }
