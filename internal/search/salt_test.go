package search

import (
	"errors"
	"maps"
	"math"
	"slices"
	"testing"

	"parch/catalog"
	"parch/internal/routes"
	"parch/internal/steps"
)

// The limits of a salt as a route may claim them (common practice, no source): it is
// never the last step for a target under 100 mg/kg, and never leaves under 50 mg/kg.
const leastSaltTarget, leastSaltOutlet = 100, 50e-6

// Every salt in every solvent, alone and before beads: whatever is asked, and whatever
// hand-over is given, the limits of a salt hold.
func TestSaltsKeepToTheirClaims(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	beads := routes.Stage{Kind: steps.Soak, Agent: "sieve-3a"}
	ended, before := 0, 0
	for _, solvent := range slices.Sorted(maps.Keys(c.Solvents)) {
		if c.Solvents[solvent].Water == nil {
			continue
		}
		for _, target := range []float64{20, 99, leastSaltTarget} {
			tuner := tunerOf(t, lotYAML("cost", solvent, 10, 24, 900, target, ""))
			for _, stage := range tuner.Case.Steps() {
				if stage.Kind != steps.Salt {
					continue
				}
				if n := alone(t, tuner, stage, target); n > 0 {
					ended++
				}
				if target == 20 && beforeBeads(t, tuner, routes.Route{stage, beads}) {
					before++
				}
			}
		}
	}
	if ended < 180 || before < 150 {
		t.Errorf("only %d routes that end with a salt and %d that go on were run", ended, before)
	}
	t.Logf("%d routes that end with a salt, %d that go on", ended, before)
}

// alone runs a salt as the only step, tuned and as settings from a file would have it,
// where a route may end with it; where not, none is offered, chained or repeated.
func alone(t *testing.T, tuner *Tuner, salt routes.Stage, target float64) (ran int) {
	t.Helper()
	route, solvent := routes.Route{salt}, tuner.Case.Solvent.Key
	offered, _ := tuner.Case.Candidates()
	standing := slices.ContainsFunc(offered, func(r routes.Route) bool { return r.ID() == route.ID() })
	repeated := len(tuner.Case.Chains(offered, []string{route.ID()})) > 0
	if target < leastSaltTarget {
		if standing || repeated || tuner.Case.MayEnd(salt) == "" {
			t.Errorf("%s of %s may end a job with a target of %g mg/kg: offered %v, repeated %v", route.ID(), solvent, target, standing, repeated)
		}
		return 0
	}
	tuned, err := tuner.Tune(route)
	again, errAgain := tuner.Run(route, routes.Settings{HandOverMgPerKg: []float64{}})
	for _, one := range []struct {
		run routes.Run
		err error
	}{{tuned, err}, {again, errAgain}} {
		switch {
		case one.err != nil && !errors.Is(one.err, routes.ErrRefused):
			t.Fatalf("%s of %s: %v", route.ID(), solvent, one.err)
		case one.err != nil:
		case one.run.WaterOut < leastSaltOutlet*(1-1e-9):
			t.Errorf("%s of %s claims %g", route.ID(), solvent, one.run.WaterOut)
		default:
			ran++
		}
	}
	return ran
}

// beforeBeads gives a salt hand-overs that no salt reaches.
func beforeBeads(t *testing.T, tuner *Tuner, route routes.Route) (ran bool) {
	t.Helper()
	for _, handOver := range []float64{5, 45, 200} {
		run, err := tuner.Run(route, routes.Settings{HandOverMgPerKg: []float64{handOver}, SoakHours: []float64{72}, Sieve: []string{"discard"}})
		if errors.Is(err, routes.ErrRefused) {
			continue
		}
		if err != nil {
			t.Fatalf("%s of %s: %v", route.ID(), tuner.Case.Solvent.Key, err)
		}
		ran = true
		if o := run.Outcomes[0]; o.Out.Water() < math.Min(leastSaltOutlet, o.In.Water())*(1-1e-9) {
			t.Errorf("%s of %s: the salt hands over %g", route.ID(), tuner.Case.Solvent.Key, o.Out.Water())
		}
	}
	return ran
}
