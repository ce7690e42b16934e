package search

import (
	"errors"
	"math"
	"slices"

	"parch/internal/routes"
)

// Field are routes that compete for the least cost a litre.
type Field struct {
	Tuner  *Tuner // its objective is the cost
	Routes []routes.Route
	Warm   map[string]routes.Settings // by route id: where to start looking
}

// Won is the cheapest route of a field that reaches the limit and has its prices.
type Won struct {
	Route routes.Route
	Run   routes.Run
	Cost  float64 // a litre; +Inf where no route reaches the limit
}

// ID of the route, "" where none reaches the limit.
func (w Won) ID() string {
	if w.Route == nil {
		return ""
	}
	return w.Route.ID()
}

// Cheapest tunes the routes until the next cannot win. floors are costs that a
// route cannot fall below, by its id; where one is known, the routes are taken in
// that order and those above the best are left alone. What was found, or the floor
// where a route was left alone, is returned by id. The route that is cheapest at
// equal cost is the first of the field.
func (f Field) Cheapest(floors map[string]float64) (Won, map[string]float64, error) {
	order := make([]int, len(f.Routes))
	ids := make([]string, len(f.Routes))
	for i, r := range f.Routes {
		order[i], ids[i] = i, r.ID()
	}
	slices.SortStableFunc(order, func(a, b int) int {
		return compareFloats(floors[ids[a]], floors[ids[b]])
	})
	best := Won{Cost: math.Inf(1)}
	found := map[string]float64{}
	for _, i := range order {
		if floor := floors[ids[i]]; floor > best.Cost {
			found[ids[i]] = floor
			continue
		}
		run, cost, err := f.cost(f.Routes[i], ids[i])
		if err != nil {
			return best, nil, err
		}
		if !math.IsInf(cost, 1) {
			found[ids[i]] = cost
		}
		if cost < best.Cost {
			best = Won{f.Routes[i], run, cost}
		}
	}
	return best, found, nil
}

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
