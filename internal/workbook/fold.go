package workbook

import "strings"

// folded breaks the id of a route into lines of a width in points: after a step if it
// can, else after a colon or a hyphen. It reports whether all pieces fit.
func folded(id string, width, size float64, bold bool) (lines string, fits bool) {
	var out []string
	line := ""
	add := func(piece string) (fitted bool) {
		if line != "" && widthOf(line+piece, size, bold) > width {
			out, line = append(out, line), ""
		}
		line += piece
		return widthOf(line, size, bold) <= width
	}
	fits = true
	for _, step := range strings.SplitAfter(id, "+") {
		if widthOf(step, size, bold) <= width {
			add(step)
			continue
		}
		for _, part := range strings.SplitAfter(step, ":") {
			for _, piece := range strings.SplitAfter(part, "-") {
				fits = add(piece) && fits
			}
		}
	}
	return strings.Join(append(out, line), "\n"), fits
}
