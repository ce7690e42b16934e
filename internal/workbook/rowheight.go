package workbook

const (
	lineHeight    = 12.75 // points, of text in 10 points
	tallest       = 400   // points, below the limit of a row
	pointsForText = 5.9   // of a unit of column width; readers give it 6.0 or 6.1 points
	besideText    = 11.0  // points: indent and edges of a cell
)

// height gives a row room for its wrapped text.
func (g *grid) height(row int) float64 {
	if h, ok := g.heights[row]; ok {
		return h
	}
	if row > len(g.rows) {
		return rowPoints
	}
	tall := lineHeight
	for i, c := range g.rows[row-1] {
		p := paints[c.look]
		lines := 1
		if s, ok := c.value.(string); ok && p.wrap && i < len(g.widths) {
			lines = wrapped(s, g.roomFor(i+1, row)*c.spared(), p.size, p.bold || g.mayBeBold(i+1, row))
		}
		tall = max(tall, float64(lines)*lineHeight*p.size/10)
	}
	return min(tallest, tall+2)
}

// headingSpared is the share of its room that a heading is laid out in: its few words
// break elsewhere in another typeface.
const headingSpared = 0.92

func (c cell) spared() float64 {
	if c.look == heading {
		return headingSpared
	}
	return 1
}

// linesHigh is the height of a row of some lines of text.
func linesHigh(lines int) float64 { return float64(lines)*lineHeight + 2 }

// roomFor is the width that a cell's text has, in points.
func (g *grid) roomFor(column, row int) float64 {
	last := column
	for _, m := range g.merged {
		if m.row == row && m.first == column {
			last = m.last
		}
	}
	width := 0.0
	for _, w := range g.widths[column-1 : last] {
		width += w
	}
	return width*pointsForText - besideText
}

// mayBeBold reports whether a mark can make the text of a cell bold.
func (g *grid) mayBeBold(column, row int) bool {
	return column <= g.boldColumns && row >= g.boldRows.first && row <= g.boldRows.last
}
