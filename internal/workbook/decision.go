package workbook

import (
	"fmt"
	"math"
	"strings"
)

// Columns of Decision.
const (
	decidePlace = 1 + iota
	decideWhat
	decideRoute
	decideCost
	decideLow
	decideHigh
	decideAttended
	decideWater
	decideChance
	decideRow
)

// What fits on the one page: lots in full, lots in a line each, and lines in all,
// where a lot in full takes fullLines.
const (
	mostInFull  = 3
	mostInLines = 24
	fullLines   = 14
	shortLines  = 2
	pageLines   = 48
)

func (l *layout) decision() *grid {
	g := newGrid(sheetDecision, "To sign: what is recommended for each lot, why, and what would change it. Routes, costs and ranks follow the prices; sentences are those of the run.",
		tabResult, checkCell(), 7, 19, 31, 11, 11, 11, 10, 10, 11, 7)
	g.printColumns = decideChance
	g.mixed, g.frozenRows, g.portrait, g.onePage = true, frameRows, true, true
	l.banner(g, frameRows+1)
	g.across(1, decideChance, frameRows+1, words, l.ofRun()+". "+shortened(l.report.Job.Title, mostTitle))
	full := l.inFull()
	if full == mostInFull {
		g.widths[decideRoute-1] += 8 // fewer lines
	}
	common := commonHazards(l.lots[:full])
	for _, lot := range l.lots[:full] {
		l.decideFull(g, lot, common)
	}
	if len(common) > 0 {
		g.put(1, g.last()+1, blank(plain))
		l.says(g, "Controls for every lot above", strings.Join(common, " "))
	}
	l.decideShort(g, l.lots[full:])
	l.assumptionRows(g)
	l.signRows(g)
	return g
}

// inFull is how many lots the page holds in full, beside a line for each other.
func (l *layout) inFull() int {
	n := len(l.lots)
	for full := min(n, mostInFull); full > 0; full-- {
		if full*fullLines+min(n-full, mostInLines)*shortLines <= pageLines {
			return full
		}
	}
	return 0
}

func (l *layout) decideHeading(g *grid, row int) {
	unit := l.money("L")
	for i, c := range []column{{"Place", "1"}, {name: "What"}, {name: "Route id"}, {"In spec", unit}, {"5 %", unit}, {"95 %", unit},
		{"Attended", "h"}, {"Water", "mg/kg"}, {"Chance", "%"}, {"Row", "1"}} {
		h := text(heading, c.heading())
		h.right = c.unit != ""
		g.put(i+1, row, h)
	}
}

// sureRoutes are the routes that can be recommended, by rank.
func (lot *lotModel) sureRoutes(assurance float64) (list []*routeModel) {
	for _, r := range lot.routes {
		if r.rank > 0 && r.sure(assurance) != "no" {
			list = append(list, r)
		}
	}
	sortBy(list, func(r *routeModel) float64 { return float64(r.rank) })
	return list
}

// pick is a figure of the route in a place: where the routes of all lots have it,
// and what it is.
type pick struct {
	column       int
	from         func(column int) string
	source       int
	unit, format string
	value        func(r *routeModel) float64
}

// placeRow shows the route of a place among those of a lot that are sure enough.
func (l *layout) placeRow(g *grid, row, place int, what string, lot *lotModel) {
	g.put(decidePlace, row, count(place))
	g.put(decideWhat, row, text(words, what))
	if len(lot.routes) == 0 {
		g.put(decideRoute, row, text(words, "none"))
		return
	}
	places := rows{lot.routes[0].no - 1, lot.routes[len(lot.routes)-1].no - 1}
	of := func(sheet string, rr rows) func(int) string {
		return func(column int) string { return on(sheet, area(column, rr.at(places.first), rr.at(places.last))) }
	}
	compared, ranged := of(sheetCompare, l.compareRows), of(sheetRanges, l.rangeRows)
	list := lot.sureRoutes(l.report.Job.Assurance)
	index, r := 0, (*routeModel)(nil)
	if place <= len(list) {
		r = list[place-1]
		index = r.no - lot.routes[0].no + 1
	}
	g.put(decideRow, row, whole(fmt.Sprintf("IFERROR(MATCH(SMALL(%s,A%d),%s,0),0)", ranged(rangeRank), row, ranged(rangeRank)), index))
	id := any("none")
	if r != nil {
		id = r.ID
	}
	g.put(decideRoute, row, cell{look: words, formula: fmt.Sprintf(`IF($J%d=0,"none",INDEX(%s,$J%d))`, row, compared(2), row), value: id})
	l.pickRow(g, row, r, []pick{
		{decideCost, compared, compareLitre, l.money("L"), moneyFormat, func(r *routeModel) float64 { return r.perLitre }},
		{decideLow, ranged, rangeLitre, l.money("L"), moneyFormat, func(r *routeModel) float64 { return tidy(r.bands()[1].Low) }},
		{decideHigh, ranged, rangeLitre + 2, l.money("L"), moneyFormat, func(r *routeModel) float64 { return tidy(r.bands()[1].High) }},
		{decideAttended, compared, compareAttended, "h", decimals(2), func(r *routeModel) float64 { return tidy(r.Run.HoursAttended) }},
		{decideWater, compared, compareWater, "mg/kg", decimals(2), func(r *routeModel) float64 { return r.waterOut }},
		{decideChance, ranged, rangeChance, "%", "0", func(r *routeModel) float64 { return tidy(r.chance()) }},
	})
}

