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
	"parch/internal/steps"
)

// What people and accidents type into flags.
var typed = map[string][]string{
	"water":       {"225 mg/kg", "2 %", "0.4 mmol/L", "49 %", "0 mg/kg", "5", "nan mg/kg", "1e400 mg/kg", "-3 ppm", "2 % V/V", "1 mol %", "5 ppb"},
	"to":          {"20 mg/kg", "0.01 mg/kg", "1 %", "60 %", "x"},
	"dose":        {"100 g/L", "0.02 g/L", "1000 g/L", "1 kg", "2 %", "10 % m/m", "5 % m/v"},
	"hours":       {"24", "2 min", "183 d", "1e9", "0", "soon"},
	"volume":      {"1 L", "0.05 L", "10 m3", "1 gal"},
	"rinse":       {"0 mL", "100 mL", "2 L"},
	"free-water":  {"0 mL", "100 mL", "2 L"},
	"temperature": {"20 C", "70 F", "-20 C", "100 C", "0 K"},
	"receiver":    {"5 C", "40 C", "0 C"},
	"pressure":    {"1013 hPa", "1 kPa", "2 bar"},
	"power":       {"1.6 kW", "10 W", "100 kW"},
	"peroxide":    {"0 mg/L", "8 mg/L", "0 ppm"},
	"height":      {"8 cm", "5 m"},
	"activated":   {"300 C", "300 C closed hot", "opened-tin", "150 C, left open, 400 d", "20 C vacuum 1 Pa", "residual 1.5 g/100 g", "residual 0 g/100 g, 572 F", "residual 1", "650 C closed hot", ","},
	"reagent":     {"0.5 mol", "0 mol"},
	"carrier":     {"toluene", "cyclohexane", "DCM", "benzene", "mtbe", "water"},
	"stages":      {"0", "3", "6", "20", "21", "-1"},
	"returns":     {"light", "either", "heavy", "receiver-assembled", "receiver-light", "still-2l", "up", ""},
	"charges":     {"1", "2", "5", "0", "many"},
}

var agents = map[steps.Kind][]string{
	steps.Soak: {"sieve-3a", "silica-gel"}, steps.Column: {"sieve-4a", "alumina"}, steps.Salt: {"magnesium-sulfate", "sodium-sulfate"},
	steps.Reactive: {"calcium oxide", "calcium-hydride"}, steps.Trap: {"gold"}, steps.Forerun: {"sodium"}, steps.Settle: {"sodium"},
}

// Any question is answered with finite numbers, refused with a reason or said to
// be wrong; nothing else.
func TestAnyQuestion(t *testing.T) {
	c := shelf(t)
	solvents := slices.DeleteFunc(slices.Sorted(maps.Keys(c.Solvents)), func(key string) bool { return c.Solvents[key].Water == nil })
	answered := 0
	rapid.Check(t, func(rt *rapid.T) {
		kind := rapid.SampledFrom(bench.Kinds).Draw(rt, "kind")
		flags := map[string]string{}
		if rapid.IntRange(0, 19).Draw(rt, "agent") > 0 && slices.Contains(bench.Takes(kind), "agent") {
			flags["agent"] = rapid.SampledFrom(agents[kind]).Draw(rt, "agent")
		} else if rapid.IntRange(0, 19).Draw(rt, "wrong agent") == 0 {
			flags["agent"] = rapid.SampledFrom(slices.Concat(agents[steps.Soak], agents[steps.Trap], agents[steps.Settle])).Draw(rt, "agent")
		}
		for _, name := range slices.Sorted(maps.Keys(typed)) {
			unusual := rapid.IntRange(0, 9).Draw(rt, name) == 0
			switch takes := slices.Contains(bench.Takes(kind), name); {
			case !takes && rapid.IntRange(0, 99).Draw(rt, name+" all the same") > 0, takes && name != "water" && rapid.Bool().Draw(rt, "no "+name):
			case unusual:
				flags[name] = rapid.SampledFrom(typed[name]).Draw(rt, name)
			default: // those that come first make sense
				flags[name] = rapid.SampledFrom(typed[name][:2]).Draw(rt, name)
			}
		}
		q, err := bench.Read(c, bench.Request{Kind: string(kind), Solvent: c.Solvents[rapid.SampledFrom(solvents).Draw(rt, "solvent")], Flags: flags,
			Stirred: rapid.Bool().Draw(rt, "stirred") && kind == steps.Soak, Powder: rapid.Bool().Draw(rt, "powder") && kind == steps.Soak})
		if err != nil {
			toldWhole(rt, err)
			return
		}
		a, err := bench.Ask(c, q)
		if err != nil {
			toldWhole(rt, err)
			return
		}
		answered++
		for _, x := range []float64{a.In.Water(), a.Out.Water(), a.HoursTotal, a.HoursAttended, a.EnergyKWh, a.AgentKg, a.SolventLostL} {
			if math.IsNaN(x) || math.IsInf(x, 0) || x < 0 {
				rt.Fatalf("%v: %+v", flags, a.Outcome)
			}
		}
		if boils := a.Kind == steps.Forerun || a.Carrier != ""; !boils && !(a.Floor >= 0) || math.IsInf(a.Floor, 0) { // those may have no floor
			rt.Fatalf("%v: a floor of %g", flags, a.Floor)
		}
		for _, advice := range a.Advice {
			if strings.Contains(advice.Text, "NaN") || strings.Contains(advice.Text, "Inf") || strings.Contains(advice.Text, "%!") {
				rt.Fatalf("%v: %s", flags, advice.Text)
			}
		}
	})
	if !t.Failed() && answered == 0 {
		t.Errorf("no question was answered")
	}
	t.Logf("%d answered", answered)
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
