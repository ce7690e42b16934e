package search

import (
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Sizes of the comparison with a dense grid. PARCH_OPTIMALITY=200 takes that many
// jobs with the finer grid (testdata/optimality.sh).
const (
	fewJobs, fewPoints   = 10, 40
	manyPoints           = 160
	worse                = 0.005 // share by which the search may be worse than the grid
	mostGridCombinations = 1200
)

// The settings found are held against every combination of the axes at each of many
// hand-overs spaced evenly in the logarithm: the same feasible set, without any
// search. The search may be worse by half a per cent at most; it may be better by no
// more than the grid changes from its best point to the next, or between the two
// points that the hand-over found lies between.
func TestTunedAgainstADenseGrid(t *testing.T) {
	jobs, points := fewJobs, fewPoints
	if n, err := strconv.Atoi(os.Getenv("PARCH_OPTIMALITY")); err == nil {
		jobs, points = n, manyPoints
	}
	random := rand.New(rand.NewPCG(20261201, 7))
	compared, worst, best := 0, 0.0, 0.0
	for compared < jobs {
		tuner, route, yaml := randomLot(t, random)
		tuned, err := tuner.Tune(route)
		if err != nil || !tuned.Meets {
			continue
		}
		got, err := tuner.Value(&tuned)
		if err != nil {
			t.Fatal(err)
		}
		grid, step := denseGrid(t, tuner, route, points, tuned.Settings)
		if math.IsInf(grid, 1) || grid == 0 && got == 0 {
			continue
		}
		compared++
		worst, best = math.Max(worst, got/grid-1), math.Max(best, 1-got/grid)
		if got > grid*(1+worse) {
			t.Errorf("%s: tuned %.8g, grid %.8g: %.3g %% worse\n%s%+v", route.ID(), got, grid, 100*(got/grid-1), yaml, tuned.Settings)
		}
		if got < grid-step-1e-9*grid {
			t.Errorf("%s: tuned %.8g, grid %.8g with a step of %.3g: better than the step explains\n%s%+v", route.ID(), got, grid, step, yaml, tuned.Settings)
		}
	}
	t.Logf("%d jobs, %d points: at most %.3g %% worse than the grid, at most %.3g %% better", compared, points, 100*worst, 100*best)
}

// How dry to hand over goes with how many lots share a charge, and above what fills the
// receiver all hand-overs are the same: two jobs in which neither alone leads to the best.
func TestHandOverAndLotsOverAChargeGoTogether(t *testing.T) {
	for agent, yaml := range map[string]string{
		"sieve-4a": lotYAML("waste", "n-butyl-acetate", 3, 17, 6614.58, 207.67, ", needed within: 165 h"),
		"sieve-3a": lotYAML("waste", "n-butyl-acetate", 2.32, 5.39, 3802.95, 296.575, ""),
	} {
		tuner, route := tunerOf(t, yaml), routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: agent}}
		tuned, err := tuner.Tune(route)
		if err != nil {
			t.Fatal(err)
		}
		got, err := tuner.Value(&tuned)
		if err != nil {
			t.Fatal(err)
		}
		if grid, _ := denseGrid(t, tuner, route, fewPoints, tuned.Settings); got > grid*(1+worse) {
			t.Errorf("%s: tuned %.8g, grid %.8g: %.3g %% worse\n%s%+v", route.ID(), got, grid, 100*(got/grid-1), yaml, tuned.Settings)
		}
	}
}

// denseGrid is the lowest value over all combinations, and how much the value
// changes from there to the nearest points on either side. One hand-over only.
func denseGrid(t *testing.T, tuner *Tuner, route routes.Route, points int, found routes.Settings) (lowest, step float64) {
	t.Helper()
	g, err := tuner.prepare(route)
	if err != nil || len(g.places) > 1 {
		return math.Inf(1), 0
	}
	all := 1
	for _, a := range g.axes {
		all *= a.count
	}
	if all > mostGridCombinations {
		return math.Inf(1), 0
	}
	if len(g.places) == 0 {
		points = 1
	}
	lowest = math.Inf(1)
	at := spot{make([]int, len(g.axes)), make([]float64, len(g.places))}
	for range all {
		line := make([]float64, points)
		for i := range line {
			if len(g.places) == 1 {
				at.u[0] = g.lo[0] + (g.hi[0]-g.lo[0])*float64(i)/float64(points-1)
			}
			line[i] = g.try(at)
		}
		for i, v := range line {
			if v >= lowest || v >= scoreMissed {
				continue
			}
			lowest, step = v, 0
			for _, k := range []int{i - 1, i + 1} {
				if k >= 0 && k < points && line[k] < scoreMissed {
					step = math.Max(step, line[k]-v)
				}
			}
		}
		for i := range at.at {
			if at.at[i]++; at.at[i] < g.axes[i].count {
				break
			}
			at.at[i] = 0
		}
	}
	if g.failed != nil {
		t.Fatal(g.failed)
	}
	return lowest, math.Max(step, g.between(found, points))
}

// between is how much the value changes over the step of the grid in which the
// settings found lie.
func (g *tuning) between(found routes.Settings, points int) float64 {
	if len(g.places) == 0 {
		return 0
	}
	at := g.nearest(found)
	width := (g.hi[0] - g.lo[0]) / float64(points-1)
	i := math.Min(math.Floor((at.u[0]-g.lo[0])/width), float64(points-2))
	below, above := at.clone(), at.clone()
	below.u[0], above.u[0] = g.lo[0]+i*width, g.lo[0]+(i+1)*width
	return math.Abs(g.try(below) - g.try(above))
}
