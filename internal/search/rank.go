package search

import (
	"math"
	"sort"
)

// Entry is a route as the ranking sees it.
type Entry struct {
	ID           string
	Meets        bool
	NoPrice      bool    // part of it has no price: its cost is not known
	Value        float64 // of the objective
	CostPerLitre float64
	WaterOut     float64
}

// Order sorts routes: those that reach the target by objective, then cost per
// litre, then id; after them those that reach it and have no price; last those
// that miss, the driest first. It returns the places of the entries in that order.
func Order(entries []Entry) []int {
	order := make([]int, len(entries))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(i, j int) bool { return before(entries[order[i]], entries[order[j]]) })
	return order
}

func before(a, b Entry) bool {
	switch {
	case a.Meets != b.Meets:
		return a.Meets
	case a.Meets && a.NoPrice != b.NoPrice:
		return b.NoPrice
	case !a.Meets && a.WaterOut != b.WaterOut:
		return a.WaterOut < b.WaterOut
	case a.Meets && differ(a.Value, b.Value):
		return a.Value < b.Value
	case differ(a.CostPerLitre, b.CostPerLitre):
		return a.CostPerLitre < b.CostPerLitre
	}
	return a.ID < b.ID
}

// differ leaves rounding noise out of a ranking.
func differ(a, b float64) bool {
	return math.Abs(a-b) > 1e-9*math.Max(math.Abs(a), math.Abs(b))
}
