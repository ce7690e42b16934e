package routes

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/steps"
)

// singleTrap boils out, with a carrier or without.
func (c *Case) singleTrap(a Asked, s *Single) (err error) {
	if a.Carrier != "" {
		return c.singleCarrier(a, s)
	}
	asked := choice{longestS: orZero(a.TimeS), watched: true, receiver: a.Receiver}
	s.Outcome, err = c.boilOut(c.Feed, orZero(a.Goal), asked)
	switch {
	case err != nil:
		return err
	case s.Why == steps.AtTime:
		return c.bandOfEfficiency(orZero(a.Goal), asked, s)
	}
	goal := math.Min(orZero(a.Goal), s.Out.Water()) // filling the receiver may go past it
	c.bandOfSolubility(s, func(factor float64) float64 { return c.trapOutlet(goal, factor) })
	return nil
}

// bandOfEfficiency takes a trap that a time ends to both ends of the efficiency that
// is common practice at low water.
func (c *Case) bandOfEfficiency(goal float64, asked choice, s *Single) error {
	v := c.Catalog.Practice["trap-efficiency"]
	if !v.Banded() {
		return nil
	}
	low, high := s.Out.Water(), s.Out.Water()
	for _, efficiency := range []float64{v.Low, v.High} {
		o, err := c.WithPractice(map[string]float64{"trap-efficiency": efficiency}).boilOut(c.Feed, goal, asked)
		if err != nil {
			return err
		}
		low, high = math.Min(low, o.Out.Water()), math.Max(high, o.Out.Water())
	}
	s.Low, s.High = low, high
	s.Bands = append(s.Bands, fmt.Sprintf("efficiency below %s, %s to %s", quantity.FormatWater(c.practice("trap-efficiency-below")), quantity.FormatShare(v.Low), quantity.FormatShare(v.High)))
	return nil
}

// trapOutlet is where a trap ends whose floor is off by a factor.
func (c *Case) trapOutlet(goal, factor float64) float64 {
	return steps.TrapOutlet(c.Feed.Water(), goal, c.Trap.Floor.Water*factor, c.practice("trap-outlet-minimum"))
}

// singleCarrier boils out with a carrier and strips it in one operation. A dose
// that is not given is chosen.
func (c *Case) singleCarrier(a Asked, s *Single) error {
	eq, err := c.carrierAt(a.Carrier)
	if err != nil {
		return err
	}
	receiver, err := c.carrierReceiver(a.Carrier, a.Receiver)
	if err != nil {
		return err
	}
	rules := c.trapRules()
	if a.TimeS < rules.ShortestRefluxS {
		return fmt.Errorf("%w: %.3g h of reflux; a trap is run for %.3g h at least", steps.ErrNoCarrier, a.TimeS/3600, rules.ShortestRefluxS/3600)
	}
	if receiver.SetUp != nil {
		rules.SetUpS += receiver.SetUp.SI
	}
	plan := c.carrierPlan(choice{stages: a.Stages}, c.Feed)
	plan.Goal, plan.PreFilled, plan.LongestS = orZero(a.Goal), receiver.PreFilled, orZero(a.TimeS)
	rigFor := func(doseKg float64) steps.TrapRig {
		return c.carrierRig(receiver.Returns, receiver.FillVolume.SI, receiver.Volume.SI, c.Feed, doseKg/c.carrierDensity(a.Carrier))
	}
	if given(a.DoseKgPerM3) {
		plan.DoseKg = a.DoseKgPerM3 * steps.LotVolume(c.Mixture, c.Feed, c.Job.Site.RoomK)
		s.Outcome, err = steps.RunCarrier(eq, c.Feed, plan, rigFor(plan.DoseKg), rules)
	} else {
		s.Outcome, err = steps.ChooseCarrierDose(eq, c.Feed, plan, rigFor, rules)
		plan.DoseKg = s.CarrierKg
	}
	if errors.Is(err, steps.ErrNoCarrier) && a.Stages == 0 {
		for _, taller := range c.ColumnStages() {
			if a.Stages = taller; taller > 0 && c.singleCarrier(a, &Single{}) == nil {
				return fmt.Errorf("%w; over a column of %d stages it works: --stages %d", err, taller, taller)
			}
		}
	}
	if err != nil {
		return err
	}
	if lost := s.Balance.SolventRemovedKg / c.Feed.SolventKg; lost > wastefulForerun {
		return wasteful{lost, fmt.Errorf("boiling out with %s and stripping it over %d stages would take %.0f %% of the lot with it", a.Carrier, a.Stages, 100*lost)}
	}
	s.Apparatus = receiver.Key
	c.bandOfLayers(s, eq, plan, rigFor(plan.DoseKg), rules)
	return nil
}

// bandOfLayers takes the water of the organic layer to both ends of its band. An
// end at which the trap does not work at all leaves the outlet without a band.
func (c *Case) bandOfLayers(s *Single, eq *steps.CarrierEquilibrium, plan steps.CarrierPlan, rig steps.TrapRig, rules steps.TrapRules) {
	factor := s.Figure("band on the water of the organic layer")
	if !(factor > 1) {
		return
	}
	low, high := s.Out.Water(), s.Out.Water()
	for _, plan.OrganicWater = range []float64{1 / factor, factor} {
		o, err := steps.RunCarrier(eq, c.Feed, plan, rig, rules)
		if err != nil {
			return
		}
		low, high = math.Min(low, o.Out.Water()), math.Max(high, o.Out.Water())
	}
	s.Low, s.High = low, high
	s.Bands = append(s.Bands, fmt.Sprintf("water of the organic layer, a factor of %.2g either way", factor))
}

// wasteful is a refusal for the share of the solvent that is lost.
type wasteful struct {
	share float64
	error
}

func (w wasteful) Is(target error) bool { return target == ErrRefused || target == ErrWasteful }

// SparingColumn is the shortest column of the catalog over which a forerun of the
// lot comes to goal (kg/kg; NaN: makes it drier) and is worth while, and the share of
// the solvent that it takes; ok is false where none is.
func (c *Case) SparingColumn(goal float64) (stages int, share float64, ok bool) {
	const rounding = 1e-6
	for _, n := range c.ColumnStages() {
		o, err := c.runForerun(c.Feed, orZero(goal), choice{stages: n})
		if err != nil || o.Out.Water() >= c.Feed.Water()*(1-rounding) || given(goal) && o.Out.Water() > goal*(1+rounding) {
			continue
		}
		return n, o.Balance.SolventRemovedKg / c.Feed.SolventKg, true
	}
	return 0, 0, false
}
