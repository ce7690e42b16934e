package study

import (
	"fmt"

	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// lotWarnings say what the answer for a lot rests on.
func lotWarnings(k *routes.Case) []string {
	var w []string
	add := func(format string, args ...any) { w = append(w, fmt.Sprintf(format, args...)) }
	if k.Limit.CannotShow != "" {
		add("target %s", k.Limit.CannotShow)
	}
	room := k.Job.Site.RoomK
	saturated, partly, err := k.Mixture.Solubility(room)
	if err == nil && partly {
		switch {
		case k.Lot.FreeWaterM3 > 0 && k.Lot.Water < 0.8*saturated:
			add("free water stands beside %s dissolved, yet %s holds %s at %.0f °C: the sample was not at equilibrium or the reading is of another layer", quantity.FormatWater(k.Lot.Water), k.Solvent.Name, quantity.FormatWater(saturated), room-273.15)
		case k.Lot.FreeWaterM3 == 0 && k.Lot.Water > 1.02*saturated:
			add("%s is more than %s holds at %.0f °C (%s): the lot holds free water, and a reading of a hazy sample is not its dissolved content", quantity.FormatWater(k.Lot.Water), k.Solvent.Name, room-273.15, quantity.FormatWater(saturated))
		}
	}
	if band := k.Solvent.Water.SolubilityBand; band > 1.2 {
		add("published solubilities of water in %s scatter by a factor of %.3g: trap floors share that band", k.Solvent.Name, band)
	}
	switch p := k.Lot.Peroxide; {
	case p == nil || !k.Solvent.Hazards.FormsPeroxides():
	case k.ReadingTooOld():
		add("the peroxide reading is of %s, too old to heat the lot by: %s", p.Date, k.ReadingCounts())
	default:
		add("the peroxide reading is of %s; %s: test again before the lot is heated or has stood", p.Date, k.ReadingCounts())
	}
	if k.Lot.Water < k.Assay.DetectionLimit {
		add("the start of %s lies below the detection limit of %s", quantity.FormatWater(k.Lot.Water), quantity.FormatWater(k.Assay.DetectionLimit))
	}
	for _, estimate := range k.Solvent.Estimates {
		add("%s, estimated: %s", k.Solvent.Name, estimate)
	}
	if k.Solvent.Water.Quality != "A" {
		add("water + %s: activity model of quality %s", k.Solvent.Name, k.Solvent.Water.Quality)
	}
	if a := k.Catalog.Assays[k.Job.Site.KarlFischer]; a.Highest.SI > 0 && k.Lot.Water > a.Highest.SI {
		add("%s Karl Fischer is advised up to %s only; read the %s of the start by the other method", a.Key, quantity.FormatWater(a.Highest.SI), quantity.FormatWater(k.Lot.Water))
	}
	return w
}

// runWarnings say what a route's numbers rest on.
func runWarnings(k *routes.Case, run routes.Run) []string {
	var w []string
	add := func(format string, args ...any) { w = append(w, fmt.Sprintf(format, args...)) }
	var pieces []string
	for _, o := range run.Outcomes {
		pieces = append(pieces, o.Agent, o.Apparatus)
	}
	w = append(w, ownWarnings(k, pieces)...)
	told := false
	for _, o := range run.Outcomes {
		w = append(w, o.Warnings...)
		if o.Kind.Heated() && !told {
			w, told = append(w, stillWarnings(k, stillCharges(k, run.Outcomes...))...), true
		}
		switch o.Kind {
		case steps.Trap:
			add("below %s a trap is taken to work at %.2g of the ideal, and its outlet is never claimed under %s (common practice, no source)",
				quantity.FormatWater(k.Catalog.Practice["trap-efficiency-below"].SI), k.Catalog.Practice["trap-efficiency"].SI, quantity.FormatWater(k.Catalog.Practice["trap-outlet-minimum"].SI))
		case steps.Soak:
			agent := k.Catalog.Agents[o.Agent]
			if agent.LoadingBand > 1 {
				add("%s: loading known to a factor of %.2g only", agent.Name, agent.LoadingBand)
			}
			w = append(w, Borrowed(k, o.Agent)...)
			add("the sieve is taken to hold %.2g g/100 g from its history; this and the mixing rate of a still vessel rule the result (fitted to few published dryings, most within a factor of 2)", k.ResidualOn(o.Agent)*100)
			if k.Lot.FreeWaterM3 > 0 && len(run.Outcomes) == 1 {
				add("free water goes over the sieve: the soak is computed as if it were dissolved, and the sieve warms; draw it off first")
			}
		case steps.Column:
			w = append(w, Borrowed(k, o.Agent)...)
			add("the column's outlet rests on the diffusion of water into the beads, which may be overstated by a factor of two, and on the sieve's history (%.2g g/100 g)", k.ResidualOn(o.Agent)*100)
		case steps.Salt:
			add("a salt is claimed to take the share of water that it took from ether when it was measured, whatever its equilibrium says")
		case steps.Reactive:
			if k.IsMeasured(o.Agent) { // else the step says so
				add("the residual of %s in %s is one published or recalled figure, from its own dose and time", o.Agent, k.Solvent.Name)
			}
		case steps.Buy:
			add("water of the dry grade is its limit as sold, before the bottle is opened; the time of delivery is not counted: order in time")
		}
	}
	if !finite(run.CO2eKg) {
		add("no emission factor for part of this route: CO2e left out")
	}
	return w
}

// Borrowed says that what a sorbent holds is not known, and what is taken instead.
func Borrowed(k *routes.Case, agent string) []string {
	if !k.Borrows(agent) {
		return nil
	}
	band := k.Catalog.Practice[routes.OxideHistory]
	zeolite := 100 * k.Lot.ResidualLoading * k.Lot.HistoryShare(agent)
	return []string{fmt.Sprintf("what %s holds after activation is not known: %.2g g/100 g is taken from zeolites, and the band, %.2g to %.2g g/100 g, is an assumption; where it is known, state it as \"residual ...\"",
		k.Catalog.Agents[agent].Plain(), zeolite*band.SI, zeolite*band.Low, zeolite*band.High)}
}

// ownWarnings say which entries of the user's own a route with these agents and
// pieces of apparatus rests on.
func ownWarnings(k *routes.Case, pieces []string) (w []string) {
	if s := k.Solvent; s.Own {
		text := s.Name + " is from own data"
		if n := len(s.Estimates); n > 0 {
			text += fmt.Sprintf(", with %d parts of it estimated", n)
		}
		w = append(w, text)
	}
	for _, key := range pieces {
		if a := k.Catalog.Agents[key]; a != nil && a.Own {
			w = append(w, a.Name+" is from own data")
		}
		if a := k.Catalog.Apparatus[key]; a != nil && a.Own {
			w = append(w, a.Name+" is from own data")
		}
	}
	return w
}

// Bounds beyond which a still is an odd choice for a lot.
const (
	manyCharges = 10
	leastFill   = 0.25 // of the flask; a smaller charge cannot be watched or stirred
)

// stillCharges are those of the step that takes most: a carrier fills the flask too.
func stillCharges(k *routes.Case, outcomes ...steps.Outcome) int {
	_, most := k.Still()
	for _, o := range outcomes {
		if n := o.Figure("still charges"); finite(n) {
			most = max(most, int(n))
		}
	}
	return most
}

func stillWarnings(k *routes.Case, charges int) []string {
	var w []string
	still, _ := k.Still()
	switch fill := k.Lot.BatchM3 / float64(charges) / still.Volume.SI; {
	case charges > manyCharges:
		w = append(w, fmt.Sprintf("the still takes the lot in %d charges: a larger one is wanted", charges))
	case charges > 1:
		w = append(w, fmt.Sprintf("the still takes the lot in %d charges", charges))
	case fill < leastFill:
		w = append(w, fmt.Sprintf("the lot fills %.2g %% of the still's flask: a smaller one is wanted", 100*fill))
	}
	if p := still.Power; p != nil && p.Banded() && k.Lot.HeaterW > 2*p.High {
		w = append(w, fmt.Sprintf("a heater of %s is more than the flask is made for (%s)", quantity.FormatPower(k.Lot.HeaterW), p.Text))
	}
	return w
}
