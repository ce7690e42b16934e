package workbook

import (
	"math"
	"strings"
	"testing"

	"parch/internal/steps"
)

// A course of three points is drawn at sixteen places, none twice; half-way between 100
// and 1 mg/kg a logarithmic axis has 10, by definition.
func TestFewPointsAreDrawnOnce(t *testing.T) {
	course := []steps.Point{{Hours: 0, Water: 1e-4}, {Hours: 2, Water: 1e-6}, {Hours: 3, Water: 5e-7}}
	if hours, water := between(course, 0.25); hours != 1 || math.Abs(water/1e-5-1) > 1e-12 {
		t.Errorf("%g h, %g", hours, water)
	}
	if hours, water := between(course, 1); hours != 3 || math.Abs(water/5e-7-1) > 1e-12 {
		t.Errorf("at the end %g h, %g", hours, water)
	}
	last := -1.0
	for i := range cardPoints {
		hours, _ := between(course, float64(i)/(cardPoints-1))
		if hours <= last {
			t.Errorf("%g h comes after %g h", hours, last)
		}
		last = hours
	}
}

// The chart on a card is small: its title says what a legend would, and names the step as
// the list beside it does.
func TestCardChartNamesItsStep(t *testing.T) {
	listed := 0
	for _, k := range everyKind(t) {
		l := k.layout
		for _, g := range l.grids {
			if g.name != sheetBenchCard {
				continue
			}
			for _, p := range g.charts {
				if p.chart.Legend.Position != "none" {
					t.Errorf("%s: the chart in row %d has a legend", k.name, p.row)
				}
				cells, err := (&file{grids: l.grids}).valuesAt(p.chart.Title.Formula)
				if err != nil || len(cells) != 1 {
					t.Fatalf("%s: title %q of the chart in row %d: %v", k.name, p.chart.Title.Formula, p.row, err)
				}
				title, _ := cells[0].value.(string)
				step, rest, _ := strings.Cut(title, ": ")
				if rest != "mg/kg against h, logarithmic; dashed: accept at" {
					t.Errorf("%s: a chart is called %q", k.name, title)
				}
				beside := func(row int) bool { // what it collects may stand behind it
					s, _ := g.rows[row-1][cardLabel-1].value.(string)
					return s == step || strings.HasPrefix(s, step+": ")
				}
				row := p.row
				for row < g.under(p) && !beside(row) {
					row++
				}
				if beside(row) {
					listed++
				} else if step != "as it is delivered" {
					t.Errorf("%s: %q is drawn, and not listed beside", k.name, step)
				}
			}
		}
	}
	if listed < 3 {
		t.Errorf("only %d charts draw a step that is listed beside them", listed)
	}
}
