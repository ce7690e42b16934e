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
