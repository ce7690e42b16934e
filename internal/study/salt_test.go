package study_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"parch/internal/steps"
	"parch/internal/study"
)

// What a salt may claim in a comparison (common practice, no source): no route ends
// with one for a target under 100 mg/kg, and none leaves under 50 mg/kg after one.
// The sieve is dear and used once, so that salts are worth it: alone, after settling,
// after another salt and before beads.
func TestNoRouteEndsWithASaltBelowItsTarget(t *testing.T) {
	for _, target := range []float64{60, 120} {
		var job strings.Builder
		job.WriteString("exclude: {steps: [trap, forerun, column, reactive, buy], agents: [sieve-4a, sieve-5a, sieve-13x], hazards: [used sieve in an oven]}\nsite: {lots over a charge: 1}\nprices: [{item: sieve-3a, price: 300 EUR/kg}]\nlots:\n")
		for _, solvent := range []string{"toluene", "dichloromethane", "ethyl-acetate", "tetrahydrofuran", "2-propanol"} {
			fmt.Fprintf(&job, "  - {name: %s, solvent: %s, batch: 10 L, water: 2 %%, free water: 20 mL, target: %g mg/kg}\n", solvent, solvent, target)
		}
		ended, passed := 0, 0
		for _, lot := range compare(t, job.String(), study.Options{}).Lots {
			for _, r := range lot.Routes {
				last := len(r.Run.Outcomes) - 1
				for i, o := range r.Run.Outcomes {
					if o.Kind != steps.Salt {
						continue
					}
					if passed++; o.Out.Water() < math.Min(50e-6, o.In.Water())*(1-1e-9) {
						t.Errorf("%s: %s leaves %g mg/kg after a salt", lot.Job.Name, r.ID, o.Out.Water()*1e6)
					}
					if i == last {
						ended++
					}
				}
			}
		}
		if target < 100 && ended > 0 || target >= 100 && ended < 5 || passed < 3 {
			t.Errorf("%g mg/kg: %d routes end with a salt", target, ended)
		}
		t.Logf("%g mg/kg: %d salts in routes, %d of them at the end", target, passed, ended)
	}
}
