package workbook

import (
	"fmt"
	"math"

	"github.com/xuri/excelize/v2"

	"parch/internal/steps"
)

// drawnCourse is the course of one step, at as many points as the chart draws.
type drawnCourse struct {
	name         string
	hours, water [cardPoints]float64 // mg/kg
}

// courseOf is the first boiling step of a route, or else the first step whose
// course is known.
func courseOf(r *routeModel) drawnCourse {
	var o *steps.Outcome
	place := 0
	for i := range r.Run.Outcomes {
		x := &r.Run.Outcomes[i]
		boils := x.Kind == steps.Trap || x.Kind == steps.Forerun
		if len(x.Course) > 1 && (o == nil || boils && o.Kind != steps.Trap && o.Kind != steps.Forerun) {
			o, place = x, i
		}
	}
	if o == nil {
		d := drawnCourse{name: "as it is delivered"}
		for i := range d.water {
			d.hours[i], d.water[i] = float64(i), tidy(max(r.waterOut, lowestPlotted))
		}
		return d
	}
	d := drawnCourse{name: stepOnCard(r, place)}
	for i := range d.water {
		hours, water := between(o.Course, float64(i)/(cardPoints-1))
		d.hours[i], d.water[i] = tidy(hours), tidy(max(water*mgPerKg, lowestPlotted))
	}
	return d
}

// between is the course at a share of its points: hours by straight lines, water
// (kg/kg) by straight lines on the logarithmic axis, as the chart draws them. A course of
// few points is drawn at places of its own, none twice.
func between(course []steps.Point, share float64) (hours, water float64) {
	at := share * float64(len(course)-1)
	i := min(int(at), len(course)-2)
	a, b, part := course[i], course[i+1], at-float64(i)
	low := lowestPlotted / mgPerKg
	return a.Hours + part*(b.Hours-a.Hours), max(a.Water, low) * math.Pow(max(b.Water, low)/max(a.Water, low), part)
}

// cardTitle stands behind the name of the step. It says what a legend would, which would
// take half of the height of the chart.
const cardTitle = ": mg/kg against h, logarithmic; dashed: accept at"

const (
	cardChartWidth = 238 // pixels, within the column of text
	cardRowHeight  = 19  // of the rows of what to expect beside it, at least
)

// cardChart draws water against time for the chosen route, beside its figures.
// Its points stand to the right of the card, from the row data.
func (l *layout) cardChart(c *cardModel, data, row, points, pixels int) {
	height := pixels * points
	g := c.g
	for r := row; r <= g.last(); r++ {
		g.heights[r] = max(g.height(r), float64(pixels)*pixelPoints)
	}
	lack := float64(height+8)*pixelPoints - g.span(row, g.last())
	if lack > 0 {
		g.heights[g.last()] = g.height(g.last()) + lack
	}
	courses := make([]drawnCourse, len(c.list))
	names := make([]any, len(c.list))
	low, high := max(c.lot.acceptAt, lowestPlotted), c.lot.target
	for k, r := range c.list {
		courses[k] = courseOf(r)
		names[k] = courses[k].name
		for _, w := range courses[k].water {
			low, high = min(low, w), max(high, w)
		}
	}
	g.heights[data] = linesHigh(1) // the headings to the right of it are tall
	for i, x := range []column{{name: "Drawn"}, {"Time", "h"}, {"Water", "mg/kg"}, {"Accept at", "mg/kg"}} {
		g.put(cardChosen+i, data, text(heading, x.heading()))
	}
	c.choose(cardChosen, data+1, helperName, plain, "", "", names)
	title := fixed(cardChosen, data+3) // apart from the name above: a column of a block has one formula
	g.put(cardChosen, data+3, derived(fmt.Sprintf("%s&%q", fixed(cardChosen, data+1), cardTitle), courses[c.chosen].name+cardTitle))
	c.heads(data, helperTime, column{"time", "h"})
	c.heads(data, helperWater, column{"water", "mg/kg"})
	for i := range cardPoints {
		c.chartRow(data+1+i, i, courses)
	}
	sheet := sheetBenchCard
	ch := baseChart(excelize.Scatter, "")
	font := *ch.Title.Paragraph[0].Font
	font.Size = 9
	ch.Title = excelize.ChartTitle{Formula: on(sheet, title), Font: &font}
	ch.Legend.Position = "none"
	ch.Format.AltText = fmt.Sprintf("Line on a logarithmic axis: water against time in a step of the route chosen on the card of lot %d, with the acceptance limit. The numbers stand right of the card, rows %d to %d.", c.lot.no, data+1, data+cardPoints)
	ch.XAxis.MajorGridLines = true
	ch.XAxis.NumFmt = excelize.ChartNumFmt{CustomNumFmt: "General"}
	logarithmic(&ch.YAxis, "mg/kg")
	ch.YAxis.Title = excelize.ChartTitle{} // the title names both: the chart is small
	bound(&ch.YAxis, low, high)
	cells := func(column int) string { return on(sheet, area(column, data+1, data+cardPoints)) }
	head := func(column int) string { return on(sheet, fixed(column, data)) }
	ch.Series = append(ch.Series, drawnLine(0, on(sheet, fixed(cardChosen, data+1)), cells(cardTime), cells(cardWater)),
		drawnLevel(head(cardLevel), cells(cardTime), cells(cardLevel), "D55E00", excelize.LineDashDash))
	g.draw(cardText, row, cardChartWidth, height, fmt.Sprintf("Lot %d: water against time", c.lot.no), ch)
}

func (c *cardModel) chartRow(row, i int, courses []drawnCourse) {
	times, waters := make([]any, len(c.list)), make([]any, len(c.list))
	for k, d := range courses {
		times[k], waters[k] = d.hours[i], d.water[i]
	}
	c.choose(cardTime, row, helperTime, formula, decimals(3), "h", times)
	c.choose(cardWater, row, helperWater, formula, decimals(2), "mg/kg", waters)
	limit := fmt.Sprintf("MAX(lot%d_accept_limit,job_lowest_plotted)", c.lot.no)
	c.g.put(cardLevel, row, derived(limit, math.Max(c.lot.acceptAt, lowestPlotted)).in("mg/kg").shown(decimals(2)))
}
