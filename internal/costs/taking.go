package costs

import "math"

// Taking is how an item is used up: an amount at once, again and again, the first
// time on the day of the first batch; or bit by bit, where AtOnce is 0. Both in
// the unit of the price.
type Taking struct{ AtOnce, PerYear float64 }

// takings of a need; a need that does not name them is taken as one.
func (n Need) takings() []Taking {
	if len(n.Takings) > 0 {
		return n.Takings
	}
	return []Taking{{n.AtOnce, max(n.LaterYears, n.Year())}}
}

// takenThrough is what has been taken by the end of a day, the first batch being
// on day 0.
func (n Need) takenThrough(day int) (taken float64) {
	const edge = 1e-9 // of an interval: a taking on the edge of a day belongs to the next
	for _, t := range n.takings() {
		intervals := float64(day + 1)
		switch {
		case t.AtOnce == 0:
			taken += t.PerYear / daysPerYear * intervals
		case t.PerYear == 0 && day >= 0:
			taken += t.AtOnce
		default:
			intervals *= t.PerYear / daysPerYear / t.AtOnce
			taken += t.AtOnce * math.Ceil(intervals-edge)
		}
	}
	return taken
}

// usable is what is taken from a pack before it is too old, on average. A pack
// that is opened serves the taking for which it is opened, however seldom that
// is, and what else is taken within its shelf life. A taking from several packs
// leaves the rest of the last; that other sizes might fit better is not counted.
func (n Need) usable(size, shelfDays float64) float64 {
	if shelfDays == 0 {
		return size
	}
	perYear, packs := 0.0, 0.0 // packs opened a year, each taking from packs of its own
	for _, t := range n.takings() {
		share := t.PerYear / daysPerYear * shelfDays
		if t.AtOnce > 0 {
			share = max(share, t.AtOnce/math.Ceil(t.AtOnce/size))
		}
		if share > 0 {
			perYear, packs = perYear+t.PerYear, packs+t.PerYear/min(size, share)
		}
	}
	together := perYear / daysPerYear * shelfDays
	if packs > 0 {
		together = max(together, perYear/packs)
	}
	return min(size, together)
}
