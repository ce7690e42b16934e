package history_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/history"
)

func shelf(t *testing.T) *catalog.Catalog {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func room(c *catalog.Catalog) history.Room {
	return history.Room{TempK: 293.15, WaterPa: 1169, Loading: c.Agents["sieve-3a"].Isotherm.LoadingKgPerKg}
}

// Loadings of the catalog, g/100 g: 1.0 after a furnace at 300 °C closed while hot, 2.0
// with ordinary handling (fitted to published dryings), 2.5 and 3.5 after 250 and
// 200 °C (from memory). What is added up has a band and says that it is assumed.
func TestHistoriesAreRead(t *testing.T) {
	c := shelf(t)
	for _, f := range []struct {
		text      string
		low, high float64 // g/100 g
		computed  bool
	}{
		{"300 C", 2, 2, false}, {"572 f", 2, 2, false}, {"300 °C, closed hot", 1, 1, false}, {"Opened-Tin", 7.5, 7.5, false}, {"225 celsius", 3, 3, false},
		{"residual 1.5 g/100 g", 1.5, 1.5, false},
		{"250 °C, closed hot, 30 d", 1, 2.5, true}, {"250 °C, left open 2 d", 10, 25, true}, {"200 °C, vacuum 1 hPa", 1, 3.5, true},
	} {
		told, err := history.Read(f.text, c, room(c))
		if q := 100 * told.KgPerKg; err != nil || q < f.low-1e-9 || q > f.high+1e-9 || told.Computed() != f.computed {
			t.Errorf("%q: %.4g g/100 g, computed %t, %v", f.text, q, told.Computed(), err)
		}
		if f.computed && !(told.Low < told.KgPerKg && told.KgPerKg < told.High && strings.Contains(told.Note, "assumed") && told.Origin.Confidence == catalog.Assumption) {
			t.Errorf("%q: %g to %g, %q", f.text, told.Low, told.High, told.Note)
		}
	}
}

// A mistake repeats what was typed and says what is allowed.
func TestHistoriesAreRefused(t *testing.T) {
	c := shelf(t)
	for text, words := range map[string]string{
		"sunny": "is not a history known here", "300": "opened-tin", "400 C": "150 °C to 300 °C", "300 C, twice": "closed hot, left open",
		"300 C closed hot, left open, 3 d": "contradict", "250 C, vacuum": "a vacuum of what?", "residual much": "much", "250 C, left open": "for how long?",
		"900 C, closed hot": "an oven temperature of 900 °C; allowed: 20 to 650 °C", "250 C, 3 d, 30 d": "said twice",
	} {
		told, err := history.Read(text, c, room(c))
		var m *history.Mistake
		if !errors.As(err, &m) || !strings.Contains(m.Error(), words) || !strings.Contains(m.Error(), strings.Fields(text)[0]) {
			t.Errorf("%q: %+v, %v", text, told, err)
		}
	}
}

// More days, never drier; a room without water gives none back.
func TestStandingNeverDries(t *testing.T) {
	c := shelf(t)
	last := 0.0
	for _, text := range []string{"250 C, closed hot, 1 d", "250 C, closed hot, 30 d", "250 C, closed hot, 300 d", "250 C, left open, 1 d", "250 C, left open, 9 d"} {
		told, err := history.Read(text, c, room(c))
		if err != nil || told.KgPerKg < last {
			t.Errorf("%s: %g after %g, %v", text, told.KgPerKg, last, err)
		}
		last = told.KgPerKg
	}
	dry := room(c)
	dry.WaterPa = 0
	told, err := history.Read("250 C, left open, 9 d", c, dry)
	if err != nil || math.IsNaN(told.KgPerKg) || told.KgPerKg > 0.025+1e-9 {
		t.Errorf("in dry air: %g, %v", told.KgPerKg, err)
	}
}
