package workbook

func (l *layout) buying() *grid {
	g := newGrid(sheetBuying, "What to order for a year of the recommended routes, all lots together.",
		tabResult, checkCell(), 26, 30, 14, 14, 14, 14)
	g.mixed, g.frozenRows = true, frameRows
	l.banner(g, frameRows+2)
	return g
}
