package workbook

import (
	"fmt"
	"math"

	"parch/internal/spread"
	"parch/internal/study"
)

// Columns of the ranges, one row per route in the order of Compare.
const (
	rangeChance = 3 + iota
	rangeSure
	rangeWater // low, median, high
	rangeLitre = rangeWater + 3
	rangeHours = rangeLitre + 3
	rangeShare = rangeHours + 3
	rangeRank  = rangeShare + 1
	rangeLot   = rangeRank + 1 // not printed
	rangeKey   = rangeLot + 1  // orders the routes that are sure enough by lot, then by rank
)

const notDrawn = "not drawn"

// seen is a value of the program that nothing is computed from.
func seen(v float64, unit, format string) cell { return finite(cutTo(v, shownDigits), unit, format) }

// drawn is a value of the draws, or the words that say that there is none.
func drawn(v float64, unit, format string) cell {
	if math.IsNaN(v) {
		return text(program, notDrawn)
	}
	return seen(v, unit, format)
}

func (l *layout) ranges() *grid {
	lot, route := l.keyWidths(61) // questions and points stand in the column of routes, and two charts on a page
	g := newGrid(sheetRanges, "How sure the figures are, what moves them, and where the choice turns. Values of the program; ranks and the cost against litres a month follow the prices.",
		tabResult, checkCell(), lot, route, 10.5, 12, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 10.5, 8, 8)
	g.printColumns = rangeRank
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 2
	l.banner(g, frameRows+1)
	l.rangeBlock(g)
	g.part(g.below())
	l.moverBlock(g) // above the charts: it fills the page of the ranges
	l.rangeCharts(g)
	g.part(g.below())
	l.breakEvenBlock(g)
	g.part(g.below())
	l.frontBlock(g)
	l.whatIfBlocks(g)
	l.volumeBlocks(g)
	return g
}

// below is the first row of a new block, under charts too.
func (g *grid) below() int { return max(g.last(), g.drawnTo()) + 2 }

func (l *layout) rangeBlock(g *grid) {
	three := func(name, unit string) []column {
		return []column{{name + ", 5 %", unit}, {name + ", median", unit}, {name + ", 95 %", unit}}
	}
	columns := []column{{name: "Lot"}, {name: "Route id"}, {"Chance of target", "%"}, {name: "Sure enough"}}
	columns = append(columns, three("Water", "mg/kg")...)
	columns = append(columns, three("Cost per litre", l.money("L"))...)
	columns = append(columns, three("Hours", "h")...)
	columns = append(columns, column{"Cheapest in draws", "%"}, column{"Rank where sure enough", "1"},
		column{"Lot no.", "1"}, column{"Key", "1"})
	name := fmt.Sprintf("Nine draws in ten lie between 5 %% and 95 %%. Sure enough: a chance of at least %.0f %%", 100*l.report.Job.Assurance)
	if l.report.Draws == 0 {
		name = "Ranges and chances: not drawn in this run"
	}
	first := g.table(g.next(), name, columns)
	l.rangeRows = rows{first, first + len(l.routes) - 1}
	for i, r := range l.routes {
		l.rangeRow(g, i, r)
	}
	l.noRoutes(g, first, len(l.routes))
	if !l.rangeRows.empty() {
		place := fmt.Sprintf("D%d:D%d", first, l.rangeRows.last)
		g.flags = append(g.flags, flag{place, fmt.Sprintf(`$D%d="yes"`, first), pass}, flag{place, fmt.Sprintf(`$D%d="no"`, first), warn})
	}
}

// bands are water (mg/kg), cost per litre and hours; NaN where not drawn.
func (r *routeModel) bands() [3]spread.Band {
	none := spread.Band{Low: math.NaN(), Median: math.NaN(), High: math.NaN()}
	if r.Range == nil {
		return [3]spread.Band{none, none, none}
	}
	water, litre := r.Range.Water, none
	if r.Range.CostPerLitre != nil {
		litre = *r.Range.CostPerLitre
	}
	return [3]spread.Band{{Low: water.Low * mgPerKg, Median: water.Median * mgPerKg, High: water.High * mgPerKg}, litre, r.Range.Hours}
}

