package workbook

import (
	"slices"
	"testing"
)

// Pages that hold what those of the usual readers hold at least cut no chart and start with
// one blank row before a part.
func TestPagesCutNothing(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			page, titles := g.pageRoom()
			for _, p := range g.charts {
				if g.percent == 0 && cutByAPage(g, p.row, g.under(p), page, titles) {
					t.Errorf("%s: a chart in row %d of %s is cut; pages start at %v", k.name, p.row, g.name, g.breaks)
				}
			}
			for _, row := range g.breaks {
				if len(g.rows[row]) == 0 && !slices.ContainsFunc(g.charts, func(p placed) bool { return p.row == row+1 }) {
					t.Errorf("%s: a page of %s starts with two blank rows, %d and the next", k.name, g.name, row)
				}
			}
		}
	}
}

// cutByAPage tells whether a page ends within some rows.
func cutByAPage(g *grid, first, last int, page, titles float64) bool {
	used := 0.0
	for row := 1; row <= last; row++ {
		if slices.Contains(g.breaks, row) || used+g.span(row, row) > page {
			used = titles
			if row > first {
				return true
			}
		}
		used += g.span(row, row)
	}
	return false
}

// A row that holds nothing but a lot, a route and figures is one line high where their
// names are of usual length: 28 digits for a lot, 27 for a route.
func TestRowsOfRoutesAreOneLineHigh(t *testing.T) {
	for _, k := range everyKind(t) {
		l := k.layout
		for _, g := range l.grids {
			if g.name != sheetCompare && g.name != sheetCosts {
				continue
			}
			lines := l.compareRows
			if g.name == sheetCosts {
				lines = l.headRows
			}
			for i, r := range l.routes {
				if row := lines.at(i); unitsFor(r.lot.Job.Name) <= 28 && unitsFor(r.ID) <= 27 && g.height(row) > linesHigh(1) {
					t.Errorf("%s: row %d of %s (%s, %s) is %g points high", k.name, row, g.name, r.lot.Job.Name, r.ID, g.height(row))
				}
			}
		}
	}
}
