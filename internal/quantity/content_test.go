package quantity

import (
	"math"
	"strings"
	"testing"
)

// mmol/L of 10 mg/kg at 20 to 25 °C, arithmetic of others to three digits; the
// densities are handbook values from memory.
func TestMillimole(t *testing.T) {
	for _, c := range []struct {
		solvent         string
		kgPerM3, mmolPL float64
	}{{"tetrahydrofuran", 888, 0.493}, {"toluene", 867, 0.481}, {"dichloromethane", 1326, 0.736}, {"acetonitrile", 786, 0.436}, {"dimethylformamide", 944, 0.524}, {"ethyl acetate", 902, 0.501}} {
		if got := MillimolePerLitre(10e-6, c.kgPerM3); math.Abs(got-c.mmolPL) > 0.0007 {
			t.Errorf("%s: %.4f mmol/L, want %.3f", c.solvent, got, c.mmolPL)
		}
	}
}

// In dichloromethane mg/L and mg/kg differ by its density of 1.33.
func TestParseContent(t *testing.T) {
	dcm := Solution{KgPerM3: 1326, ReagentMol: 0.1, SolventKg: 0.5, ReagentLabel: "butyllithium"}
	for text, want := range map[string]float64{
		"100 mg/kg": 100e-6, "100 ppm": 100e-6, "0.05 % m/m": 500e-6, "0.05 %": 500e-6,
		"100 mg/L": 75.41e-6, "100 ug/mL": 75.41e-6, "0.1 g/L": 75.41e-6, "1 mmol/L": 13.586e-6, "1 mM": 13.586e-6, "0.001 mol/L": 13.586e-6,
		"0.1 % V/V": 752.8e-6, "0.1 vol%": 752.8e-6, "0.01 % w/v": 75.41e-6,
		"2 mol %": 72.06e-6, // 2 mmol of water, 36.03 mg, in 0.5 kg
	} {
		r, err := ParseContent(text, dcm)
		if err != nil || math.Abs(r.SI/want-1) > 1e-3 {
			t.Errorf("%s = %g, %v, want %g", text, r.SI, err, want)
		}
		byMass := strings.Contains(text, "kg") || strings.Contains(text, "m/m")
		if (r.Note == "") != byMass {
			t.Errorf("%s: note %q", text, r.Note)
		}
	}
	r, _ := ParseContent("2 mol%", dcm)
	if !strings.Contains(r.Note, "butyllithium") || !strings.Contains(r.Note, "0.1 mol") {
		t.Errorf("note %q", r.Note)
	}
}

func TestContentIsRefused(t *testing.T) {
	for _, c := range []struct {
		text  string
		s     Solution
		words []string
	}{
		{"100 mg/L", Solution{}, []string{"density", "mg/kg"}},
		{"0.1 % V/V", Solution{}, []string{"% V/V", "density"}},
		{"2 mol %", Solution{KgPerM3: 867}, []string{"reagent"}},
		{"2000 g/L", Solution{KgPerM3: 867}, []string{"more water than solution"}},
		{"480", Solution{KgPerM3: 867}, []string{"no unit"}},
		{"5 L", Solution{KgPerM3: 867}, []string{"a volume", "mg/L", "mol %"}},
		{"1e999 mg/L", Solution{KgPerM3: 867}, []string{"too large"}},
		{"nan mg/L", Solution{KgPerM3: 867}, []string{"finite"}},
		{"1,5 mmol/L", Solution{KgPerM3: 867}, []string{"decimal point"}},
	} {
		_, err := ParseContent(c.text, c.s)
		for _, word := range c.words {
			if err == nil || !strings.Contains(err.Error(), word) {
				t.Errorf("%s: %v, want a word of %q", c.text, err, word)
			}
		}
	}
	// Parse itself stays as strict as it was
	if _, err := Parse("100 mg/L", WaterContent); err == nil {
		t.Error("Parse reads mg/L as a content by mass")
	}
}

func TestContentIsPrinted(t *testing.T) {
	s := Solution{KgPerM3: 1326, ReagentMol: 0.1, SolventKg: 0.5}
	for got, want := range map[string]string{
		FormatMolar(10e-6, 1326): "0.736 mmol/L", FormatByVolume(10e-6, 1326): "13.3 mg/L", FormatOfReagent(72.06e-6, s): "2 mol %",
		FormatOfReagent(72.06e-6, Solution{}): Unknown, FormatMolar(math.NaN(), 1326): Unknown,
	} {
		if got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}
