package search

import (
	"cmp"
	"math"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Measures are what chains are compared by beside the water they leave.
type Measures struct {
	PerLitre                           float64 // money a litre delivered
	Attended, WasteKg, EnergyKWh, Time float64 // a batch; h, kg, kWh, h
	Beads                              float64 // money a litre, a part of the cost
}

// MeasuresOf a run.
func (t *Tuner) MeasuresOf(run *routes.Run) (Measures, error) {
	cost, err := Cost.Of(run, t.Book, t.Case.Lot.BatchesPerYear)
	if err != nil {
		return Measures{}, err
	}
	beads, err := t.beads(run)
	return Measures{cost, run.HoursAttended, run.WasteKg, run.EnergyKWh, run.HoursTotal, beads}, err
}

// beads are what a run pays for its sorbents, a litre delivered.
func (t *Tuner) beads(run *routes.Run) (float64, error) {
	var uses []routes.StageUse
	for _, u := range run.Uses {
		if u.Stage > 0 && u.Head == steps.Agent && onBeads(run.Route[u.Stage-1:u.Stage]) {
			uses = append(uses, u)
		}
	}
	cost, err := t.Book.PerBatchFloat(uses, t.Case.Lot.BatchesPerYear)
	return cost / run.LitresDelivered, err
}

// aim is the value of the objective.
func (t *Tuner) aim(m Measures) float64 {
	of := map[Objective]float64{Cost: m.PerLitre, Time: m.Time, Waste: m.WasteKg, Energy: m.EnergyKWh}
	if t.Mix == nil {
		return of[t.Objective]
	}
	total := 0.0
	for _, o := range Objectives {
		if t.Mix.Weights[o] > 0 {
			total += t.Mix.Weights[o] * of[o] / t.Mix.Unit[o]
		}
	}
	return total
}

// Marks are what routes that reach the limit and are sure enough come to, by their
// best settings and by others: what any further chain has to beat.
type Marks struct {
	tuner                    *Tuner
	litres                   float64
	anHour, aKWh, aKgOfWaste float64 // money
	all                      []mark
}

type mark struct {
	id    string
	route routes.Route
	Measures
}

// DearBeads is how many times as dear sieves are taken to become at most.
const DearBeads = 10

// slight is the share of a batch's cost that savings of time, energy and waste have
// to be worth together before a dearer chain is offered for their sake.
const slight = 0.01

// NewMarks has none yet.
func NewMarks(t *Tuner) *Marks {
	m := &Marks{tuner: t, litres: steps.LotVolume(t.Case.Mixture, t.Case.Feed, t.Case.Job.Site.RoomK) * 1e3}
	price := func(item string) float64 {
		if p, ok := t.Book[item]; ok {
			return p.PerUnit.InexactFloat64()
		}
		return 0
	}
	m.anHour, m.aKWh = price("technician"), price("electricity")
	for _, class := range []steps.WasteClass{steps.SolventWaste, steps.AqueousWaste, steps.WetSolidWaste} {
		m.aKgOfWaste = math.Max(m.aKgOfWaste, price(t.Case.WasteItem(class)))
	}
	return m
}

// Set adds what a route comes to.
func (m *Marks) Set(r routes.Route, measures Measures) {
	m.all = append(m.all, mark{r.ID(), r, measures})
}

// CostOf is the cost a litre of the route with an id, where it is marked.
func (m *Marks) CostOf(id string) (perLitre float64, ok bool) {
	for _, mark := range m.all {
		if mark.id == id {
			return mark.PerLitre, true
		}
	}
	return 0, false
}

// Beats names a route, other than the chain itself, that costs no more than all the
// bounds of a chain, is no worse by the objective, and from which the chain saves
// next to nothing in attended time, energy and waste; "" where there is none. It does so
// over a chain without beads only if it would where its own were DearBeads times as dear;
// and only where one more route costs no more, as the next best is told too, unless the
// chain is that route with more steps.
func (m *Marks) Beats(chain routes.Route, bounds []Measures) string {
	if len(bounds) == 0 {
		return ""
	}
	by := ""
	for _, bound := range bounds {
		if by = m.beats(chain, bound); by == "" {
			return ""
		}
	}
	return by
}

func (m *Marks) beats(chain routes.Route, bound Measures) string {
	id, beads := chain.ID(), onBeads(chain)
	first, cheaper := "", map[string]bool{}
	for i := range m.all {
		x := &m.all[i]
		if x.id == id || x.PerLitre > bound.PerLitre || m.tuner.aim(x.Measures) > m.tuner.aim(bound) {
			continue
		}
		cheaper[x.id] = true
		dear := x.PerLitre
		if !beads {
			dear += (DearBeads - 1) * x.Beads
		}
		saved := m.anHour*math.Max(0, x.Attended-bound.Attended) + m.aKWh*math.Max(0, x.EnergyKWh-bound.EnergyKWh) + m.aKgOfWaste*math.Max(0, x.WasteKg-bound.WasteKg)
		if dear > bound.PerLitre || saved > slight*x.PerLitre*m.litres {
			continue
		}
		if within(chain, x.route) {
			return x.id
		}
		first = cmp.Or(first, x.id)
	}
	if len(cheaper) < 2 {
		return ""
	}
	return first
}

// within reports whether a chain has the steps of a route, in their order.
func within(chain, route routes.Route) bool {
	found := 0
	for _, s := range chain {
		if found < len(route) && s == route[found] {
			found++
		}
	}
	return found == len(route)
}

func onBeads(r routes.Route) bool { return has(r, steps.Soak) || has(r, steps.Column) }
