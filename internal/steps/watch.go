package steps

import "math"

// Watch picks the points of a course that are worth reading at the bench: the
// start, the end, and between them points about evenly spaced in the logarithm
// of the water left, rows in all.
func (o *Outcome) Watch(rows int) []Point {
	c := o.Course
	if len(c) <= rows || rows < 2 {
		return c
	}
	level := func(p Point) float64 { return math.Log(math.Max(p.Water, 1e-9)) }
	first, last := level(c[0]), level(c[len(c)-1])
	picked := []Point{c[0]}
	next := 1
	for k := 1; k < rows-1; k++ {
		goal := first + (last-first)*float64(k)/float64(rows-1)
		best := next
		for i := next; i < len(c)-(rows-1-k); i++ {
			if math.Abs(level(c[i])-goal) < math.Abs(level(c[best])-goal) {
				best = i
			}
		}
		picked = append(picked, c[best])
		next = best + 1
	}
	return append(picked, c[len(c)-1])
}

// ReadingRepeatabilityM3 is the repeatability of the volume read in a receiver
// that holds up to 1 mL, 0.1 mL (ASTM D95).
const ReadingRepeatabilityM3 = 0.1e-6

// ProvedByReading is the least water content, as a mass fraction of a charge,
// that a reading of the receiver can tell from none.
func ProvedByReading(chargeKg float64) float64 {
	const waterKgPerM3 = 998.0 // at 20 °C
	return ReadingRepeatabilityM3 * waterKgPerM3 / chargeKg
}
