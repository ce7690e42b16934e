package workbook

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// Every line of a bill, every total, rank and point of a curve that is changed on
// purpose raises a flag, one by one. The sum of the flags is no less than any of
// them, for none is negative.
func TestWhatIsBrokenIsSeen(t *testing.T) {
	if testing.Short() {
		t.Skip("computes the workbook many times")
	}
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l, _, err := layLive(m)
	if err != nil {
		t.Fatal(err)
	}
	b := &breaker{l: l, grids: fresh(l)}
	if flag := b.raised(t, nil, 0); flag != "" {
		t.Fatalf("nothing is broken, yet %s", flag)
	}
	type target struct {
		sheet       string
		rows        rows
		column      int
		factor, add float64
	}
	targets := []target{
		{sheet: sheetCosts, rows: l.lineRows, column: billAmount, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.lineRows, column: billQty, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.litreRows, column: litreTotal, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.litreRows, column: litreCost, factor: 1, add: 1},
		{sheet: sheetCosts, rows: l.rankRows, column: rankPlace, factor: 1, add: 1},
		{sheet: sheetCompare, rows: l.compareRows, column: compareBatch, factor: 1, add: 1},
	}
	for _, c := range l.curveColumns {
		targets = append(targets, target{sheet: sheetCurves, rows: c.rows, column: c.column, factor: 1.01, add: 1e-6 * l.gridOf(sheetCurves).largest(c.column, c.rows)})
	}
	n := 0
	for _, x := range targets {
		for row := x.rows.first; row <= x.rows.last; row++ {
			if x.sheet == sheetCurves && !l.gridOf(sheetCurves).holds(x.column, row) {
				continue
			}
			n++
			if flag := b.breaks(t, x.sheet, x.column, row, x.factor, x.add); flag == "" {
				t.Errorf("%s!%s broken: no flag is raised", x.sheet, at(x.column, row))
			}
		}
	}
	t.Logf("%d cells broken", n)
}

func (g *grid) holds(column, row int) bool {
	return column <= len(g.rows[row-1]) && g.rows[row-1][column-1].value != nil
}

// largest is the largest number of a part of a column.
func (g *grid) largest(column int, rr rows) (most float64) {
	for row := rr.first; row <= rr.last; row++ {
		if v, ok := g.rows[row-1][column-1].value.(float64); ok {
			most = max(most, abs(v))
		}
	}
	return most
}

// breaker breaks cells of sheets, one after the other.
type breaker struct {
	l     *layout
	grids []*grid
}

// breaks changes the number in a cell and names the first flag that is raised.
func (b *breaker) breaks(t *testing.T, sheet string, column, row int, factor, add float64) string {
	t.Helper()
	e, from := b.evaluator(t), 0
	for i, g := range b.grids {
		if g.name == sheet {
			from = i
		}
	}
	v, ok := e.cell(b.grids[from], column, row).(float64)
	if !ok {
		t.Fatalf("%s!%s is no number", sheet, at(column, row))
	}
	x := &b.grids[from].rows[row-1][column-1]
	before := *x
	x.formula, x.value = "", v*factor+add
	defer func() { *x = before; b.clear(from) }()
	return b.raised(t, x, from)
}

// clear forgets what is computed on a sheet and on those behind it: none looks
// forward but Decision, on which no check rests.
func (b *breaker) clear(from int) {
	for _, g := range b.grids[from:] {
		for _, row := range g.rows {
			for c := range row {
				if row[c].formula != "" {
					row[c].value = nil
				}
			}
		}
	}
}

func (b *breaker) evaluator(t *testing.T) *evaluator {
	t.Helper()
	e, err := newEvaluator(b.grids, b.l.names)
	if err != nil {
		t.Fatal(err)
	}
	return e
}

// raised is what the first raised flag says; "" where none is. The checks of curves
// need nothing else to be computed.
func (b *breaker) raised(t *testing.T, broken *cell, from int) string {
	t.Helper()
	b.clear(from)
	e := b.evaluator(t)
	g := e.grids[sheetChecks]
	var order []int
	for row := g.last(); row > frameRows+4; row-- {
		if len(g.rows[row-1]) < 8 || g.rows[row-1][7].formula == "" {
			continue
		}
		if what, _ := g.rows[row-1][1].value.(string); strings.HasPrefix(what, "Sum of the curve") && b.grids[from].name == sheetCurves {
			order = append([]int{row}, order...)
			continue
		}
		order = append(order, row)
	}
	for _, row := range order {
		flag, ok := e.cell(g, 8, row).(float64)
		if !ok || flag < 0 {
			t.Fatalf("the flag in row %d of Checks is %v", row, e.cell(g, 8, row))
		}
		if flag >= 1 {
			return fmt.Sprint(g.rows[row-1][1].value)
		}
	}
	if broken == nil && e.failed != nil {
		t.Fatal(e.failed)
	}
	return ""
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
