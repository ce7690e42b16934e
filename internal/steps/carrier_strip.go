package steps

import (
	"fmt"
	"math"
)

// strip draws carrier off until the product holds no more than its limit.
func (r *refluxing) strip() error {
	carrierShare := func(s *state) float64 { return r.kg(s.pot[inCarrier], inCarrier) / r.massKg(s.pot) }
	r.stripWhy = AtTarget
	first := math.Log(carrierShare(&r.s) / r.plan.CarrierLimit)
	if first <= 0 {
		return nil
	}
	before := carrierShare(&r.s)
	if err := r.strippable(before); err != nil {
		return err
	}
	lnHeel := math.Log(r.leastKg() / r.massKg(r.s.pot))
	start := r.massKg(r.s.pot)
	if lnHeel >= 0 {
		r.stripWhy = AtHeel
		return nil
	}
	progress := func(s *state, _ *condensed) float64 {
		return math.Max(1-math.Log(carrierShare(s)/r.plan.CarrierLimit)/first, math.Log(r.massKg(s.pot)/start)/lnHeel)
	}
	if err := r.march(r.stripping, progress, ignore); err != nil {
		return err
	}
	if after := carrierShare(&r.s); after >= before {
		return fmt.Errorf("%w: the dried pot holds %.3g %% %s before stripping and %.3g %% after it: the solvent leaves first; take less carrier",
			ErrNoCarrier, 100*before, r.m.Pure[inCarrier].Key, 100*after)
	} else if after > r.plan.CarrierLimit*(1+1e-4) {
		r.stripWhy = AtHeel
	}
	return nil
}

// strippable refuses a pot whose vapour holds less carrier than the pot itself:
// beyond the azeotrope the solvent would leave and the carrier stay.
func (r *refluxing) strippable(potShare float64) error {
	c, err := r.climb(&r.s)
	if err != nil {
		return err
	}
	if head := r.m.Mass(c.head.Y)[inCarrier]; head <= potShare {
		return fmt.Errorf("%w: the dried pot holds %.3g %% %s, its vapour %.3g %%: the solvent would leave first; take less carrier",
			ErrNoCarrier, 100*potShare, r.m.Pure[inCarrier].Key, 100*head)
	}
	return nil
}
