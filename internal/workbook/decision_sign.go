package workbook

// mostAssumptions stand on the page to sign; Sources has them all.
const mostAssumptions = 5

func (l *layout) assumptionRows(g *grid) {
	list := l.assumptions(mostAssumptions)
	if len(list) == 0 {
		return
	}
	row := g.next()
	g.across(1, decideChance, row, block, "Assumptions that carry most of the cost of these routes, and their age on "+l.runDate())
	g.across(1, decideRoute, row+1, heading, "What")
	g.put(decideCost, row+1, text(heading, "Date"))
	g.put(decideLow, row+1, cell{look: heading, value: "Age / d", right: true})
	g.across(decideHigh, decideChance, row+1, heading, "Rests on")
	for i, a := range list {
		r := row + 2 + i
		g.across(1, decideRoute, r, program, a.what+": "+a.value)
		g.put(decideCost, r, text(program, orWords(a.date, "no date")))
		g.put(decideLow, r, finite(l.ageDays(a.date), "d", "0"))
		g.across(decideHigh, decideChance, r, program, a.rests)
	}
}

func orWords(s, none string) string {
	if s == "" {
		return none
	}
	return s
}

// signRows are to be filled in by hand.
func (l *layout) signRows(g *grid) {
	row := g.next()
	g.across(1, decideChance, row, block, "To be filled in: site rules, safety data sheets, local codes and licensed practice decide")
	for i, labels := range [][2]string{{"Prepared by, date", "Checked by, date"}, {"Safety reviewed, date", "Review this page on"}} {
		g.across(1, decideWhat, row+1+i, words, labels[0])
		g.put(decideRoute, row+1+i, blank(field))
		g.across(decideCost, decideLow, row+1+i, words, labels[1])
		g.field(decideHigh, decideChance, row+1+i)
		g.heights[row+1+i] = signHeight
	}
	last := row + 3
	g.across(1, decideRoute, last, words, "Quantity in the room against the local fire code: litres allowed, litres present, by, date")
	g.field(decideCost, decideChance, last)
	g.heights[last] = max(signHeight, g.height(last))
}

// field is left open over several columns.
func (g *grid) field(first, last, row int) {
	for column := first; column <= last; column++ {
		g.put(column, row, blank(field))
	}
	g.merged = append(g.merged, merge{row, first, last})
}

const signHeight = 22 // points: room for a hand
