package workbook

// curvesPrinted rows of Curves are printed: tables are for looking up, not for paper.
const curvesPrinted = 40

// workPages are the rows that the working sheets print: the blocks with a row for
// each step or route, not what they are computed from.
func (l *layout) workPages() {
	withHeading := func(first, last rows) []rows { return []rows{{first.first - 2, last.last}} } // its name and its columns
	for _, g := range l.grids {
		switch {
		case g.name == sheetCurves:
			g.printed = []rows{{1, min(g.last(), curvesPrinted)}}
		case g.name == sheetSteps && !l.flowRows.empty():
			g.printed = withHeading(l.flowRows, l.flowRows)
		case g.name == sheetCosts && !l.headRows.empty():
			g.printed = withHeading(l.headRows, l.rankRows) // one area: each starts a page
		}
	}
}
