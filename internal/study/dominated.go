package study

import (
	"fmt"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// dropDominated takes out the chains of several steps that another route beats
// or equals in everything: the job's objective, cost, attended hours, energy,
// waste, and water left where the target is missed. Single steps stay, and so do
// chains of settling, trap and soak: whether pre-drying pays is what people ask.
func (l *Lot) dropDominated() {
	var kept []Route
	for _, r := range l.Routes {
		better := l.dominator(r)
		if better == nil || asked(r.Run.Route) {
			kept = append(kept, r)
			continue
		}
		l.Excluded = append(l.Excluded, routes.Excluded{ID: r.ID, Reason: fmt.Sprintf("no better than %s in cost, attended hours, energy or waste", better.ID), Beaten: true})
	}
	for i := range kept {
		if kept[i].Rank > 0 {
			kept[i].Rank = i + 1
		}
	}
	l.Routes = kept
}

func asked(r routes.Route) bool {
	return len(r) == 1 || !slices.ContainsFunc(r, func(s routes.Stage) bool {
		return s.Kind != steps.Settle && s.Kind != steps.Trap && s.Kind != steps.Soak
	})
}

func (l *Lot) dominator(r Route) *Route {
	for i := range l.Routes {
		if b := &l.Routes[i]; b.ID != r.ID && b.dominates(r) {
			return b
		}
	}
	return nil
}

func (r *Route) dominates(o Route) bool {
	if o.Recommended && !r.Recommended || r.Run.Meets != o.Run.Meets && !r.Run.Meets || !r.Bill.Priced() && o.Bill.Priced() {
		return false
	}
	mine, others := r.measures(), o.measures()
	better := r.Run.Meets && !o.Run.Meets
	for i := range mine {
		if mine[i] > others[i] {
			return false
		}
		better = better || mine[i] < others[i]
	}
	return better
}

func (r *Route) measures() [6]float64 {
	water := 0.0
	if !r.Run.Meets {
		water = r.Run.WaterOut
	}
	return [6]float64{r.Objective, r.Bill.PerLitre.InexactFloat64(), r.Run.HoursAttended, r.Run.EnergyKWh, r.Run.WasteKg, water}
}
