package search

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
)

// solventsTried have all steps between them: light and heavy return, no trap at all,
// free water, peroxides.
var solventsTried = []string{"toluene", "dichloromethane", "ethyl-acetate", "acetonitrile", "tetrahydrofuran", "cyclohexane", "2-propanol", "n-butyl-acetate"}

func tunerOf(t testing.TB, yaml string) *Tuner {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read("job.yaml", []byte(yaml), c)
	if err != nil {
		t.Fatalf("%v\n%s", err, yaml)
	}
	k, err := routes.NewCase(j, j.Lots[0], c)
	if err != nil {
		t.Fatal(err)
	}
	book, err := costs.NewBook(c, j)
	if err != nil {
		t.Fatal(err)
	}
	return &Tuner{Case: k, Book: book, Objective: Objective(j.Objective), Site: costs.NewArrangement(c, j)}
}

// lotYAML is a job of one lot.
func lotYAML(objective, solvent string, litres, batches, water, target float64, more string) string {
	return fmt.Sprintf("objective: %s\nlots:\n  - {name: lot, solvent: %s, batch: %.3g L, batches: %.3g /yr, water: %.6g mg/kg, target: %.6g mg/kg, peroxide: {reading: 0 mg/L, date: 2026-11-28}%s}\n",
		objective, solvent, litres, batches, water, target, more)
}

// randomLot draws a job and one of its routes.
func randomLot(t testing.TB, random *rand.Rand) (*Tuner, routes.Route, string) {
	t.Helper()
	between := func(lo, hi float64) float64 { return lo * math.Pow(hi/lo, random.Float64()) }
	for {
		solvent := solventsTried[random.IntN(len(solventsTried))]
		target := between(15, 300)
		more := ""
		if random.IntN(3) == 0 {
			more = fmt.Sprintf(", needed within: %.3g h", between(24, 200))
		}
		yaml := lotYAML(string(Objectives[random.IntN(len(Objectives))]), solvent, between(2, 50), between(1, 200), between(2, 60)*target, target, more)
		tuner := tunerOf(t, yaml)
		if tuner.Case.Limit.CannotShow != "" || tuner.Case.Dry() {
			continue
		}
		offered, _ := tuner.Case.Candidates()
		if random.IntN(4) > 0 { // most with something to refine
			offered = slices.DeleteFunc(offered, func(r routes.Route) bool { return len(places(r)) != 1 })
		}
		if len(offered) > 0 {
			return tuner, offered[random.IntN(len(offered))], yaml
		}
	}
}
