package study

import "slices"

// front enters the routes that reach the limit, are sure enough where any is, and have
// their prices into the trade-off of cost, attended hours, waste and energy, and names for each the first
// route that is no worse in all four and better in one.
func (l *Lot) front() {
	l.Front = nil
	for i := range l.Routes {
		if r := &l.Routes[i]; l.competes(r) && r.Bill.Priced() {
			l.Front = append(l.Front, FrontPoint{
				ID: r.ID, CostPerLitre: r.Bill.PerLitre.InexactFloat64(),
				HoursAttended: r.Run.HoursAttended, WasteKg: r.Run.WasteKg, EnergyKWh: r.Run.EnergyKWh,
			})
		}
	}
	for i := range l.Front {
		for _, other := range l.Front {
			if other.beats(l.Front[i]) {
				l.Front[i].DominatedBy = other.ID
				break
			}
		}
	}
}

// competes reports whether a route reaches the limit and is sure enough, where any is.
func (l *Lot) competes(r *Route) bool { return r.Recommended || r.Meets() && !l.anySure() }

func (l *Lot) anySure() bool {
	return slices.ContainsFunc(l.Routes, func(r Route) bool { return r.Recommended })
}

func (p FrontPoint) beats(o FrontPoint) bool {
	mine, others := p.values(), o.values()
	better := false
	for i := range mine {
		if mine[i] > others[i] {
			return false
		}
		better = better || mine[i] < others[i]
	}
	return better
}

func (p FrontPoint) values() [4]float64 {
	return [4]float64{p.CostPerLitre, p.HoursAttended, p.WasteKg, p.EnergyKWh}
}
