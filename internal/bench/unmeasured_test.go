package bench_test

import (
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"parch/internal/bench"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// Of a pair that nothing was measured for one warning stands, with one band: that of the
// answer. It ends at what the lot holds, and begins no lower than what is claimed of any
// distillate (20 mg/kg, common practice); once 2.26 to 719 mg/kg and 2.26 to 300 stood side
// by side, and 0.48 mg/kg under a least of 20. Over all pairs of the catalog that may meet.
func TestOneBandOfAnUnmeasuredPair(t *testing.T) {
	c := shelf(t)
	seen := 0
	for _, agent := range slices.Sorted(maps.Keys(c.Agents)) {
		if c.Agents[agent].Kind != "reactive" {
			continue
		}
		for _, solvent := range slices.Sorted(maps.Keys(c.Solvents)) {
			for _, water := range []string{"10 mg/kg", "300 mg/kg"} {
				q, err := bench.Read(c, bench.Request{Kind: "reactive", Solvent: c.Solvents[solvent], Flags: map[string]string{"water": water, "agent": agent, "peroxide": "0 mg/L"}})
				if err != nil {
					continue
				}
				a, err := bench.Ask(c, q)
				if err != nil || a.Why == steps.AtMeasured {
					continue
				}
				seen++
				var told []string
				for _, w := range a.Warnings {
					if strings.Contains(w, "measured for ") {
						told = append(told, w)
					}
				}
				least := math.Min(20e-6, a.In.Water())
				name := agent + " in " + solvent + " with " + water
				switch low, high := quantity.FormatWater(a.Low), quantity.FormatWater(a.High); {
				case len(told) != 1:
					t.Errorf("%s: %d warnings: %q", name, len(told), told)
				case low != high && !strings.Contains(told[0], "anything between "+low+" and "+high+" of this lot"):
					t.Errorf("%s: the answer lies between %s and %s, yet %s", name, low, high, told[0])
				case low == high && !strings.Contains(told[0], "no less than "+low+" is claimed"):
					t.Errorf("%s: %s is claimed, yet %s", name, low, told[0])
				}
				if w := a.Out.Water(); !(a.Low >= least*(1-1e-9) && a.Low <= w*(1+1e-9) && w <= a.High*(1+1e-9) && a.High <= a.In.Water()*(1+1e-9)) {
					t.Errorf("%s: %g of %g, between %g and %g", name, w, a.In.Water(), a.Low, a.High)
				}
			}
		}
	}
	if seen < 40 {
		t.Errorf("only %d pairs were seen", seen)
	}
	t.Logf("%d pairs and lots", seen)
}
