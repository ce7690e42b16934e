package workbook

import (
	"math"

	"github.com/xuri/excelize/v2"
)

// strokes tell lines apart in print and in grey: hue, dash and marker differ.
var strokes = []struct {
	colour, symbol string
	dash           excelize.LineDashType
}{
	{"0072B2", "diamond", excelize.LineDashSolid},
	{"D55E00", "square", excelize.LineDashDash},
	{"009E73", "triangle", excelize.LineDashSashDot},
	{"A0508A", "circle", excelize.LineDashLgDash},
	{"333333", "x", excelize.LineDashSolid},
	{"6B4A00", "plus", excelize.LineDashDash},
	{"2E4F46", "star", excelize.LineDashSashDot},
	{"143D6B", "dash", excelize.LineDashLgDash},
}

// drawnLine is the kth line of a chart.
func drawnLine(k int, name, x, y string) excelize.ChartSeries {
	s := strokes[k%len(strokes)]
	return excelize.ChartSeries{Name: name, Categories: x, Values: y, Fill: solid(s.colour),
		Line:   excelize.LineOptions{Type: excelize.LineSolid, Dash: s.dash, Width: 1.75, Fill: solid(s.colour)},
		Marker: mark(s.symbol, s.colour, 7)}
}

// drawnPoints is a row of markers without a line.
func drawnPoints(name, x, y, symbol string) excelize.ChartSeries {
	return excelize.ChartSeries{Name: name, Categories: x, Values: y, Fill: solid(darkInk),
		Line: excelize.LineOptions{Type: excelize.LineNone}, Marker: mark(symbol, "333333", 9)}
}

func mark(symbol, colour string, size int) excelize.ChartMarker {
	return excelize.ChartMarker{Symbol: symbol, Size: size, Fill: solid(colour),
		Border: excelize.LineOptions{Type: excelize.LineSolid, Width: 0.75, Fill: solid(darkInk)}}
}

// drawnLevel is a straight line without markers: a target or a limit.
func drawnLevel(name, x, y, colour string, dash excelize.LineDashType) excelize.ChartSeries {
	return excelize.ChartSeries{Name: name, Categories: x, Values: y, Fill: solid(colour),
		Line:   excelize.LineOptions{Type: excelize.LineSolid, Dash: dash, Width: 2.25, Fill: solid(colour)},
		Marker: excelize.ChartMarker{Symbol: "none"}}
}

func logarithmic(a *excelize.ChartAxis, name string) {
	a.LogBase = 10
	a.MajorGridLines = true
	a.NumFmt = excelize.ChartNumFmt{CustomNumFmt: "General"}
	a.Title = axisTitle(name)
}

// bound sets a logarithmic axis to the decades that hold the values.
func bound(a *excelize.ChartAxis, low, high float64) {
	lowest, highest := math.Pow(10, math.Floor(math.Log10(low*0.999))), math.Pow(10, math.Ceil(math.Log10(high*1.001)))
	a.Minimum, a.Maximum = &lowest, &highest
}
