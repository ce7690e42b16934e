package workbook

import (
	"math"
	"strings"
	"unicode/utf8"
)

const (
	lineHeight   = 13.5 // points
	tallest      = 400  // points, below the limit of a row
	charsPerUnit = 1.3  // characters of text that fit in a unit of column width
	charsPerBold = 1.15
)

// height gives a row room for its wrapped text.
func (g *grid) height(row int) float64 {
	if h, ok := g.heights[row]; ok {
		return h
	}
	lines, size := 1, 10.0
	if row > len(g.rows) {
		return rowPoints
	}
	for i, c := range g.rows[row-1] {
		p := paints[c.look]
		size = max(size, p.size)
		if s, ok := c.value.(string); ok && p.wrap && i < len(g.widths) {
			fit := charsPerUnit
			if p.bold {
				fit = charsPerBold
			}
			lines = max(lines, wrapped(s, (g.roomFor(i+1, row)-1)*fit))
		}
	}
	return min(tallest, float64(lines)*lineHeight*size/10+1.5)
}

// roomFor is the width that a cell's text has, in units of column width.
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
	return width
}

// wrapped counts the lines of a text in a column of the given characters.
func wrapped(s string, width float64) int {
	lines := 0
	for _, paragraph := range strings.Split(s, "\n") {
		used := 0.0
		lines++
		for _, word := range strings.Fields(paragraph) {
			n := float64(utf8.RuneCountInString(word))
			switch {
			case n > width:
				lines += int(math.Ceil((used+n)/width)) - 1
				used = math.Mod(used+n, width) + 1
			case used+n > width:
				lines++
				used = n + 1
			default:
				used += n + 1
			}
		}
	}
	return lines
}
