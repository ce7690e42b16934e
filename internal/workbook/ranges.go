package workbook

func (l *layout) ranges() *grid {
	g := newGrid(sheetRanges, "How sure the figures are. Values of the program; they change only by a new run.",
		tabResult, checkCell(), 26, 30, 14, 14, 14, 14)
	g.mixed, g.frozenRows = true, frameRows
	l.banner(g, frameRows+2)
	return g
}
