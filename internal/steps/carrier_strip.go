package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
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
		return fmt.Errorf("%w: the dried pot holds %s %s before stripping and %s after it: the solvent leaves first; take less carrier",
			ErrNoCarrier, percent(before), r.m.Pure[inCarrier].Called(), percent(after))
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
		return fmt.Errorf("%w: the dried pot holds %s %s, its vapour %s of it: the solvent would leave first; take less carrier",
			ErrNoCarrier, percent(potShare), r.m.Pure[inCarrier].Called(), percent(head))
	}
	return nil
}

// percent prints a share of the mass; what is too little to be found is none.
func percent(share float64) string {
	const found = 1e-7
	if share < found {
		return "no"
	}
	return quantity.Significant(100*share, 3) + " %"
}
