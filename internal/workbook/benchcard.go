package workbook

func (l *layout) benchCard() *grid {
	g := newGrid(sheetBenchCard, "One printed side for each lot. Choose the route in the blue cell.",
		tabResult, checkCell(), 26, 30, 14, 14, 14, 14)
	g.mixed, g.frozenRows = true, frameRows
	l.banner(g, frameRows+2)
	return g
}
