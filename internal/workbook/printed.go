package workbook

// curvesPrinted rows of Curves are printed: tables are for looking up, not for paper.
const curvesPrinted = 40

// workPages are the rows that the working sheets print: the blocks with a row for
// each step or route, not what they are computed from.
func (l *layout) workPages() {
	withHeading := func(r rows) rows { return rows{r.first - 2, r.last} } // its name and its columns
	for _, g := range l.grids {
		var blocks []rows
		switch g.name {
		case sheetCurves:
			g.printed = []rows{{1, min(g.last(), curvesPrinted)}}
		case sheetSteps:
			blocks = []rows{l.flowRows}
		case sheetCosts:
			blocks = []rows{l.headRows, l.rankRows}
		}
		for _, r := range blocks {
			if !r.empty() {
				g.printed = append(g.printed, withHeading(r))
			}
		}
	}
}
