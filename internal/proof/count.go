package proof

import (
	"cmp"
	"math"
	"slices"

	"parch/catalog"
)

// Tally counts the rows of a kind or of a quantity and kind.
type Tally struct {
	Quantity                                   string // "" for all quantities
	Kind                                       catalog.CheckKind
	Rows, Within, Excused, Missed, NotComputed int
	LeastRatio, MostRatio                      float64 // of the rows that have one
}

func (r *Result) count() {
	type key struct {
		quantity string
		kind     catalog.CheckKind
	}
	tallies := map[key]*Tally{}
	for i := range r.Rows {
		row := &r.Rows[i]
		for _, k := range []key{{"", row.Kind}, {row.Quantity, row.Kind}} {
			if tallies[k] == nil {
				tallies[k] = &Tally{Quantity: k.quantity, Kind: k.kind, LeastRatio: math.NaN(), MostRatio: math.NaN()}
			}
			tallies[k].add(row)
		}
	}
	for k, t := range tallies {
		if k.quantity == "" {
			r.Kinds = append(r.Kinds, *t)
		} else {
			r.Quantities = append(r.Quantities, *t)
		}
	}
	order := func(a, b Tally) int {
		return cmp.Or(cmp.Compare(a.Quantity, b.Quantity), cmp.Compare(slices.Index(kinds, a.Kind), slices.Index(kinds, b.Kind)))
	}
	slices.SortFunc(r.Kinds, order)
	slices.SortFunc(r.Quantities, order)
}

// kinds in the order in which they are listed, the strictest first.
var kinds = []catalog.CheckKind{catalog.Independent, catalog.FitTarget, catalog.Recalled, catalog.Contradicted}

func (t *Tally) add(row *Row) {
	t.Rows++
	if row.Within {
		t.Within++
	}
	switch row.Verdict {
	case Excused:
		t.Excused++
	case Misses:
		t.Missed++
	}
	if math.IsNaN(row.Computed) {
		t.NotComputed++
	}
	if !math.IsNaN(row.Ratio) {
		t.LeastRatio, t.MostRatio = lesser(t.LeastRatio, row.Ratio), greater(t.MostRatio, row.Ratio)
	}
}

func lesser(a, b float64) float64 {
	if math.IsNaN(a) || b < a {
		return b
	}
	return a
}

func greater(a, b float64) float64 {
	if math.IsNaN(a) || b > a {
		return b
	}
	return a
}
