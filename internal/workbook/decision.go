package workbook

func (l *layout) decision() *grid {
	g := newGrid(sheetDecision, "One page to sign: what is recommended for each lot, why, and what would change the choice.",
		tabResult, checkCell(), 26, 30, 14, 14, 14, 14)
	g.mixed, g.frozenRows = true, frameRows
	l.banner(g, frameRows+2)
	return g
}
