package report_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"flag"
	"math"
	"os"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"

	"parch/internal/report"
)

var update = flag.Bool("update", false, "write the golden files anew")

func golden(t *testing.T, name string, got []byte) {
	t.Helper()
	path := "testdata/" + name
	if *update {
		if err := os.WriteFile(path, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), string(got)); diff != "" {
		t.Errorf("%s (-want +got):\n%s", name, diff)
	}
}

func TestText(t *testing.T) {
	var out bytes.Buffer
	if err := report.Text(&out, synthetic(), report.Options{Workbook: "drying-routes.xlsx"}); err != nil {
		t.Fatal(err)
	}
	golden(t, "text.golden", out.Bytes())
	for i, line := range strings.Split(out.String(), "\n") {
		if utf8.RuneCountInString(line) > 100 || strings.TrimRight(line, " ") != line {
			t.Errorf("line %d is longer than 100 columns or ends in a space: %q", i+1, line)
		}
	}
}

func TestJSON(t *testing.T) {
	var out, again bytes.Buffer
	if err := report.JSON(&out, synthetic()); err != nil {
		t.Fatal(err)
	}
	if err := report.JSON(&again, synthetic()); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(out.Bytes(), again.Bytes()) {
		t.Error("the same report gives other bytes")
	}
	golden(t, "report.golden.json", out.Bytes())
}

// The keys of the outside contract, in order and complete. A lot that has them
// carries "nothing_to_do", "cannot_show" and "warnings" besides.
const (
	documentKeys = "parch catalog_date seed draws currency lots purchases"
	lotKeys      = "name solvent batch_l batches_per_year water_in_mg_per_kg target_mg_per_kg accept_at_or_below_mg_per_kg routes excluded break_even"
	routeKeys    = "id label rank meets_target recommended water_out_mg_per_kg water_out_low_mg_per_kg water_out_high_mg_per_kg chance_of_target " +
		"hours_total hours_attended energy_kwh cooling_water_l solvent_lost_l agent_kg waste_kg co2e_kg cost_per_batch cost_per_litre " +
		"cost_per_litre_low cost_per_litre_high cost_by_head settings steps cautions warnings"
	stepKeys = "kind agent carrier water_in_mg_per_kg water_out_mg_per_kg floor_mg_per_kg why_it_stops hours_total hours_attended " +
		"energy_kwh agent_kg solvent_lost_l"
	// of a step that was asked for by itself, after those
	aloneKeys = " water_out_low_mg_per_kg water_out_high_mg_per_kg band_of water_in_mg_per_l water_in_mmol_per_l water_out_mg_per_l " +
		"water_out_mmol_per_l volume_l temperature_c why turns_on missed hours_attended_at_step hours_attended_elsewhere sizes advice course " +
		"figures read_as warnings rests_on cautions sources"
	cautionKeys  = "code level text"
	excludedKeys = "id reason source"
	purchaseKeys = "item need_kg_per_year later_years_kg_per_year packs total"
	packKeys     = "size_kg count price"
	headKeys     = "agent cooling_water energy equipment labour purchase solvent_lost testing waste"
)

// keysOf returns the keys of the object at a path of keys and first elements.
func keysOf(t *testing.T, raw json.RawMessage, path ...string) string {
	t.Helper()
	for _, key := range path {
		object := map[string]json.RawMessage{}
		if err := json.Unmarshal(raw, &object); err != nil {
			t.Fatal(err)
		}
		raw = object[key]
		var list []json.RawMessage
		if json.Unmarshal(raw, &list) == nil && len(list) > 0 {
			raw = list[0]
		}
	}
	dec := json.NewDecoder(bytes.NewReader(raw))
	var keys []string
	for depth, isKey := 0, false; ; {
		token, err := dec.Token()
		if err != nil {
			break
		}
		switch token {
		case json.Delim('{'), json.Delim('['):
			depth++
			isKey = depth == 1
			continue
		case json.Delim('}'), json.Delim(']'):
			depth--
		default:
			if depth == 1 && isKey {
				keys = append(keys, token.(string))
				isKey = false
				continue
			}
		}
		isKey = depth == 1
	}
	return strings.Join(keys, " ")
}

