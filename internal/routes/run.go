package routes

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"parch/internal/quantity"
	"parch/internal/steps"
)

// Ways to treat a sieve after use.
const (
	Regenerate = "regenerate"
	Discard    = "discard"
)

// Run carries out the route with the given settings. It is an error if the
// physics refuses a step; a route that misses its target is not.
func (c *Case) Run(r Route, s Settings) (Run, error) {
	return c.RunTo(r, s, c.aim(s))
}

// Outline is the case with soaks in outline (steps.SoakRig), for many runs of which few
// are told of.
func (c *Case) Outline() *Case {
	k := *c
	k.outline = true
	return &k
}

// RunTo is Run with a goal (kg/kg) for the last step of its own.
func (c *Case) RunTo(r Route, s Settings, last float64) (Run, error) {
	run := Run{Route: r, Settings: s, AgentKg: map[string]float64{}, Outcomes: make([]steps.Outcome, 0, len(r)), Uses: make([]StageUse, 0, 12*len(r)+8)}
	lot := c.Feed
	handOver := make([]float64, 0, len(r))
	for i, stage := range r {
		goal := last
		if i < len(r)-1 {
			goal = s.HandOverMgPerKg[i] * 1e-6
		}
		choice := s.at(r, i)
		o, err := c.carry(i, stage, lot, goal, i == len(r)-1, choice)
		if err == nil {
			err = nothingKept(o)
		}
		if err != nil {
			return Run{}, fmt.Errorf("%s: %w", stage.Kind, refused(err))
		}
		uses := c.account(i+1, o, choice)
		o.HoursAttended, o.EnergyKWh = sum(uses, "technician"), sum(uses, "electricity")
		run.add(uses...)
		run.Outcomes = append(run.Outcomes, o)
		if o.AgentKg > 0 {
			run.AgentKg[stage.Agent] += o.AgentKg
		}
		if i < len(r)-1 {
			handOver = append(handOver, o.Out.Water()*1e6)
		}
		lot = o.Out
	}
	run.Settings.HandOverMgPerKg = c.keptHandOver(r, s, handOver)
	c.finish(&run, lot)
	return run, nil
}

// idleShare is the share of the water that a salt or a reactive agent in a chain takes at
// least; what takes less is left out of it.
const idleShare = 0.01

// leastShare is that of a route: a step by itself is shown whatever it takes.
func leastShare(r Route) float64 {
	if len(r) == 1 {
		return 0
	}
	return idleShare
}

// Idle refuses a run as a plan in which a salt or a reactive agent of a chain takes next
// to nothing. That a draw may come to that is no reason against the plan.
func Idle(run *Run) error {
	for i := range run.Outcomes {
		o := &run.Outcomes[i]
		in, out := o.In.Water(), o.Out.Water()
		if (o.Kind == steps.Salt || o.Kind == steps.Reactive) && out > in*(1-leastShare(run.Route))*(1+1e-9) {
			return refusal{fmt.Errorf("%s: %s takes next to nothing of %s", o.Kind, o.Agent, quantity.FormatWater(in))}
		}
	}
	return nil
}

// step carries out one stage.
func (c *Case) step(stage Stage, lot steps.Lot, goal float64, last bool, choice choice) (steps.Outcome, error) {
	switch stage.Kind {
	case steps.Settle:
		return steps.RunSettle(c.Mixture, lot, c.Job.Site.RoomK, c.settleRules())
	case steps.Trap:
		if stage.Carrier != "" {
			return c.boilWithCarrier(stage.Carrier, lot, goal, choice)
		}
		return c.boilOut(lot, goal, choice)
	case steps.Forerun:
		if choice.carrier != "" {
			return c.stripCarrier(choice.carrier, lot, choice)
		}
		return c.runForerun(lot, goal, choice)
	case steps.Salt:
		return c.runSalt(lot, goal, stage.Agent, last)
	case steps.Soak:
		return c.runSoak(lot, goal, stage.Agent, choice)
	case steps.Column:
		return c.runColumn(lot, goal, stage.Agent, choice)
	case steps.Reactive:
		return c.runReactive(lot, stage.Agent)
	case steps.Buy:
		return steps.RunBuy(c.Mixture, lot, c.Lot.BatchM3, c.dryGrade(), c.practice("buy-attended"), c.Job.Site.RoomK), nil
	}
	return steps.Outcome{}, fmt.Errorf("step %q is not known", stage.Kind)
}

