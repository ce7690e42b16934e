package workbook

import (
	"fmt"
	"math"

	"github.com/xuri/excelize/v2"
)

// mostLotsDrawn is how many lots get charts: a file with more could hardly be
// opened.
const mostLotsDrawn = 8

const (
	rangeChartColumn = 7
	rangeChartWidth  = 650 // pixels
)

// rangeCharts draws the range of the cost per litre of the first routes of each lot.
func (l *layout) rangeCharts(g *grid) {
	for _, lot := range l.lots[:min(len(l.lots), mostLotsDrawn)] {
		var drawn []*routeModel
		for _, r := range lot.routes {
			if !math.IsNaN(r.bands()[1].Low) && len(drawn) < mostDrawn {
				drawn = append(drawn, r)
			}
		}
		if len(drawn) > 0 {
			g.part(g.below())
			l.rangeChart(g, lot, drawn)
		}
	}
}

func (l *layout) rangeChart(g *grid, lot *lotModel, drawn []*routeModel) {
	unit := l.money("L")
	first := g.table(g.below(), fmt.Sprintf("Lot %d: cost per litre as drawn, %s", lot.no, unit),
		[]column{{name: "Lot"}, {name: "Route id"}, {"Below 5 %", unit}, {"5 % to median", unit}, {"Median to 95 %", unit}})
	for i, r := range drawn {
		row, source, b := first+i, l.rangeRows.at(r.no-1), r.bands()[1]
		from := func(k int) string { return at(rangeLitre+k, source) }
		low, median, high := tidy(b.Low), tidy(b.Median), tidy(b.High)
		g.putRow(row, text(words, lot.Job.Name), text(words, r.ID), derived(from(0), low).in(unit).shown(moneyFormat),
			derived(from(1)+"-"+from(0), median-low).in(unit).shown(moneyFormat), derived(from(2)+"-"+from(1), high-median).in(unit).shown(moneyFormat))
	}
	last := first + len(drawn) - 1
	c := baseChart(excelize.BarStacked, fmt.Sprintf("Lot %d: cost per litre, 5 %% to 95 %% of the draws, %s", lot.no, unit))
	c.Format.AltText = fmt.Sprintf("Bars: range of the cost per litre of the first routes of lot %d, from the 5 %% to the 95 %% quantile, changing shade at the median. The numbers are on sheet Ranges, rows %d to %d.", lot.no, first, last)
	gap, overlap := uint(55), 100
	c.GapWidth, c.Overlap = &gap, &overlap
	c.XAxis.ReverseOrder = true
	c.YAxis.MajorGridLines = true
	c.YAxis.NumFmt = excelize.ChartNumFmt{CustomNumFmt: "#,##0.##"}
	c.YAxis.Title = axisTitle(unit + " delivered in spec: 5 % to median dark, median to 95 % light")
	c.Legend.Position = "none" // it would name the bar that is not seen
	zero := 0.0
	c.YAxis.Minimum = &zero
	for i, fill := range []excelize.Fill{solid(unseen), solid("0072B2"), solid("9CC9E6")} {
		column := 3 + i
		c.Series = append(c.Series, excelize.ChartSeries{Name: on(sheetRanges, fixed(column, first-1)),
			Categories: on(sheetRanges, area(2, first, last)), Values: on(sheetRanges, area(column, first, last)), Fill: fill})
	}
	height := max(180, 88+rangePitch(drawn)*len(drawn))
	g.draw(rangeChartColumn, first-1, rangeChartWidth, height, fmt.Sprintf("Lot %d: cost range", lot.no), c)
}

// rangePitch is the height of a bar with its gap, in pixels, so that two charts of ten bars
// fit on a page: names that break at a hyphen take two lines beside it.
func rangePitch(drawn []*routeModel) int {
	for _, r := range drawn {
		if len(r.ID) > shortID {
			return 30
		}
	}
	return 24
}

const shortID = 20 // characters that a line beside the bars holds
