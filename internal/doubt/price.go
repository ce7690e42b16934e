package doubt

import (
	"math"
	"strings"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Outcome is what a plan comes to in each draw.
type Outcome struct {
	Water        []float64 // kg/kg in the product; +Inf where the plan fails
	Hours        []float64 // start to finish
	CostPerLitre []float64 // money per litre delivered; nil where part of the plan has no price
}

// Through takes a plan through all draws.
func (l *Lot) Through(run *routes.Run) (*Outcome, error) {
	f, err := l.through(run)
	if err != nil {
		return nil, err
	}
	o := &Outcome{Water: f.water, Hours: f.hours()}
	if len(l.Book.Missing(run.Uses)) == 0 {
		o.CostPerLitre = f.costs()
	}
	return o, l.failure()
}

// Limits are what a product must keep to, kg/kg.
type Limits struct{ Least, Most float64 }

// Met reports whether a product keeps to them.
func (s Limits) Met(water float64) bool {
	least, most := s.ends()
	return water <= most && water >= least
}

// ends with a margin for the arithmetic.
func (s Limits) ends() (least, most float64) { return s.Least * (1 - 1e-9), s.Most * (1 + 1e-9) }

// Chance is the share of the draws in which a plan keeps to the limits.
func (l *Lot) Chance(run *routes.Run, limits Limits) (float64, error) {
	f, err := l.wet(run, nil)
	if err != nil {
		return 0, err
	}
	met := 0
	for _, w := range f.water {
		if limits.Met(w) {
			met++
		}
	}
	return float64(met) / float64(l.n), nil
}

func (f *flow) hours() []float64 {
	all := make([]float64, f.lot.n)
	tests := 0.0
	for _, u := range f.run.Uses {
		if u.Head == steps.Testing && u.Item == "technician" {
			tests += u.Quantity
		}
	}
	test0 := f.lot.Case.Catalog.Practice["karl-fischer-time"].SI
	test := f.lot.practice("karl-fischer-time")
	attended := f.attended()
	for i := range all {
		h := f.run.HoursTotal - f.run.HoursWaiting + f.lot.Case.WaitingFor(attended[i]) + tests*(test[i]/test0-1)
		for place, t := range f.turns {
			if t.hours != nil {
				h += t.hours[i] - f.run.Outcomes[place].HoursTotal
			}
		}
		all[i] = h
	}
	return all
}

// attended hours of the whole route.
func (f *flow) attended() []float64 {
	all := make([]float64, f.lot.n)
	seen := map[int]bool{}
	for _, u := range f.run.Uses {
		if u.Item != "technician" {
			continue
		}
		now := f.quantity(u, seen)
		for i := range all {
			if now != nil {
				all[i] += now[i]
			} else {
				all[i] += u.Quantity
			}
		}
	}
	return all
}

// costs prices the uses of the plan, each as it turns out in the draw.
func (f *flow) costs() []float64 {
	l := f.lot
	total, waste, least := make([]float64, l.n), make([]float64, l.n), make([]float64, l.n)
	litres := f.litres()
	seen := map[int]bool{}
	batches := l.Case.Lot.BatchesPerYear
	wasteKg := f.wasteShare()
	for _, u := range append(f.unplanned(), f.run.Uses...) {
		quantity := u.Quantity
		if u.PerYear {
			quantity /= batches
		}
		q := f.quantity(u, seen)
		if u.Item == "waste-container" {
			q = wasteKg
		}
		if u.Head == steps.Purchase && u.Item == l.Case.Solvent.Key {
			q = litres
		}
		if _, priced := l.Book[u.Item]; !priced {
			continue
		}
		unit := l.Book[u.Item].PerUnit.InexactFloat64()
		price := l.price(u.Item)
		into := total
		switch {
		case u.Item == "waste-minimum":
			into = least
		case u.Head == steps.Waste:
			into = waste
		}
		for i := range into {
			cost := quantity * unit
			if q != nil {
				cost = q[i] * unit
				if u.Item == "waste-container" {
					cost = quantity * q[i] * unit
				}
			}
			if price != nil {
				cost *= price[i]
			}
			into[i] += cost
		}
	}
	for i := range total {
		total[i] = (total[i] + max(waste[i], least[i])) / litres[i]
	}
	return total
}

// unplanned are the uses of which the plan needs nothing and a draw may need some:
// what a still loses and discards.
func (f *flow) unplanned() (uses []routes.StageUse) {
	planned := map[routes.StageUse]bool{}
	for _, u := range f.run.Uses {
		planned[routes.StageUse{Stage: u.Stage, Use: steps.Use{Head: u.Head, Basis: u.Basis}}] = true
	}
	add := func(place int, head steps.Head, item, unit, basis string) {
		use := routes.StageUse{Stage: place + 1, Use: steps.Use{Head: head, Basis: basis}}
		if !planned[use] {
			use.Item, use.Unit = item, unit
			uses = append(uses, use)
		}
	}
	for place, t := range f.turns {
		o := &f.run.Outcomes[place]
		for _, loss := range o.Losses {
			if t.lostKg[loss.Cause] != nil {
				add(place, steps.SolventLost, f.lot.Case.Solvent.Key, "litre", loss.Cause)
			}
		}
		for _, d := range o.Discards {
			if t.wasteKg[d.What] != nil {
				add(place, steps.Waste, f.lot.Case.WasteItem(d.Class), "kg", d.What)
			}
		}
	}
	return uses
}

// quantity is what a use comes to in each draw; nil: as planned. seen remembers the
// stages whose own labour has come by.
func (f *flow) quantity(u routes.StageUse, seen map[int]bool) []float64 {
	if u.Head == steps.Testing {
		if u.Item == "technician" {
			return f.scaled(u.Quantity, "karl-fischer-time")
		}
		return nil
	}
	if u.Stage == 0 {
		return nil
	}
	t, o := &f.turns[u.Stage-1], &f.run.Outcomes[u.Stage-1]
	switch u.Head {
	case steps.Labour:
		switch {
		case !seen[u.Stage]:
			seen[u.Stage] = true
			return t.attended
		case o.Kind == steps.Reactive:
			return f.scaled(u.Quantity, "reactive-spent")
		}
		return f.scaled(u.Quantity, "oven-attended")
	case steps.Energy:
		if strings.HasPrefix(u.Basis, "activation") {
			return nil
		}
		return t.energyKWh
	case steps.CoolingWater:
		if u.Item == "cooling-water" || t.energyKWh == nil {
			return t.coolM3
		}
		return f.as(u.Quantity, t.energyKWh, f.ownEnergy(u.Stage))
	case steps.SolventLost:
		return f.litresOf(t.lostKg[u.Basis])
	case steps.Waste:
		return t.wasteKg[u.Basis]
	}
	return nil
}

// ownEnergy is what a stage's heater or pump was planned to draw.
func (f *flow) ownEnergy(stage int) float64 {
	for _, u := range f.run.Uses {
		if u.Stage == stage && u.Head == steps.Energy && !strings.HasPrefix(u.Basis, "activation") {
			return u.Quantity
		}
	}
	return 0
}

// scaled is a quantity that goes with an operating fact.
func (f *flow) scaled(quantity float64, fact string) []float64 {
	return f.as(quantity, f.lot.practice(fact), f.lot.Case.Catalog.Practice[fact].SI)
}

// as is a quantity that goes with something that was planned.
func (f *flow) as(quantity float64, now []float64, planned float64) []float64 {
	if now == nil || planned == 0 {
		return nil
	}
	all := make([]float64, len(now))
	for i, x := range now {
		all[i] = quantity * x / planned
	}
	return all
}

func (f *flow) litresOf(kg []float64) []float64 {
	if kg == nil {
		return nil
	}
	k := f.lot.Case
	return f.as(1, kg, k.Mixture.Solvent.DensityKgPerM3.At(k.Job.Site.RoomK)*1e-3)
}

// litres delivered. A draw in which the plan fails costs what was done and leaves
// no reading: its solvent is counted with the water that was planned.
func (f *flow) litres() []float64 {
	k := f.lot.Case
	room := k.Job.Site.RoomK
	solventKgPerL, waterKgPerL := 1e-3*k.Mixture.Solvent.DensityKgPerM3.At(room), 1e-3*k.Mixture.Water.DensityKgPerM3.At(room)
	all := make([]float64, f.lot.n)
	for i, kg := range f.kg {
		w := f.water[i]
		if math.IsInf(w, 1) {
			w = f.run.WaterOut
		}
		all[i] = kg/solventKgPerL + kg*w/(1-w)/waterKgPerL
	}
	return all
}

// wasteShare is the waste of the draw over that of the plan.
func (f *flow) wasteShare() []float64 {
	planned := 0.0
	all := make([]float64, f.lot.n)
	for _, u := range f.run.Uses {
		if u.Head != steps.Waste || u.Unit != "kg" {
			continue
		}
		planned += u.Quantity
		var now []float64
		if u.Stage > 0 {
			now = f.turns[u.Stage-1].wasteKg[u.Basis]
		}
		for i := range all {
			if now != nil {
				all[i] += now[i]
			} else {
				all[i] += u.Quantity
			}
		}
	}
	if planned == 0 {
		return nil
	}
	for i := range all {
		all[i] /= planned
	}
	return all
}
