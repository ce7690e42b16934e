package routes

import (
	"parch/internal/assay"
	"parch/internal/steps"
)

// lifeBatches is how many batches a charge of sieve is followed for.
const lifeBatches = 24

// Life follows the charge of beads of a soak without regenerating it, batch after
// batch, until it has to be.
func (c *Case) Life(run *Run, place int) (steps.SieveLife, error) {
	o := run.Outcomes[place]
	choice := run.Settings.at(run.Route, place)
	agent := c.Catalog.Agents[o.Agent]
	return steps.FollowSieve(c.Mixture, o.In, c.Goal(), choice.soakHours*3600, c.sorbent(o.Agent, Discard), c.soakRig(choice.stirred), steps.LifeRules{
		Kg: o.AgentKg, FreshKgPerKg: c.ResidualOn(o.Agent), FadePerCycle: agent.Fade.SI, MostCycles: int(agent.Lives.SI),
	}, lifeBatches)
}

// A lot of the size of a drum is kept in one, a smaller one under a septum.
const (
	leastDrumL = 100.0
	daysPerWk  = 7.0
)

// Store is the product in the vessel it is kept in, drawn on in the room's air.
func (c *Case) Store(run *Run) assay.Store {
	room := c.Job.Site.RoomK
	closure := "storage-rise-septum"
	if run.LitresDelivered >= leastDrumL {
		closure = "storage-rise-drum"
	}
	return assay.Store{
		LeakPerDay: c.practice(closure) / daysPerWk,
		VolumeM3:   run.LitresDelivered * 1e-3, Water: run.WaterOut, KgPerM3: c.Mixture.Solvent.DensityKgPerM3.At(room),
		AirWaterKgPerM3: assay.AirWaterKgPerM3(room, c.Job.Site.Humidity),
	}
}

// IgnitionMargin is how far the oven of the sieve's history stays below the
// autoignition of the solvent on the beads, K; ok is false where it is not known
// or the sieve sees no oven.
func (c *Case) IgnitionMargin() (marginK float64, ok bool) {
	if c.Lot.SieveHistoryK == 0 || c.Solvent.Autoignition == nil {
		return 0, false
	}
	return c.Solvent.Autoignition.SI - c.Lot.SieveHistoryK, true
}
