package workbook

import (
	"math"
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
