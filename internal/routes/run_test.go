package routes_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/steps"
)

func caseOf(t testing.TB, solvent, water, target, more string) *routes.Case {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read("job.yaml", fmt.Appendf(nil, "lots:\n  - {name: lot, solvent: %s, batch: 18 L, water: %s, target: %s%s}\n", solvent, water, target, more), c)
	if err != nil {
		t.Fatal(err)
	}
	k, err := routes.NewCase(j, j.Lots[0], c)
	if err != nil {
		t.Fatal(err)
	}
	return k
}

// Litres bought are litres delivered, free water or not.
func TestBuyingDeliversWhatIsPaidFor(t *testing.T) {
	k := caseOf(t, "toluene", "480 mg/kg", "60 mg/kg", ", free water: 1 L")
	run, err := k.Run(routes.Route{{Kind: steps.Buy}}, routes.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	for _, u := range run.Uses {
		if u.Head == steps.Purchase && math.Abs(u.Quantity-run.LitresDelivered) > 1e-9 {
			t.Errorf("%g L bought, %g L delivered", u.Quantity, run.LitresDelivered)
		}
	}
}

// A sieve has nothing to do on a lot that is at its goal.
func TestASieveThatDoesNothingIsRefused(t *testing.T) {
	k := caseOf(t, "toluene", "480 mg/kg", "60 mg/kg", "")
	r := routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: "sieve-3a"}}
	_, err := k.Run(r, routes.Settings{HandOverMgPerKg: []float64{20}, SoakHours: []float64{24}, Sieve: []string{routes.Regenerate}})
	if !errors.Is(err, routes.ErrRefused) {
		t.Errorf("%v, want a refusal", err)
	}
}

// A salt that takes nothing has no place in a chain; by itself it is shown for what it
// does. Sodium sulfate leaves methanol of 2 % as it is: its decahydrate is stable from a
// water activity of about 0.8 on only (from memory).
func TestAnIdleSaltIsLeftOutOfAChain(t *testing.T) {
	k := caseOf(t, "methanol", "2 %", "500 mg/kg", "")
	salt, soak := routes.Stage{Kind: steps.Salt, Agent: "sodium-sulfate"}, routes.Stage{Kind: steps.Soak, Agent: "sieve-3a"}
	alone, chain := routes.Route{salt}, routes.Route{salt, soak}
	run, err := k.Run(alone, settingsOf(alone))
	if err == nil {
		err = routes.Idle(&run)
	}
	if err != nil || run.WaterOut != run.Outcomes[0].In.Water() {
		t.Errorf("alone: %g left, %v", run.WaterOut, err)
	}
	if run, err = k.Run(chain, settingsOf(chain)); err != nil {
		t.Fatal(err)
	}
	if err := routes.Idle(&run); !errors.Is(err, routes.ErrRefused) {
		t.Errorf("in a chain: %v, want a refusal", err)
	}
}

// Nobody attends a route for longer than it takes, and what is used is finite
// and not negative, for every route of several lots.
func TestRunsMakeSense(t *testing.T) {
	for _, lot := range []struct{ solvent, water, target, more string }{
		{"toluene", "480 mg/kg", "150 mg/kg", ""},
		{"toluene", "480 mg/kg", "150 mg/kg", ", free water: 1 L"},
		{"dichloromethane", "1500 mg/kg", "120 mg/kg", ""},
		{"ethyl acetate", "30000 mg/kg", "300 mg/kg", ""},
		{"tetrahydrofuran", "500 mg/kg", "120 mg/kg", ", peroxide: {reading: 0 mg/L, date: 2026-11-28}"},
	} {
		k := caseOf(t, lot.solvent, lot.water, lot.target, lot.more)
		offered, _ := k.Candidates()
		ran := 0
		for _, r := range offered {
			run, err := k.Run(r, settingsOf(r))
			if errors.Is(err, routes.ErrRefused) {
				continue
			}
			if err != nil {
				t.Errorf("%s: %s: %v", lot.solvent, r.ID(), err)
				continue
			}
			ran++
			if run.HoursAttended > run.HoursTotal*(1+1e-9) {
				t.Errorf("%s: %s: %g h attended of %g", lot.solvent, r.ID(), run.HoursAttended, run.HoursTotal)
			}
			for _, u := range run.Uses {
				if !(u.Quantity >= 0) || math.IsInf(u.Quantity, 0) {
					t.Errorf("%s: %s: %g %s of %s", lot.solvent, r.ID(), u.Quantity, u.Unit, u.Item)
				}
			}
		}
		if ran < 10 {
			t.Errorf("%s: only %d routes ran", lot.solvent, ran)
		}
	}
}

func settingsOf(r routes.Route) routes.Settings {
	s := routes.Settings{HandOverMgPerKg: make([]float64, len(r)-1)}
	for i := range s.HandOverMgPerKg {
		s.HandOverMgPerKg[i] = 400
	}
	for _, stage := range r {
		switch stage.Kind {
		case steps.Soak:
			s.SoakHours, s.Stirred, s.Sieve = append(s.SoakHours, 24), append(s.Stirred, true), append(s.Sieve, routes.Regenerate)
		case steps.Column:
			s.Sieve = append(s.Sieve, routes.Discard)
		case steps.Forerun:
			s.Stages = append(s.Stages, 6)
		case steps.Trap:
			if stage.Carrier != "" {
				s.CarrierDose = append(s.CarrierDose, 0.25)
			}
		}
	}
	return s
}
