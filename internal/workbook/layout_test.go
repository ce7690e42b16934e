package workbook

import (
	"math"
	"slices"
	"strings"
	"testing"
)

// A page that holds the least that the usual readers put on one ends where a break is,
// and within no chart: what holds more breaks at the same rows.
func TestPagesCutNothing(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			if g.percent > 0 || g.onePage {
				continue
			}
			ends := g.pageEnds()
			for _, p := range g.charts {
				if slices.ContainsFunc(ends, func(row int) bool { return row > p.row && row <= g.under(p) }) {
					t.Errorf("%s: a chart in row %d of %s is cut; pages start at %v", k.name, p.row, g.name, ends)
				}
			}
			if n := len(g.parts); n > 0 && g.chartsWithin(g.parts[n-1], g.last()) == 0 { // the last block runs on without breaks
				name := g.last()
				for name > g.parts[n-1] && !named(g, name) {
					name--
				}
				ends = slices.DeleteFunc(ends, func(row int) bool { return row > name+2 })
			}
			if len(g.parts) > 0 && !slices.Equal(ends, g.breaks) {
				t.Errorf("%s: pages of %s start at %v, breaks are at %v", k.name, g.name, ends, g.breaks)
			}
			for _, row := range g.breaks {
				if named(g, row-1) || named(g, row-2) {
					t.Errorf("%s: row %d of %s starts a page, the name of its block is on the one before", k.name, row, g.name)
				}
			}
		}
	}
}

// named reports whether a row holds the name of a block.
func named(g *grid, row int) bool {
	return row > 0 && row <= len(g.rows) && len(g.rows[row-1]) > 0 && g.rows[row-1][0].look == block
}

// pageEnds are the rows that start a page where breaks are or a page is full.
func (g *grid) pageEnds() (starts []int) {
	page, titles := g.pageRoom()
	used, first := 0.0, 1
	if len(g.printed) > 0 {
		used, first = titles, g.printed[0].first
	}
	for row := first; row <= max(g.last(), g.drawnTo()); row++ {
		if slices.Contains(g.breaks, row) || used+g.span(row, row) > page {
			starts, used = append(starts, row), titles
		}
		used += g.span(row, row)
	}
	return starts
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

// Costs prints its blocks below the lines of the bill one after the other: each printed
// area starts a page, and four routes leave it empty.
func TestCostsArePrintedTogether(t *testing.T) {
	m, err := newModel(jobReport(t, "acetonitrile"))
	if err != nil {
		t.Fatal(err)
	}
	l := lay(m)
	for _, g := range l.grids {
		if g.name == sheetCosts && (len(g.printed) != 1 || g.printed[0].first != l.headRows.first-3 || g.printed[0].last != l.rankRows.last || len(g.breaks) > 0) {
			t.Errorf("printed %v in pages from %v", g.printed, g.breaks)
		}
	}
}

// narrowUnit is the width in points of one unit of column width in the narrowest of the
// usual stand-ins: a digit of Liberation Sans Narrow is 0.456 of its size (from its file),
// 6.7 pixels at 11 points, which readers round to 7.
const narrowUnit = 5.25

// No chart reaches beyond the printed columns, in whatever typeface the sheet is printed.
func TestChartsFitInAnyTypeface(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			for _, p := range g.charts {
				room := 0.0
				for _, w := range g.widths[p.column-1 : g.printColumns] {
					room += w * narrowUnit
				}
				if width := float64(p.chart.Dimension.Width) * pixelPoints; width > room {
					t.Errorf("%s: a chart of %s is %.0f points wide, the columns from %s on have %.0f", k.name, g.name, width, columnName(p.column), room)
				}
			}
		}
	}
}

// The headings of a sheet that repeats them on each page all stand on its first page:
// another block of rows further on would have them twice where it starts a page.
func TestRepeatedHeadingsStandOnce(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			if g.mixed || g.frozenRows == 0 || g.percent > 0 || g.onePage {
				continue
			}
			ends := g.pageEnds()
			for r, row := range g.rows {
				if len(ends) > 0 && r+1 >= ends[0] && len(row) > 0 && row[0].look == heading {
					t.Errorf("%s: row %d of %s holds headings that stand on top of its page already", k.name, r+1, g.name)
				}
			}
		}
	}
}

// Each page of Read me begins with a list, none is cut: a list of lots that is longer than
// a page apart.
func TestReadMeCutsNoList(t *testing.T) {
	for _, k := range everyKind(t) {
		if len(k.layout.lots) > mostLotsDrawn {
			continue
		}
		g := k.layout.grids[0]
		page, titles := g.pageRoom()
		used := titles
		for row := frameRows + 2; row <= g.last(); row++ {
			if slices.Contains(g.breaks, row) {
				if !named(g, row) && !named(g, row+1) {
					t.Errorf("%s: row %d starts a page", k.name, row)
				}
				used = titles
			}
			if used += g.span(row, row); used > page {
				t.Errorf("%s: row %d does not fit on its page", k.name, row)
			}
		}
		if len(g.breaks) > 1 {
			t.Errorf("%s: pages start at %v", k.name, g.breaks)
		}
	}
}

