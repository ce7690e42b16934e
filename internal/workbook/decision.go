package workbook

import (
	"fmt"
	"strings"
)

// Columns of Decision. Those from decidePlace on are not printed.
const (
	decideLot = 1 + iota
	decideWhat
	decideRoute
	decideCost
	decideLow
	decideHigh
	decideAttended
	decideWater
	decideChance
	decidePlace
	decideKey
	decideRow
	decideRun
)

// The most lots that are tried on the one page: in full, and in a line each.
const (
	mostInFull  = 6
	mostInLines = 60
)

// leastLetters is the size in points in which running text is printed at least.
const leastLetters = 7

// decision is the page to sign. It holds as many lots in full as stand on it in
// letters that can be read, the others in a line each, and if these are too many, says
// how many are left out. Before a lot loses its sentences, all lots name less of what
// would change the choice.
func (l *layout) decision() *grid {
	n := len(l.lots)
	for full := min(n, mostInFull); full > 0; full-- {
		for most := mostNamed; most > 0; most-- {
			if g := l.decisionOf(full, n-full, most); g.legible(rows{1, g.last()}) || n+most == 2 {
				return g
			}
		}
	}
	lines := min(n, mostInLines)
	for ; lines > 1; lines-- {
		if g := l.decisionOf(0, lines, 0); g.legible(rows{1, g.last()}) {
			return g
		}
	}
	return l.decisionOf(0, lines, 0)
}

// mostNamed break-evens and inputs that move the result are named for each lot; Ranges
// has them all.
const mostNamed = 3

// legible reports whether rows that print on a page of their own do so in letters that
// can be read.
func (g *grid) legible(r rows) bool {
	return g.pageScale(r)*paints[words].size >= leastLetters
}

// decisionOf shows the first lots in full, each with the most that is named of what
// would change the choice, and the next ones in a line each.
func (l *layout) decisionOf(full, lines, most int) *grid {
	g := newGrid(sheetDecision, "To sign: what is recommended for each lot, why, and what would change it. The table follows the prices; sentences are those of the run.",
		tabResult, checkCell(), 8, 14, 28, 11, 9.5, 9.5, 10, 9, 9, 7, 8, 7, 24)
	g.printColumns = decideChance
	g.mixed, g.frozenRows, g.portrait, g.onePage = true, frameRows, true, true
	l.banner(g, frameRows+1)
	g.across(1, decideChance, frameRows+1, words, l.ofRun()+". "+shortened(l.report.Job.Title, mostTitle))
	first := l.decideTable(g, full, lines)
	g.put(1, g.last()+1, blank(plain))
	for i, lot := range l.lots[:full] {
		l.decideFull(g, lot, first[i], l.lots[:full], most)
	}
	l.sharedControls(g, l.lots[:full])
	l.assumptionRows(g)
	l.signRows(g)
	return g
}

// decideFull says of a lot what is asked of it and why its route is recommended. The
// route stands in the given row of the table.
func (l *layout) decideFull(g *grid, lot *lotModel, row int, all []*lotModel, most int) {
	l.says(g, "", fmt.Sprintf("%s: %s.", capital(shortened(lot.Job.Name, mostTitle)), lot.asked()))
	g.put(1, g.last(), text(block, fmt.Sprintf("Lot %d", lot.no)))
	g.heights[g.last()] = max(g.height(g.last()), lotHeight)
	l.says(g, "Why", l.verdict(lot))
	l.agree(g, g.last(), row, lot)
	best := lot.best()
	if best == nil {
		return
	}
	if own := ownHazards(lot, all); len(own) > 0 {
		l.says(g, "Hazards, controls", strings.Join(own, " "))
	}
	l.says(g, "What would change it", turns(lot, most))
	l.says(g, "What it turns on", doubts(lot, best, most))
}

const lotHeight = 18 // points, of the row that begins a lot

// says writes a label and running text beside it.
func (l *layout) says(g *grid, label, s string) {
	row := g.last() + 1
	g.across(1, decideWhat, row, words, label)
	g.across(decideRoute, decideChance, row, words, s)
}

// agree makes a label tell when the route that leads now, in a row of the table, is
// not the one that the sentences are of.
func (l *layout) agree(g *grid, row, place int, lot *lotModel) {
	const agrees, differs = "Why", "Another route leads: " + runAgain
	ofRun, leads := "none", "none"
	if best := lot.best(); best != nil {
		ofRun = best.ID
	}
	if list := lot.sureRoutes(l.report.Job.Assurance); len(list) > 0 {
		leads = list[0].ID
	}
	value := agrees
	if leads != ofRun {
		value = differs
	}
	g.put(decideRun, place, text(program, ofRun))
	now, run := at(decideRoute, place), at(decideRun, place)
	g.put(1, row, cell{look: words, formula: fmt.Sprintf(`IF(%s=%s,"%s","%s")`, now, run, agrees, differs), value: value})
	g.heights[row] = max(g.height(row), linesHigh(2)) // of the longer label
	g.flags = append(g.flags, flag{at(1, row), fmt.Sprintf("$%s<>$%s", now, run), warn})
}

// sharedControls are the cautions that hold for several of the lots, each once.
func (l *layout) sharedControls(g *grid, lots []*lotModel) {
	for _, c := range sharedCautions(lots) {
		label := "Controls for every lot"
		if len(c.lots) < len(lots) {
			label = "Controls for lots " + strings.Join(c.lots, ", ")
		}
		l.says(g, label, strings.Join(c.texts, " "))
	}
}

// mostTitle is as much of a name as a title line holds.
const mostTitle = 70

func shortened(s string, most int) string {
	s = oneLine(s)
	if r := []rune(s); len(r) > most {
		return string(r[:most-1]) + "…"
	}
	return s
}
