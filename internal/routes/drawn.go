package routes

import (
	"errors"
	"maps"
	"math"

	"parch/internal/steps"
	"parch/internal/thermo"
)

// Drawn is how things turn out that are not known exactly when a lot is planned.
// The zero value of a factor is not allowed: Planned is where a draw begins.
type Drawn struct {
	PairFactor, PairTrend float64            // on water's activity coefficient at dilution: at 25 °C, and what comes to it at 100 °C
	Water                 float64            // kg/kg dissolved in the lot as delivered
	ResidualKgPerKg       float64            // on the sieve
	Loading               map[string]float64 // factor on what a sorbent takes up; 1 where it is not named
	StillRate             float64            // factor on the rate of a still soak
	StirredRate           float64            // of a stirred one
	ColumnRate            float64            // of diffusion in a column
	SaltLeft              float64            // factor on the share of the dissolved water that a salt leaves
	Reactive              map[string]float64 // factor on what a reactive agent leaves; 1 where it is not named
	Practice              map[string]float64 // operating facts that turn out otherwise, SI
}

// Planned is the draw in which everything is as it was planned.
func (c *Case) Planned() Drawn {
	return Drawn{
		PairFactor: 1, PairTrend: 1, Water: c.Lot.Water, ResidualKgPerKg: c.Lot.ResidualLoading,
		StillRate: 1, StirredRate: 1, ColumnRate: 1, SaltLeft: 1,
	}
}

// Shift is the draw's change of the pair's activity model.
func (d Drawn) Shift() thermo.Shift {
	return thermo.Shift{Ln25: math.Log(d.PairFactor), LnTrend: math.Log(d.PairTrend)}
}

// Under is the case as a draw has it. Routes run on it by Rerun.
func (c *Case) Under(d Drawn) (*Case, error) {
	cat, solvent, water := *c.Catalog, *c.Solvent, *c.Solvent.Water
	water.NRTL.Shift = d.Shift()
	solvent.Water = &water
	cat.Solvents = maps.Clone(cat.Solvents)
	cat.Solvents[solvent.Key] = &solvent
	cat.Practice = maps.Clone(cat.Practice)
	for key, si := range d.Practice {
		v := cat.Practice[key]
		v.SI = si
		cat.Practice[key] = v
	}
	lot := c.Lot
	lot.Water, lot.ResidualLoading = d.Water, d.ResidualKgPerKg
	k, err := NewCase(c.Job, lot, &cat)
	if err != nil {
		return nil, err
	}
	k.drawn, k.known = &d, nil // each lot comes by once
	return k, nil
}

// Rerun carries a planned run out on the case of a draw: doses and charges are
// those of the plan, weighed out beforehand; a trap or a forerun is run until its
// hand-over reads right.
func (c *Case) Rerun(plan *Run) (Run, error) {
	under := *c
	under.plan = plan
	return under.Run(plan.Route, plan.Settings)
}

// GoalOf is the water (kg/kg) that a stage of a run is carried to.
func (c *Case) GoalOf(plan *Run, place int) float64 {
	if place < len(plan.Route)-1 {
		return plan.Settings.HandOverMgPerKg[place] * 1e-6
	}
	return c.aim(plan.Settings)
}

// Stage carries out one stage of a run on another lot and to another goal (kg/kg)
// than its own.
func (c *Case) Stage(plan *Run, place int, lot steps.Lot, goal float64) (steps.Outcome, error) {
	under := *c
	under.plan = plan
	last := place == len(plan.Route)-1
	o, err := under.carry(place, plan.Route[place], lot, goal, last, plan.Settings.at(plan.Route, place))
	if err == nil {
		err = nothingKept(o)
	}
	return o, err
}

// carry carries out a stage, with the dose of the plan where there is one.
func (c *Case) carry(place int, stage Stage, lot steps.Lot, goal float64, last bool, choice choice) (steps.Outcome, error) {
	if c.plan == nil {
		return c.remembered(stage, lot, goal, last, choice)
	}
	kg := c.plan.Outcomes[place].AgentKg
	switch stage.Kind {
	case steps.Soak:
		return c.soakOver(lot, kg, stage.Agent, choice)
	case steps.Column:
		return c.pumpOver(lot, kg, c.plan.Outcomes[place].Apparatus, stage.Agent, goal, choice)
	case steps.Salt:
		a := c.Catalog.Agents[stage.Agent]
		return steps.RunSalt(c.Mixture, lot, kg/steps.LotVolume(c.Mixture, lot, c.Job.Site.RoomK), c.salt(a), c.saltRules(a), c.saltRig(math.NaN()))
	case steps.Reactive:
		return c.distilOff(lot, kg, stage.Agent)
	}
	return c.step(stage, lot, goal, last, choice)
}

