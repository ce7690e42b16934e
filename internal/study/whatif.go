package study

import (
	"context"
	"math"
	"slices"

	"parch/internal/job"
)

// Factors on the lot's own start water and target in the grid of other lots.
var (
	startFactors  = []float64{0.25, 0.5, 1, 2, 4}
	targetFactors = []float64{0.5, 1, 2, 4}
)

// whatIf finds the cheapest route for other start waters and targets. A wetter
// start or a lower target makes no route cheaper: what a route costs in the cell
// before is a floor here, and routes whose floor is above the best are left alone.
func (q *question) whatIf(ctx context.Context) error {
	own := q.lot.Job
	w := &WhatIf{StartWater: around(own.Water, startFactors, math.Min(0.5, q.k.Saturation())), Target: around(own.Target, targetFactors, 0.5)}
	w.Cells = make([][]WhatIfCell, len(w.StartWater))
	above := make([]map[string]float64, len(w.Target)) // costs one start drier
	for i, start := range w.StartWater {
		w.Cells[i] = make([]WhatIfCell, len(w.Target))
		var looser map[string]float64 // costs at the next higher target
		for k := len(w.Target) - 1; k >= 0; k-- {
			if err := ctx.Err(); err != nil {
				return err
			}
			cell, found, err := q.cell(start, w.Target[k], highest(above[k], looser))
			if err != nil {
				return err
			}
			w.Cells[i][k], above[k], looser = cell, found, found
		}
	}
	q.lot.WhatIf = w
	return nil
}

func (q *question) cell(start, target float64, floors map[string]float64) (WhatIfCell, map[string]float64, error) {
	t := q.withLot(func(l *job.Lot) { l.Water, l.Target, l.Saturated = start, target, false })
	none := func(note string) (WhatIfCell, map[string]float64, error) {
		return WhatIfCell{CostPerLitre: math.NaN(), Note: note}, floors, nil
	}
	switch {
	case t.Case.Limit.CannotShow != "":
		return none("cannot be shown")
	case t.Case.Dry():
		return none("dry already")
	}
	offered, _ := t.Case.Candidates()
	f := q.field(t, nil)
	f.Routes = q.sure(append(q.quick(offered), q.longer...))
	won, found, err := f.Cheapest(floors, math.Inf(1))
	if err != nil {
		return WhatIfCell{}, nil, err
	}
	if won.Route == nil {
		return none("no route")
	}
	return WhatIfCell{ID: won.ID(), CostPerLitre: won.Cost}, found, nil
}

// around multiplies a value by factors, up to a limit, each once.
func around(value float64, factors []float64, most float64) (all []float64) {
	for _, f := range factors {
		if x := math.Min(value*f, most); !slices.Contains(all, x) {
			all = append(all, x)
		}
	}
	return all
}

// highest joins floors.
func highest(a, b map[string]float64) map[string]float64 {
	joined := map[string]float64{}
	for _, m := range []map[string]float64{a, b} {
		for id, x := range m {
			if math.IsInf(x, 1) {
				continue // what cannot be had on one lot may be had on another
			}
			joined[id] = math.Max(joined[id], x)
		}
	}
	return joined
}
