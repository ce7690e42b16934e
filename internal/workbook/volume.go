package workbook

import (
	"fmt"
	"math"
	"strings"

	"github.com/xuri/excelize/v2"

	"parch/internal/quantity"
	"parch/internal/steps"
)

func significant(x float64) string { return quantity.Significant(x, 3) }

// kindsOf is the chain of steps of a route without its agents.
func kindsOf(r *routeModel) string {
	var kinds []string
	for _, s := range r.Run.Route {
		kinds = append(kinds, string(s.Kind))
	}
	return strings.Join(kinds, "+")
}

// unlike are the first routes of a lot that differ in their chain of steps, by
// rank. Where buying is offered it is among them.
func (lot *lotModel) unlike(most int) (list []*routeModel) {
	seen := map[string]bool{}
	var buy *routeModel
	for _, r := range lot.routes {
		kinds := kindsOf(r)
		if seen[kinds] {
			continue
		}
		seen[kinds] = true
		if kinds == string(steps.Buy) {
			buy = r
		}
		list = append(list, r)
	}
	if len(list) > most {
		list = list[:most]
		if buy != nil && list[most-1].no < buy.no {
			list[most-1] = buy
		}
	}
	return list
}

// mostVolumes routes are compared over the litres a month.
const mostVolumes = 4

// monthsPerYear stands in a cell of its own.
const monthsPerYear = 12

// Columns of what routes are paid by.
const (
	paidNo = 3 + iota
	paidBatch
	paidYear
	paidLitres
	paidTurn
	paidMonth
)

// volumeShares are the batches a year that are drawn, as shares of those of the run.
var volumeShares = []float64{0.1, 0.15, 0.25, 0.4, 0.6, 0.8, 1, 1.5, 2.5, 4, 6, 10}

// volumeModel is a lot whose routes are compared over the litres a month.
type volumeModel struct {
	lot   *lotModel
	list  []*routeModel
	paid  rows // one row for each of list
	nodes rows
}

// paid is what a route costs for each batch and each year.
type paid struct{ batch, year, litres float64 }

func (r *routeModel) paid() paid {
	p := paid{litres: r.litres}
	yearShare := 0.0
	for _, line := range r.lines {
		if line.perYear {
			yearShare += line.amount
		} else {
			p.batch += line.amount
		}
	}
	p.year = yearShare * r.lot.batches
	return p
}

func (p paid) perLitre(batches float64) float64 { return (p.batch + p.year/batches) / p.litres }

// turn is the number of batches a year at which two routes cost the same per
// litre; 0 where they never do.
func turn(first, other paid) float64 {
	over := other.batch/other.litres - first.batch/first.litres
	if over == 0 {
		return 0
	}
	return max((first.year/first.litres-other.year/other.litres)/over, 0)
}

func (l *layout) volumeBlocks(g *grid) {
	var months string
	for _, lot := range l.lots {
		list := lot.unlike(mostVolumes)
		if len(list) < 2 {
			continue
		}
		row := g.below()
		g.part(row)
		if months == "" {
			g.putRow(row, text(words, "Months in a year"), blank(plain), count(monthsPerYear))
			months = fixed(paidNo, row)
		}
		v := &volumeModel{lot: lot, list: list}
		l.paidBlock(g, v, months)
		l.volumeBlock(g, v, months)
		if lot.no == mostLotsDrawn {
			break
		}
	}
}

// paidBlock lists what is paid for each batch and for each year.
func (l *layout) paidBlock(g *grid, v *volumeModel, months string) {
	money := l.currency()
	first := g.table(g.below(), fmt.Sprintf("Lot %d: what is shared by the batches of a year, for the first routes that differ in their steps, all else as in the bill", v.lot.no), []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"},
		{"Paid for each batch", money}, {"Paid for each year", money}, {"Litres delivered", "L"}, {"Level with the first at, 0 never", "1/yr"}, {"That is a month", "L"}})
	v.paid = rows{first, first + len(v.list) - 1}
	for i, r := range v.list {
		l.paidRow(g, v.paid.at(i), v, r, months)
	}
}

func (l *layout) paidRow(g *grid, row int, v *volumeModel, r *routeModel, months string) {
	money, p, lead := l.currency(), r.paid(), v.paid.first
	bill := func(column int) string { return on(sheetCosts, l.lineRows.column(column)) }
	sum := func(per string) string {
		return fmt.Sprintf(`SUMIFS(%s,%s,C%d,%s,"%s")`, bill(billAmount), bill(3), row, bill(billPer), per)
	}
	level := turn(v.list[0].paid(), p)
	f := fmt.Sprintf("IFERROR(MAX((E$%[1]d/F$%[1]d-E%[2]d/F%[2]d)/(D%[2]d/F%[2]d-D$%[1]d/F$%[1]d),0),0)", lead, row)
	g.putRow(row, append(l.routeKey(r),
		derived(sum("batch"), p.batch).in(money).shown(moneyFormat),
		derived(sum("year")+"*"+l.lotName(v.lot, "batches_per_year"), p.year).in(money).shown(moneyFormat),
		derived(fmt.Sprintf("INDEX(%s,C%d)", on(sheetCosts, l.litreRows.column(litreDelivered)), row), p.litres).in("L").shown(decimals(2)),
		derived(f, level).in("1/yr").shown(decimals(1)),
		derived(fmt.Sprintf("G%d*%s/%s", row, l.lotName(v.lot, "batch_litres"), months), level*v.lot.batchLitres/monthsPerYear).in("L").shown(decimals(1)))...)
}

// Columns of the cost over the litres a month.
const (
	volumeBatches = 3
	volumeLitres  = 4
	volumeFirst   = 5
)

