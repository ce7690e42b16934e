package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// fill gets the receiver full of condensate, and parts that into layers.
func (r *refluxing) fill() error {
	rate, full := r.filling, func(s *state, _ *condensed) float64 {
		return r.liquidM3(s.held, r.eq.ReceiverK) / r.rig.FillVolumeM3
	}
	if r.plan.PreFilled {
		rate, full = r.pushing, func(s *state, _ *condensed) float64 { return s.pushedM3 / r.rig.FillVolumeM3 }
	}
	if err := r.march(rate, full, ignore); err != nil {
		return err
	}
	split, err := r.part(r.s.held)
	if err != nil || !split.Exists {
		return err
	}
	n := total(r.s.held)
	r.s.aqueous = scaled(split.Aqueous, n*split.AqueousShare)
	for i := range r.s.held {
		r.s.held[i] -= r.s.aqueous[i]
	}
	return nil
}

// slowestRemoval ends the trap: to boil as much as the whole pot over once more
// would take less than this share of its water.
const slowestRemoval = 0.05

// reflux runs the steady return until the goal is reached or the trap can do no more.
func (r *refluxing) reflux() error {
	goal := math.Max(r.plan.Goal, r.rules.LowestOutlet)
	r.why = AtTarget
	if goal > r.plan.Goal {
		r.why = AtPractice
	}
	r.goal, r.trapFromJ = goal, r.spentJ
	if err := r.firstLayers(); err != nil {
		return err
	}
	first, err := r.condense(&r.s)
	if err != nil || r.dryness(&r.s) <= goal {
		return err
	}
	begin := r.leeway(&r.s, &first)
	for _, l := range begin {
		if !(l > 0) {
			r.why, r.whyText = r.ended(&r.s, &first)
			return nil
		}
	}
	progress := func(s *state, c *condensed) float64 {
		if r.changedPlaces(c) { // within a step, which went past densities that are alike
			return math.Inf(1)
		}
		done := r.timeSpent(r.heatJ(s, c.pot.TempK))
		for i, l := range r.leeway(s, c) {
			done = math.Max(done, 1-l/begin[i])
		}
		return done
	}
	var last condensed
	err = r.march(r.returning, progress, func(_ *state, c *condensed) {
		r.watch(c)
		last = *c
	})
	if err == nil && r.dryness(&r.s) > goal*(1+1e-4) {
		r.why, r.whyText = r.ended(&r.s, &last)
	}
	return err
}

// changedPlaces reports whether the layer that went back so far is the other one now.
func (r *refluxing) changedPlaces(c *condensed) bool {
	now := r.m.Settle(c.split, r.eq.ReceiverK).Return
	return now != thermo.None && now != r.returns
}

func (r *refluxing) leastKg() float64 { return r.plan.HeelShare * r.massKg(r.charge) }

// briskness is the share of the pot's water that boiling as much as the whole
// pot over would take at the present rate, over slowestRemoval.
func (r *refluxing) briskness(s *state, c *condensed) float64 {
	if !c.split.Exists {
		return 0
	}
	taken := c.split.AqueousShare * c.split.Aqueous[inWater] * r.efficiency(s)
	return taken * total(s.pot) / s.pot[inWater] / slowestRemoval
}

// timeSpent is the share of the longest time under the trap.
func (r *refluxing) timeSpent(spentJ float64) float64 {
	if r.plan.LongestS <= 0 {
		return 0
	}
	return (spentJ - r.trapFromJ) / r.netW() / r.plan.LongestS
}

func (r *refluxing) efficiency(s *state) float64 {
	if r.dryness(s) < r.rules.EfficiencyBelow {
		return r.rules.Efficiency
	}
	return 1
}

// leastReturn is the share of the condensate that goes back, in moles, below which
// a trap returns nothing: what it boils off is all kept.
const leastReturn = 1e-3

// leastCarrier is the mole share of the pot below which the carrier is used up: what
// was charged stands in the receiver or has left with the aqueous layer.
const leastCarrier = 1e-6

// What brings a trap to its end; the places in leeway.
const (
	byGoal = iota
	byRate
	byHeel
	byDensity
	byReturn
	byWater
	byCarrier
	waysToEnd
)

// leeway is how far the trap is from each end, as logarithms that fall to 0.
// Without layers it is far beyond some of them.
func (r *refluxing) leeway(s *state, c *condensed) (ln [waysToEnd]float64) {
	dry := r.dryness(s)
	ln[byGoal] = math.Log(dry / r.goal)
	ln[byCarrier] = math.Log(s.pot[inCarrier] / total(s.pot) / leastCarrier)
	ln[byHeel] = math.Log(r.massKg(s.pot) / r.leastKg())
	if !c.split.Exists {
		ln[byRate], ln[byDensity], ln[byReturn], ln[byWater] = math.Inf(-1), math.Inf(-1), math.Inf(-1), math.Inf(-1)
		return ln
	}
	layers := r.m.Settle(c.split, r.eq.ReceiverK)
	ln[byRate] = math.Log(r.briskness(s, c))
	ln[byDensity] = math.Log(layers.DensityDifference() / thermo.LeastDensityDifference)
	ln[byReturn] = math.Log((1 - c.split.AqueousShare) / leastReturn)
	ln[byWater] = math.Log(r.carrierFree(c.split.Aqueous) / dry)
	return ln
}

