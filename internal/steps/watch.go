package steps

import "math"

// Watch picks the points of a course that are worth reading at the bench: the
// start, the end, and between them points about evenly spaced in the time and in the
// logarithm of the water left, rows in all.
func (o *Outcome) Watch(rows int) []Point {
	if len(o.Course) < 3 || rows < 2 {
		return o.Course
	}
	start, end := o.Course[0], o.Course[len(o.Course)-1]
	least := 1e-9
	if out := o.Out.Water(); end.Water < out { // no less is claimed
		least = out
	}
	lnWater := func(p Point) float64 { return math.Log(math.Max(p.Water, least)) }
	c := distinct(o.Course, lnWater)
	if len(c) <= rows {
		return c
	}
	hours, falls := end.Hours-start.Hours, math.Abs(lnWater(end)-lnWater(start))
	level := func(p Point) float64 { // 0 at the start, 1 at the end
		byTime, byWater := (p.Hours-start.Hours)/hours, math.Abs(lnWater(p)-lnWater(start))/falls
		switch {
		case !(hours > 0):
			return byWater
		case !(falls > 0):
			return byTime
		}
		return (byTime + byWater) / 2
	}
	first, last := 0.0, 1.0
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

// distinct leaves out the points of a course that read like the one before or like the
// last: where an end is closed in upon, steps grow short.
func distinct(c []Point, lnWater func(Point) float64) []Point {
	last := c[len(c)-1]
	alike := func(a, b Point) bool {
		const readably = 0.005
		return math.Abs(a.Hours-b.Hours) < readably*last.Hours && math.Abs(lnWater(a)-lnWater(b)) < readably
	}
	kept := []Point{c[0]}
	for _, p := range c[1 : len(c)-1] {
		if !alike(p, kept[len(kept)-1]) && !alike(p, last) {
			kept = append(kept, p)
		}
	}
	return append(kept, last)
}

// holdsOfWater is the figure of what a receiver holds before it must be drained.
const holdsOfWater = "receiver holds of aqueous layer"

// DrainAt are the points of a charge at which the receiver of a trap is full of
// aqueous layer, before the end, between the points of the course.
func (o *Outcome) DrainAt() (all []Point) {
	usableM3 := o.Figure(holdsOfWater) * 1e-6
	for i := 1; i < len(o.Course) && usableM3 > 0; i++ {
		a, b := o.Course[i-1], o.Course[i]
		for full := usableM3 * float64(len(all)+1); full > a.AqueousM3 && full < b.AqueousM3; full = usableM3 * float64(len(all)+1) {
			all = append(all, between(a, b, (full-a.AqueousM3)/(b.AqueousM3-a.AqueousM3)))
		}
	}
	return all
}

// between is the point at a share of the way from one to the next, by straight
// lines; water falls by a constant factor.
func between(a, b Point, share float64) Point {
	line := func(from, to float64) float64 { return from + (to-from)*share }
	return Point{
		Hours: line(a.Hours, b.Hours), Water: a.Water * math.Pow(b.Water/a.Water, share), BoiledKg: line(a.BoiledKg, b.BoiledKg),
		AqueousM3: line(a.AqueousM3, b.AqueousM3), DrawnM3: line(a.DrawnM3, b.DrawnM3), LostShare: line(a.LostShare, b.LostShare),
		Carrier: line(a.Carrier, b.Carrier), PotK: line(a.PotK, b.PotK), HeadK: line(a.HeadK, b.HeadK),
	}
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
