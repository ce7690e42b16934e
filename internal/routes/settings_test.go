package routes_test

import (
	"encoding/json"
	"errors"
	"math"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

var soak3A = routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}}

func runSettings(t *testing.T, k *routes.Case, text string) routes.Run {
	t.Helper()
	var s routes.Settings
	if err := json.Unmarshal([]byte(text), &s); err != nil {
		t.Fatal(err)
	}
	if err := s.Fit(soak3A); err != nil {
		t.Fatal(err)
	}
	run, err := k.Run(soak3A, s)
	if err != nil {
		t.Fatal(err)
	}
	return run
}

// Settings of an earlier program have no charges: one is meant.
func TestChargesAreOptional(t *testing.T) {
	k := caseOf(t, "ethanol", "8000 mg/kg", "30 mg/kg", "")
	without := runSettings(t, k, `{"hand_over_mg_per_kg": [], "soak_hours": [48], "stirred": [true], "sieve": ["regenerate"]}`)
	one := runSettings(t, k, `{"hand_over_mg_per_kg": [], "soak_hours": [48], "stirred": [true], "charges": [1], "lots_over_charge": [1], "sieve": ["regenerate"]}`)
	two := runSettings(t, k, `{"hand_over_mg_per_kg": [], "soak_hours": [48], "stirred": [true], "charges": [2], "sieve": ["regenerate"]}`)
	if without.WaterOut != one.WaterOut || without.HoursTotal != one.HoursTotal {
		t.Errorf("without %g, one charge %g", without.WaterOut, one.WaterOut)
	}
	if !(two.AgentKg["sieve-3a"] < one.AgentKg["sieve-3a"] && two.HoursTotal > 1.9*one.HoursTotal-2) || k.Label(soak3A, two.Settings) != "stir over molecular sieve 3A, beads in 2 charges" {
		t.Errorf("two charges: %v kg, %g h; one %v kg, %g h; %s", two.AgentKg, two.HoursTotal, one.AgentKg, one.HoursTotal, k.Label(soak3A, two.Settings))
	}
	if two.Uses[0].Quantity <= one.Uses[0].Quantity {
		t.Errorf("two charges take %g h of work, one %g h", two.Uses[0].Quantity, one.Uses[0].Quantity)
	}
}

// What a charge costs is shared by the lots that go over it: by hand, at the same dose
// six lots bear a sixth each of sieve, waste, oven and the solvent on the beads.
func TestLotsShareACharge(t *testing.T) {
	k := caseOf(t, "toluene", "200 mg/kg", "30 mg/kg", "")
	one := runSettings(t, k, `{"hand_over_mg_per_kg": [], "soak_hours": [72], "sieve": ["regenerate"]}`)
	six := runSettings(t, k, `{"hand_over_mg_per_kg": [], "soak_hours": [72], "lots_over_charge": [6], "sieve": ["regenerate"]}`)
	if one.AgentKg["sieve-3a"] != six.AgentKg["sieve-3a"] || k.Label(soak3A, six.Settings) != "stand over molecular sieve 3A, beads, 6 lots over a charge" {
		t.Fatalf("%v, %v, %s: the least dose is to do for both", one.AgentKg, six.AgentKg, k.Label(soak3A, six.Settings))
	}
	shared := 0
	for i, u := range one.Uses {
		want := u.Quantity
		switch u.Head {
		case steps.Agent, steps.Waste, steps.SolventLost, steps.Energy:
			want /= 6
			shared++
		}
		if u.Head == steps.Labour && i > 0 {
			want /= 6
		}
		if got := six.Uses[i]; got.Head != u.Head || got.Head != steps.Purchase && math.Abs(got.Quantity/want-1) > 1e-9 {
			t.Errorf("%s, %s: %g of %g", u.Head, u.Basis, got.Quantity, u.Quantity)
		}
	}
	if shared < 4 || six.WaterOut < one.WaterOut {
		t.Errorf("%d shared; %g after six lots, %g after one", shared, six.WaterOut, one.WaterOut)
	}
}

func TestSettingsThatDoNotFit(t *testing.T) {
	column := routes.Route{{Kind: steps.Column, Agent: "sieve-3a"}}
	for name, c := range map[string]struct {
		r routes.Route
		s routes.Settings
	}{
		"a bed used again":          {column, routes.Settings{LotsOverCharge: []int{2}, Sieve: []string{routes.Regenerate}}},
		"six charges":               {soak3A, routes.Settings{SoakHours: []float64{1}, Charges: []int{6}, Sieve: []string{routes.Discard}}},
		"thirteen lots":             {soak3A, routes.Settings{SoakHours: []float64{1}, LotsOverCharge: []int{13}, Sieve: []string{routes.Discard}}},
		"charges for no soak":       {column, routes.Settings{Charges: []int{2}, Sieve: []string{routes.Discard}}},
		"two charges, used again":   {soak3A, routes.Settings{SoakHours: []float64{1}, Charges: []int{2}, LotsOverCharge: []int{2}, Sieve: []string{routes.Discard}}},
		"a word that is not a way":  {soak3A, routes.Settings{SoakHours: []float64{1}, Sieve: []string{"burn"}}},
		"fewer than no charges":     {soak3A, routes.Settings{SoakHours: []float64{1}, Charges: []int{-1}, Sieve: []string{routes.Discard}}},
		"a charge for a soak twice": {soak3A, routes.Settings{SoakHours: []float64{1}, Charges: []int{1, 1}, Sieve: []string{routes.Discard}}},
	} {
		if err := c.s.Fit(c.r); !errors.Is(err, routes.ErrSettings) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// In every draw the quick way of a soak in charges, or of the last of several lots,
// follows the full model.
func TestSoakFormsRunAgain(t *testing.T) {
	k := caseOf(t, "ethyl acetate", "3000 mg/kg", "100 mg/kg", "")
	for _, text := range []string{
		`{"hand_over_mg_per_kg": [], "soak_hours": [48], "charges": [2], "sieve": ["discard"]}`,
		`{"hand_over_mg_per_kg": [], "soak_hours": [48], "stirred": [true], "lots_over_charge": [3], "sieve": ["regenerate"]}`,
	} {
		run := runSettings(t, k, text)
		for _, factor := range []float64{0.5, 0.9, 1, 1.2} {
			d := k.Planned()
			d.ResidualKgPerKg *= factor
			d.StillRate, d.StirredRate, d.PairFactor, d.Water = factor, 1/factor, factor, d.Water*factor
			under, err := k.Under(d)
			if err != nil {
				t.Fatal(err)
			}
			full, err := under.Rerun(&run)
			if err != nil {
				t.Fatal(err)
			}
			quick, err := k.QuickSoak(&run, 0)
			if err != nil {
				t.Fatal(err)
			}
			feed, rate := k.FeedOf(d.Water), d.StillRate
			if run.Settings.StirredAt(soak3A, 0) {
				rate = d.StirredRate
			}
			got := quick.Water(feed.Water(), feed.SolventKg, &steps.Aside{Shift: d.Shift(), Loading: 1, ResidualKgPerKg: d.ResidualKgPerKg, Rate: rate})
			if math.Abs(got/full.WaterOut-1) > 0.01 {
				t.Errorf("%s, %g: quick %g, full %g", text, factor, got, full.WaterOut)
			}
			if math.Abs(full.HoursTotal/run.HoursTotal-1) > 1e-9 {
				t.Errorf("%s: %g h, planned %g h", text, full.HoursTotal, run.HoursTotal)
			}
		}
	}
}
