package job

import (
	"math"
	"strings"
	"testing"

	"parch/catalog"
)

// Toluene holds 0.0543 % of water at 25 °C (Polak & Lu, Can. J. Chem. 51 (1973) 4018).

func TestSaturatedIsWhatTheSolventHolds(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	const yaml = "site: {room: 25 °C}\nlots:\n- {solvent: SOLVENT, batch: 18 L, water: saturated, free water: 40 mL, target: 15 mg/kg}\n"
	j, err := Read("job.yaml", []byte(strings.Replace(yaml, "SOLVENT", "toluene", 1)), c)
	if err != nil {
		t.Fatal(err)
	}
	lot := j.Lots[0]
	if !lot.Saturated || math.Abs(lot.Water/543e-6-1) > 0.05 {
		t.Errorf("%g kg/kg, saturated %t", lot.Water, lot.Saturated)
	}
	if !strings.Contains(strings.Join(j.Warnings, "\n"), "toluene holds") {
		t.Errorf("what saturated means is not said: %q", j.Warnings)
	}
	_, err = Read("job.yaml", []byte(strings.Replace(yaml, "SOLVENT", "acetone", 1)), c)
	if err == nil || !strings.Contains(err.Error(), "acetone takes up any amount of water at 25 °C and is never saturated; give its content") {
		t.Errorf("acetone: %v", err)
	}
}

func jobWith(t *testing.T, water string) (*Job, error) {
	t.Helper()
	return Read("job.yaml", []byte("lots:\n- solvent: toluene\n  batch: 18 L\n  water: "+water+"\n  target: 15 mg/kg\n"), loaded(t))
}

func TestWaterAsABand(t *testing.T) {
	for water, want := range map[string]WaterBand{
		"300 to 600 mg/kg":                                         {Low: 300e-6, High: 600e-6},
		"{low: 300 mg/kg, high: 0.06 %}":                           {Low: 300e-6, High: 600e-6},
		"{low: 300 mg/kg, typical: 500 mg/kg, high: 600 mg/kg}":    {Low: 300e-6, High: 600e-6},
		"{low: 300 mg/kg, high: 600 mg/kg, distribution: uniform}": {Low: 300e-6, High: 600e-6, Uniform: true},
	} {
		j, err := jobWith(t, water)
		if err != nil {
			t.Fatal(err)
		}
		b := j.Lots[0].WaterBand
		if b == nil || math.Abs(b.Low/want.Low-1) > 1e-12 || math.Abs(b.High/want.High-1) > 1e-12 || b.Uniform != want.Uniform {
			t.Errorf("%s: %+v, want %+v", water, b, want)
		}
	}
}

func TestBandsThatAreNone(t *testing.T) {
	for water, want := range map[string]string{
		"600 to 300 mg/kg":                                                       "job.yaml:4: lots[0].water: the lower end of the band, 600 mg/kg, is above its upper end, 300 mg/kg",
		"{low: 600 mg/kg, high: 300 mg/kg}":                                      "job.yaml:4: lots[0].water: the lower end of the band, 600 mg/kg, is above its upper end, 300 mg/kg",
		"300 to 300 mg/kg":                                                       "job.yaml:4: lots[0].water: a band from 300 mg/kg to 300 mg/kg has no spread; give one content instead",
		"{low: 300 mg/kg, typical: 200 mg/kg, high: 600 mg/kg}":                  `job.yaml:4: lots[0].water.typical: "200 mg/kg" does not lie between 300 mg/kg and 600 mg/kg`,
		"{low: 300 mg/kg, high: 600 mg/kg, distribution: even}":                  `job.yaml:4: lots[0].water.distribution: "even" is not allowed here; allowed: lognormal, uniform`,
		"{low: 1 mg/kg, typical: 2 mg/kg, high: 3 mg/kg, distribution: uniform}": "job.yaml:4: lots[0].water.typical: a uniform band has no typical value: all of it is alike",
		"300 to much": `job.yaml:4: lots[0].water: "much"`,
	} {
		if _, err := jobWith(t, water); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %s", water, err, want)
		}
	}
}

func TestFailedBatch(t *testing.T) {
	text := "site: {failed batch: 300 EUR}\nlots:\n- {solvent: toluene, batch: 18 L, water: 480 mg/kg, target: 15 mg/kg}\n- {solvent: toluene, batch: 18 L, water: 480 mg/kg, target: 15 mg/kg, failed batch: 12.50 EUR}\n"
	j, err := Read("job.yaml", []byte(text), loaded(t))
	if err != nil {
		t.Fatal(err)
	}
	if a, b := j.Lots[0].FailedBatch.Amount.String(), j.Lots[1].FailedBatch.Amount.String(); a != "300" || b != "12.5" {
		t.Errorf("%s and %s, want 300 and 12.5", a, b)
	}
	if _, err := Read("job.yaml", []byte(strings.Replace(text, "12.50 EUR", "12.50 EUR/h", 1)), loaded(t)); err == nil || !strings.Contains(err.Error(), "a failed batch costs an amount") {
		t.Errorf("a rate: %v", err)
	}
}

func loaded(t *testing.T) *catalog.Catalog {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return c
}
