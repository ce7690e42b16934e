package workbook

import (
	"strings"

	"parch/internal/study"
)

// weakKinds are the lists of weak numbers: what their entries begin with, which the list
// leaves off where its name says it. The last takes all others.
var weakKinds = []struct{ name, begin, off string }{
	{"Weak prices", "price of ", ""},
	{"Weak numbers of practice", "practice: ", "practice: "},
	{"Weak numbers of substances, apparatus and the rest", "", ""},
}

func (l *layout) sources() *grid {
	g := newGrid(sheetSources, "Where the numbers come from. Numbers that rest on memory, common practice or an assumption are listed first.",
		tabText, checkCell(), 48, 20, 18, 22, 58)
	g.mixed, g.frozenRows, g.flows = true, frameRows, true
	g.listsFrom = g.next()
	left := l.report.Weak
	for _, kind := range weakKinds {
		var rest []study.Weak
		var list []study.Weak
		for _, w := range left {
			if strings.HasPrefix(w.What, kind.begin) {
				w.What = strings.TrimPrefix(w.What, kind.off)
				list = append(list, w)
			} else {
				rest = append(rest, w)
			}
		}
		g.weakBlock(kind.name, list)
		left = rest
	}
	if len(l.report.Weak) == 0 {
		g.put(1, g.next(), text(plain, "No number is weak."))
	}
	g.part(g.next())
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

// weakBlock lists the weak numbers of a kind, if there are any.
func (g *grid) weakBlock(name string, list []study.Weak) {
	if len(list) == 0 {
		return
	}
	if g.last() > frameRows {
		g.part(g.next())
	}
	row := g.table(g.next(), name+": treat results that depend on them with care",
		[]column{{name: "What"}, {name: "Value"}, {name: "Rests on"}, {name: "Source"}, {name: "Note"}})
	for _, w := range list {
		g.putRow(row, text(words, w.What), text(program, w.Value), text(warn, w.Confidence), text(words, w.Source), text(words, w.Note))
		row++
	}
}
