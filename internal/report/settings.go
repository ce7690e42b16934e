package report

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"slices"
	"strings"

	"parch/internal/routes"
)

// maxSettingsBytes keeps a wrong file from filling the memory.
const maxSettingsBytes = 16 << 20

// Settings reads back what was tuned, by lot name and route id, from the JSON of
// an earlier run. Of the rest of the document only the names are looked at. All
// problems are reported at once.
func Settings(name string, data []byte) (map[string]map[string]routes.Settings, error) {
	if len(data) > maxSettingsBytes {
		return nil, fmt.Errorf("%s: larger than %d MiB; expected the JSON that compare writes", name, maxSettingsBytes>>20)
	}
	var doc struct {
		Lots []struct {
			Name   string `json:"name"`
			Routes []struct {
				ID       string          `json:"id"`
				Settings json.RawMessage `json:"settings"`
			} `json:"routes"`
		} `json:"lots"`
	}
	if err := json.Unmarshal(data, &doc); err != nil {
		return nil, fmt.Errorf("%s:%d: %s; expected the JSON that compare writes", name, lineOf(data, err), explain(err))
	}
	if len(doc.Lots) == 0 {
		return nil, fmt.Errorf("%s: no lots in it; expected the JSON that compare writes", name)
	}
	all := make(map[string]map[string]routes.Settings, len(doc.Lots))
	var problems []error
	for _, lot := range doc.Lots {
		if _, twice := all[lot.Name]; twice {
			problems = append(problems, fmt.Errorf("%s: lot %q stands in it twice", name, lot.Name))
		}
		tuned := make(map[string]routes.Settings, len(lot.Routes))
		for _, route := range lot.Routes {
			settings, err := readSettings(route.Settings)
			if err != nil {
				problems = append(problems, fmt.Errorf("%s: lot %q, route %q: settings: %w", name, lot.Name, route.ID, err))
			}
			if _, twice := tuned[route.ID]; twice {
				problems = append(problems, fmt.Errorf("%s: lot %q, route %q stands in it twice", name, lot.Name, route.ID))
			}
			tuned[route.ID] = settings
		}
		all[lot.Name] = tuned
	}
	if len(problems) > 0 {
		return nil, errors.Join(problems...)
	}
	return all, nil
}

func readSettings(raw json.RawMessage) (routes.Settings, error) {
	var s routes.Settings
	if len(raw) == 0 || string(raw) == "null" {
		return s, errors.New("missing")
	}
	dec := json.NewDecoder(bytes.NewReader(raw))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&s); err != nil {
		return s, errors.New(explain(err))
	}
	negative := func(x float64) bool { return x < 0 }
	var problems []error
	if slices.ContainsFunc(s.HandOverMgPerKg, negative) {
		problems = append(problems, fmt.Errorf("hand_over_mg_per_kg is negative: %v", s.HandOverMgPerKg))
	}
	if slices.ContainsFunc(s.SoakHours, negative) {
		problems = append(problems, fmt.Errorf("soak_hours is negative: %v", s.SoakHours))
	}
	for name, counts := range map[string][]int{"charges": s.Charges, "lots_over_charge": s.LotsOverCharge} {
		if slices.ContainsFunc(counts, func(n int) bool { return n < 0 }) {
			problems = append(problems, fmt.Errorf("%s is negative: %v", name, counts))
		}
	}
	for _, word := range s.Sieve {
		if word != routes.Regenerate && word != routes.Discard {
			problems = append(problems, fmt.Errorf("sieve is %q; allowed: %q, %q", word, routes.Regenerate, routes.Discard))
		}
	}
	return s, errors.Join(problems...)
}

// explain turns an error of the JSON reader into words.
func explain(err error) string {
	var syntax *json.SyntaxError
	var kind *json.UnmarshalTypeError
	switch {
	case errors.As(err, &syntax):
		return fmt.Sprintf("not JSON: %s", syntax)
	case errors.As(err, &kind):
		return fmt.Sprintf("%s cannot be a %s", kind.Field, kind.Value)
	}
	return strings.TrimPrefix(err.Error(), "json: ")
}

// lineOf is the line at which the JSON reader stopped.
func lineOf(data []byte, err error) int {
	var syntax *json.SyntaxError
	var kind *json.UnmarshalTypeError
	offset := int64(0)
	switch {
	case errors.As(err, &syntax):
		offset = syntax.Offset
	case errors.As(err, &kind):
		offset = kind.Offset
	}
	return 1 + bytes.Count(data[:min(offset, int64(len(data)))], []byte("\n"))
}
