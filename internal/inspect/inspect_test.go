package inspect_test

import (
	"math"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/inspect"
	"parch/internal/thermo"
)

func sheet(t *testing.T, solvent string, pressurePa, receiverK float64) *inspect.Sheet {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	s, err := inspect.Solvent(cat, cat.Solvents[solvent], pressurePa, receiverK)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// What lies outside a model is said, not hidden.
func TestNotesOnWhatTheModelCannotDo(t *testing.T) {
	for _, c := range []struct {
		solvent    string
		pressurePa float64
		want       string
	}{
		{"cyclohexane", 1e3, "no liquid boils"}, // melts at 6.7 °C, CRC Handbook, 95th ed.
		{"dichloromethane", 5e3, "where one of the two is frozen"},
		{"dichloromethane", 5e3, "lies outside the 0 to 120 °C"},
		{"cyclohexane", 101325, "published solubilities scatter by a factor"},
	} {
		if notes := strings.Join(sheet(t, c.solvent, c.pressurePa, 298.15).Notes, "\n"); !strings.Contains(notes, c.want) {
			t.Errorf("%s at %g Pa: %q is not among\n%s", c.solvent, c.pressurePa, c.want, notes)
		}
	}
}

func TestSolubilityGoesAsFarAsTheLiquid(t *testing.T) {
	for _, c := range []struct {
		solvent     string
		first, last float64 // °C
	}{
		{"toluene", 0, 80},
		{"dichloromethane", 0, 30}, // boils at 39.6 °C
		{"cyclohexane", 10, 80},    // melts at 6.7 °C, boils at 80.7 °C
		{"ethyl-acetate", 0, 70},   // boils at 77.1 °C; all CRC Handbook, 95th ed.
	} {
		table := sheet(t, c.solvent, 101325, 298.15).Solubility
		first, last := table[0].TempK-273.15, table[len(table)-1].TempK-273.15
		if math.Abs(first-c.first) > 1e-9 || math.Abs(last-c.last) > 1e-9 {
			t.Errorf("%s: %g to %g °C, want %g to %g", c.solvent, first, last, c.first, c.last)
		}
	}
}

func TestMissingPairIsNotOK(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	alone := *cat
	alone.Matrix = nil
	s, err := inspect.Solvent(&alone, cat.Solvents["toluene"], 101325, 298.15)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range s.Pairs {
		if p.Allowed() || p.Word != inspect.NoData {
			t.Errorf("%s without data is %q", p.Agent, p.Word)
		}
	}
}

func TestPressureOutsideTheModelIsRefused(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for _, pressurePa := range []float64{0, 999, 110001, math.NaN()} {
		if _, err := inspect.Solvent(cat, cat.Solvents["toluene"], pressurePa, 298.15); err == nil {
			t.Errorf("%g Pa was accepted", pressurePa)
		}
	}
	if s := sheet(t, "tetrahydrofuran", 101325, 298.15); s.Floor.Return != thermo.None || !math.IsNaN(s.Floor.Water) {
		t.Errorf("tetrahydrofuran has a trap floor: %+v", s.Floor)
	}
}
