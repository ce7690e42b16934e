package workbook

import (
	"slices"
	"strings"
)

// part marks the row at which a part starts that is to stay on one printed page.
func (g *grid) part(row int) { g.parts = append(g.parts, row) }

// mostUsed is the share of a page above which a part that runs on starts the next one.
const mostUsed = 0.7

// entryRow is how far below the name of a block its first entry stands.
const entryRow = 2

// paginate sets the page breaks of a sheet with parts. A part stays on the page of the one
// before if it fits there, else it starts a page. A part that is longer than a page, and
// each of a sheet that flows, runs on, and is broken where the least that a page holds is
// full: readers differ in what it holds, and would differ in what follows. The last
// block is left to the reader, but for its headings, which stay with its first entry;
// lists repeat their headings on each page, so that they are broken as far as it takes.
func (g *grid) paginate() {
	if len(g.parts) == 0 || len(g.breaks) > 0 {
		return
	}
	page, titles := g.pageRoom()
	used, start := 0.0, 1
	if len(g.printed) > 0 {
		used, start = titles, g.printed[0].first
	}
	for i := 0; i <= len(g.parts); i++ {
		if i > 0 {
			start = g.parts[i-1]
		}
		end := max(g.last(), g.drawnTo())
		if i < len(g.parts) {
			end = g.parts[i] - 2 // a row between parts is blank
		}
		if i > 0 {
			whole := used+rowPoints+g.chartsWithin(start, end) <= page*chartFilled/pageFilled
			fits := used+rowPoints+g.span(start, end) <= page && whole
			long := titles+rowPoints+g.span(start, end) > page
			runsOn := (long || g.flows) && used < mostUsed*page && whole
			switch {
			case fits || runsOn:
				used += rowPoints
			case !g.free() || used+rowPoints > page || g.chartsWithin(start, start) > 0: // the blank row leads the page
				g.breaks = append(g.breaks, start-1)
				used = titles + rowPoints
			default:
				g.breaks = append(g.breaks, start)
				used = titles
			}
		}
		if i == len(g.parts) && !g.isList(end) && g.chartsWithin(start, end) == 0 {
			end = min(end, g.lastBlock(start, end)+entryRow)
		}
		used = g.runOn(start, end, used, page, titles)
	}
}

// runOn fills pages with rows and returns what is used of the last. The name of a block, its
// headings and its first entry stay together; a list has them again where it goes on.
func (g *grid) runOn(first, last int, used, page, titles float64) float64 {
	for row := first; row <= last; row++ {
		together := row
		if g.isBlock(row) {
			together = min(row+entryRow, last)
		}
		if used+g.span(row, together) > page && used > titles {
			if g.endsHere(row, last, used, page) {
				return used
			}
			if g.isList(row) && !g.isBlock(row) && !g.blankRow(row) && g.hasHeadings(g.lastBlock(g.listsFrom, row)) {
				last += g.headAgain(row)
			}
			g.breaks = append(g.breaks, row)
			used = titles
		}
		used += g.span(row, row)
	}
	return used
}

// fullPage is the share of a page that the end of a sheet may take.
const fullPage = 0.98

// endsHere reports whether the rest of the last list fits on the page of most readers: it is
// left to the others to break, rather than to have a page of a few lines everywhere.
func (g *grid) endsHere(row, last int, used, page float64) bool {
	return g.isList(row) && last == g.last() && row > g.lastBlock(g.listsFrom, last)+entryRow &&
		used+g.span(row, last) <= page*fullPage/pageFilled
}

// hasHeadings reports whether headings stand below the name of a block.
func (g *grid) hasHeadings(name int) bool {
	return name < len(g.rows) && len(g.rows[name]) > 0 && g.rows[name][0].look == heading
}

// isList reports whether a row belongs to the lists of a sheet: what no formula reads but the
// total of the orders, which is written when they have their places.
func (g *grid) isList(row int) bool { return g.listsFrom > 0 && row >= g.listsFrom }

// headAgain puts the name of the list that a row belongs to and its headings above that row,
// and returns how many rows these take.
func (g *grid) headAgain(row int) (added int) {
	name := g.lastBlock(g.listsFrom, row)
	added = entryRow
	g.insert(row, added)
	g.put(1, row, text(block, strings.TrimSuffix(g.rows[name-1][0].value.(string), continued)+continued))
	for i, c := range g.rows[name] {
		g.put(i+1, row+1, c)
	}
	for _, m := range g.merged {
		if m.row == name+1 {
			g.merged = append(g.merged, merge{row + 1, m.first, m.last})
		}
	}
	return added
}

// continued stands behind the name of a list that began on a page before.
const continued = " (continued)"

// insert makes room for some rows of a list. What lists hold moves; a formula, a mark or an
// input stands in none yet.
func (g *grid) insert(row, count int) {
	g.rows = slices.Insert(g.rows, row-1, make([][]cell, count)...)
	for i := range g.merged {
		if g.merged[i].row >= row {
			g.merged[i].row += count
		}
	}
	for i := range g.parts {
		if g.parts[i] >= row {
			g.parts[i] += count
		}
	}
	heights := make(map[int]float64, len(g.heights))
	for r, h := range g.heights {
		if r >= row {
			r += count
		}
		heights[r] = h
	}
	g.heights = heights
}

// isBlock reports whether a row has the name of a block.
func (g *grid) isBlock(row int) bool {
	return row <= len(g.rows) && len(g.rows[row-1]) > 0 && g.rows[row-1][0].look == block
}

// lastBlock is the row with the name of the last block within some rows; the first of them
// where they have none.
func (g *grid) lastBlock(first, last int) int {
	for row := last; row > first; row-- {
		if g.isBlock(row) {
			return row
		}
	}
	return first
}

// chartsWithin is how far below a row the charts that stand on some rows reach, in
// points; 0 where there is none.
func (g *grid) chartsWithin(first, last int) (points float64) {
	for _, p := range g.charts {
		if p.row >= first && p.row <= last {
			points = max(points, g.span(first, g.under(p)))
		}
	}
	return points
}