func (l *layout) pickRow(g *grid, row int, r *routeModel, picks []pick) {
	for _, p := range picks {
		v := any("")
		if r != nil {
			x := p.value(r)
			if math.IsNaN(x) {
				g.put(p.column, row, text(program, notDrawn))
				continue
			}
			v = x
		}
		g.put(p.column, row, derived(fmt.Sprintf(`IF($J%d=0,"",INDEX(%s,$J%d))`, row, p.from(p.source), row), v).in(p.unit).shown(p.format))
	}
}

// decideFull gives a lot its own part of the page.
func (l *layout) decideFull(g *grid, lot *lotModel, common []string) {
	row := g.next()
	g.across(1, decideChance, row, block, fmt.Sprintf("Lot %d: %s", lot.no, shortened(lot.Job.Name, mostTitle)))
	g.across(1, decideChance, row+1, words, capital(lot.asked())+".")
	l.agreeRow(g, row+2, row+4, lot)
	l.decideHeading(g, row+3)
	l.placeRow(g, row+4, 1, "Recommended", lot)
	l.placeRow(g, row+5, 2, "Runner-up", lot)
	l.says(g, "Why", l.verdict(lot))
	best := lot.best()
	if best == nil {
		return
	}
	l.says(g, "Hazards, controls", strings.Join(except(hazards(lot, best), common), " "))
	l.says(g, "What would change it", turns(lot))
	l.says(g, "What it turns on", doubts(lot, best))
}

// says writes a label and running text beside it.
func (l *layout) says(g *grid, label, s string) {
	row := g.last() + 1
	g.across(1, decideWhat, row, words, label)
	g.across(decideRoute, decideChance, row, words, s)
}

// agreeRow tells whether the first place is still that of the run.
func (l *layout) agreeRow(g *grid, row, place int, lot *lotModel) {
	id := "none"
	if best := lot.best(); best != nil {
		id = best.ID
	}
	g.put(decideWhat, row, text(words, "Route of the run"))
	g.put(decideRoute, row, text(program, id))
	if len(lot.routes) == 0 {
		return
	}
	const agrees, differs = "The sentences below are of this route", "Another route leads: " + runAgain
	value, leads := agrees, "none"
	if list := lot.sureRoutes(l.report.Job.Assurance); len(list) > 0 {
		leads = list[0].ID
	}
	if leads != id {
		value = differs
	}
	f := fmt.Sprintf(`IF(C%d=C%d,"%s","%s")`, place, row, agrees, differs)
	g.put(decideCost, row, cell{look: message, formula: f, value: value})
	g.flags = append(g.flags, flag{at(decideCost, row), fmt.Sprintf("$C%d<>$C%d", place, row), warn})
}

// decideShort gives lots a line each, as many as the page holds.
func (l *layout) decideShort(g *grid, lots []*lotModel) {
	if len(lots) == 0 {
		return
	}
	row := g.next()
	name := "The other lots, a line each"
	if len(lots) == len(l.lots) {
		name = "The lots, a line each"
	}
	g.across(1, decideChance, row, block, name)
	l.decideHeading(g, row+1)
	shown := lots[:min(len(lots), mostInLines)]
	for _, lot := range shown {
		l.placeRow(g, g.last()+1, 1, fmt.Sprintf("%d %s", lot.no, shortened(lot.Job.Name, mostNameShort)), lot)
	}
	if left := len(lots) - len(shown); left > 0 {
		g.across(1, decideChance, g.last()+1, warn, fmt.Sprintf("%d lots more do not fit on this page: see Compare. The signatures below do not cover them.", left))
	}
}

// mostTitle is as much of a name as a title line holds.
const mostTitle = 70

// mostNameShort keeps a lot to two lines.
const mostNameShort = 50

func shortened(s string, most int) string {
	s = oneLine(s)
	if r := []rune(s); len(r) > most {
		return string(r[:most-1]) + "…"
	}
	return s
}

// mostAssumptions stand on the page to sign; Sources has them all.
const mostAssumptions = 5

func (l *layout) assumptionRows(g *grid) {
	list := l.assumptions(mostAssumptions)
	if len(list) == 0 {
		return
	}
	row := g.next()
	g.across(1, decideChance, row, block, "Assumptions that carry most of the cost of these routes, and their age on "+l.runDate())
	g.across(1, decideWhat, row+1, heading, "What")
	for c, h := range []string{"Value", "Date", "Age / d"} {
		g.put(decideRoute+c, row+1, text(heading, h))
	}
	g.across(decideHigh, decideChance, row+1, heading, "Rests on")
	for i, a := range list {
		r := row + 2 + i
		g.across(1, decideWhat, r, words, a.what)
		g.put(decideRoute, r, text(program, a.value))
		g.put(decideCost, r, text(program, orWords(a.date, "no date")))
		g.put(decideLow, r, finite(l.ageDays(a.date), "d", "0"))
		g.across(decideHigh, decideChance, r, words, a.rests)
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
	for i, label := range []string{"Prepared by, date", "Checked by, date", "Safety reviewed by, date", "Quantity in the room against the local fire code: litres allowed, litres present, by, date", "Review this page on"} {
		r := row + 1 + i
		g.across(1, decideRoute, r, words, label)
		for c := decideCost; c <= decideChance; c++ {
			g.put(c, r, blank(field))
		}
		g.merged = append(g.merged, merge{r, decideCost, decideHigh}, merge{r, decideHigh + 1, decideChance})
		g.heights[r] = max(signHeight, g.height(r))
	}
}

const signHeight = 20 // points: room for a hand