// soakOver is a soak over weighed beads. A rate that is twice as high is the same
// as twice the time.
func (c *Case) soakOver(lot steps.Lot, kg float64, agent string, choice choice) (steps.Outcome, error) {
	rate := c.drawn.StillRate
	if choice.stirred {
		rate = c.drawn.StirredRate
	}
	timeS, charges := choice.soakHours*3600, max(1, choice.charges)
	rig := c.soakRigOf(choice)
	rig.CondensationPerS /= rate
	o, err := c.standOver(lot, charges, kg/steps.LotVolume(c.Mixture, lot, c.Job.Site.RoomK), math.Min(timeS*rate, longestSoakHours*3600), c.sorbent(agent, choice.after), rig)
	if errors.Is(err, steps.ErrWetSieve) {
		return c.asWetAsItWas(lot, kg, agent, float64(charges)*timeS, choice), nil
	}
	if err != nil {
		return o, err
	}
	o.HoursTotal += float64(charges)*timeS/3600 - o.Course[len(o.Course)-1].Hours
	o.EnergyKWh += c.stirrerKWh(choice)
	return o, err
}

// asWetAsItWas is a lot over beads that turned out wetter than the lot: it comes
// off no drier, and costs what it costs.
func (c *Case) asWetAsItWas(lot steps.Lot, kg float64, agent string, timeS float64, choice choice) steps.Outcome {
	s, rig := c.sorbent(agent, choice.after), c.soakRig(choice.stirred)
	heldKg := math.Min(kg*s.HoldUpM3PerKg*c.Mixture.Solvent.DensityKgPerM3.At(rig.TempK), lot.SolventKg) / float64(max(1, choice.lots))
	kept := 1 - heldKg/lot.SolventKg
	attended := float64(rig.Vessels*max(1, choice.charges)) * rig.AttendedS / 3600
	return steps.Outcome{
		Kind: steps.Soak, Agent: agent, In: lot, AgentKg: kg, Why: steps.AtFloor,
		Out:        steps.Lot{SolventKg: lot.SolventKg * kept, WaterKg: lot.WaterKg * kept, TempK: rig.TempK},
		HoursTotal: timeS/3600 + attended, HoursAttended: attended,
		Losses: []steps.Loss{{Cause: "held by the drained beads", SolventKg: heldKg}},
	}
}

// pumpOver is a column over the bed that was planned.
func (c *Case) pumpOver(lot steps.Lot, kg float64, column, agent string, goal float64, choice choice) (steps.Outcome, error) {
	rig := c.columnRig(c.Catalog.Apparatus[column])
	rig.Association = c.drawn.ColumnRate * c.drawn.ColumnRate // the diffusivity goes with its root
	o, err := steps.ColumnOver(c.Mixture, lot, kg*(1-1e-12), goal, c.sorbent(agent, choice.after), rig)
	o.Apparatus = column
	return o, err
}

// distilOff is a reactive agent of which the planned charge is put to the lot, or
// what it needs where that is more.
func (c *Case) distilOff(lot steps.Lot, kg float64, agent string) (steps.Outcome, error) {
	a, found, rig := c.reactiveAgent(agent), c.measured(c.Catalog.Agents[agent]), c.reactiveRig(agent)
	if left, ok := c.drawn.Reactive[agent]; ok {
		found.Water, found.Low, found.High = found.Water*left, found.Low*left, found.High*left
		a.ClassActivity *= left
	}
	rig.Surplus, rig.LeastKgPerM3 = 1, kg/steps.LotVolume(c.Mixture, lot, rig.RoomK)
	o, err := steps.RunReactive(c.Mixture, lot, a, found, rig)
	o.HoursTotal += c.practice("reactive-spent") / 3600
	return o, err
}

// loadingFactor is what a draw makes of a sorbent's uptake.
func (c *Case) loadingFactor(agent string) float64 {
	if c.drawn != nil {
		if f, ok := c.drawn.Loading[agent]; ok {
			return f
		}
	}
	return 1
}

