package search

import (
	"math"
	"math/rand/v2"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Over all stands, lots, charges and uses of the sieve of a soak alone, what is taken is
// as good as the best by Tie, and nothing that is no worse than the best ends sooner.
func TestTheShorterOfTwoThatCostTheSame(t *testing.T) {
	random := rand.New(rand.NewPCG(20261202, 3))
	shortened := 0
	for range 40 {
		tuner, _, yaml := randomLot(t, random)
		if tuner.Objective == Time {
			continue
		}
		route := routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}}
		taken, err := tuner.Tune(route)
		if err != nil || !taken.Meets {
			continue
		}
		got, err := tuner.Value(&taken)
		if err != nil {
			t.Fatal(err)
		}
		all := everySetting(t, tuner, route)
		lowest := math.Inf(1)
		for _, one := range all {
			lowest = math.Min(lowest, one.score)
		}
		if got > lowest*(1+worse) {
			t.Errorf("%.8g is taken, %.8g is to be had\n%s%+v", got, lowest, yaml, taken.Settings)
		}
		for _, one := range all {
			if one.score <= math.Min(lowest, got) && one.run.HoursTotal < taken.HoursTotal*(1-1e-9) {
				t.Errorf("%g h at %.8g are taken, %g h at %.8g to be had\n%s%+v\n%+v", taken.HoursTotal, got, one.run.HoursTotal, one.score, yaml, taken.Settings, one.run.Settings)
				break
			}
		}
		if s := taken.Shortened; s != nil {
			shortened++
			if s.HoursTotal <= taken.HoursTotal || s.Saves > Tie {
				t.Errorf("%g h taken: %+v\n%s", taken.HoursTotal, *s, yaml)
			}
		}
	}
	if shortened < 5 {
		t.Errorf("%d shorter stands taken: too few to tell", shortened)
	}
}

// everySetting runs a route without hand-overs with every combination of its axes.
func everySetting(t *testing.T, tuner *Tuner, route routes.Route) (all []trial) {
	t.Helper()
	g, err := tuner.prepare(route)
	if err != nil || len(g.places) > 0 {
		t.Fatal(route.ID(), err)
	}
	at := spot{at: make([]int, len(g.axes))}
	for i := 0; i < len(at.at); {
		if g.best = (trial{score: math.Inf(1)}); g.try(at) < scoreMissed {
			all = append(all, g.best)
		}
		for i = 0; i < len(at.at); i++ {
			if at.at[i]++; at.at[i] < g.axes[i].count {
				break
			}
			at.at[i] = 0
		}
	}
	return all
}
