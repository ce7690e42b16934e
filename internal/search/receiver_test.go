package search

import (
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

// No other receiver that is at hand, or that can be bought as well, makes a tuned trap
// cheaper, with a carrier or without: one made for it is drained often, one assembled
// from common glassware takes its time to set up and holds more.
func TestNoOtherReceiverIsCheaper(t *testing.T) {
	for name, route := range map[string]routes.Route{
		"toluene":      {{Kind: steps.Trap}},
		"tert-butanol": {{Kind: steps.Trap, Carrier: "dichloromethane"}, {Kind: steps.Forerun}},
	} {
		for _, litres := range []float64{2, 100} {
			tuner := tunerOf(t, lotYAML("cost", name, litres, 6, 9000, 200, ""))
			run, err := tuner.Tune(route)
			if err != nil {
				t.Fatalf("%s: %v", name, err)
			}
			keys := tuner.Case.Receivers(route[0].Carrier)
			if len(keys) < 2 {
				t.Errorf("%s: nothing to choose from: %v", name, keys)
			}
			best, err := tuner.score(&run)
			if err != nil {
				t.Fatal(err)
			}
			for _, key := range keys {
				s := cloned(run.Settings)
				s.Receiver[0] = key
				other, err := tuner.Run(route, s)
				if err != nil {
					continue // it does not fit
				}
				if score, err := tuner.score(&other); err != nil || score < best*(1-1e-6) {
					t.Errorf("%g L of %s: %s costs %g, %s %g (%v)", litres, name, run.Settings.Receiver[0], best, key, score, err)
				}
			}
		}
	}
}
