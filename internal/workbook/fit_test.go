package workbook

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"
)

// Nothing is cut: every number fits in its column, since readers show marks in place of
// one that does not; no word of a heading is broken, the ids of routes apart, which are
// long; every text has the lines that it needs.
func TestEveryCellHasRoom(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) {
			for _, g := range k.layout.grids {
				for r, row := range g.rows {
					for c, x := range row {
						if c < len(g.widths) {
							hasRoom(t, g, c+1, r+1, x)
						}
					}
				}
			}
		})
	}
}

func hasRoom(t *testing.T, g *grid, column, row int, x cell) {
	t.Helper()
	p := paints[x.look]
	room := g.roomFor(column, row)
	if v, ok := x.value.(float64); ok {
		s := numberShown(t, v, x.format)
		if w := widthOf(s, p.size, p.bold || g.mayBeBold(column, row)); w > room {
			t.Errorf("%s!%s: %s is %.1f points wide, the column has %.1f", g.name, at(column, row), s, w, room)
		}
		return
	}
	s, ok := x.value.(string)
	if !ok {
		return
	}
	if x.look == heading {
		for _, word := range strings.Fields(s) {
			if w := widthOf(word, p.size, true); w > room && !strings.ContainsAny(word, ":+") {
				t.Errorf("%s!%s: %q of a heading is %.1f points wide, the column has %.1f", g.name, at(column, row), word, w, room)
			}
		}
	}
	if p.wrap && (x.look != heading || column <= g.printColumns) { // what cards choose from is not printed
		if need := linesHigh(wrapped(clean(s), room, p.size, p.bold || g.mayBeBold(column, row))) - 2; g.height(row) < need {
			t.Errorf("%s!%s: the text needs %.0f points, the row has %.0f", g.name, at(column, row), need, g.height(row))
		}
	}
}

// numberShown is a number as its format shows it, for the formats in use.
func numberShown(t *testing.T, v float64, format string) string {
	t.Helper()
	if format == "" || // shows as many digits as fit
		format == "General" {
		return strconv.FormatFloat(cutTo(v, 3), 'G', -1, 64)
	}
	if format == twoFigures {
		switch {
		case v >= 9.95:
			format = "#,##0"
		case v >= 0.995:
			format = "0.0"
		default:
			format = "0.000"
		}
	}
	if number, ok := strings.CutSuffix(format, ";@"); ok {
		format, _, _ = strings.Cut(number, ";")
	}
	if mantissa, _, ok := strings.Cut(format, "E+"); ok {
		_, digits, _ := strings.Cut(mantissa, ".")
		return fmt.Sprintf("%.*E", len(digits), v)
	}
	whole, digits, _ := strings.Cut(format, ".")
	if strings.Trim(whole+digits, "#,0") != "" {
		t.Fatalf("a format that is not known: %q", format)
	}
	s := fmt.Sprintf("%.*f", len(digits), math.Abs(v))
	if strings.HasSuffix(digits, "#") {
		s = strings.TrimRight(s, "0")
	}
	front, back, cut := strings.Cut(s, ".")
	if strings.Contains(whole, ",") {
		for i := len(front) - 3; i > 0; i -= 3 {
			front = front[:i] + "," + front[i:]
		}
	}
	if cut {
		front += "." + back
	}
	if v < 0 {
		front = "-" + front
	}
	return front
}

func TestNumberShown(t *testing.T) {
	for _, c := range []struct {
		v            float64
		format, want string
	}{{17200, "#,##0.00", "17,200.00"}, {-1234567.8, "#,##0", "-1,234,568"}, {0.05, "General", "0.05"}, {1e-9, "0.0E+00", "1.0E-09"}, {150, "#,##0.##", "150."}, {12, "0", "12"}, {-4.5, numberOrWords("0.00"), "-4.50"}} {
		if got := numberShown(t, c.v, c.format); got != c.want {
			t.Errorf("%g as %s is %s, want %s", c.v, c.format, got, c.want)
		}
	}
}