// nearest is the end that a trap has come to, or -1.
func (r *refluxing) nearest(s *state, c *condensed) int {
	const reached = 1e-3
	for i, l := range r.leeway(s, c) {
		if l < reached {
			return i
		}
	}
	return -1
}

// ended says why a trap that has not reached its goal has come to its end.
func (r *refluxing) ended(s *state, c *condensed) (stop Stop, text string) {
	pot := quantity.FormatWater(r.water(s)) + " in the pot, carrier included"
	receiver := r.eq.ReceiverK - 273.15
	l := r.m.Settle(c.split, r.eq.ReceiverK)
	if s.pot[inCarrier]/total(s.pot) < leastCarrier*(1+1e-3) {
		return AtCarrier, fmt.Sprintf("carrier used up: what is left of %s stands in the receiver, with %s; take more", r.m.Pure[inCarrier].Called(), pot)
	}
	if !c.split.Exists {
		return AtOneLayer, fmt.Sprintf("no second layer: the condensate is one liquid at %.0f °C, with %s", receiver, pot)
	}
	if r.timeSpent(r.spentJ) > 1-1e-4 {
		return AtTime, fmt.Sprintf("time: %.3g h under the trap are over, with %s", r.plan.LongestS/secondsPerHour, pot)
	}
	switch r.nearest(s, c) {
	case byHeel:
		return AtHeel, fmt.Sprintf("heel: the aqueous layer has taken all but %.0f %% of the charge", 100*r.plan.HeelShare)
	case byDensity:
		return AtExchange, fmt.Sprintf("the layers' densities have come together, with %s: organic %.0f, aqueous %.0f kg/m3 differ by %.1f %% only and do not settle",
			pot, l.OrganicKgPerM3, l.AqueousKgPerM3, 100*l.DensityDifference())
	case byReturn:
		return AtOneLayer, fmt.Sprintf("no organic layer: the condensate is hardly anything but aqueous layer at %.0f °C, with %s", receiver, pot)
	case byWater:
		return AtFloor, fmt.Sprintf("floor: the aqueous layer is no wetter than the pot, with %s", pot)
	}
	if r.changedPlaces(c) {
		return AtExchange, fmt.Sprintf("the layers change places, with %s: organic %.0f, aqueous %.0f kg/m3", pot, l.OrganicKgPerM3, l.AqueousKgPerM3)
	}
	return AtFloor, fmt.Sprintf("floor: hardly any second layer forms at %.0f °C, with %s", receiver, pot)
}

// watch notes at an accepted step how well the water of the organic layer is known.
func (r *refluxing) watch(c *condensed) {
	if !c.split.Exists {
		return
	}
	if factor, basis := r.eq.Band(r.m.Mass(c.split.Organic)); factor > r.widestBand {
		r.widestBand, r.bandBasis = factor, basis
	}
}

// firstLayers checks that the condensate splits, or what the receiver holds where that
// took all the water, and that the return fits.
func (r *refluxing) firstLayers() error {
	c, err := r.condense(&r.s)
	if err == nil && r.dryness(&r.s) <= r.goal {
		c.split, err = r.part(sum(r.s.held, r.s.aqueous))
	}
	if err != nil {
		return err
	}
	l := r.m.Settle(c.split, r.eq.ReceiverK)
	if l.Return == thermo.None {
		w := r.m.Mass(c.head.Y)
		return fmt.Errorf("%w: %s; it holds %s water, %s %s and %s %s", ErrNoCarrier, l.Reason,
			percent(w[inWater]), percent(w[inSolvent]), r.m.Pure[inSolvent].Called(), percent(w[inCarrier]), r.m.Pure[inCarrier].Called())
	}
	r.returns = l.Return
	if !r.fits(l.Return) {
		return fmt.Errorf("%w: the layers need a %s return (organic %.0f, aqueous %.0f kg/m3), the receiver returns the %s layer",
			ErrNoCarrier, l.Return, l.OrganicKgPerM3, l.AqueousKgPerM3, r.rig.Returns)
	}
	if layer, pot := r.carrierFree(c.split.Aqueous), r.dryness(&r.s); layer <= pot {
		return fmt.Errorf("%w: without the carrier the aqueous layer holds %.3g %% water, the pot %.3g %%: the solvent would leave first",
			ErrNoCarrier, 100*layer, 100*pot)
	}
	r.watch(&c)
	return nil
}

// carrierFree is water/(water + solvent) by mass in a layer.
func (r *refluxing) carrierFree(layer Fractions) float64 {
	return r.dryness(&state{pot: layer})
}

func (r *refluxing) fits(needed thermo.Returns) bool {
	return r.rig.Returns == "either" || r.rig.Returns == string(needed)
}
