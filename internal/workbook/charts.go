package workbook

import (
	"fmt"

	"github.com/xuri/excelize/v2"

	"parch/internal/steps"
)

// placed is a chart and where it stands.
type placed struct {
	column, row int
	height      int // pixels
	chart       *excelize.Chart
}

const (
	rowPoints   = 15.0
	pixelPoints = 0.75
)

// under is the last row that a chart covers.
func (g *grid) under(p placed) int {
	left := float64(p.height) * pixelPoints
	row := p.row
	for ; left > 0; row++ {
		left -= g.span(row, row)
	}
	return row - 1
}

// drawnTo is the last row that a chart covers, or the one below where it ends.
func (g *grid) drawnTo() int {
	last := 0
	for _, p := range g.charts {
		last = max(last, g.under(p)+1)
	}
	return last
}

func (e *emitter) drawings(g *grid) error {
	for _, p := range g.charts {
		if err := e.file.AddChart(g.name, at(p.column, p.row), p.chart); err != nil {
			return err
		}
	}
	return nil
}

// headColours are the hues of Okabe and Ito, one for each head of cost, the same
// in every chart; all bars are outlined since some of the hues are pale.
var headColours = map[steps.Head]string{
	steps.Labour: "0072B2", steps.Energy: "E69F00", steps.CoolingWater: "56B4E9", steps.Agent: "009E73",
	steps.SolventLost: "D55E00", steps.Waste: "CC79A7", steps.Equipment: "F0E442", steps.Testing: "999999", steps.Purchase: "333333",
}

const (
	costWidth   = 670 // pixels
	waterWidth  = 610
	waterColumn = 9 // clear of the chart to its left
)

// mostDrawn is how many routes of a lot a chart shows, the first by rank: more
// names cannot be read.
const mostDrawn = 10

// firstOf says so in a title.
func firstOf(lot *lotModel) string {
	if len(lot.routes) <= mostDrawn {
		return ""
	}
	return fmt.Sprintf(", the first %d routes", mostDrawn)
}

// compareCharts lays out, for each lot, the water along the routes, and draws below it the
// cost by head and beside that the water. The table fills the page of the routes where the
// charts have no room there.
func (l *layout) compareCharts(g *grid) {
	l.along = map[int]along{}
	for i, lot := range l.lots {
		if len(lot.routes) == 0 {
			continue
		}
		row := g.below()
		g.part(row)
		l.alongBlock(g, row, lot)
		if i >= mostLotsDrawn {
			continue
		}
		drawn := min(len(lot.routes), mostDrawn)
		places := rows{lot.routes[0].no - 1, lot.routes[drawn-1].no - 1}
		height := max(320, 130+barPitch(lot.routes[:drawn])*drawn)
		row = g.below()
		g.part(row)
		if cost := l.costChart(lot, places); len(cost.Series) > 0 { // nothing has a price in some currencies
			g.draw(1, row, costWidth, height, fmt.Sprintf("Lot %d: cost", lot.no), cost)
		}
		g.draw(waterColumn, row, waterWidth, height, fmt.Sprintf("Lot %d: water", lot.no), l.alongChart(lot))
	}
	if left := len(l.lots) - mostLotsDrawn; left > 0 {
		g.put(1, g.below(), text(plain, fmt.Sprintf("Charts are drawn for the first %d lots; %d lots more stand in the tables only.", mostLotsDrawn, left)))
	}
}

// barPitch is the height of a bar with its gap, in pixels: long names take two lines
// beside it, the longest three.
func barPitch(list []*routeModel) int {
	longest := 0
	for _, r := range list {
		longest = max(longest, len(r.ID))
	}
	switch {
	case longest > threeLines:
		return 42
	case longest > longID:
		return 36
	}
	return 30
}

const (
	longID     = 26 // characters that a line beside the bars holds
	threeLines = 50
)

