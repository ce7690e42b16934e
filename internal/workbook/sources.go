package workbook

func (l *layout) sources() *grid {
	g := newGrid(sheetSources, "Where the numbers come from. Numbers that rest on memory, common practice or an assumption are listed first.",
		tabText, checkCell(), 34, 26, 20, 26, 60)
	first := g.table(frameRows+2, "Weak numbers: treat results that depend on them with care",
		[]column{{name: "What"}, {name: "Value"}, {name: "Rests on"}, {name: "Source"}, {name: "Note"}})
	g.mixed, g.frozenRows = true, frameRows
	for i, w := range l.report.Weak {
		g.putRow(first+i, text(words, w.What), text(program, w.Value), text(warn, w.Confidence), text(words, w.Source), text(words, w.Note))
	}
	if len(l.report.Weak) == 0 {
		g.put(1, first, text(plain, "none"))
	}
	row := g.table(g.next(), "References", []column{{name: "Source id"}, {name: "Reference"}, {}, {}, {}})
	for _, s := range l.report.Sources {
		g.putRow(row, text(words, s.ID))
		g.across(2, len(g.widths), row, words, s.Reference)
		row++
	}
	if len(l.report.Sources) == 0 {
		g.put(1, row, text(plain, "none"))
	}
	return g
}
