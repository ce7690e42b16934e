// Package proof holds the catalog's models against published figures: each row
// is a figure from outside, what the program computes for it, and a verdict.
package proof

import (
	"fmt"
	"math"

	"parch/catalog"
)

// Verdict is the outcome of a row.
type Verdict string

// The verdicts. A row from memory is recalled, and one that other entries contradict
// is contradicted, whatever it gives: they decide nothing.
const (
	Holds    Verdict = "holds"
	Misses   Verdict = "misses"
	Excused  Verdict = "excused" // misses, the data say why, and it stays within what they allow for that
	Recalled Verdict = "recalled"
	Disputed Verdict = "contradicted"
)

// Row is a published figure beside the computed one.
type Row struct {
	Quantity, Subject, Partner string
	TempK, PressurePa          float64 // 0 where the row has none
	Condition                  string  // further conditions in words; "" for most
	Published, Computed        float64 // Computed is NaN where nothing could be computed
	Unit                       string
	Deviation, Limit           float64 // in LimitUnit; the deviation is NaN where there is none
	LimitUnit                  string  // "%", "factor" or a unit
	Ratio                      float64 // computed over published; NaN where it means nothing
	Kind                       catalog.CheckKind
	Confidence                 catalog.Confidence
	Verdict                    Verdict
	Within                     bool    // whether the limit is met, for rows from memory too
	Reason                     string  // recorded, why the row may miss
	ExcusedTo                  float64 // the deviation, in LimitUnit, that the reason is held to; 0 where there is none
	Trouble                    string  // why nothing could be computed
	Source, Place              string  // Place is the file and line of the row, "" where not kept
}

// Result is the whole proof.
type Result struct {
	Rows       []Row
	Kinds      []Tally  // by kind
	Quantities []Tally  // by quantity and kind
	Stale      []string // recorded reasons that belong to no row
}

// Run computes every row. The order is that of the tables.
func Run(cat *catalog.Catalog, all *catalog.Checks) (*Result, error) {
	why, err := readReasons()
	if err != nil {
		return nil, err
	}
	r := &Result{}
	for i := range all.Rows {
		r.Rows = append(r.Rows, checkRow(cat, &all.Rows[i]))
	}
	for _, l := range all.TieLines {
		if row, ok := layerRow(cat, l, why); ok {
			r.Rows = append(r.Rows, row)
		}
	}
	for _, d := range all.Dryings {
		r.Rows = append(r.Rows, dryingRow(cat, d, why))
	}
	r.count()
	for _, one := range why {
		if !one.used {
			r.Stale = append(r.Stale, fmt.Sprintf("%s of %s and %s, %g", one.quantity, one.subject, one.partner, one.published))
		}
	}
	return r, nil
}

// Failures are the rows that miss without a recorded reason.
func (r *Result) Failures() (rows []Row) {
	for _, row := range r.Rows {
		if row.Verdict == Misses {
			rows = append(rows, row)
		}
	}
	return rows
}

// ExcusedAim is the share of rows that may be excused.
const ExcusedAim = 0.06

// ExcusedShare is the share of all rows that are excused, and the share of the
// published ones alone: only those can be excused.
func (r *Result) ExcusedShare() (ofAll, ofPublished float64) {
	excused, published := 0, 0
	for _, row := range r.Rows {
		if row.Verdict == Excused {
			excused++
		}
		if row.Confidence == catalog.Published && row.Verdict != Disputed {
			published++
		}
	}
	return float64(excused) / float64(len(r.Rows)), float64(excused) / float64(published)
}

// judge fills in the deviation and the verdict of a row whose published and
// computed values, limit and reason are known. trouble says why nothing was
// computed.
//
// What is from memory is a row from memory, also where it was a target of a fit.
func (row Row) judge(trouble error) Row {
	if row.Confidence == catalog.Memory {
		row.Kind = catalog.Recalled
	}
	if trouble != nil {
		row.Trouble, row.Computed = trouble.Error(), math.NaN()
	}
	c := catalog.Check{Value: row.Published, Limit: row.Limit, LimitUnit: row.LimitUnit, Excuse: row.Reason, ExcusedTo: row.ExcusedTo}
	row.Deviation, row.Ratio = c.Deviation(row.Computed), math.NaN()
	row.Within = c.Holds(row.Computed)
	if row.Published > 0 && row.Unit != "°C" {
		row.Ratio = row.Computed / row.Published
	}
	switch {
	case row.Kind == catalog.Recalled:
		row.Verdict = Recalled
	case row.Kind == catalog.Contradicted:
		row.Verdict = Disputed
	case row.Within:
		row.Verdict = Holds
	case c.Excuses(row.Computed):
		row.Verdict = Excused
	default:
		row.Verdict = Misses
	}
	return row
}