func (g *grid) draw(column, row, width, height int, name string, c *excelize.Chart) {
	c.Dimension = excelize.ChartDimension{Width: uint(width), Height: uint(height)}
	c.Format.Positioning = "oneCell"
	c.Format.Name = name
	g.charts = append(g.charts, placed{column, row, height, c})
}

// pageFilled is the share of a page that is filled. Readers differ in the scale and in the
// height of rows: where a unit of column width has 6.0 points in place of 6.1, a page holds
// 2 % less. Charts end higher up: no typeface that stands in, however narrow, cuts them.
const (
	pageFilled  = 0.93
	chartFilled = 0.85
)

// pageRoom is how much a printed page holds and how much of it the repeated rows take.
func (g *grid) pageRoom() (page, titles float64) {
	return pageFilled * printableHeight / g.scale(), g.span(g.titles())
}

// span is the height of some rows in points.
func (g *grid) span(first, last int) (points float64) {
	for row := first; row <= last; row++ {
		if row > 0 && row <= len(g.rows) && len(g.rows[row-1]) > 0 {
			points += g.height(row)
		} else {
			points += rowPoints
		}
	}
	return points
}

func (l *layout) costChart(lot *lotModel, places rows) *excelize.Chart {
	first, last := l.headRows.at(places.first), l.headRows.at(places.last)
	c := baseChart(excelize.BarStacked, fmt.Sprintf("Lot %d: cost of a batch by head, %s%s", lot.no, l.currency(), firstOf(lot)))
	c.Format.AltText = fmt.Sprintf("Stacked bars: cost of a batch of lot %d by head of cost, one bar per route. The numbers are on sheet Costs, rows %d to %d.", lot.no, first, last)
	gap, overlap := uint(55), 100
	c.GapWidth, c.Overlap = &gap, &overlap
	c.XAxis.ReverseOrder = true
	c.YAxis.MajorGridLines = true
	c.YAxis.NumFmt = excelize.ChartNumFmt{CustomNumFmt: "#,##0"}
	c.YAxis.Title = axisTitle(l.currency() + " per batch")
	for h, head := range steps.Heads {
		if !l.billed(lot, h) {
			continue
		}
		column := headFirst + h
		c.Series = append(c.Series, excelize.ChartSeries{
			Name:       on(sheetCosts, fixed(column, l.headRows.first-1)),
			Categories: on(sheetCosts, area(2, first, last)),
			Values:     on(sheetCosts, area(column, first, last)),
			Fill:       solid(headColours[head]),
		})
	}
	return c
}

// billed reports whether any route of the lot has a line under the head.
func (l *layout) billed(lot *lotModel, h int) bool {
	for _, r := range lot.routes {
		for _, line := range r.lines {
			if line.Head == steps.Heads[h] {
				return true
			}
		}
	}
	return false
}

func solid(colour string) excelize.Fill {
	return excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{colour}}
}

func axisTitle(s string) excelize.ChartTitle {
	return excelize.ChartTitle{Paragraph: []excelize.RichTextRun{{Text: s, Font: &excelize.Font{Family: typeface, Color: darkInk, Size: 10}}}}
}

func baseChart(kind excelize.ChartType, name string) *excelize.Chart {
	vary := false
	font := excelize.Font{Family: typeface, Color: darkInk, Size: 10}
	return &excelize.Chart{
		Type:       kind,
		Title:      excelize.ChartTitle{Paragraph: []excelize.RichTextRun{{Text: name, Font: &excelize.Font{Family: typeface, Color: black, Size: 12, Bold: true}}}},
		Legend:     excelize.ChartLegend{Position: "bottom", Font: &font},
		VaryColors: &vary,
		XAxis:      excelize.ChartAxis{Font: font},
		YAxis:      excelize.ChartAxis{Font: font},
		Fill:       solid(white),
		Border:     excelize.LineOptions{Type: excelize.LineSolid, Width: 0.75, Fill: solid(rule)},
	}
}
