package cli

import (
	"bytes"
	"slices"
	"testing"

	"parch/catalog"
	"parch/internal/bench"
	"parch/internal/report"
)

// A step is answered, or refused, from the part of the catalog that is read for it as
// it is from the whole: every solvent with every agent, and boiled, in text and JSON
// (needs no outside value).
func TestPartOfTheCatalogAnswersAlike(t *testing.T) {
	whole, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	answers := 0
	for _, solvent := range solventKeys(whole) {
		part, ok := catalog.LoadFor(solvent)
		if !ok {
			t.Fatalf("no part for %s", solvent)
		}
		for _, q := range questions(whole) {
			want, answered := told(whole, solvent, q.kind, q.flags)
			got, _ := told(part, solvent, q.kind, q.flags)
			if got != want {
				t.Errorf("%s of %s %v: %s\ninstead of\n%s", q.kind, solvent, q.flags, got, want)
			}
			if answered {
				answers++
			}
		}
	}
	for _, carrier := range []string{"toluene", "cyclohexane"} {
		flags := map[string]string{"water": "4 %", "carrier": carrier, "dose": "300 g/L"}
		part, _ := catalog.LoadFor("ethanol", carrier)
		want, _ := told(whole, "ethanol", "trap", flags)
		if got, _ := told(part, "ethanol", "trap", flags); got != want {
			t.Errorf("%s: %s\ninstead of\n%s", carrier, got, want)
		}
	}
	if answers < 300 {
		t.Errorf("only %d answers", answers)
	}
}

type stepQuestion struct {
	kind  string
	flags map[string]string
}

func questions(cat *catalog.Catalog) []stepQuestion {
	list := []stepQuestion{
		{"settle", map[string]string{"water": "saturated", "free-water": "20 mL"}},
		{"trap", map[string]string{"water": "300 mg/kg", "peroxide": "0 mg/L"}},
		{"forerun", map[string]string{"water": "300 mg/kg", "peroxide": "0 mg/L"}},
	}
	for key, agent := range cat.Agents {
		kind := map[string]string{"sieve": "soak", "oxide": "soak", "salt": "salt", "reactive": "reactive"}[agent.Kind]
		flags := map[string]string{"water": "80 mg/kg", "agent": key, "dose": "100 g/L", "hours": "24"}
		if kind != "soak" {
			flags = map[string]string{"water": "80 mg/kg", "agent": key, "peroxide": "0 mg/L"}
		}
		list = append(list, stepQuestion{kind, flags})
	}
	slices.SortFunc(list, func(a, b stepQuestion) int { return bytes.Compare([]byte(a.flags["agent"]), []byte(b.flags["agent"])) })
	return list
}

// told is the answer in text and JSON, or why there is none.
func told(cat *catalog.Catalog, solvent, kind string, flags map[string]string) (text string, answered bool) {
	question, err := bench.Read(cat, bench.Request{Kind: kind, Solvent: cat.Solvents[solvent], Flags: flags})
	if err != nil {
		return err.Error(), false
	}
	answer, err := bench.Ask(cat, question)
	if err != nil {
		return refusedStep(cat, err).Error(), false
	}
	var out bytes.Buffer
	if err := report.StepText(&out, answer); err != nil {
		return err.Error(), false
	}
	if err := report.StepJSON(&out, answer); err != nil {
		return err.Error(), false
	}
	return out.String(), true
}
