package workbook

import "strings"

// advance is the width of the characters from space to tilde of the workbook's
// typeface, in thousandths of its size: the metrics published with Helvetica, which
// Arial and its free stand-ins share (from memory, and equal to those in the file of
// Liberation Sans 2).
var advance = [...]int{278, 278, 355, 556, 556, 889, 667, 191, 333, 333, 389, 584, 278, 333, 278, 278,
	556, 556, 556, 556, 556, 556, 556, 556, 556, 556, 278, 278, 584, 584, 584, 556,
	1015, 667, 667, 722, 722, 667, 611, 778, 722, 278, 500, 667, 556, 833, 722, 778, 667, 778, 722, 667, 611, 722, 667, 944, 667, 667, 611, 278, 278, 278, 469, 556,
	333, 556, 556, 500, 556, 556, 278, 556, 556, 222, 222, 500, 222, 833, 556, 556, 556, 556, 333, 500, 278, 556, 500, 722, 500, 500, 500, 334, 260, 334, 584}

const (
	otherLatin  = 600  // thousandths, of letters beyond the table
	fullWidth   = 1100 // of scripts with square characters, of emoji
	boldIsWider = 1.09
)

// widthOf is the width of a text on one line, in points.
func widthOf(s string, size float64, bold bool) float64 {
	sum := 0
	for _, r := range s {
		switch {
		case r >= ' ' && int(r-' ') < len(advance):
			sum += advance[r-' ']
		case r < 0x1100:
			sum += otherLatin
		default:
			sum += fullWidth
		}
	}
	width := float64(sum) / 1000 * size
	if bold {
		width *= boldIsWider
	}
	return width
}

// wrapped counts the lines of a text in a column of a width in points.
func wrapped(s string, width, size float64, bold bool) int {
	width = max(width, size) // a letter stands on every line
	space := widthOf(" ", size, bold)
	lines := 0
	for _, paragraph := range strings.Split(s, "\n") {
		used := 0.0
		lines++
		for _, word := range strings.Fields(paragraph) {
			n := widthOf(word, size, bold)
			if used > 0 && used+n > width {
				lines++
				used = 0
			}
			for ; n > width; n -= width { // broken where the line ends
				lines++
			}
			used += n + space
		}
	}
	return lines
}
