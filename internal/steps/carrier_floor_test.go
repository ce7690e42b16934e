package steps_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"parch/internal/quantity"
	"parch/internal/steps"
)

// A trap that says it stopped at its floor leaves no less water than that floor, over all
// pairs of a solvent and a carrier. Both are mg of water per kg of what is in the pot, its
// carrier with it, as Karl Fischer reads them; a floor without the carrier once stood beside
// an outlet with it, 105 beside 95 mg/kg. Where the carrier is stripped in the same operation the
// floor is that of the product.
func TestNoCarrierTrapEndsBelowItsFloor(t *testing.T) {
	var pairs [][2]string
	for k := range shelf(t).Pairs {
		pairs = append(pairs, k)
	}
	slices.SortFunc(pairs, func(a, b [2]string) int { return slices.Compare(a[:], b[:]) })
	random := rand.New(rand.NewPCG(5, 26))
	atFloor, seen := 0, map[[2]string]bool{}
	for range 400 {
		c, ok := drawCarrier(t, pairs, random)
		if !ok {
			continue
		}
		c.plan.Goal = 0
		for what, run := range map[string]func(*steps.CarrierEquilibrium, steps.Lot, steps.CarrierPlan, steps.TrapRig, steps.TrapRules) (steps.Outcome, error){
			"trap": steps.RunCarrierTrap, "product": steps.RunCarrier,
		} {
			o, err := run(c.eq, c.lot, c.plan, c.rig, rules)
			if err != nil || o.Why != steps.AtFloor {
				continue
			}
			atFloor++
			seen[c.pair] = true
			last := o.Course[len(o.Course)-1]
			if out := o.Out.Water(); out < o.Floor*(1-1e-6) {
				t.Errorf("%v, %s: %.6g mg/kg are left under a floor of %.6g", c.pair, what, out*1e6, o.Floor*1e6)
			}
			if math.Abs(o.Floor/last.Water-1) > 1e-6 {
				t.Errorf("%v, %s: a floor of %.6g mg/kg, the pot ends at %.6g", c.pair, what, o.Floor*1e6, last.Water*1e6)
			}
			if o.FloorOf == "" {
				t.Errorf("%v, %s: of what the floor is, is not said", c.pair, what)
			}
			if said := quantity.FormatWater(o.Figure("water in the pot when the trap stops") / 1e6); !strings.Contains(o.WhyText, said) {
				t.Errorf("%v, %s: the reason does not tell the %s of the pot: %s", c.pair, what, said, o.WhyText)
			}
		}
	}
	if atFloor < 40 || len(seen) < 15 {
		t.Errorf("only %d runs of %d pairs ended at a floor", atFloor, len(seen))
	}
	t.Logf("%d runs of %d pairs of %d", atFloor, len(seen), len(pairs))
}
