package job

import (
	"math"
	"strings"
	"testing"
)

// Dichloromethane at 20 °C: 1326 kg/m3 (handbook values from memory), so that mg/L and
// mg/kg differ by 1.33. Water 18.015 g/mol, 998.2 kg/m3.
func TestContentByVolumeOfTheLot(t *testing.T) {
	const kgPerL = 1.326
	for text, want := range map[string]float64{
		"100 mg/kg": 100, "100 ppm": 100, "100 ppmw": 100, "0.01 % m/m": 100,
		"100 mg/L": 100 / kgPerL, "0.1 g/L": 100 / kgPerL, "5 mmol/L": 5 * 18.015 / kgPerL, "0.01 % V/V": 99.82 / kgPerL,
		"50 to 200 mg/L": 100 / kgPerL, "50 mg/L to 200 mg/L": 100 / kgPerL, "{low: 50 mg/L, high: 200 mg/L}": 100 / kgPerL,
	} {
		j, err := Read("job.yaml", []byte("site: {room: 68 f}\nlots:\n- solvent: dichloromethane\n  batch: 18 L\n  water: "+text+"\n  target: 13.26 mg/L\n  not below: 1.326 mg/L\n"), loaded(t))
		if err != nil {
			t.Errorf("%s: %v", text, err)
			continue
		}
		lot := j.Lots[0]
		for what, pair := range map[string][2]float64{"water": {lot.Water, want * 1e-6}, "target": {lot.Target, 10e-6}, "not below": {lot.NotBelow, 1e-6}} {
			if math.Abs(pair[0]/pair[1]-1) > 5e-3 {
				t.Errorf("%s: %s read as %g kg/kg, want %g", text, what, pair[0], pair[1])
			}
		}
		if told := strings.Join(j.Warnings, "\n"); !strings.Contains(told, `lots[0].target: "13.26 mg/L" read as 9.9`) || !strings.Contains(told, "by mass, with 13") {
			t.Errorf("%s: how the target was read is not told: %q", text, j.Warnings)
		}
	}
}

// A content that a job cannot make clear says where it stands and what is allowed.
func TestContentOfALotIsRefused(t *testing.T) {
	for text, words := range map[string][]string{
		"2 mol %":        {`job.yaml:4: lots[0].water: "2 mol %"`, "amount of substance", "mg/kg"},
		"100 ppmv":       {`"ppmv" is by volume`, "mg/kg"},
		"100 mg/gal":     {`"mg/gal" is not a unit known here; allowed: mg/kg`, "with a density also mg/L"},
		"5 to 2 mol %":   {`lots[0].water: "2 mol %"`},
		"500000 mg/L":    {"is not possible here; allowed: 0 mg/kg to 500000 mg/kg"},
		"100 to 50 mg/L": {"lower end of the band"},
		"100":            {`"100" has no unit; write "100 mg/kg"`},
	} {
		_, err := Read("job.yaml", []byte("lots:\n- solvent: toluene\n  batch: 18 L\n  water: "+text+"\n  target: 15 mg/kg\n"), loaded(t))
		for _, word := range words {
			if err == nil || !strings.Contains(err.Error(), word) {
				t.Errorf("%s: %v, want %q", text, err, word)
			}
		}
		if err != nil && (strings.Contains(err.Error(), "reagent") || strings.Count(err.Error(), "\n") > 0) {
			t.Errorf("%s: %v", text, err)
		}
	}
	// a solvent or a room that is not known is told once, and nothing of a density
	_, err := Read("job.yaml", []byte("site: {room: 21}\nlots:\n- {solvent: tolune, batch: 18 L, water: 100 mg/L, target: 15 mg/kg}\n"), loaded(t))
	if err == nil || strings.Count(err.Error(), "\n") != 1 || strings.Contains(err.Error(), "density") {
		t.Errorf("tolune: %v", err)
	}
}
