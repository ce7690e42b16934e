package doubt_test

import (
	"slices"
	"testing"

	"parch/internal/doubt"
	"parch/internal/routes"
	"parch/internal/steps"
)

// What is told from a part of the draws is what all of them tell: a plan is sure to a
// level where its chance, counted over every draw, reaches it.
func TestSureIsTheChanceOfAllDraws(t *testing.T) {
	yes, no := 0, 0
	for _, c := range []struct {
		yaml  string
		route routes.Route
	}{
		{"lots:\n- {solvent: tetrahydrofuran, batch: 10 L, water: 1200 mg/kg, target: 20 mg/kg, vessel height: 0.1 m}\n", routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}}},
		{"lots:\n- {solvent: tetrahydrofuran, batch: 10 L, water: 1200 mg/kg, target: 20 mg/kg, sieve history: 300 °C}\n", routes.Route{{Kind: steps.Soak, Agent: "sieve-4a"}}},
		{"lots:\n- {solvent: dichloromethane, batch: 5 L, water: 400 to 600 mg/kg, target: 60 mg/kg}\n", routes.Route{{Kind: steps.Reactive, Agent: "calcium-hydride"}}},
		{"lots:\n- {solvent: toluene, batch: 18 L, water: 300 to 480 mg/kg, target: 30 mg/kg, heater: 1.6 kW}\n", routes.Route{{Kind: steps.Trap}}},
	} {
		k, l := lotOf(t, c.yaml, 500)
		run, err := k.Run(c.route, routes.Settings{HandOverMgPerKg: []float64{}, SoakHours: []float64{24}, Stirred: []bool{true}, Sieve: []string{routes.Regenerate}})
		if err != nil {
			t.Fatalf("%s: %v", c.route.ID(), err)
		}
		o, err := l.Through(&run)
		if err != nil {
			t.Fatal(err)
		}
		water := slices.Sorted(slices.Values(o.Water))
		for _, met := range []int{1, 50, 250, 450, 475, 500} { // limits that so many draws keep to
			for _, level := range []float64{0.05, 0.5, 0.9, 0.95, 1} {
				limits := doubt.Limits{Most: water[met-1]}
				kept := 0
				for _, w := range o.Water {
					if limits.Met(w) {
						kept++
					}
				}
				want := float64(kept)/float64(len(o.Water)) >= level
				got, err := l.Sure(&run, limits, level)
				if err != nil {
					t.Fatal(err)
				}
				if got != want {
					t.Errorf("%s: %d of %d draws keep to %.3g mg/kg; sure to %g: %v", c.route.ID(), kept, len(o.Water), limits.Most*1e6, level, got)
				}
				if want {
					yes++
				} else {
					no++
				}
			}
		}
	}
	if yes == 0 || no == 0 {
		t.Errorf("%d sure, %d not: the test says nothing", yes, no)
	}
}

// A sieve that is stated to be empty brings no water in any draw.
func TestAnEmptySieveIsEmptyInAllDraws(t *testing.T) {
	for sieve, empty := range map[string]bool{"300 °C": false, "residual 0 g/100 g": true} {
		_, l := lotOf(t, "lots:\n- {solvent: toluene, batch: 10 L, water: 300 mg/kg, target: 30 mg/kg, sieve history: "+sieve+"}\n", 200)
		for i, residual := range l.ResidualOn("sieve-3a") {
			if (residual == 0) != empty {
				t.Fatalf("%s: draw %d has %g kg/kg on the sieve", sieve, i, residual)
			}
		}
	}
}