// Each page of lists begins with the name of the list that goes on there, or of the one that
// starts, and with its headings: a column without its heading cannot be read. Readers that
// hold the least on a page may break the end of a sheet that fits on a page of the others.
func TestListsRepeatTheirHeadings(t *testing.T) {
	pages := 0
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			if g.listsFrom == 0 {
				continue
			}
			name := ""
			for row := g.listsFrom; row <= g.last(); row++ {
				if !named(g, row) {
					continue
				}
				before, again := strings.CutSuffix(g.rows[row-1][0].value.(string), " (continued)")
				if again && before != name {
					t.Errorf("%s: row %d of %s goes on with %q after %q", k.name, row, g.name, before, name)
				}
				name = before
			}
			for _, row := range g.pageEnds() {
				if row < g.listsFrom-1 {
					continue
				}
				if !slices.Contains(g.breaks, row) {
					_, titles := g.pageRoom()
					if used := titles + g.span(g.breaks[len(g.breaks)-1], g.last()); used > 0.98*printableHeight/g.scale() {
						t.Errorf("%s: row %d of %s is left to start a page; the last one takes %.0f points", k.name, row, g.name, used)
					}
					continue
				}
				pages++
				if !named(g, row) {
					row++ // a blank row leads the page
				}
				if !named(g, row) || g.rows[row][0].look != heading || g.rows[row][1].look != heading {
					t.Errorf("%s: the page of %s that starts at row %d has no headings", k.name, g.name, row)
				}
			}
		}
	}
	if pages < 10 {
		t.Errorf("only %d pages of lists", pages)
	}
}

// Lists move down by the headings that are repeated: nothing else in the workbook may count
// on their rows.
func TestListsAreText(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			for row := max(g.listsFrom, 1); g.listsFrom > 0 && row <= g.last(); row++ {
				for i, c := range g.rows[row-1] {
					if g.name == sheetBuying {
						if c.look == input || c.formula != "" && !strings.HasPrefix(c.formula, "SUM(M") {
							t.Errorf("%s: %s of %s does not stand for itself", k.name, at(i+1, row), g.name)
						}
					} else if c.formula != "" || c.isNumber() || c.look == input {
						t.Errorf("%s: %s of %s is more than text", k.name, at(i+1, row), g.name)
					}
				}
			}
		}
	}
}

// The prices of a job with one lot and the usual steps are one page.
func TestPricesOfOneLotAreOnePage(t *testing.T) {
	for _, job := range []string{"acetonitrile", "reclaimed-ethyl-acetate", "saturated-toluene"} {
		m, err := newModel(jobReport(t, job))
		if err != nil {
			t.Fatal(err)
		}
		for _, g := range lay(m).grids {
			if share := g.span(1, g.last()) * g.scale() / printableHeight; g.name == sheetPrices && share > 0.98 {
				t.Errorf("%s: Prices takes %.2f pages", job, share)
			}
		}
	}
}

// An order list of several pages has its headings on each, and its total takes in all of it.
func TestOrdersOfSeveralPages(t *testing.T) {
	copied := *demo(t)
	r := &copied
	list := slices.Clone(r.Buying.Purchases)
	for range 100 {
		list = append(list, list[0])
	}
	r.Buying.Purchases = list
	want := 0.0
	for _, p := range r.Buying.Purchases {
		for _, o := range p.Orders {
			want += float(o.Cost)
		}
	}
	b := readBook(t, written(t, r))
	heads, total := 0, math.NaN()
	for place, c := range b.cells[sheetBuying] {
		if c.text == "Specification" {
			heads++
		}
		if strings.HasPrefix(c.formula, "SUM(M") && strings.HasPrefix(place, "M") {
			total, _ = c.number()
		}
	}
	if heads < 3 {
		t.Errorf("the headings of 105 orders stand %d times", heads)
	}
	if !(math.Abs(total-want) < 0.005) {
		t.Errorf("all orders: %g, want %g", total, want)
	}
}

// The longest key of a solvent in the catalog stands on one line of Buying.
func TestItemsToBuyAreOnOneLine(t *testing.T) {
	copied := *demo(t)
	copied.Buying.Purchases = slices.Clone(copied.Buying.Purchases)
	copied.Buying.Purchases[0].Item = "2-methyltetrahydrofuran"
	m, err := newModel(&copied)
	if err != nil {
		t.Fatal(err)
	}
	for _, g := range lay(m).grids {
		if g.name != sheetBuying {
			continue
		}
		for r, row := range g.rows {
			if len(row) > 0 && row[0].value == "2-methyltetrahydrofuran" && wrapped("2-methyltetrahydrofuran", g.roomFor(1, r+1), 10, false) > 1 {
				t.Errorf("row %d: the key takes two lines", r+1)
			}
		}
	}
}

// Amounts of an item that differ a thousandfold fit in their columns, as those of drums of a
// solvent of which some drops are lost.
func TestAmountsToBuyHaveRoom(t *testing.T) {
	for _, v := range [][2]float64{{299.3438, 0.027}, {1448.4321, 0.0113}, {48000, 0.5}, {99999.6, 0.004}} {
		copied := *demo(t)
		copied.Buying.Purchases = slices.Clone(copied.Buying.Purchases)
		p := &copied.Buying.Purchases[0]
		p.Process, p.Losses, p.ToBuy = v[0], v[1], v[0]+v[1]
		m, err := newModel(&copied)
		if err != nil {
			t.Fatal(err)
		}
		for _, g := range lay(m).grids {
			for r, row := range g.rows {
				for c, x := range row {
					if g.name == sheetBuying && c < len(g.widths) {
						hasRoom(t, g, c+1, r+1, x)
					}
				}
			}
		}
	}
}