// chance in per cent; NaN where there is none.
func (r *routeModel) chance() float64 {
	if r.Range == nil || r.Range.Chance == nil {
		return math.NaN()
	}
	return 100 * *r.Range.Chance
}

// sure says whether the chance is enough for a route to be recommended.
func (r *routeModel) sure(assurance float64) string {
	switch c := r.chance(); {
	case math.IsNaN(c):
		return notDrawn
	case tidy(c) >= tidy(100*assurance):
		return "yes"
	}
	return "no"
}

func (l *layout) rangeRow(g *grid, i int, r *routeModel) {
	row := l.rangeRows.at(i)
	g.putRow(row, text(words, r.lot.Job.Name), text(words, r.ID), drawn(r.chance(), "%", "0"),
		text(program, r.sure(l.report.Job.Assurance)))
	units, formats := [3]string{"mg/kg", l.money("L"), "h"}, [3]string{twoFigures, twoFigures, twoFigures}
	for k, b := range r.bands() {
		for j, v := range []float64{b.Low, b.Median, b.High} {
			g.put(rangeWater+3*k+j, row, drawn(v, units[k], formats[k]))
		}
	}
	share := math.NaN()
	if r.Range != nil {
		share = 100 * r.Range.CheapestShare
	}
	g.put(rangeShare, row, drawn(share, "%", "0"))
	var rank any = ""
	if r.rank > 0 && r.sure(l.report.Job.Assurance) != "no" {
		rank = float64(r.rank)
	}
	g.put(rangeRank, row, derived(fmt.Sprintf(`IF(D%d="no","",%s)`, row, on(sheetCompare, at(compareRank, l.compareRows.at(i)))), rank).shown("0"))
	g.put(rangeLot, row, count(r.lot.no))
	key := rank
	if v, ranked := rank.(float64); ranked {
		key = float64(r.lot.no*len(l.routes)) + v
	}
	all := area(rangeRank, l.rangeRows.first, l.rangeRows.last)
	g.put(rangeKey, row, derived(fmt.Sprintf(`IF(LEN(O%d)>0,P%d*ROWS(%s)+O%d,"")`, row, row, all, row), key).shown("0"))
}

// moverBlock lists the inputs that move the results of the route to take.
func (l *layout) moverBlock(g *grid) {
	row := g.table(g.below(), "What moves the result of the route to take: rank correlation, -1 to 1, the strongest first",
		[]column{{name: "Lot"}, {name: "Route id"}, {name: "Result"}, {"Correlation", "1"}, {name: "Input"}})
	headAcross(g, row-1, 5, 8, "Input")
	headAcross(g, row-1, 9, 15, "Its spread rests on")
	start := row
	for _, lot := range l.lots {
		best := lot.Best()
		if best == nil || best.Range == nil {
			continue
		}
		for _, m := range best.Range.Movers {
			g.putRow(row, text(words, lot.Job.Name), text(words, best.ID), text(words, m.Of), number(m.Correlation, "1").shown("0.0"))
			g.across(5, 8, row, words, m.Input)
			g.across(9, 15, row, words, m.Why)
			row++
		}
	}
	if row == start {
		g.put(1, row, text(plain, notDrawn))
	}
}

// headAcross is a heading over several columns of running text.
func headAcross(g *grid, row, first, last int, s string) { g.across(first, last, row, heading, s) }

func (l *layout) breakEvenBlock(g *grid) {
	row := g.table(g.below(), "Break-evens: where the choice turns, all else as in the job, "+l.askedOf(),
		[]column{{name: "Lot"}, {name: "Question"}, {"Now", "1"}, {"Turns at", "1"}, {"Searched from", "1"}, {"Searched to", "1"}, {name: "Unit"}})
	headAcross(g, row-1, 8, 15, "Answer")
	start := row
	for _, lot := range l.lots {
		for _, b := range lot.BreakEvens {
			unit := b.Unit
			if unit == "" {
				unit = "1"
			}
			format := formatFor(tidy(b.Now), tidy(b.At), tidy(b.From), tidy(b.To))
			g.putRow(row, text(words, lot.Job.Name), text(words, b.What), seen(b.Now, unit, format), seen(b.At, unit, format),
				seen(b.From, unit, format), seen(b.To, unit, format), text(plain, unit))
			g.across(8, 15, row, words, b.Answer)
			row++
		}
	}
	if row == start {
		g.put(1, row, text(plain, "none were sought in this run"))
	}
}

