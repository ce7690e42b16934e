package report_test

import (
	"bytes"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"

	"parch/catalog"
	"parch/internal/inspect"
	"parch/internal/report"
)

const (
	sheetKeys = "solvent pressure_kpa boiling_point_c azeotrope water_solubility gamma_water_inf_25c receiver_c returns " +
		"trap_floor_mg_per_kg quality sources notes"
	azeotropeKeys  = "kind temperature_c water_mass_percent"
	solubilityKeys = "temperature_c mg_per_kg"
)

// Every solvent of the catalog gives a sheet, at any pressure of the model, with
// the keys of the outside contract.
func TestSheetOfEverySolvent(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for key, solvent := range cat.Solvents {
		if solvent.Water == nil {
			continue
		}
		for _, pressurePa := range []float64{1e3, 5e3, 20e3, 101325, 110e3} {
			sheet, err := inspect.Solvent(cat, solvent, pressurePa, 278.15)
			if err != nil {
				t.Errorf("%s at %g Pa: %v", key, pressurePa, err)
				continue
			}
			var doc, text bytes.Buffer
			if err := report.SheetJSON(&doc, sheet); err != nil {
				t.Errorf("%s at %g Pa: %v", key, pressurePa, err)
				continue
			}
			if err := report.SheetText(&text, sheet); err != nil {
				t.Error(err)
			}
			for _, line := range strings.Split(text.String(), "\n") {
				if utf8.RuneCountInString(line) > 100 {
					t.Errorf("%s: longer than 100 columns: %q", key, line)
				}
			}
			checkKeys(t, doc.Bytes(), sheetKeys)
			checkKeys(t, doc.Bytes(), azeotropeKeys, "azeotrope")
			if len(sheet.Solubility) > 0 {
				checkKeys(t, doc.Bytes(), solubilityKeys, "water_solubility")
			}
		}
	}
}

func checkKeys(t *testing.T, doc []byte, want string, path ...string) {
	t.Helper()
	if diff := cmp.Diff(strings.Fields(want), strings.Fields(keysOf(t, doc, path...))); diff != "" {
		t.Errorf("%v (-want +got):\n%s", path, diff)
	}
}
