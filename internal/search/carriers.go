package search

import (
	"fmt"
	"sort"

	"parch/internal/quantity"
	"parch/internal/routes"
)

// mostCarriers is how many carriers are looked at in full: each of their runs takes
// as long as thousands of soaks.
const mostCarriers = 2

// screened is a carrier's route, run once with the usual dose.
type screened struct {
	carrier     string
	water, cost float64 // kg/kg, money
}

// fewCarriers keeps the routes of the best carriers. Those that leave no more than
// twice the water of the driest are ordered by cost. A carrier that the job names is
// kept; what a carrier is refused for stays to be found by its own route.
func (t *Tuner) fewCarriers(all []routes.Route) (kept []routes.Route, dropped []routes.Excluded) {
	good := t.screen(all)
	keep, worse := map[string]bool{"": true}, map[string]string{}
	for i, s := range good {
		if keep[s.carrier] = i < mostCarriers || t.Case.CarrierAccepted(s.carrier); !keep[s.carrier] {
			worse[s.carrier] = fmt.Sprintf("of the carriers %s does better: it leaves %s at %s, this one %s; with the same dose", good[0].carrier,
				quantity.FormatWater(good[0].water), comparedCost(good[0].cost, s.cost), quantity.FormatWater(s.water))
		}
	}
	told, enough := map[string]bool{}, map[string]bool{}
	for _, s := range good {
		enough[s.carrier] = s.water <= t.Case.Goal()
	}
	for _, r := range all {
		key := r.CarrierOf()
		why, beaten := worse[key]
		switch {
		case enough[key] && keep[key] && len(r) > 2: // nothing is left for what follows
			if longer := "trap:" + key + "+forerun+…"; !told[longer] {
				told[longer] = true
				dropped = append(dropped, routes.Excluded{ID: longer, Reason: "the carrier alone takes the lot to its goal: nothing is left for what follows"})
			}
		case !beaten && (key == "" || keep[key] || len(r) == 2):
			kept = append(kept, r)
		case beaten && !told[key]:
			told[key] = true
			dropped = append(dropped, routes.Excluded{ID: r.ID(), Reason: why, Beaten: true})
		}
	}
	return kept, dropped
}

func comparedCost(a, b float64) string {
	if a <= b {
		return "no more money"
	}
	return "more money"
}

// screen runs each carrier once, best first. Refused ones are left out.
func (t *Tuner) screen(all []routes.Route) (good []screened) {
	driest := 1.0
	for _, r := range all {
		if r.CarrierOf() == "" || len(r) != 2 { // the carrier by itself
			continue
		}
		s := t.blank(r)
		s.CarrierDose[0] = routes.UsualCarrierDose
		stages := t.Case.ColumnStages()
		s.Stages[0] = stages[len(stages)-1]
		run, err := t.Run(r, s)
		if err != nil {
			continue
		}
		cost, err := t.Book.PerBatchFloat(run.Uses, t.Case.Lot.BatchesPerYear)
		if err != nil {
			continue
		}
		good = append(good, screened{carrier: r.CarrierOf(), water: run.WaterOut, cost: cost})
		driest = min(driest, run.WaterOut)
	}
	sort.SliceStable(good, func(i, j int) bool {
		a, b := good[i], good[j]
		if dryA, dryB := a.water <= 2*driest, b.water <= 2*driest; dryA != dryB {
			return dryA
		}
		if a.cost != b.cost {
			return a.cost < b.cost
		}
		return a.carrier < b.carrier
	})
	return good
}
