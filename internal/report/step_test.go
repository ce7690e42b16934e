package report_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"

	"parch/catalog"
	"parch/internal/bench"
	"parch/internal/quantity"
	"parch/internal/report"
)

// askedOf are questions of every kind, answered or refused as the solvent has it.
var askedOf = []bench.Request{
	{Kind: "settle", Flags: map[string]string{"water": "4 %", "free-water": "50 mL", "temperature": "70 F"}},
	{Kind: "trap", Flags: map[string]string{"water": "300 mg/kg", "to": "30 mg/kg", "peroxide": "0 mg/L"}},
	{Kind: "trap", Flags: map[string]string{"water": "2 %", "carrier": "toluene", "dose": "300 g/L", "stages": "6", "peroxide": "0 mg/L"}},
	{Kind: "forerun", Flags: map[string]string{"water": "500 mg/kg", "to": "60 mg/kg", "stages": "6", "peroxide": "0 mg/L"}},
	{Kind: "salt", Flags: map[string]string{"water": "400 ppm", "agent": "magnesium-sulfate"}},
	{Kind: "soak", Flags: map[string]string{"water": "300 mg/L", "agent": "sieve-3a", "to": "20 mg/kg", "activated": "250 C, closed hot, 30 d"}},
	{Kind: "soak", Stirred: true, Flags: map[string]string{"water": "300 mg/kg", "agent": "sieve-4a", "dose": "20 g/L", "hours": "24"}},
	{Kind: "column", Flags: map[string]string{"water": "300 mg/kg", "agent": "sieve-3a", "to": "20 mg/kg", "volume": "10 L"}},
	{Kind: "reactive", Flags: map[string]string{"water": "100 mg/kg", "agent": "calcium-hydride", "peroxide": "0 mg/L", "reagent": "0.5 mol"}},
}

// every solvent answers some of the questions: the text keeps to its width, ends
// with cautions and sources, and the JSON has the keys of the contract.
func TestSteps(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	answered := map[string]int{}
	for _, key := range slices.Sorted(maps.Keys(c.Solvents)) {
		for _, request := range askedOf {
			if request.Solvent = c.Solvents[key]; request.Solvent.Water == nil {
				continue
			}
			a := stepAnswer(t, c, request)
			if a == nil {
				continue
			}
			answered[request.Kind]++
			checkStep(t, fmt.Sprintf("%s of %s", request.Kind, key), a)
		}
	}
	for _, kind := range bench.Kinds {
		if answered[string(kind)] < 5 {
			t.Errorf("%s: only %d solvents answered", kind, answered[string(kind)])
		}
	}
}

// stepAnswer is nil where the step is refused or has no sense.
func stepAnswer(t *testing.T, c *catalog.Catalog, request bench.Request) *bench.Answer {
	t.Helper()
	q, err := bench.Read(c, request)
	if request.Flags["carrier"] == request.Solvent.Key {
		return nil
	}
	if err != nil {
		t.Fatal(err)
	}
	a, err := bench.Ask(c, q)
	var refusal *bench.Refusal
	var mistake *bench.Mistake
	if err != nil && !errors.As(err, &refusal) && !errors.As(err, &mistake) {
		t.Fatal(err)
	}
	return a
}

func checkStep(t *testing.T, name string, a *bench.Answer) {
	t.Helper()
	var text, doc bytes.Buffer
	if err := errors.Join(report.StepText(&text, a), report.StepJSON(&doc, a)); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	for line := range strings.Lines(text.String()) {
		if n := utf8.RuneCountInString(strings.TrimSuffix(line, "\n")); n > 100 {
			t.Errorf("%s: a line of %d columns: %s", name, n, line)
		}
	}
	for _, odd := range []string{"NaN", "Inf", "%!", "  \n"} {
		if strings.Contains(text.String(), odd) {
			t.Errorf("%s: the text holds %q", name, odd)
		}
	}
	cautions, sources := strings.Index(text.String(), "   Cautions:\n"), strings.Index(text.String(), "   Sources:\n")
	if cautions < 0 || sources < cautions {
		t.Errorf("%s: cautions at %d, sources at %d", name, cautions, sources)
	}
	if diff := cmp.Diff(strings.Fields(stepKeys+aloneKeys), strings.Fields(keysOf(t, doc.Bytes()))); diff != "" {
		t.Errorf("%s (-want +got):\n%s", name, diff)
	}
	checkAgreement(t, name, text.String(), doc.Bytes())
}

