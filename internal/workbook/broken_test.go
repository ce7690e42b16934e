package workbook

import (
	"math/rand/v2"
	"os"
	"slices"
	"testing"
)

// Every line of a bill, every total, rank and point of a curve that is changed on
// purpose turns the sum of the flags from 0. A sample is broken each time; with
// PARCH_BREAK_ALL set, all of them are.
func TestWhatIsBrokenIsSeen(t *testing.T) {
	if testing.Short() {
		t.Skip("computes the workbook many times")
	}
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l, err := layLive(m)
	if err != nil {
		t.Fatal(err)
	}
	type target struct {
		sheet       string
		rows        rows
		column      int
		sampled     int
		factor, add float64
	}
	targets := []target{
		{sheet: sheetCosts, rows: l.lineRows, column: billAmount, sampled: 6, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.lineRows, column: billQty, sampled: 6, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.litreRows, column: litreTotal, sampled: 4, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.rankRows, column: rankPlace, sampled: 4, factor: 1, add: 1},
		{sheet: sheetCompare, rows: l.compareRows, column: compareBatch, sampled: 4, factor: 1, add: 1},
	}
	for _, c := range l.curveColumns {
		targets = append(targets, target{sheet: sheetCurves, rows: c.rows, column: c.column, sampled: 1, factor: 1.01, add: 1e-6})
	}
	rng := rand.New(rand.NewPCG(1, 2))
	for _, x := range targets {
		var all []int
		for row := x.rows.first; row <= x.rows.last; row++ {
			all = append(all, row)
		}
		if os.Getenv("PARCH_BREAK_ALL") == "" && len(all) > x.sampled {
			rng.Shuffle(len(all), func(i, k int) { all[i], all[k] = all[k], all[i] })
			all = slices.Clone(all[:x.sampled])
		}
		for _, row := range all {
			if total := flagsWithBroken(t, l, x.sheet, x.column, row, x.factor, x.add); !(total >= 1) {
				t.Errorf("%s!%s broken: the sum of the flags is %g", x.sheet, at(x.column, row), total)
			}
		}
	}
}

// flagsWithBroken is the sum of the flags with one cell holding another number.
func flagsWithBroken(t *testing.T, l *layout, sheet string, column, row int, factor, add float64) float64 {
	t.Helper()
	e, err := newEvaluator(fresh(l), l.names)
	if err != nil {
		t.Fatal(err)
	}
	v, ok := e.cell(e.grids[sheet], column, row).(float64)
	if !ok {
		t.Fatalf("%s!%s is no number", sheet, at(column, row))
	}
	if e, err = newEvaluator(fresh(l), l.names); err != nil {
		t.Fatal(err)
	}
	x := &e.grids[sheet].rows[row-1][column-1]
	x.formula, x.value = "", v*factor+add
	check := e.names["check_total"]
	total, _ := e.cell(check.g, check.c1, check.r1).(float64)
	return total
}

// fresh is a copy of the sheets in which nothing is computed.
func fresh(l *layout) []*grid {
	grids := make([]*grid, len(l.grids))
	for i, g := range l.grids {
		h := *g
		h.rows = make([][]cell, len(g.rows))
		for r, row := range g.rows {
			h.rows[r] = slices.Clone(row)
			for c := range h.rows[r] {
				if h.rows[r][c].formula != "" {
					h.rows[r][c].value = nil
				}
			}
		}
		grids[i] = &h
	}
	return grids
}
