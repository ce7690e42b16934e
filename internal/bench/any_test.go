package bench_test

import (
	"errors"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/catalog"
	"parch/internal/bench"
)

// What people and accidents type into flags.
var typed = map[string][]string{
	"water":       {"225 mg/kg", "2 %", "0.4 mmol/L", "49 %", "0 mg/kg", "5", "nan mg/kg", "1e400 mg/kg", "-3 ppm", "2 % V/V", "1 mol %", "5 ppb"},
	"to":          {"20 mg/kg", "0.01 mg/kg", "1 %", "60 %", "x"},
	"dose":        {"100 g/L", "0.02 g/L", "1000 g/L", "1 kg", "2 %"},
	"hours":       {"24", "2 min", "183 d", "1e9", "0", "soon"},
	"volume":      {"1 L", "0.05 L", "10 m3", "1 gal"},
	"free-water":  {"0 mL", "100 mL", "2 L"},
	"temperature": {"20 C", "70 F", "-20 C", "100 C", "0 K"},
	"receiver":    {"5 C", "40 C", "0 C"},
	"pressure":    {"1013 hPa", "1 kPa", "2 bar"},
	"power":       {"1.6 kW", "10 W", "100 kW"},
	"peroxide":    {"0 mg/L", "8 mg/L", "0 ppm"},
	"height":      {"8 cm", "5 m"},
	"activated":   {"300 C", "300 C closed hot", "opened-tin", "150 C, left open, 400 d", "20 C vacuum 1 Pa", "650 C closed hot", ","},
	"reagent":     {"0.5 mol", "0 mol"},
	"agent":       {"sieve-3a", "silica-gel", "magnesium-sulfate", "sodium", "calcium oxide", "gold"},
}

// Any question is answered with finite numbers, refused with a reason or said to
// be wrong; nothing else.
func TestAnyQuestion(t *testing.T) {
	c := shelf(t)
	solvents := slices.DeleteFunc(slices.Sorted(maps.Keys(c.Solvents)), func(key string) bool { return c.Solvents[key].Water == nil })
	rapid.Check(t, func(rt *rapid.T) {
		flags := map[string]string{}
		for _, name := range slices.Sorted(maps.Keys(typed)) {
			// The first values make sense, and are the likely ones.
			if n := rapid.IntRange(0, 2*len(typed[name])).Draw(rt, name); n > 0 {
				flags[name] = typed[name][max(0, n-1-len(typed[name]))]
			}
		}
		kind := string(rapid.SampledFrom(bench.Kinds).Draw(rt, "kind"))
		for name := range flags {
			if !rapid.Bool().Draw(rt, "keep "+name) && name != "water" {
				delete(flags, name)
			}
		}
		q, err := bench.Read(c, bench.Request{Kind: kind, Solvent: c.Solvents[rapid.SampledFrom(solvents).Draw(rt, "solvent")], Flags: flags})
		if err != nil {
			toldWhole(rt, err)
			return
		}
		a, err := bench.Ask(c, q)
		if err != nil {
			toldWhole(rt, err)
			return
		}
		for _, x := range []float64{a.In.Water(), a.Out.Water(), a.Floor, a.HoursTotal, a.HoursAttended, a.EnergyKWh, a.AgentKg, a.SolventLostL} {
			if math.IsNaN(x) || math.IsInf(x, 0) || x < 0 {
				rt.Fatalf("%v: %+v", flags, a.Outcome)
			}
		}
		for _, advice := range a.Advice {
			if strings.Contains(advice.Text, "NaN") || strings.Contains(advice.Text, "Inf") || strings.Contains(advice.Text, "%!") {
				rt.Fatalf("%v: %s", flags, advice.Text)
			}
		}
	})
}

// toldWhole: each error is a mistake or a refusal with words.
func toldWhole(rt *rapid.T, err error) {
	if several, ok := err.(interface{ Unwrap() []error }); ok {
		for _, e := range several.Unwrap() {
			toldWhole(rt, e)
		}
		return
	}
	var mistake *bench.Mistake
	var refusal *bench.Refusal
	if !errors.As(err, &mistake) && !errors.As(err, &refusal) || err.Error() == "" {
		rt.Fatalf("neither a mistake nor a refusal: %v", err)
	}
}

// A pair that the matrix does not know is refused.
func TestUnknownPair(t *testing.T) {
	c := *shelf(t)
	c.Matrix = map[[2]string]catalog.Verdict{}
	q, err := bench.Read(&c, bench.Request{Kind: "soak", Solvent: c.Solvents["toluene"], Flags: map[string]string{"water": "225 mg/kg", "agent": "sieve-3a", "to": "20 mg/kg"}})
	if err != nil {
		t.Fatal(err)
	}
	var refusal *bench.Refusal
	if _, err := bench.Ask(&c, q); !errors.As(err, &refusal) || !strings.Contains(refusal.Reason, "no data on molecular sieve 3A") {
		t.Errorf("%v", err)
	}
}
