package workbook

import "math"

// Widths of the columns that hold names of lots and ids of routes, in digits.
const (
	leastLot   = 14.0
	mostLot    = 28.0 // longer names take more lines
	leastRoute = 16.0
	mostRoute  = 27.0
)

// keyWidths are the widths of the columns of lots and routes: each as wide as its longest
// entry in bold, so that rows are one line high, within limits. Together they are at least
// as wide as what stands beside charts needs.
func (l *layout) keyWidths(together float64) (lot, route float64) {
	lot, route = leastLot, leastRoute
	for _, x := range l.lots {
		lot = max(lot, unitsFor(x.Job.Name))
	}
	for _, r := range l.routes {
		route = max(route, unitsFor(r.ID))
	}
	lot = min(lot, mostLot)
	route = min(route, mostRoute+mostLot-lot) // what short names of lots leave
	return lot, max(route, together-lot)
}

// unitsFor is the width of a column that holds a text in bold on one line, to half a digit.
func unitsFor(s string) float64 {
	points := widthOf(oneLine(s), paints[words].size, true) + besideText
	return math.Ceil(2*points/pointsForText) / 2
}