func TestJSONHasTheKeysOfTheContract(t *testing.T) {
	var out bytes.Buffer
	if err := report.JSON(&out, synthetic()); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		path []string
		want string
	}{
		{nil, documentKeys},
		{[]string{"lots"}, lotKeys},
		{[]string{"lots", "routes"}, routeKeys},
		{[]string{"lots", "routes", "steps"}, stepKeys},
		{[]string{"lots", "routes", "cautions"}, cautionKeys},
		{[]string{"lots", "routes", "cost_by_head"}, headKeys},
		{[]string{"lots", "excluded"}, excludedKeys},
		{[]string{"purchases"}, purchaseKeys},
		{[]string{"purchases", "packs"}, packKeys},
	} {
		if diff := cmp.Diff(strings.Fields(c.want), strings.Fields(keysOf(t, out.Bytes(), c.path...))); diff != "" {
			t.Errorf("%v (-want +got):\n%s", c.path, diff)
		}
	}
}

func TestJSONRefusesInfinity(t *testing.T) {
	r := synthetic()
	r.Lots[0].Routes[0].Run.HoursTotal = math.Inf(1)
	if err := report.JSON(&bytes.Buffer{}, r); err == nil {
		t.Error("an infinite time was written")
	}
}

// What a run writes can be read back to the last digit.
func TestSettingsReadBack(t *testing.T) {
	r := synthetic()
	var out bytes.Buffer
	if err := report.JSON(&out, r); err != nil {
		t.Fatal(err)
	}
	got, err := report.Settings("out.json", out.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	for _, lot := range r.Lots {
		for _, route := range lot.Routes {
			want := route.Run.Settings
			if want.HandOverMgPerKg == nil {
				want.HandOverMgPerKg = []float64{}
			}
			if diff := cmp.Diff(want, got[lot.Job.Name][route.ID]); diff != "" {
				t.Errorf("%s, %s (-want +got):\n%s", lot.Job.Name, route.ID, diff)
			}
		}
	}
}

func TestSettingsRefused(t *testing.T) {
	wrap := func(settings string) string {
		return `{"lots": [{"name": "a", "routes": [{"id": "trap", "settings": ` + settings + `}]}]}`
	}
	for _, c := range []struct{ name, data, want string }{
		{"empty", ``, `f.json:1: not JSON: unexpected end of JSON input; expected the JSON that compare writes`},
		{"not JSON", "{\n\"lots\": [}", `f.json:2: not JSON: invalid character '}' looking for beginning of value; expected the JSON that compare writes`},
		{"another document", `{}`, `f.json: no lots in it; expected the JSON that compare writes`},
		{"wrong kind", `{"lots": 3}`, `f.json:1: lots cannot be a number; expected the JSON that compare writes`},
		{"missing", `{"lots": [{"name": "a", "routes": [{"id": "trap"}]}]}`, `f.json: lot "a", route "trap": settings: missing`},
		{"unknown key", wrap(`{"plates": 3}`), `f.json: lot "a", route "trap": settings: unknown field "plates"`},
		{"negative", wrap(`{"hand_over_mg_per_kg": [-1]}`), `f.json: lot "a", route "trap": settings: hand_over_mg_per_kg is negative: [-1]`},
		{"word", wrap(`{"sieve": ["burn"]}`), `f.json: lot "a", route "trap": settings: sieve is "burn"; allowed: "regenerate", "discard"`},
		{"twice", `{"lots": [{"name": "a"}, {"name": "a"}]}`, `f.json: lot "a" stands in it twice`},
		{"huge number", wrap(`{"soak_hours": [1e400]}`), `f.json: lot "a", route "trap": settings: soak_hours cannot be a number 1e400`},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := report.Settings("f.json", []byte(c.data))
			if err == nil || err.Error() != c.want {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
}

type full struct{ room int }

func (f *full) Write(b []byte) (int, error) {
	if f.room -= len(b); f.room < 0 {
		return 0, errors.New("no room")
	}
	return len(b), nil
}

func TestTextReportsAWriterThatFails(t *testing.T) {
	if err := report.Text(&full{200}, synthetic(), report.Options{}); err == nil || !strings.Contains(err.Error(), "no room") {
		t.Errorf("got %v", err)
	}
}

func TestLargestHeadIsNamed(t *testing.T) {
	var out bytes.Buffer
	if err := report.Text(&out, synthetic(), report.Options{}); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(out.String(), "Labour is 67 % of its cost.") {
		t.Error("the largest head is not named")
	}
}