// refusal is a step's error that is ErrRefused too and reads like the step's.
type refusal struct{ error }

func (r refusal) Is(target error) bool { return target == ErrRefused }

func (r refusal) Unwrap() error { return r.error }

// refused marks the errors that say that a step does not work on this lot.
func refused(err error) error {
	for _, known := range []error{steps.ErrNoTrap, steps.ErrNothingSettles, steps.ErrWetSieve, steps.ErrUnfit, steps.ErrNoSense,
		steps.ErrNoForerun, steps.ErrNoColumn, steps.ErrSaltTooWarm, steps.ErrPreDry, steps.ErrNoReactive, steps.ErrHeater, steps.ErrBoilUp, steps.ErrNoCarrier} {
		if errors.Is(err, known) {
			return refusal{err}
		}
	}
	return err
}

// keptHandOver reports the chosen hand-over of a step that has a choice and the
// reached one of a step that has none.
func (c *Case) keptHandOver(r Route, s Settings, reached []float64) []float64 {
	for i := range reached {
		if chosenOutlet(r[i].Kind) && !r.Strips(i) {
			reached[i] = s.HandOverMgPerKg[i]
		}
	}
	return reached
}

// chosenOutlet tells the steps that are run to a water that is chosen from those
// that leave what they leave.
func chosenOutlet(kind steps.Kind) bool {
	return slices.Contains([]steps.Kind{steps.Trap, steps.Forerun, steps.Soak, steps.Column}, kind)
}

// finish adds what belongs to the whole route and sums up.
func (c *Case) finish(run *Run, product steps.Lot) {
	run.WaterOut = product.Water()
	run.TooDry = run.WaterOut < c.AcceptFrom()*(1-1e-9)
	run.Meets = run.WaterOut <= c.Limit.AcceptAt*(1+1e-9) && !run.TooDry
	run.LitresDelivered = steps.LotVolume(c.Mixture, product, c.Job.Site.RoomK) * 1e3
	run.add(c.WholeRoute(run)...)
	for _, o := range run.Outcomes {
		run.HoursTotal += o.HoursTotal
		run.CoolingWaterL += o.CoolingWaterL
		run.SolventLostL += o.SolventLostL
	}
	run.HoursTotal += c.tests(run.Route) * c.practice("karl-fischer-time") / 3600
	run.HoursAttended, run.EnergyKWh = sum(run.Uses, "technician"), sum(run.Uses, "electricity")
	run.HoursWaiting = waiting(run.HoursAttended, c.Job.Site.AttendedSecondsPerDay/3600)
	run.HoursTotal += run.HoursWaiting
	for _, u := range run.Uses {
		if u.Head == steps.Waste {
			run.WasteKg += u.Quantity
		}
	}
	run.CO2eKg = c.emissions(run)
}

// sum of the quantities of one item.
func sum(uses []StageUse, item string) float64 {
	total := 0.0
	for _, u := range uses {
		if u.Item == item {
			total += u.Quantity
		}
	}
	return total
}

func (r *Run) add(uses ...StageUse) { r.Uses = append(r.Uses, uses...) }

func (c *Case) settleRules() steps.SettleRules {
	return steps.SettleRules{
		TimeS: c.practice("settle-time"), AttendedS: c.practice("settle-attended"),
		InterfaceShare: c.practice("settle-interface"),
	}
}

func (c *Case) trapRules() steps.TrapRules {
	return steps.TrapRules{
		LowestOutlet: c.practice("trap-outlet-minimum"), Efficiency: c.practice("trap-efficiency"),
		EfficiencyBelow: c.practice("trap-efficiency-below"), ShortestRefluxS: c.practice("trap-reflux-minimum"),
		SetUpS: c.practice("trap-setup"), AttendedShare: c.practice("trap-attended-share"),
		ShutDownS: c.practice("trap-shutdown"), DrainingS: c.practice("draining-time"),
		VapourLossPerDay: c.practice("vapour-loss-per-day"),
		CoolingFlowM3S:   c.practice("cooling-flow"), CoolingRiseK: c.practice("cooling-rise"),
		LongestHeatUpS: c.practice("heat-up-maximum"),
	}
}

