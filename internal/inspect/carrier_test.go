package inspect_test

import (
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/inspect"
	"parch/internal/thermo"
)

// Every solvent at four pressures gives a sheet: an azeotrope that solves the
// equations, or the reason why there is none.
func TestEverySolventAtFourPressures(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for _, key := range slices.Sorted(maps.Keys(cat.Solvents)) {
		if cat.Solvents[key].Water == nil {
			continue
		}
		for _, pressurePa := range []float64{101325, 50e3, 10e3, 2e3} {
			s := sheet(t, key, pressurePa, 298.15)
			exists := s.Azeotrope.Kind != thermo.NoAzeotrope
			switch {
			case exists && !(s.AzeotropeMass > 0 && s.AzeotropeMass < 1 && s.Azeotrope.TempK > 200):
				t.Errorf("%s at %g Pa: %+v", key, pressurePa, s.Azeotrope)
			case s.AzeotropeTrouble != "" && !strings.Contains(strings.Join(s.Notes, "\n"), s.AzeotropeTrouble):
				t.Errorf("%s at %g Pa: %q is not said", key, pressurePa, s.AzeotropeTrouble)
			case exists && s.Azeotrope.TempK > math.Min(s.BoilingK, boilingOfWater(t, cat, pressurePa)) && s.Azeotrope.Kind == thermo.Heterogeneous:
				t.Errorf("%s at %g Pa: a heteroazeotrope at %.1f K boils above its components", key, pressurePa, s.Azeotrope.TempK)
			}
			if miss := cat.Solvents[key].Water.KnownMiss; miss != "" && !slices.Contains(s.Notes, "known miss: "+miss) {
				t.Errorf("%s: the known miss is not said", key)
			}
		}
	}
}

func boilingOfWater(t *testing.T, cat *catalog.Catalog, pressurePa float64) float64 {
	tK, err := thermo.Boil(&cat.Solvents["water"].Pure, pressurePa)
	if err != nil {
		t.Fatal(err)
	}
	return tK
}

// Azeotropes that vanish or change kind with pressure. In the model tetrahydrofuran
// has none at 5 kPa, and 2-methyltetrahydrofuran and diethyl ether change kind; the
// azeotrope of ethanol really vanishes below 9.2 kPa (handbook value, from memory),
// which the model misses.
func TestAzeotropesThatChangeWithPressure(t *testing.T) {
	for _, c := range []struct {
		solvent     string
		pressurePa  float64
		below, here string
	}{
		{"tetrahydrofuran", 5e3, "no azeotrope", "no azeotrope"},
		{"diethyl-ether", 10e3, "no azeotrope", "no azeotrope"},
		{"2-methyltetrahydrofuran", 5e3, "a homogeneous azeotrope", "a homogeneous azeotrope"},
	} {
		s := sheet(t, c.solvent, c.pressurePa, 298.15)
		notes := strings.Join(s.Notes, "\n")
		if len(s.Changes) != 1 || !strings.Contains(notes, "has "+c.below+" below about") || !strings.Contains(notes, "at this pressure "+c.here) {
			t.Errorf("%s at %g Pa: %+v\n%s", c.solvent, c.pressurePa, s.Changes, notes)
		}
	}
	if s := sheet(t, "toluene", 101325, 298.15); len(s.Changes) != 0 {
		t.Errorf("toluene: %+v", s.Changes)
	}
}

// Every carrier of the catalog with a solvent that has an activity model for it
// gives an azeotrope of the three or the reason; one without a model says so.
func TestCarriersAreSolvedOrRefused(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	solved := 0
	for _, solvent := range []string{"ethanol", "2-propanol", "acetonitrile", "toluene", "pyridine"} {
		base := sheet(t, solvent, 101325, 298.15)
		for carrier := range cat.Carriers {
			s := *base
			err := s.AddCarrier(cat, carrier)
			switch {
			case carrier == solvent:
				if err == nil {
					t.Errorf("%s carries itself", solvent)
				}
				continue
			case err != nil:
				t.Fatal(err)
			}
			k := s.Carrier
			if k.Azeotrope.Kind == thermo.NoAzeotrope {
				if k.Trouble == "" || !strings.Contains(strings.Join(s.Notes, "\n"), k.Trouble) {
					t.Errorf("%s with %s: no azeotrope and no reason: %q", solvent, carrier, k.Trouble)
				}
				continue
			}
			solved++
			if sum := k.Mass[0] + k.Mass[1] + k.Mass[2]; math.Abs(sum-1) > 1e-9 {
				t.Errorf("%s with %s: %v", solvent, carrier, k.Mass)
			}
			if k.Azeotrope.TempK >= math.Min(s.BoilingK, 373.2) {
				t.Errorf("%s with %s: %.1f K is no minimum", solvent, carrier, k.Azeotrope.TempK)
			}
			if cat.Carriers[carrier].ByName && !strings.Contains(strings.Join(s.Notes, "\n"), "by name") {
				t.Errorf("%s is not said to need acceptance", carrier)
			}
		}
	}
	if solved < 10 {
		t.Errorf("%d ternary azeotropes only", solved)
	}
}

func TestReceiversNobodyCouldRunAreRefused(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for _, tK := range []float64{-126.85, 0, 192, 530, math.NaN(), math.Inf(1)} {
		if _, err := inspect.Solvent(cat, cat.Solvents["toluene"], 101325, tK); err == nil || !strings.Contains(err.Error(), "-80 to 250 °C") {
			t.Errorf("%g K: %v", tK, err)
		}
	}
}