func (l *layout) frontBlock(g *grid) {
	row := g.table(g.below(), "Trade-off of cost, attended time, waste and energy: no other route is better in one of them and no worse in the rest, or the one that is, is named",
		[]column{{name: "Lot"}, {name: "Route id"}, {"Cost per litre", l.money("L")}, {"Hours attended", "h"}, {"Waste", "kg"}, {"Energy", "kWh"}, {name: "State"}})
	headAcross(g, row-1, 8, 15, "No worse in all four and better in one")
	start := row
	for _, lot := range l.lots {
		for _, p := range lot.Front {
			state := "on the front"
			if p.DominatedBy != "" {
				state = "beaten"
			}
			g.putRow(row, text(words, lot.Job.Name), text(words, p.ID), seen(p.CostPerLitre, l.money("L"), moneyFormat),
				seen(p.HoursAttended, "h", decimals(2)), seen(p.WasteKg, "kg", decimals(3)), seen(p.EnergyKWh, "kWh", decimals(2)), text(plain, state))
			g.across(8, 15, row, words, p.DominatedBy)
			row++
		}
	}
	if row == start {
		g.put(1, row, text(plain, "none in this run"))
	}
}

// askedOf tells which routes the break-evens are asked of, where that is the same for all
// lots.
func (l *layout) askedOf() string {
	said := l.lots[0].BreakEvensOf()
	for _, lot := range l.lots[1:] {
		if lot.BreakEvensOf() != said {
			return "where a route is sure enough: of those that are, as sure as now"
		}
	}
	return said
}

const (
	whatIfStart = 2  // column of the start water
	mostWhatIf  = 12 // columns of targets fit on the sheet
)

func (l *layout) whatIfBlocks(g *grid) {
	for _, lot := range l.lots {
		if w := lot.WhatIf; w != nil && len(w.Target) > 0 && len(w.StartWater) > 0 {
			g.part(g.below())
			l.whatIfBlock(g, lot, w)
		}
	}
}

// whatIfBlock shows the cheapest route over start water and target: the routes,
// then their costs. Where there is room for it, each target has two columns: ids are long.
func (l *layout) whatIfBlock(g *grid, lot *lotModel, w *study.WhatIf) {
	targets := w.Target[:min(len(w.Target), mostWhatIf)]
	wide := 1
	if 2*len(targets) <= g.printColumns-whatIfStart {
		wide = 2
	}
	last := func(j int) int { return whatIfStart + (j+1)*wide } // column of a target
	block := func(name string, put func(row, first, last int, c study.WhatIfCell)) {
		row := g.table(g.below(), name, []column{{name: "Lot"}, {"Start water", "mg/kg"}})
		for j, t := range targets {
			g.put(last(j)-wide+1, row-1, blank(heading))
			h := text(heading, column{fmt.Sprintf("to %s", significant(t*mgPerKg)), "mg/kg"}.heading())
			h.right = true
			g.put(last(j), row-1, h)
		}
		format := formatFor(each(w.StartWater, func(x float64) float64 { return tidy(x * mgPerKg) })...)
		for i, start := range w.StartWater {
			g.putRow(row, text(words, lot.Job.Name), number(start*mgPerKg, "mg/kg").shown(format))
			for j := range targets {
				put(row, last(j)-wide+1, last(j), w.Cells[i][j])
			}
			row++
		}
	}
	block(fmt.Sprintf("Lot %d, what if: the cheapest route for other starts and targets, %s", lot.no, lot.AskedOf()), func(row, first, last int, c study.WhatIfCell) {
		g.put(last, row, blank(program))
		if first < last {
			g.merged = append(g.merged, merge{row, first, last})
		}
		s := c.Note
		if c.ID != "" {
			s, _ = folded(c.ID, g.roomFor(first, row), paints[program].size, false)
		}
		g.put(first, row, text(program, s))
	})
	block(fmt.Sprintf("Lot %d, what if: its cost per litre, %s", lot.no, l.money("L")), func(row, first, last int, c study.WhatIfCell) {
		g.put(first, row, blank(program))
		g.put(last, row, seen(c.CostPerLitre, l.money("L"), moneyFormat))
	})
}
