package quantity

import (
	"math"
	"strings"
	"testing"
)

// The factors are those of NIST Special Publication 811 (2008), Appendix B.8,
// entered from memory. It prints seven digits, so they hold to half a unit of the
// seventh: 5e-7 at most. Rows without a mark follow from the SI prefixes.
func TestFactors(t *testing.T) {
	for _, c := range []struct {
		text string
		d    Dimension
		want float64
	}{
		{"1 US gal", Volume, 3.785412e-03}, // SP 811
		{"1 lb", Mass, 4.535924e-01},       // SP 811
		{"1 mmHg", Pressure, 1.333224e+02}, // SP 811, conventional
		{"1 Torr", Pressure, 1.333224e+02}, // SP 811
		{"1 atm", Pressure, 1.01325e+05},   // SP 811
		{"1 bar", Pressure, 1e5},           // SP 811
		{"1 mbar", Pressure, 1e2},          // SP 811
		{"1 kWh", Energy, 3.6e6},           // SP 811
		{"1 d", Time, 8.64e4},              // SP 811
		{"1 h", Time, 3.6e3},               // SP 811
		{"1 in", Length, 2.54e-2},          // SP 811
		{"32 °F", Temperature, 273.15},     // SP 811, T/K = (t/F + 459.67)/1.8
		{"212 F", Temperature, 373.15},     // SP 811
		{"-40 °F", Temperature, 233.15},    // SP 811
		{"9 °F", TemperatureDifference, 5}, // SP 811
		{"21 °C", Temperature, 294.15},
		{"21C", Temperature, 294.15},
		{"300 K", Temperature, 300},
		{"18 L", Volume, 0.018},
		{"250 mL", Volume, 2.5e-4},
		{"2 m³", Volume, 2},
		{"480 mg/kg", WaterContent, 4.8e-4},
		{"480 mg / kg", WaterContent, 4.8e-4},
		{"480 ppm", WaterContent, 4.8e-4},
		{"3 g/kg", WaterContent, 3e-3},
		{"1.2 % m/m", WaterContent, 0.012},
		{"1.2 wt%", WaterContent, 0.012},
		{"1.2%", WaterContent, 0.012},
		{"0.01 kg/kg", WaterContent, 0.01},
		{"2 g/100 g", MassRatio, 0.02},
		{"1013 hPa", Pressure, 101300},
		{"10 kPa", Pressure, 1e4},
		{"1.6 kW", Power, 1600},
		{"400 W", Power, 400},
		{"2 MJ", Energy, 2e6},
		{"90 min", Time, 5400},
		{"25 cm", Length, 0.25},
		{"2 mm", Length, 2e-3},
		{"90 %", Share, 0.9},
		{"5 mg/L", MassConcentration, 5e-3},
		{"100 g/L", MassConcentration, 100},
		{"40 /yr", PerYear, 40},
		{"40/year", PerYear, 40},
		{"2 /month", PerYear, 24},
		{"1 /week", PerYear, 52},
		{"0.867 g/mL", Density, 867},
		{"92.14 g/mol", MolarMass, 0.09214},
		{"6 L/min", Flow, 1e-4},
		{"0.25 mL/g", HoldUp, 2.5e-4},
		{"36 1/h", Rate, 0.01},
		{"35 kJ/mol", HeatPerMole, 35000},
		{"1.5e-3 m3", Volume, 1.5e-3},
		{"\u22125 °C", Temperature, 268.15},
		{"-5 L", Volume, -0.005},
		{"3", Number, 3},
	} {
		got, err := Parse(c.text, c.d)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		if math.Abs(got.SI-c.want) > 5e-7*math.Abs(c.want) {
			t.Errorf("%s = %.10g SI, want %.10g", c.text, got.SI, c.want)
		}
	}
}

// Decimal factors leave no binary dust: what was typed is what a sheet shows.
func TestExactDecimals(t *testing.T) {
	for _, c := range []struct {
		text string
		d    Dimension
		want float64
	}{
		{"480 mg/kg", WaterContent, 0.00048}, {"15 ppm", WaterContent, 0.000015}, {"18 L", Volume, 0.018}, {"1.2 %", WaterContent, 0.012}, {"35 mL", Volume, 0.000035},
	} {
		if got, _ := Parse(c.text, c.d); got.SI != c.want {
			t.Errorf("%s = %.17g, want %.17g", c.text, got.SI, c.want)
		}
	}
}

// 68 °F are 20 °C (NIST SP 811, Appendix B). A part per million is by mass here, however
// that is written; one by volume is refused.
func TestSpellings(t *testing.T) {
	for _, text := range []string{"68 f", "68 F", "68f", "68 °f", "68 degF", "68 deg f", "68 fahrenheit", "20 c", "20 C", "20 celsius", "20 Celsius", "20 degC", "20 degc", "20 degrees C"} {
		if got, err := Parse(text, Temperature); err != nil || math.Abs(got.SI-293.15) > 1e-9 {
			t.Errorf("%s: %g K, %v", text, got.SI, err)
		}
	}
	for _, text := range []string{"480 ppmw", "480 ppm w/w", "480 ppm(w)", "480 ppm (m/m)", "480 ppm by mass", "480 wtppm"} {
		if got, err := Parse(text, WaterContent); err != nil || got.SI != 480e-6 || got.Note == "" {
			t.Errorf("%s: %g, note %q, %v", text, got.SI, got.Note, err)
		}
	}
	for _, text := range []string{"480 ppmv", "480 ppm v/v", "480 ppm(v)"} {
		if _, err := Parse(text, WaterContent); err == nil || !strings.Contains(err.Error(), `is by volume of what is not clear; write "mg/kg"`) {
			t.Errorf("%s: %v", text, err)
		}
	}
}

