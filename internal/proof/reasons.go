package proof

import (
	_ "embed"
	"encoding/csv"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"parch/catalog"
)

//go:embed reasons.csv
var reasonsFile string

// reason is why a row may miss its limit.
type reason struct {
	quantity, subject, partner string
	published                  float64
	excusedTo                  float64 // the deviation that the reason is held to
	notComputed                bool    // it excuses only that nothing can be computed
	inSource, text             string
	used                       bool
}

// reasons are those recorded for the rows that have no place for one in the
// catalog's tables.
type reasons []reason

var reasonHeadings = []string{"quantity", "subject", "partner", "published", "in_source", "excused_to", "reason"}

func readReasons() (reasons, error) {
	r := csv.NewReader(strings.NewReader(reasonsFile))
	r.Comment = '#'
	rows, err := r.ReadAll()
	if err != nil {
		return nil, fmt.Errorf("reasons.csv cannot be read: %w", err)
	}
	if !slices.Equal(rows[0], reasonHeadings) {
		return nil, fmt.Errorf("reasons.csv: the headings are not %s", strings.Join(reasonHeadings, ","))
	}
	var all reasons
	for _, row := range rows[1:] {
		published, err := strconv.ParseFloat(row[3], 64)
		to, errTo := strconv.ParseFloat(row[5], 64)
		none := row[5] == "not computed"
		if err != nil || errTo != nil && !none || row[6] == "" {
			return nil, fmt.Errorf("reasons.csv: %q gives no published value, no figure that it is held to or no reason", strings.Join(row, ","))
		}
		all = append(all, reason{quantity: row[0], subject: row[1], partner: row[2], published: published, inSource: row[4], excusedTo: to, notComputed: none, text: row[6]})
	}
	return all, nil
}

// excuse gives a row that misses the reason recorded for it, if there is one.
func (all reasons) excuse(row Row) Row {
	if row.Verdict != Misses {
		return row
	}
	for i := range all {
		if !all[i].meets(row) {
			continue
		}
		all[i].used, row.Reason, row.ExcusedTo = true, all[i].text, all[i].excusedTo
		c := catalog.Check{Value: row.Published, LimitUnit: row.LimitUnit, Excuse: row.Reason, ExcusedTo: row.ExcusedTo}
		if c.Excuses(row.Computed) || all[i].notComputed && math.IsNaN(row.Computed) {
			row.Verdict = Excused
		}
		break
	}
	return row
}

func (r *reason) meets(row Row) bool {
	const rounding = 1e-9
	return r.quantity == row.Quantity && r.subject == row.Subject && r.partner == row.Partner &&
		math.Abs(row.Published/r.published-1) < rounding && containsWord(row.Source, r.inSource)
}

// containsWord finds a record that is not the beginning of a longer one.
func containsWord(text, word string) bool {
	return slices.ContainsFunc(strings.FieldsFunc(text, func(c rune) bool { return strings.ContainsRune(" ;:,", c) }),
		func(field string) bool { return field == word })
}
