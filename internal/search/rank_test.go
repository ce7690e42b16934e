package search

import (
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestOrder(t *testing.T) {
	entries := []Entry{
		{ID: "misses by much", Value: 1, WaterOut: 90e-6},
		{ID: "b", Meets: true, Value: 2, CostPerLitre: 2},
		{ID: "a", Meets: true, Value: 2 * (1 + 1e-12), CostPerLitre: 2}, // rounding noise apart
		{ID: "no price", Meets: true, NoPrice: true, Value: 0},
		{ID: "cheapest", Meets: true, Value: 1, CostPerLitre: 1},
		{ID: "misses by little", Value: 9, WaterOut: 20e-6},
		{ID: "dearer", Meets: true, Value: 2, CostPerLitre: 3},
	}
	var got []string
	for _, i := range Order(entries) {
		got = append(got, entries[i].ID)
	}
	want := []string{"cheapest", "a", "b", "dearer", "no price", "misses by little", "misses by much"}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
}

// The order does not depend on the order in which the routes come.
func TestOrderIsIndependentOfTheInput(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(2, 12).Draw(t, "n")
		entries := make([]Entry, n)
		for i := range entries {
			entries[i] = Entry{
				ID: string(rune('a' + i)), Meets: rapid.Bool().Draw(t, "meets"), Value: float64(rapid.IntRange(1, 3).Draw(t, "value")),
				CostPerLitre: float64(rapid.IntRange(1, 2).Draw(t, "cost")), WaterOut: float64(rapid.IntRange(1, 3).Draw(t, "water")),
			}
		}
		names := func(all []Entry) (out string) {
			for _, i := range Order(all) {
				out += all[i].ID
			}
			return out
		}
		shuffled := rapid.Permutation(entries).Draw(t, "shuffled")
		if a, b := names(entries), names(shuffled); a != b {
			t.Fatalf("%s, then %s", a, b)
		}
	})
}

// The minimum of (u - 1.3)^2 lies at 1.3; one outside the bounds is not passed.
func TestRefineStaysInsideAndFindsTheMinimum(t *testing.T) {
	for _, c := range []struct{ lo, hi, at float64 }{{0, 2, 1.3}, {0, 1, 1}, {1.5, 3, 1.5}} {
		best, lowest := 0.0, 1e9
		refined(func(at []float64) float64 {
			u := at[0]
			if u < c.lo || u > c.hi {
				t.Fatalf("%g is outside %g to %g", u, c.lo, c.hi)
			}
			v := (u - 1.3) * (u - 1.3)
			if v < lowest {
				best, lowest = u, v
			}
			return v
		}, []float64{c.lo}, []float64{c.hi}, 40)
		if d := best - c.at; d > 0.01 || d < -0.01 {
			t.Errorf("between %g and %g: %g, want %g", c.lo, c.hi, best, c.at)
		}
	}
}
