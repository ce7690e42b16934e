// Package search chooses the free settings of a route and ranks the routes.
package search

import (
	"fmt"

	"parch/internal/costs"
	"parch/internal/routes"
)

// Objective is what is made small.
type Objective string

// The objectives of a job. Cost is per litre delivered; time is start to finish;
// waste and energy are per batch.
const (
	Cost   Objective = "cost"
	Time   Objective = "time"
	Waste  Objective = "waste"
	Energy Objective = "energy"
)

// Of returns the objective's value for a run: money per litre, h, kg or kWh.
func (o Objective) Of(run *routes.Run, book costs.Book, batchesPerYear float64) (float64, error) {
	switch o {
	case Cost:
		perBatch, err := book.PerBatchFloat(run.Uses, batchesPerYear)
		return perBatch / run.LitresDelivered, err
	case Time:
		return run.HoursTotal, nil
	case Waste:
		return run.WasteKg, nil
	case Energy:
		return run.EnergyKWh, nil
	}
	return 0, fmt.Errorf("objective %q is not one of cost, time, waste, energy", o)
}

// Mix weighs the objectives against each other. Each value is divided by that of
// the lot's cheapest route, so that the cheapest route scores 1 and a route that is
// half as dear, half as long and half as wasteful scores 0.5. Where the cheapest
// route has none of something, the least that any other route has is the unit.
type Mix struct {
	Weights map[Objective]float64 // add up to 1
	Unit    map[Objective]float64 // above zero
}

// Of returns the weighed sum for a run.
func (m *Mix) Of(run *routes.Run, book costs.Book, batchesPerYear float64) (float64, error) {
	total := 0.0
	for _, o := range Objectives {
		if m.Weights[o] == 0 {
			continue
		}
		value, err := o.Of(run, book, batchesPerYear)
		if err != nil {
			return 0, err
		}
		total += m.Weights[o] * value / m.Unit[o]
	}
	return total, nil
}

// Objectives in the order in which they are named.
var Objectives = []Objective{Cost, Time, Waste, Energy}
