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