// aloneStep are the keys of a step's JSON that are held to its text.
type aloneStep struct {
	Out      float64  `json:"water_out_mg_per_kg"`
	Low      *float64 `json:"water_out_low_mg_per_kg"`
	High     *float64 `json:"water_out_high_mg_per_kg"`
	BandOf   []string `json:"band_of"`
	Total    float64  `json:"hours_total"`
	Attended float64  `json:"hours_attended"`
	Own      float64  `json:"hours_attended_at_step"`
	More     float64  `json:"hours_attended_elsewhere"`
	Course   []struct {
		Hours float64 `json:"hours"`
	} `json:"course"`
	ReadAs   []string `json:"read_as"`
	Warnings []string `json:"warnings"`
	Advice   []struct {
		Topic, Text string
	} `json:"advice"`
	RestsOn []struct {
		What, Source, Confidence string
	} `json:"rests_on"`
	Cautions []struct {
		Code, Text, Source, Confidence string
	} `json:"cautions"`
	Sources []struct {
		ID, Reference string
	} `json:"sources"`
}

// what the text says stands in the JSON too: the band about the outlet, the hours, what
// is weak, the warnings, the cautions and where all of it comes from.
func checkAgreement(t *testing.T, name, text string, doc []byte) {
	t.Helper()
	var step aloneStep
	if err := json.Unmarshal(doc, &step); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
	plain := strings.Join(strings.Fields(text), " ")
	says := func(what string) {
		if what = strings.Join(strings.Fields(what), " "); !strings.Contains(plain, what) {
			t.Errorf("%s: the text does not say %q", name, what)
		}
	}
	if step.Low != nil && (*step.Low > step.Out*(1+1e-9) || *step.High < step.Out*(1-1e-9) || len(step.BandOf) == 0) {
		t.Errorf("%s: %g mg/kg lies outside %g to %g, from %q", name, step.Out, *step.Low, *step.High, step.BandOf)
	}
	says(fmt.Sprintf("time %s h in all, %s h attended", quantity.Significant(step.Total, 3), quantity.Significant(step.Attended, 3)))
	if math.Abs(step.Own+step.More-step.Attended) > 1e-9 {
		t.Errorf("%s: %g + %g h are not %g h", name, step.Own, step.More, step.Attended)
	}
	if n := len(step.Course); n > 0 && step.Course[n-1].Hours > step.Total*(1+1e-9) {
		t.Errorf("%s: the course takes %g of %g h", name, step.Course[n-1].Hours, step.Total)
	}
	for _, list := range [][]string{step.ReadAs, step.Warnings, step.BandOf} {
		for _, one := range list {
			says(one)
		}
	}
	for _, a := range step.Advice {
		says(a.Text)
	}
	cited := map[string]bool{}
	for _, s := range step.Sources {
		says(s.ID + ": " + s.Reference)
		cited[s.ID] = true
	}
	for _, b := range step.RestsOn {
		says(b.What)
		if b.Confidence == "" || !cited[b.Source] {
			t.Errorf("%s: %s rests on %q, %q, which is not among the sources", name, b.What, b.Source, b.Confidence)
		}
	}
	for _, c := range step.Cautions {
		says(c.Code + ": " + c.Text)
	}
	if len(step.RestsOn) == 0 || len(step.Cautions) == 0 || len(step.Sources) == 0 {
		t.Errorf("%s: without what it rests on, without cautions or without sources", name)
	}
}