// stepKey tells the steps of one case apart: what goes in and what is asked.
type stepKey struct {
	stage                           Stage
	waterKg, solventKg, tempK, goal float64
	carrierKg                       float64
	last                            bool
	choice                          choice
}

// remembered carries out a stage, or gives the outcome it had before: a search
// asks for the same trap, salt or forerun before many different soaks. Soaks
// themselves are quick and many.
func (c *Case) remembered(stage Stage, lot steps.Lot, goal float64, last bool, choice choice) (steps.Outcome, error) {
	if stage.Kind == steps.Soak || c.known == nil {
		return c.step(stage, lot, goal, last, choice)
	}
	if choice.carrier != "" {
		goal, last = 0, false // a carrier is stripped to its limit, whatever follows
	}
	key := stepKey{stage, lot.WaterKg, lot.SolventKg, lot.TempK, goal, lot.CarrierKg, last, choice}
	r := c.known.Of(key, func() (r result) {
		r.outcome, r.err = c.step(stage, lot, goal, last, choice)
		return r
	})
	return r.outcome, r.err
}

type result struct {
	outcome steps.Outcome
	err     error
}

// boilOut runs the trap; a pot that goes on to a forerun is not cooled down.
func (c *Case) boilOut(lot steps.Lot, goal float64, choice choice) (steps.Outcome, error) {
	trap, err := c.trapAt(choice.receiverC)
	if err != nil {
		return steps.Outcome{}, err
	}
	receiver, err := c.receiver(trap, choice.receiver)
	if err != nil {
		return steps.Outcome{}, err
	}
	still, charges := c.Still()
	rules := c.trapRules()
	if receiver.SetUp != nil {
		rules.SetUpS += receiver.SetUp.SI
	}
	if choice.goesOn {
		rules.ShutDownS = 0
	}
	rules.LongestRefluxS, rules.Closely = choice.longestS, choice.watched
	o, err := steps.RunTrap(trap, lot, goal, steps.TrapRig{
		HeaterW: c.heaterW(still), HeatShare: c.practice("heat-share"), Returns: receiver.Returns,
		FillVolumeM3: receiver.FillVolume.SI, UsableVolumeM3: receiver.Volume.SI,
		RoomK: c.Job.Site.RoomK, Coolant: c.coolant(), Charges: charges,
	}, rules)
	if err == nil && choice.goesOn {
		o.Out.TempK = o.Course[len(o.Course)-1].PotK
	}
	o.Apparatus = receiver.Key
	return o, err
}

// trapAt is the equilibrium of a trap with its receiver at a temperature (°C; 0
// stands for the coldest in reach).
func (c *Case) trapAt(receiverC float64) (*steps.TrapEquilibrium, error) {
	const shown = 0.006 // K: settings carry two decimals
	tK, coldest := receiverC+zeroCelsiusK, c.Job.Site.ReceiverK
	if receiverC == 0 || math.Abs(tK-coldest) < shown {
		tK = coldest
	}
	if tK < coldest {
		return nil, fmt.Errorf("%w: a receiver at %s; the site reaches %s", ErrSettings, quantity.FormatTemperature(tK), quantity.FormatTemperature(coldest))
	}
	if tK == coldest {
		return c.Trap, c.NoTrap
	}
	return c.site.trap(tK, func() (*steps.TrapEquilibrium, error) {
		return steps.NewTrapEquilibrium(c.Mixture, tK, c.Job.Site.PressurePa)
	})
}

const zeroCelsiusK = 273.15

// dryGrade is the water a dry grade is sold with, the job's own before the catalog's.
func (c *Case) dryGrade() float64 {
	item := c.Solvent.Key + "-dry"
	for _, p := range c.Job.Prices {
		if p.Item == item && p.WaterMax > 0 {
			return p.WaterMax
		}
	}
	if p, ok := c.Catalog.Prices[item]; ok && p.WaterMax != nil {
		return p.WaterMax.SI
	}
	return math.NaN()
}
