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

// lined breaks a list at its spaces into lines of a width in points, so that it is as high
// in every reader: some break the ids of routes at hyphens, others do not. An id that is
// wider is folded.
func lined(s string, width, size float64) string {
	var out []string
	line := ""
	for _, word := range strings.Fields(s) {
		if line != "" && widthOf(line+" "+word, size, false) <= width {
			line += " " + word
			continue
		}
		if line != "" {
			out = append(out, line)
		}
		pieces, _ := folded(word, width, size, false)
		lines := strings.Split(pieces, "\n")
		last := len(lines) - 1
		out, line = append(out, lines[:last]...), lines[last]
	}
	return strings.Join(append(out, line), "\n")
}
