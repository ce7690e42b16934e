package search

import (
	"errors"
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Field are routes that compete for the least cost a litre.
type Field struct {
	Tuner  *Tuner // its objective is the cost
	Routes []routes.Route
	Warm   map[string]routes.Settings // by route id: where to start looking
	Learns bool                       // what is found is where to start the next time
}

// Won is the cheapest route of a field that reaches the limit and has its prices.
type Won struct {
	Route routes.Route
	Run   routes.Run
	Cost  float64 // a litre; +Inf where no route reaches the limit

	AtLeast float64 // what the field costs at least, with the routes that were left alone
}

// ID of the route, "" where none reaches the limit.
func (w Won) ID() string {
	if w.Route == nil {
		return ""
	}
	return w.Route.ID()
}

// Cheapest tunes the routes until the next cannot win. floors are costs that a
// route cannot fall below, by its id; what its steps before the last cost is a
// floor too. The routes are taken in the order of their floors, and those above the
// best, or above most, are left alone. What was found, or the floor where a route
// was left alone, is returned by id; +Inf where a route cannot be had. At equal
// cost the first in the field wins.
func (f Field) Cheapest(floors map[string]float64, most float64) (Won, map[string]float64, error) {
	lots := make([]ticket, len(f.Routes))
	for i, r := range f.Routes {
		id := r.ID()
		lots[i] = ticket{r, id, math.Max(floors[id], f.Tuner.LeastCost(r))}
	}
	slices.SortStableFunc(lots, func(a, b ticket) int { return compareFloats(a.floor, b.floor) })
	best := Won{Cost: math.Inf(1), AtLeast: math.Inf(1)}
	found := map[string]float64{}
	for _, l := range lots {
		if l.floor > best.Cost || l.floor > most {
			found[l.id] = l.floor
			best.AtLeast = math.Min(best.AtLeast, l.floor)
			continue
		}
		run, cost, err := f.cost(l.route, l.id)
		if err != nil {
			return best, nil, err
		}
		found[l.id] = cost
		if _, known := f.Warm[l.id]; f.Learns && !known && !math.IsInf(cost, 1) {
			f.Warm[l.id] = run.Settings
		}
		if cost < best.Cost {
			best.Route, best.Run, best.Cost = l.route, run, cost
		}
	}
	best.AtLeast = math.Min(best.AtLeast, best.Cost)
	return best, found, nil
}

// ticket is a route with a cost that it cannot fall below.
type ticket struct {
	route routes.Route
	id    string
	floor float64
}

// LeastCost is a cost a litre that a route cannot fall below: that of its steps
// before the last, each doing the least it can. Costs only add up along a route and
// its litres only shrink. +Inf where those steps refuse the lot.
func (t *Tuner) LeastCost(r routes.Route) float64 {
	head := r[:len(r)-1]
	if len(head) == 0 || has(head, steps.Soak) || has(head, steps.Column) || r.CarrierOf() != "" {
		return 0
	}
	s := t.blank(head)
	for i := range s.PressureKPa { // the coldest pot takes the least heat
		all := t.Case.ForerunPressures()
		s.PressureKPa[i] = all[len(all)-1]
	}
	for _, place := range places(r) {
		if place < len(head)-1 {
			s.HandOverMgPerKg[place] = t.Case.Feed.Water() * 1e6
		}
	}
	run, err := t.Case.RunTo(head, s, t.Case.Feed.Water()*leastEffort)
	if errors.Is(err, routes.ErrRefused) {
		return math.Inf(1)
	}
	if err != nil {
		return 0 // what it costs is seen when it is tuned
	}
	if t.Site != nil {
		t.Site.Apply(&run, t.Case.Lot.BatchesPerYear)
	}
	cost, err := Cost.Of(&run, t.Book, t.Case.Lot.BatchesPerYear)
	if err != nil {
		return 0
	}
	return cost
}

// leastEffort is the share of the water that a step is to leave that does the least.
const leastEffort = 1 - 1e-6

func compareFloats(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// Cost a litre of one route as tuned; +Inf where it cannot be had, misses the limit
// or lacks a price.
func (f Field) Cost(r routes.Route) (float64, error) {
	_, cost, err := f.cost(r, r.ID())
	return cost, err
}

func (f Field) cost(r routes.Route, id string) (routes.Run, float64, error) {
	var warm *routes.Settings
	if s, ok := f.Warm[id]; ok {
		warm = &s
	}
	run, err := f.Tuner.TuneFrom(r, warm)
	if _, kept := f.Tuner.kept(r); kept && soaks(r) > 0 && err == nil && !run.Meets {
		longer := *f.Tuner
		longer.standsLonger = true
		run, err = longer.TuneFrom(r, warm)
	}
	switch {
	case errors.Is(err, ErrTooSlow) || errors.Is(err, routes.ErrRefused):
		return run, math.Inf(1), nil
	case err != nil:
		return run, 0, err
	case !run.Meets || len(f.Tuner.Book.Missing(run.Uses)) > 0:
		return run, math.Inf(1), nil
	}
	cost, err := Cost.Of(&run, f.Tuner.Book, f.Tuner.Case.Lot.BatchesPerYear)
	return run, cost, err
}
