package workbook

// part marks the row at which a part starts that is to stay on one printed page.
func (g *grid) part(row int) { g.parts = append(g.parts, row) }

// mostUsed is the share of a page above which a part that is longer than a page starts
// the next one.
const mostUsed = 0.6

// paginate sets the page breaks of a sheet. A part stays on the page of the one before
// if it fits there, else it starts a page. A part that is longer than a page runs on:
// where it ends is known only roughly, since readers differ in what a page holds, and a
// part with a chart does not follow it on its page.
func (g *grid) paginate() {
	page, titles := g.pageRoom()
	used, first := 0.0, 1
	if len(g.printed) > 0 {
		used, first = titles, g.printed[0].first
	}
	starts := append([]int{first}, g.parts...)
	sure := true
	for i, start := range starts {
		end := max(g.last(), g.drawnTo())
		if i+1 < len(starts) {
			end = starts[i+1] - 2 // a row between parts is blank
		}
		height := g.span(start, end)
		charts := g.chartsWithin(start, end)
		fits := used+rowPoints+height <= page && (sure || charts == 0)
		runsOn := height > page-titles-rowPoints && used < mostUsed*page && used+rowPoints+charts <= page
		switch {
		case i == 0:
		case fits || runsOn:
			used += rowPoints
		default:
			g.breaks = append(g.breaks, start-1) // the blank row leads the page
			used, sure = titles+rowPoints, true
		}
		for used += height; used > page; used -= page - titles {
			sure = false
		}
	}
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
