package workbook

// curvesPrinted rows of Curves are printed: tables are for looking up, not for paper.
const curvesPrinted = 40

// workPages are the rows that the working sheets print: the blocks with a row for
// each step or route, not what they are computed from.
func (l *layout) workPages() {
	for _, g := range l.grids {
		switch {
		case g.name == sheetCurves:
			g.printed = []rows{{1, min(g.last(), curvesPrinted)}}
		case g.name == sheetSteps && !l.flowRows.empty():
			g.heads = rows{l.flowRows.first - 2, l.flowRows.first - 1}
			g.printed = []rows{{g.heads.first, l.flowRows.last}}
		case g.name == sheetCosts && !l.headRows.empty():
			g.printed = []rows{{l.headRows.first - 3, l.rankRows.last}} // from the blank row above; one area: each starts a page
		}
	}
}
