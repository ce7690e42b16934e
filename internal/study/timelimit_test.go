package study_test

import (
	"fmt"
	"testing"

	"parch/internal/search"
	"parch/internal/study"
)

// What has to be done within a week costs no less than what may take as long as it
// likes: the same routes are on offer, fewer stands. The search for settings that are
// sure has to find that out of its own.
func TestATimeLimitMakesNothingCheaper(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	for _, lot := range []string{
		"solvent: ethanol, water: 1000 mg/kg, target: 20 mg/kg",
		"solvent: n-heptane, water: 1000 mg/kg, target: 20 mg/kg",
		"solvent: isopropanol, water: 2 %, target: 50 mg/kg",
		"solvent: dimethylformamide, water: 1000 mg/kg, target: 20 mg/kg",
	} {
		cost := func(limit string) float64 {
			r := compare(t, fmt.Sprintf("currency: EUR\nsite: {room: 20 °C, technician: 48 EUR/h, electricity: 0.24 EUR/kWh}\nlots:\n  - {name: lot, %s, batch: 20 L, batches: 40 /yr%s}\n", lot, limit), study.Options{Draws: 400, Seed: 1})
			best := r.Lots[0].Best()
			if best == nil || !best.Recommended {
				t.Fatalf("%s: nothing is sure", lot)
			}
			return best.Bill.PerLitre.InexactFloat64()
		}
		free, week := cost(""), cost(", needed within: 168 h")
		t.Log(lot, free, week)
		if free > week*(1+search.Tie) {
			t.Errorf("%s: %.5g a litre, and %.5g where it has to be done in a week", lot, free, week)
		}
	}
}