func TestNotes(t *testing.T) {
	for text, want := range map[string]string{
		"480 ppm":   `"ppm" read as mg/kg (by mass)`,
		"1.2 %":     `"%" read as per cent by mass (% m/m)`,
		"1.2 % m/m": "",
		"480 mg/kg": "",
	} {
		got, err := Parse(text, WaterContent)
		if err != nil || got.Note != want {
			t.Errorf("%s: note %q, %v; want %q", text, got.Note, err, want)
		}
	}
}

func TestRefused(t *testing.T) {
	for _, c := range []struct {
		text string
		d    Dimension
		want string // the whole message
	}{
		{"480", WaterContent, `"480" has no unit; write "480 mg/kg"`},
		{"18", Volume, `"18" has no unit; write "18 L"`},
		{"0.9", Share, `"0.9" has no unit; write it like "90 %"`},
		{"", Volume, `is empty; write it like "18 L"`},
		{"dry", WaterContent, `"dry" does not begin with a number; write it like "480 mg/kg"`},
		{"18 kg", Volume, `"18 kg" is a mass, but a volume is wanted here; allowed: L, mL, m3, US gal, uL, cm3`},
		{"5 gal", Volume, `"5 gal": "gal" could be a US or an imperial gallon; write "US gal", or litres; allowed: L, mL, m3, US gal, uL, cm3`},
		{"1,5 L", Volume, `"1,5 L" has a comma; write a decimal point (1.5) and no thousands separator (1500)`},
		{"1,500 mg/kg", WaterContent, `"1,500 mg/kg" has a comma; write a decimal point (1.5) and no thousands separator (1500)`},
		{"1 500 mg/kg", WaterContent, `"1 500 mg/kg" has a thousands separator; write the number in one piece (1500)`},
		{"1'500 mg/kg", WaterContent, `"1'500 mg/kg" has a thousands separator; write the number in one piece (1500)`},
		{"1_500 mg/kg", WaterContent, `"1_500 mg/kg" has a thousands separator; write the number in one piece (1500)`},
		{"1.500.000 L", Volume, `"1.500.000 L" has a thousands separator; write the number in one piece (1500)`},
		{"NaN L", Volume, `"NaN L" is not a finite number`},
		{".inf", Volume, `".inf" is not a finite number`},
		{"-Infinity L", Volume, `"-Infinity L" is not a finite number`},
		{"1e400 L", Volume, `"1e400 L" is too large`},
		{"1e308 US gal", Mass, `"1e308 US gal" is a volume, but a mass is wanted here; allowed: kg, g, mg, ug, t, lb`},
		{"1e306 t", Mass, `"1e306 t" is too large`},
		{"2 KG", Mass, `"2 KG": the unit is written "kg"`},
		{"0x10 L", Volume, `"0x10 L": "x10 L" is not a unit known here; allowed: L, mL, m3, US gal, uL, cm3`},
		{"3 mg/L", WaterContent, `"3 mg/L": "mg/L" would need the density of the wet solvent; give the water by mass; allowed: mg/kg, ppm, g/kg, % m/m, %, kg/kg, ug/g, mg/g`},
		{"3 mmol/L", WaterContent, `"3 mmol/L": "mmol/L" would need the density of the wet solvent; give the water by mass; allowed: mg/kg, ppm, g/kg, % m/m, %, kg/kg, ug/g, mg/g`},
		{"3 % V/V", WaterContent, `"3 % V/V": "% V/V" would need the density of the wet solvent; give the water by mass; allowed: mg/kg, ppm, g/kg, % m/m, %, kg/kg, ug/g, mg/g`},
		{"3 pieces", Number, `"3 pieces" has a unit; a plain number is wanted here`},
	} {
		_, err := Parse(c.text, c.d)
		if err == nil || err.Error() != c.want {
			t.Errorf("%q as %s:\n got %v\nwant %s", c.text, c.d, err, c.want)
		}
	}
}

// Each dimension must have an example that it reads itself.
func TestExamples(t *testing.T) {
	for d := range units {
		if _, err := Parse(examples[d], d); err != nil {
			t.Errorf("%s: example %q: %v", d, examples[d], err)
		}
	}
	for other, symbol := range spellings {
		if !known(symbol) {
			t.Errorf("%q is a spelling of %q, which is no unit", other, symbol)
		}
	}
}

func known(symbol string) bool {
	for d := range units {
		if _, ok := lookUp(d, symbol); ok {
			return true
		}
	}
	return false
}

func FuzzParse(f *testing.F) {
	for _, seed := range []string{"18 L", "480 ppm", "1e400 L", "NaN", "1,5 L", "\u22125 °C", "1 500 mg/kg", "-.5e-3 m³", "70 F", "9\xff L", "% m/m"} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		for d := range units {
			got, err := Parse(text, d)
			switch {
			case err != nil && got != (Reading{}):
				t.Errorf("%q: a reading and an error", text)
			case err != nil && strings.ContainsAny(err.Error(), "\n\x1b"):
				t.Errorf("%q: message is not printable: %q", text, err)
			case err == nil && (math.IsNaN(got.SI) || math.IsInf(got.SI, 0)):
				t.Errorf("%q: %g is not finite", text, got.SI)
			}
		}
		if m, err := ParseMoney(text); err == nil && len(m.Currency) != 3 {
			t.Errorf("%q: currency %q", text, m.Currency)
		}
	})
}