// shareRemoved is what a draw makes of a salt's share.
func (c *Case) shareRemoved(share float64) float64 {
	if c.drawn == nil || share == 0 {
		return share
	}
	return 1 - math.Min(1, (1-share)*c.drawn.SaltLeft)
}

// aim is what the last step of a run is sized for: the settings' own, under the
// limit, or the limit.
func (c *Case) aim(s Settings) float64 {
	if s.AimMgPerKg > 0 {
		return s.AimMgPerKg * 1e-6
	}
	return c.Goal()
}

// QuickSoak is the soak of a run at a place, for many draws.
func (c *Case) QuickSoak(run *Run, place int) (*steps.QuickSoak, error) {
	o, choice := &run.Outcomes[place], run.Settings.at(run.Route, place)
	return steps.NewQuickSoak(c.Mixture, o.In, o.AgentKg, choice.soakHours*3600, choice.charges, c.tabulated(o.Agent, choice.after), c.soakRigOf(choice))
}

// tabulated is a sorbent with what it holds at room temperature as a table.
func (c *Case) tabulated(agent, after string) steps.Sorbent {
	s := c.sorbent(agent, after)
	s.Uptakes = c.site.uptakes.Of(agent, func() *steps.Uptakes { return steps.UptakesOf(c.Mixture, s, c.Job.Site.RoomK) })
	return s
}

// StirredAt reports whether the soak of a run at a place is stirred.
func (s Settings) StirredAt(r Route, place int) bool { return s.at(r, place).stirred }

// QuickColumn is the column of a run at a place, for many draws.
func (c *Case) QuickColumn(run *Run, place int) (*steps.QuickColumn, error) {
	o, choice := &run.Outcomes[place], run.Settings.at(run.Route, place)
	return steps.NewQuickColumn(c.Mixture, o.In, o.AgentKg, c.tabulated(o.Agent, choice.after), c.columnRig(c.Catalog.Apparatus[o.Apparatus]))
}

// QuickSalt is the salt of a run at a place, for many draws.
func (c *Case) QuickSalt(run *Run, place int, holds *steps.Solubilities) (*steps.QuickSalt, error) {
	o := &run.Outcomes[place]
	a := c.Catalog.Agents[o.Agent]
	return steps.NewQuickSalt(c.Mixture, o.In, o.AgentKg, c.salt(a), c.saltRules(a), c.saltRig(math.NaN()), holds)
}

// QuickReactive is the reactive agent of a run at a place, for many draws.
func (c *Case) QuickReactive(run *Run, place int, holds *steps.Solubilities) *steps.QuickReactive {
	agent := run.Outcomes[place].Agent
	return steps.NewQuickReactive(c.Mixture, c.reactiveAgent(agent), c.measured(c.Catalog.Agents[agent]), c.reactiveRig(agent), holds)
}

// FeedOf is the lot as delivered with another content of dissolved water.
func (c *Case) FeedOf(water float64) steps.Lot { return c.FeedsOf([]float64{water})[0] }

// FeedsOf are lots as delivered, each with its content of dissolved water.
func (c *Case) FeedsOf(water []float64) []steps.Lot {
	roomK, feeds := c.Job.Site.RoomK, make([]steps.Lot, len(water))
	waterKgPerM3, solventKgPerM3 := c.Mixture.Water.DensityKgPerM3.At(roomK), c.Mixture.Solvent.DensityKgPerM3.At(roomK)
	for i, w := range water {
		feeds[i] = delivered(&c.Lot, w, waterKgPerM3, solventKgPerM3, roomK)
	}
	return feeds
}

// WithPractice is the case with other operating facts.
func (c *Case) WithPractice(facts map[string]float64) *Case {
	under, cat := *c, *c.Catalog
	cat.Practice = maps.Clone(cat.Practice)
	for key, si := range facts {
		v := cat.Practice[key]
		v.SI = si
		cat.Practice[key] = v
	}
	under.Catalog, under.known = &cat, nil
	return &under
}

// WaitingFor is how long a lot waits for people with so many attended hours.
func (c *Case) WaitingFor(attendedH float64) float64 {
	return waiting(attendedH, c.Job.Site.AttendedSecondsPerDay/3600)
}
