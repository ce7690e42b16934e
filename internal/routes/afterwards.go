package routes

import (
	"fmt"
	"math"

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
		DustPerBatch: c.practice(SieveDust),
	}, lifeBatches)
}

// SieveDust is the operating fact for what beads lose as dust with each lot.
const SieveDust = "soak-dust"

// SieveUse is what a charge of beads has gone through when it is regenerated or
// replaced, and what it needs in a year.
type SieveUse struct {
	ChargeKg       float64
	Lots           int
	TakenKg        []float64 // of water, from all these lots, by each of the charges that follow one another
	LoadingKgPerKg []float64 // after them
	NextOutlet     float64   // kg/kg, of the next such lot, not regenerated; NaN where it would be made wetter
	Uses           float64   // of a charge before it is discarded
	CapacityLeft   float64   // share of a new one's capacity at the last of them
	DustShare      float64   // of the charge, a lot
	DustKgPerYear  float64
}

// UseOf follows the charge of beads of a soak through the lots that go over it, and
// one more.
func (c *Case) UseOf(run *Run, place int) (SieveUse, error) {
	o, choice := run.Outcomes[place], run.Settings.at(run.Route, place)
	u := SieveUse{ChargeKg: o.AgentKg, Lots: max(choice.lots, 1), Uses: 1, CapacityLeft: 1, DustShare: c.practice(SieveDust)}
	var err error
	if choice.charges > 1 {
		err = c.useOfSeries(o, choice, &u)
	} else {
		err = c.useOfOne(o, choice, &u)
	}
	if err != nil {
		return SieveUse{}, err
	}
	if choice.after == Regenerate {
		agent := c.Catalog.Agents[o.Agent]
		u.Uses = agent.Lives.SI
		u.CapacityLeft = math.Pow(1-agent.Fade.SI, u.Uses-1)
	}
	u.DustKgPerYear = u.DustShare * u.ChargeKg * c.Lot.BatchesPerYear
	return u, nil
}

// useOfOne follows one charge through its lots.
func (c *Case) useOfOne(o steps.Outcome, choice choice, u *SieveUse) error {
	const anyOutlet = 1
	life, err := steps.FollowSieve(c.Mixture, o.In, anyOutlet, choice.soakHours*3600, c.sorbent(o.Agent, Discard), c.soakRig(choice.stirred), steps.LifeRules{
		Kg: o.AgentKg, FreshKgPerKg: c.ResidualOn(o.Agent), MostCycles: lifeBatches,
	}, u.Lots+1)
	if err != nil {
		return err
	}
	last, next := life.Batches[u.Lots-1], life.Batches[u.Lots]
	u.TakenKg, u.LoadingKgPerKg, u.NextOutlet = []float64{last.WaterTakenKg}, []float64{last.LoadingAfter}, next.Outlet
	if next.RegeneratedFirst || next.RenewedFirst {
		u.NextOutlet = math.NaN()
	}
	return nil
}

// useOfSeries takes equal charges through their one lot, and through one more.
func (c *Case) useOfSeries(o steps.Outcome, choice choice, u *SieveUse) (err error) {
	var used []steps.UsedCharge
	kg := o.AgentKg / float64(choice.charges)
	for i := range choice.charges {
		loading := o.Figure(fmt.Sprintf("loading after, charge %d", i+1)) / 100
		used = append(used, steps.UsedCharge{Kg: kg, LoadingKgPerKg: loading})
		u.TakenKg = append(u.TakenKg, (loading-c.ResidualOn(o.Agent))*kg)
		u.LoadingKgPerKg = append(u.LoadingKgPerKg, loading)
	}
	u.NextOutlet, err = steps.OverUsed(c.Mixture, o.In, used, choice.soakHours*3600, c.sorbent(o.Agent, Discard), c.soakRig(choice.stirred))
	return err
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
