package study

import (
	"fmt"
	"slices"

	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// dropBeaten takes out the chains that reach the target and that another route beats,
// by its settings or by others (search.Marks). Single steps stay, and so do chains of
// settling, trap and soak: whether pre-drying pays is what people ask.
func (l *Lot) dropBeaten(t *search.Tuner, marks *search.Marks) error {
	if marks == nil { // an earlier run is repeated
		return nil
	}
	by := map[string]string{}
	for i := range l.Routes {
		r := &l.Routes[i]
		if !r.Meets() {
			continue
		}
		m, err := t.MeasuresOf(&r.Run)
		if err != nil {
			return err
		}
		if winner := marks.Beats(r.Run.Route, []search.Measures{m}); winner != "" {
			by[r.ID] = fmt.Sprintf("dearer than %s, and what it saves in attended hours, energy and waste is worth less than 1 %% of it", winner)
		}
	}
	l.drop(by)
	return nil
}

// dropDominated takes out the chains that are not sure enough and stand behind a
// route that is, and those that miss the target and leave no less water than another
// for no less of anything.
func (l *Lot) dropDominated() {
	by := map[string]string{}
	for i := range l.Routes {
		r := &l.Routes[i]
		if winner := l.surer(r); winner != "" && r.WhyNot != "" {
			by[r.ID] = fmt.Sprintf("not sure enough, and no better than %s, which is", winner)
		}
		if winner := l.dominator(r); winner != "" && !r.Meets() {
			by[r.ID] = fmt.Sprintf("leaves no less water than %s, for no less money, attended hours, energy or waste", winner)
		}
	}
	l.drop(by)
	for i := range l.Routes {
		if l.Routes[i].Rank > 0 {
			l.Routes[i].Rank = i + 1
		}
	}
}

// drop moves routes, but for those that are asked for, to those not offered, each
// with its reason.
func (l *Lot) drop(reasons map[string]string) {
	var kept []Route
	for _, r := range l.Routes {
		if reasons[r.ID] == "" || asked(r.Run.Route) {
			kept = append(kept, r)
			continue
		}
		l.Excluded = append(l.Excluded, routes.Excluded{ID: r.ID, Reason: reasons[r.ID], Beaten: true})
	}
	l.Routes = kept
}

// asked are single steps, and settling, a trap and a soak in this order.
func asked(r routes.Route) bool {
	place := -1
	for _, s := range r {
		at := slices.Index([]steps.Kind{steps.Settle, steps.Trap, steps.Soak}, s.Kind)
		if at <= place {
			return len(r) == 1
		}
		place = at
	}
	return true
}

func (l *Lot) dominator(r *Route) string {
	for i := range l.Routes {
		if b := &l.Routes[i]; b.ID != r.ID && b.dominates(r) {
			return b.ID
		}
	}
	return ""
}

// surer is a recommended route before one that is not, or "".
func (l *Lot) surer(r *Route) string {
	for i := range l.Routes {
		switch b := &l.Routes[i]; {
		case b.ID == r.ID:
			return ""
		case b.Recommended:
			return b.ID
		}
	}
	return ""
}

// dominates a route that misses the target.
func (r *Route) dominates(o *Route) bool {
	if !r.Bill.Priced() && o.Bill.Priced() {
		return false
	}
	mine, others := r.measures(), o.measures()
	better := false
	for i := range mine {
		if mine[i] > others[i] {
			return false
		}
		better = better || mine[i] < others[i]
	}
	return better
}

func (r *Route) measures() [6]float64 {
	return [6]float64{r.Objective, r.Bill.PerLitre.InexactFloat64(), r.Run.HoursAttended, r.Run.EnergyKWh, r.Run.WasteKg, r.Run.WaterOut}
}