// headings over the costs of the routes are their ids, or where one would be broken
// within a word, the numbers that stand beside the ids above.
func (v *volumeModel) headings(g *grid) (names []string) {
	whole := true
	for k, r := range v.list {
		room := (g.widths[volumeFirst+k-1]*pointsForText - besideText) * headingSpared
		name, fits := folded(r.ID, room, paints[heading].size, true)
		names, whole = append(names, name), whole && fits
	}
	for k, r := range v.list {
		if !whole {
			names[k] = fmt.Sprintf("Route no %d", r.no)
		}
	}
	return names
}

// volumeBlock is the cost per litre of the routes at other volumes, at the present
// one, and where routes are level with the first; where they never are within the
// volumes drawn, the present one stands in.
func (l *layout) volumeBlock(g *grid, v *volumeModel, months string) {
	columns := []column{{name: "Lot"}, {name: "Point"}, {"Batches a year", "1/yr"}, {"Litres a month", "L"}}
	for _, name := range v.headings(g) {
		columns = append(columns, column{name, "1"})
	}
	first := g.table(g.below(), fmt.Sprintf("Lot %d: cost per litre against litres a month, %s", v.lot.no, l.money("L")), columns)
	v.nodes = rows{first, first + len(volumeShares) - 1}
	put := func(row int, label string, batches cell, n float64) {
		g.putRow(row, text(words, v.lot.Job.Name), text(words, label), batches.in("1/yr").shown("#,##0.##"),
			derived(fmt.Sprintf("C%d*%s/%s", row, l.lotName(v.lot, "batch_litres"), months), n*v.lot.batchLitres/monthsPerYear).in("L").shown(decimals(1)))
		for k, r := range v.list {
			from := v.paid.at(k)
			f := fmt.Sprintf("($D$%[1]d+$E$%[1]d/$C%[2]d)/$F$%[1]d", from, row)
			g.put(volumeFirst+k, row, derived(f, r.paid().perLitre(n)).in(l.money("L")).shown(moneyFormat))
		}
	}
	node := func(i int) float64 { return tidy(round2(v.lot.batches * volumeShares[i])) }
	for i := range volumeShares {
		put(v.nodes.at(i), "drawn", number(node(i), "1/yr"), node(i))
	}
	now := v.nodes.last + 1
	put(now, "now", derived(l.lotName(v.lot, "batches_per_year"), v.lot.batches), v.lot.batches)
	low, high := node(0), node(len(volumeShares)-1)
	for k := 1; k < len(v.list); k++ {
		level := turn(v.list[0].paid(), v.list[k].paid())
		n := level
		if level < low || level > high {
			n = v.lot.batches
		}
		f := fmt.Sprintf("IF(AND(G%[1]d>=C$%[2]d,G%[1]d<=C$%[3]d),G%[1]d,C$%[4]d)", v.paid.at(k), v.nodes.first, v.nodes.last, now)
		put(now+1+k, "level with "+v.list[k].ID+", or now", derived(f, n), n)
	}
	l.volumeChart(g, v, now)
}

// round2 rounds to two significant figures.
func round2(x float64) float64 {
	if x == 0 {
		return 0
	}
	scale := math.Pow(10, math.Floor(math.Log10(abs(x)))-1)
	return math.Round(x/scale) * scale
}

const (
	volumeHeight = 520 // pixels
	chartBeside  = 10  // column of a chart beside its table
	besideWidth  = 435
)

func (l *layout) volumeChart(g *grid, v *volumeModel, now int) {
	last := now + len(v.list)
	c := baseChart(excelize.Scatter, fmt.Sprintf("Lot %d: cost per litre against litres a month, %s, logarithmic axes", v.lot.no, l.money("L")))
	c.Format.AltText = fmt.Sprintf("Lines: cost per litre of unlike routes of lot %d against the litres dried a month, with the present volume and the break-evens as points. The numbers are on sheet Ranges, rows %d to %d.", v.lot.no, v.nodes.first, last)
	logarithmic(&c.XAxis, "litres a month "+logWords)
	logarithmic(&c.YAxis, l.money("L"))
	low, high := math.Inf(1), 0.0
	for _, r := range v.list {
		for _, share := range volumeShares {
			x := r.paid().perLitre(tidy(round2(v.lot.batches * share)))
			low, high = min(low, x), max(high, x)
		}
	}
	bound(&c.YAxis, low, high)
	perMonth := v.lot.batches * v.lot.batchLitres / monthsPerYear
	bound(&c.XAxis, perMonth*volumeShares[0], perMonth*volumeShares[len(volumeShares)-1])
	for k := range v.list {
		c.Series = append(c.Series, drawnLine(k, on(sheetRanges, fixed(2, v.paid.at(k))),
			on(sheetRanges, v.nodes.column(volumeLitres)), on(sheetRanges, v.nodes.column(volumeFirst+k))))
	}
	point := func(name string, first, last int, symbol string) {
		c.Series = append(c.Series, drawnPoints(name, on(sheetRanges, area(volumeLitres, first, last)), on(sheetRanges, area(volumeFirst, first, last)), symbol))
	}
	point(on(sheetRanges, fixed(2, now)), now, now, "circle")
	g.putRow(now+1, text(words, v.lot.Job.Name), text(words, "level with the first"))
	if now+2 <= last {
		point(on(sheetRanges, fixed(2, now+1)), now+2, last, "star")
	}
	g.draw(chartBeside, v.paid.first-1, besideWidth, volumeHeight, fmt.Sprintf("Lot %d: cost against volume", v.lot.no), c)
}
