package workbook

import (
	"fmt"
	"math"

	"github.com/xuri/excelize/v2"
)

// mostAlong routes are drawn along their steps, beside the target and the limit.
const mostAlong = 7

// Columns of the water along the routes.
const (
	alongFirst = 3 // number of the first step among all steps
	alongStart = 4
)

// along is a lot and the rows that hold the water along its routes.
type along struct {
	list          []*routeModel
	head          int // row of the headings
	routes        rows
	target, limit int
}

// alongBlock shows the water after each step of the first routes of a lot that differ in
// their steps, as its chart draws it.
func (l *layout) alongBlock(g *grid, row int, lot *lotModel) {
	most := 0
	for _, r := range lot.unlike(mostAlong) {
		most = max(most, len(r.Run.Outcomes))
	}
	columns := []column{{name: "Lot"}, {name: "Route id"}, {"First step no", "1"}, {"Start", "mg/kg"}}
	for i := range most {
		columns = append(columns, column{fmt.Sprintf("After step %d", i+1), "mg/kg"})
	}
	row = g.table(row, fmt.Sprintf("Lot %d: water along the first routes that differ in their steps, as drawn: at least %g mg/kg", lot.no, lowestPlotted), columns)
	a := along{list: lot.unlike(mostAlong), head: row - 1}
	a.routes = rows{row, row + len(a.list) - 1}
	format := l.waterFormat()
	drawn := func(place string, v float64) cell {
		return derived(fmt.Sprintf("MAX(%s,job_lowest_plotted)", place), max(tidy(v), lowestPlotted)).in("mg/kg").shown(format)
	}
	after := func(column, shift int) string {
		return fmt.Sprintf("INDEX(%s,$C%d)", on(sheetSteps, area(column, l.flowRows.first+shift, l.flowRows.last+shift)), row)
	}
	for _, r := range a.list {
		g.putRow(row, text(words, lot.Job.Name), text(words, r.ID), count(l.firstStep(r)+1),
			drawn(after(stepWaterIn, 0), r.Run.Outcomes[0].In.Water()*mgPerKg))
		for i, o := range r.Run.Outcomes {
			g.put(alongStart+1+i, row, drawn(after(stepWaterOut, i), o.Out.Water()*mgPerKg))
		}
		row++
	}
	level := func(name, of string, v float64) int {
		g.putRow(row, text(words, lot.Job.Name), text(words, name))
		for i := range most + 1 {
			g.put(alongStart+i, row, drawn(l.lotName(lot, of), v))
		}
		return row
	}
	row++
	a.target = level("target", "target_water", lot.target)
	row += 2
	a.limit = level("accept at or below", "accept_limit", lot.acceptAt)
	l.along[lot.no] = a
}

// firstStep is the place of the first step of a route among all steps.
func (l *layout) firstStep(r *routeModel) (n int) {
	for _, x := range l.routes[:r.no-1] {
		n += len(x.Run.Outcomes)
	}
	return n
}

func (l *layout) alongChart(lot *lotModel) *excelize.Chart {
	a := l.along[lot.no]
	c := baseChart(excelize.Line, fmt.Sprintf("Lot %d: water along the routes, mg/kg, logarithmic axis", lot.no))
	c.Format.AltText = fmt.Sprintf("Lines on a logarithmic axis: water at the start and after each step, for routes of lot %d that differ in their steps, with lines for the target and the acceptance limit. The numbers are on sheet Compare, rows %d to %d.", lot.no, a.routes.first, a.limit)
	low, high, most := math.Inf(1), lot.target, 1
	for _, r := range a.list {
		most = max(most, len(r.Run.Outcomes))
		for _, o := range r.Run.Outcomes {
			low, high = min(low, max(o.Out.Water()*mgPerKg, lowestPlotted)), max(high, o.In.Water()*mgPerKg)
		}
	}
	low = min(low, max(lot.acceptAt, lowestPlotted))
	logarithmic(&c.YAxis, "mg/kg")
	bound(&c.YAxis, low, high)
	across := func(row, points int) string {
		return on(sheetCompare, fixed(alongStart, row)+":"+fixed(alongStart+points, row))
	}
	heads := across(a.head, most)
	for k, r := range a.list {
		row := a.routes.at(k)
		c.Series = append(c.Series, drawnLine(k, on(sheetCompare, fixed(2, row)), heads, across(row, len(r.Run.Outcomes))))
	}
	c.Series = append(c.Series,
		drawnLevel(on(sheetCompare, fixed(2, a.target)), heads, across(a.target, most), "7A1B12", excelize.LineDashSolid),
		drawnLevel(on(sheetCompare, fixed(2, a.limit)), heads, across(a.limit, most), "0E5A43", excelize.LineDashDash))
	return c
}
