package study

import (
	"math"

	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

// weigh sets the mix of objectives of a tuner where the job weighs several: the
// units are the values of the lot's cheapest route.
func weigh(t *search.Tuner, j *job.Job, offered []routes.Route) error {
	if j.Weights == nil {
		return nil
	}
	byCost := *t
	byCost.Objective = search.Cost
	mix := &search.Mix{Weights: map[search.Objective]float64{}, Unit: map[search.Objective]float64{}}
	values := map[search.Objective][]float64{}
	cheapest := math.Inf(1)
	for _, r := range offered {
		run, err := byCost.Tune(r)
		if _, refused := refusal(err); refused {
			continue
		}
		if err != nil {
			return err
		}
		if !run.Meets || len(t.Book.Missing(run.Uses)) > 0 {
			continue
		}
		for _, o := range search.Objectives {
			v, err := o.Of(&run, t.Book, t.Case.Lot.BatchesPerYear)
			if err != nil {
				return err
			}
			values[o] = append(values[o], v)
		}
		if at := len(values[search.Cost]) - 1; values[search.Cost][at] < cheapest {
			cheapest = values[search.Cost][at]
			for _, o := range search.Objectives {
				mix.Unit[o] = values[o][at]
			}
		}
	}
	for _, o := range search.Objectives {
		mix.Weights[o] = j.Weights[string(o)]
		if mix.Unit[o] == 0 {
			mix.Unit[o] = leastAboveZero(values[o])
		}
	}
	t.Mix = mix
	return nil
}

// leastAboveZero is 1 where all are zero: then they make no difference.
func leastAboveZero(values []float64) float64 {
	least := math.Inf(1)
	for _, v := range values {
		if v > 0 {
			least = math.Min(least, v)
		}
	}
	if math.IsInf(least, 1) {
		return 1
	}
	return least
}
