package workbook

import (
	"fmt"
	"math"
)

// decideTable shows the routes to take of all lots: with the runner-up of those in
// full, alone for those in a line. It returns the rows of the first kind.
func (l *layout) decideTable(g *grid, full, lines int) (first []int) {
	l.decideHeading(g, g.next())
	for _, lot := range l.lots[:full] {
		row := g.last() + 1
		first = append(first, row)
		l.placeRow(g, row, 1, "Recommended", lot)
		l.placeRow(g, row+1, 2, "Runner-up", lot)
	}
	for _, lot := range l.lots[full : full+lines] {
		l.placeRow(g, g.last()+1, 1, shortened(lot.Job.Name, mostNameShort), lot)
	}
	if lines > 0 && full > 0 {
		g.across(1, decideChance, g.last()+1, words, "A lot of a line shows its recommended route; its reasons and cautions stand on Compare and on its card.")
	}
	if left := len(l.lots) - full - lines; left > 0 {
		g.across(1, decideChance, g.last()+1, warn, fmt.Sprintf("%d lots more do not fit on this page: see Compare. The signatures below do not cover them.", left))
	}
	return first
}

// mostNameShort keeps the name of a lot to two or three lines.
const mostNameShort = 50

func (l *layout) decideHeading(g *grid, row int) {
	unit := l.money("L")
	for i, c := range []column{{"Lot", "1"}, {name: "What"}, {name: "Route id"}, {"In spec", unit}, {"5 %", unit}, {"95 %", unit},
		{"Attended", "h"}, {"Water", "mg/kg"}, {"Chance", "%"},
		{"Place", "1"}, {"Key", "1"}, {"Row", "1"}, {name: "Route of the run"}} {
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
	g.put(decideLot, row, count(lot.no))
	g.put(decideWhat, row, text(words, what))
	g.put(decidePlace, row, count(place))
	if len(l.routes) == 0 {
		g.put(decideRoute, row, text(words, "none"))
		return
	}
	of := func(sheet string, rr rows) func(int) string {
		return func(column int) string { return on(sheet, area(column, rr.first, rr.last)) }
	}
	compared, ranged := of(sheetCompare, l.compareRows), of(sheetRanges, l.rangeRows)
	list := lot.sureRoutes(l.report.Job.Assurance)
	key, index, r := 0, 0, (*routeModel)(nil)
	if place <= len(list) {
		r = list[place-1]
		key, index = lot.no*len(l.routes)+r.rank, r.no
	}
	keys := ranged(rangeKey)
	g.put(decideKey, row, whole(fmt.Sprintf(`IFERROR(SMALL(%s,COUNTIF(%s,"<"&(A%d*ROWS(%s)+1))+J%d),0)`, keys, keys, row, keys, row), key))
	g.put(decideRow, row, whole(fmt.Sprintf("IF(K%d>(A%d+1)*ROWS(%s),0,IFERROR(MATCH(K%d,%s,0),0))", row, row, keys, row, keys), index))
	id := any("none")
	if r != nil {
		id = r.ID
	}
	g.put(decideRoute, row, cell{look: words, formula: fmt.Sprintf(`IF($L%d=0,"none",INDEX(%s,$L%d))`, row, compared(2), row), value: id})
	l.pickRow(g, row, r, []pick{
		{decideCost, compared, compareLitre, l.money("L"), moneyFormat, func(r *routeModel) float64 { return r.perLitre }},
		{decideLow, ranged, rangeLitre, l.money("L"), twoFigures, func(r *routeModel) float64 { return tidy(r.bands()[1].Low) }},
		{decideHigh, ranged, rangeLitre + 2, l.money("L"), twoFigures, func(r *routeModel) float64 { return tidy(r.bands()[1].High) }},
		{decideAttended, compared, compareAttended, "h", decimals(2), func(r *routeModel) float64 { return tidy(r.Run.HoursAttended) }},
		{decideWater, compared, compareWater, "mg/kg", decimals(2), func(r *routeModel) float64 { return r.waterOut }},
		{decideChance, ranged, rangeChance, "%", "0", func(r *routeModel) float64 { return tidy(r.chance()) }},
	})
}

func (l *layout) pickRow(g *grid, row int, r *routeModel, picks []pick) {
	for _, p := range picks {
		v := any("")
		if r != nil {
			if v = p.value(r); math.IsNaN(p.value(r)) {
				v = notDrawn
			}
		}
		g.put(p.column, row, derived(fmt.Sprintf(`IF($L%d=0,"",INDEX(%s,$L%d))`, row, p.from(p.source), row), v).in(p.unit).shown(p.format))
	}
}
