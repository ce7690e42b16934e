package routes

import (
	"fmt"
	"slices"

	"parch/internal/job"
	"parch/internal/steps"
)

// What a regeneration is billed for beside the oven.
const (
	ovenWork       = "loading the oven, bottling hot sieve, shared by its load"
	flushWork      = ovenWork + "; flushing the solvent off before"
	FlushGasBasis  = "activation: dry nitrogen that carries the solvent off the beads before the oven"
	FlushedSolvent = "solvent flushed off the beads"
	flushGas       = "flush-nitrogen"
)

// IgnitionMarginK is kept between an oven and the autoignition temperature of what is
// on the beads (common practice, no source).
const IgnitionMarginK = 50

// usualOvenK is the oven of a sieve whose history names none.
const usualOvenK = 300 + zeroCelsiusK

// OvenK is what used sieve is heated to.
func (c *Case) OvenK() float64 {
	if c.Lot.SieveHistoryK > 0 {
		return c.Lot.SieveHistoryK
	}
	return usualOvenK
}

// Burns reports whether the solvent burns: it has a flash point. An own solvent is
// held to burn.
func (c *Case) Burns() bool { return c.Solvent.FlashPoint != nil || c.Solvent.Own }

// flushes reports whether used beads are freed of solvent before they see an oven.
// What does not burn is driven off in it.
func (c *Case) flushes() bool { return c.Burns() && c.Job.Site.SieveFlush != job.FlushNone }

// Regeneration is how used beads are brought back.
type Regeneration struct {
	Flushed        bool
	GasM3PerKg     float64 // of dry gas, by solvent on the beads
	CondensedShare float64 // of that solvent, which becomes waste
	WorkOfFlush    float64 // share that comes to the work of the oven run
}

// Regeneration of the sieve of the lot.
func (c *Case) Regeneration() Regeneration {
	r := Regeneration{Flushed: c.flushes()}
	if !r.Flushed {
		return r
	}
	r.WorkOfFlush = c.practice("flush-attended")
	r.CondensedShare = (1 - c.practice("flush-left")) * c.practice("flush-condensed")
	if c.Job.Site.SieveFlush == job.FlushNitrogen {
		r.GasM3PerKg = (1 - c.practice("flush-left")) * steps.FlushGasM3PerKg(c.Mixture.Solvent, c.practice("flush-temperature"), c.practice("flush-saturation"))
	}
	return r
}

// RefuseOven says why used sieve does not go into the oven, or "".
func (c *Case) RefuseOven() (reason, source string) {
	if slices.Contains(c.Job.Exclude.Hazards, job.UsedSieveInOven) {
		return "the job excludes used sieve in an oven: each charge is used once, or for several lots as it is", "job"
	}
	used := steps.UsedSieve{Kg: 1, SolventKg: 1, Flammable: c.Burns()}
	if c.Solvent.Autoignition != nil {
		used.IgnitionK, source = c.Solvent.Autoignition.SI, c.Solvent.Autoignition.Source
	}
	if err := used.Admit(steps.Flush{Done: c.flushes()}, steps.Oven{LoadKg: 1, SpareMarginK: IgnitionMarginK}, c.OvenK()); err != nil {
		return fmt.Sprintf("%s; the job says sieve flush: none, so each charge is used once, or for several lots as it is", err), source
	}
	return "", ""
}

// MayRegenerate reports whether used sieve may go into the oven.
func (c *Case) MayRegenerate() bool {
	reason, _ := c.RefuseOven()
	return reason == ""
}

// flushUses are what freeing a charge of solvent takes, for each of the lots that
// shared it: heldKg is the share of a lot.
func (c *Case) flushUses(place int, heldKg float64) (uses []StageUse) {
	r := c.Regeneration()
	if gas := r.GasM3PerKg * heldKg; gas > 0 {
		uses = append(uses, StageUse{place, steps.Use{Head: steps.Energy, Item: flushGas, Unit: "m3", Quantity: gas, Basis: FlushGasBasis}})
	}
	if condensed := r.CondensedShare * heldKg; condensed > 0 {
		uses = append(uses, StageUse{place, steps.Use{Head: steps.Waste, Item: c.WasteItem(steps.SolventWaste), Unit: "kg", Quantity: condensed, Basis: FlushedSolvent}})
	}
	return uses
}
