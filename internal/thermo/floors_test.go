package thermo_test

import (
	"math"
	"testing"

	"parch/internal/thermo"
)

// Floors computed beforehand from the same sets by another program; 10 % is the
// limit set for them.
func TestTrapFloorsOfTheShelf(t *testing.T) {
	for _, r := range table(t, "trap_floors.csv") {
		m := mixture(t, r["solvent"])
		var floors []float64
		for _, c := range []struct {
			celsius          float64
			floor, saturated string
		}{{25, "floor_25c", "saturated_25c"}, {10, "floor_10c", "saturated_10c"}} {
			got, err := m.TrapFloor(c.celsius+273.15, atmospherePa)
			if err != nil {
				t.Errorf("%s: %v", r["solvent"], err)
				continue
			}
			if r[c.floor] == "none" {
				if got.Return != thermo.None || got.Reason == "" {
					t.Errorf("%s at %g °C: %+v, want no trap and the reason", r["solvent"], c.celsius, got)
				}
				continue
			}
			// anisole's layers are too alike in density to settle; p-xylene freezes at 13 °C
			if r["solvent"] == "anisole" || (r["solvent"] == "p-xylene" && c.celsius < 13) {
				if got.Return != thermo.None || got.Reason == "" {
					t.Errorf("%s at %g °C returns %s", r["solvent"], c.celsius, got.Return)
				}
				continue
			}
			if want := r.number(t, c.floor); !(math.Abs(got.Water*1e6/want-1) <= 0.1) {
				t.Errorf("%s at %g °C: floor %.4g mg/kg, want %.4g", r["solvent"], c.celsius, got.Water*1e6, want)
			}
			floors = append(floors, got.Water)
		}
		rises := r["solvent"] == "triethylamine"
		if len(floors) == 2 && (floors[1] > floors[0]) != rises {
			t.Errorf("%s: the floor is %.4g mg/kg at 25 °C and %.4g at 10 °C", r["solvent"], floors[0]*1e6, floors[1]*1e6)
		}
	}
}

// The limits of the catalog refuse what its sets cannot say.
func TestLimitsRefuse(t *testing.T) {
	c := load(t)
	limited := func(key string) *thermo.Mixture {
		m := mixture(t, key)
		m.Limits = c.Solvents[key].Water.Limits
		return m
	}
	for _, r := range []struct {
		solvent             string
		receiverC, pressure float64
		refused             bool
	}{
		{"triethylamine", 15, atmospherePa, true},
		{"triethylamine", 25, atmospherePa, false},
		{"2-butanone", 5, atmospherePa, true},
		{"toluene", 5, atmospherePa, false},
	} {
		f, err := limited(r.solvent).TrapFloor(r.receiverC+273.15, r.pressure)
		if err != nil {
			t.Fatal(err)
		}
		if (f.Return == thermo.None) != r.refused || (r.refused && f.Reason == "") {
			t.Errorf("%+v: %s, %q", r, f.Return, f.Reason)
		}
	}
	acid := mixture(t, "acetic-acid")
	acid.Limits = []thermo.Limit{{LowestPa: 95e3, HighestPa: 106e3, Reason: "its vapour is made of pairs of molecules"}}
	if err := acid.CheckPressure(20e3); err == nil {
		t.Error("acetic acid at 20 kPa is accepted")
	}
	if err := acid.CheckPressure(atmospherePa); err != nil {
		t.Errorf("acetic acid at 1 atm: %v", err)
	}
}
