package bench_test

import (
	"fmt"
	"math"
	"testing"

	"parch/internal/bench"
	"parch/internal/job"
	"parch/internal/routes"
)

// A step and a job read a history alike for every sorbent: what was done after the oven
// is added up with the isotherm of the one that is used. Left open for long it ends at the
// room's own loading, which is more on 4A than on 3A (its capacity is 1.12 times that and
// it holds water more strongly, catalog) and far less on alumina than on either.
func TestHistoryOfEverySorbent(t *testing.T) {
	c := shelf(t)
	for _, text := range []string{"250 °C, closed hot, 30 d", "250 °C, left open 20 d", "200 °C, vacuum 1 hPa", "300 °C, 90 d", "300 °C", "opened tin", "residual 1.5 g/100 g, 300 °C"} {
		source := fmt.Sprintf("lots:\n  - {name: a, solvent: toluene, batch: 1 L, water: 300 mg/kg, target: 30 mg/kg, sieve history: %q}\n", text)
		j, err := job.Read("job.yaml", []byte(source), c)
		if err != nil {
			t.Fatal(err)
		}
		k, err := routes.NewCase(j, j.Lots[0], c)
		if err != nil {
			t.Fatal(err)
		}
		held := map[string]float64{}
		for key, a := range c.Agents {
			if a.Isotherm == nil {
				continue
			}
			q, err := bench.Read(c, bench.Request{Kind: "soak", Solvent: c.Solvents["toluene"], Flags: map[string]string{
				"agent": key, "water": "300 mg/kg", "dose": "100 g/L", "hours": "24", "activated": text,
			}})
			if err != nil {
				t.Fatal(err)
			}
			held[key] = k.ResidualOn(key)
			if step := q.Activation.KgPerKg; math.Abs(held[key]-step) > 1e-9*step {
				t.Errorf("%s after %q holds %g kg/kg in a job, %g in a step", key, text, held[key], step)
			}
		}
		if text == "250 °C, left open 20 d" && !(held["sieve-4a"] > 1.05*held["sieve-3a"] && held["alumina"] < 0.8*held["sieve-3a"]) {
			t.Errorf("%s: %v", text, held)
		}
	}
}
