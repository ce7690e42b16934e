package doubt

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

const reference = 298.15 // K, at which floors of reactive agents are stated

// flow is a route on its way through all draws at once.
type flow struct {
	lot   *Lot
	run   *routes.Run
	water []float64 // kg/kg, after the stages so far; +Inf where a draw has failed
	kg    []float64 // solvent
	turns []turn    // what each stage did
	tally *tally    // of the last stage; nil: all draws are carried through
}

// turn is what a stage did in each draw. A nil series is as planned.
type turn struct {
	hours, attended   []float64 // h
	energyKWh, coolM3 []float64
	lostKg, wasteKg   map[string][]float64 // by cause, by what
}

// start is the lot as delivered.
func (l *Lot) start(run *routes.Run) *flow {
	f := &flow{lot: l, run: run, water: make([]float64, l.n), kg: make([]float64, l.n)}
	for i, feed := range l.Case.FeedsOf(l.column(l.water())) {
		f.water[i], f.kg[i] = feed.Water(), feed.SolventKg
	}
	return f
}

// through carries a run through all its stages with their accounts.
func (l *Lot) through(run *routes.Run) (*flow, error) {
	f := l.start(run)
	err := f.upTo(len(run.Route), true)
	return f, errors.Join(err, l.failure())
}

// wet carries a run through its stages for the water alone. What stands before the
// last stage is remembered: a search changes that stage only, and many routes share
// what goes before.
func (l *Lot) wet(run *routes.Run, t *tally) (*flow, error) {
	last := len(run.Route) - 1
	known := l.ahead.Of(ahead(run, last), func() (r result[wetness]) {
		f := l.start(run)
		r.err = f.upTo(last, false)
		r.value = wetness{f.water, f.kg}
		return r
	})
	if known.err != nil {
		return nil, known.err
	}
	f := &flow{lot: l, run: run, water: slices.Clone(known.value.water), kg: slices.Clone(known.value.kg), tally: t}
	_, err := f.stage(last, false)
	return f, errors.Join(err, l.failure())
}

// wetness is the water (kg/kg) and the solvent (kg) of a lot in each draw.
type wetness struct{ water, kg []float64 }

// Plan tells the plans of one lot apart: doses follow from the settings.
func Plan(run *routes.Run) string {
	s := run.Settings
	s.Packs = nil // prices make no difference to what is left
	return run.Route.ID() + fmt.Sprint(s)
}

// ahead tells apart what stands before a place.
func ahead(run *routes.Run, place int) string {
	key := run.Route[:place].ID()
	if place > 0 {
		key += fmt.Sprint(run.Route[place].Kind, run.Settings.Stages, run.Settings.PressureKPa, run.Settings.Receiver, run.Settings.ReceiverC)
	}
	for i := range place {
		o := &run.Outcomes[i]
		key += fmt.Sprint(" ", o.In, o.Out, o.AgentKg, o.HoursTotal)
	}
	return key
}

func (f *flow) upTo(places int, accounts bool) error {
	for place := len(f.turns); place < places; place++ {
		t, err := f.stage(place, accounts)
		if err != nil {
			return fmt.Errorf("%s: %w", f.run.Route[place].Kind, err)
		}
		f.turns = append(f.turns, t)
	}
	return nil
}

func (f *flow) stage(place int, accounts bool) (turn, error) {
	if err := f.lot.stopped(); err != nil {
		return turn{}, err
	}
	if f.carried(place) {
		return f.asPlanned(place), nil
	}
	switch f.run.Route[place].Kind {
	case steps.Soak:
		return f.soak(place)
	case steps.Column:
		return f.column(place)
	case steps.Salt:
		return f.salt(place)
	case steps.Reactive:
		return f.reactive(place)
	case steps.Buy:
		o := &f.run.Outcomes[place]
		for i := range f.water {
			f.water[i], f.kg[i] = o.Out.Water(), o.Out.SolventKg
		}
		return f.busy(place, "buy-attended"), nil
	case steps.Trap, steps.Forerun, steps.Settle:
		return f.boil(place, accounts)
	}
	return f.asPlanned(place), nil
}

// carried is a carrier distillation, or stripping the carrier after it: three
// components are not followed through the draws.
func (f *flow) carried(place int) bool {
	r := f.run.Route
	return r[place].Carrier != "" || place > 0 && r[place].Kind == steps.Forerun && r[place-1].Carrier != ""
}

// dry sets the water of every draw that has not failed yet; not ok fails one.
func (f *flow) dry(leave func(i int, a *steps.Aside) (water float64, ok bool)) {
	f.dryIn(nil, leave)
}

// dryIn is dry in an order, which tells sooner where the draws are only counted.
func (f *flow) dryIn(order []int, leave func(i int, a *steps.Aside) (water float64, ok bool)) {
	for k := range f.water {
		i := k
		if order != nil && f.tally != nil {
			i = order[k]
		}
		if !math.IsInf(f.water[i], 1) {
			a := f.lot.asides[i]
			water, ok := leave(i, &a)
			if !ok || !(water > 0 && water < 1) || !(f.kg[i] > 0) {
				water = math.Inf(1)
			}
			f.water[i] = water
		}
		if f.tally != nil && f.tally.decided(f.tally.limits.Met(f.water[i])) {
			return
		}
	}
}

// count goes through the draws in an order until it is told whether enough of them are
// kept to the limits.
func (f *flow) count(order []int, keep func(i int, a *steps.Aside) bool) {
	for _, i := range order {
		a := f.lot.asides[i]
		if f.tally.decided(!math.IsInf(f.water[i], 1) && f.kg[i] > 0 && keep(i, &a)) {
			return
		}
	}
}

// busy is a stage whose attended time is that of one operating fact, times what
// was planned.
func (f *flow) busy(place int, fact string) turn {
	o := &f.run.Outcomes[place]
	planned := f.lot.Case.Catalog.Practice[fact].SI
	own := f.own(place)
	t := turn{hours: make([]float64, f.lot.n), attended: make([]float64, f.lot.n)}
	for i, now := range f.lot.practice(fact) {
		t.attended[i] = own * now / planned
		t.hours[i] = o.HoursTotal + t.attended[i] - own
	}
	return t
}

// own is the attended time of a stage itself: the first line of its labour.
func (f *flow) own(place int) float64 {
	for _, u := range f.run.Uses {
		if u.Stage == place+1 && u.Head == steps.Labour && u.Item == "technician" {
			return u.Quantity
		}
	}
	return 0
}

// lose takes from the solvent what the plan loses at a stage.
func (f *flow) lose(place int) {
	o := &f.run.Outcomes[place]
	lost := o.In.SolventKg - o.Out.SolventKg
	for i := range f.kg {
		f.kg[i] = math.Max(1e-9, f.kg[i]-lost)
	}
}

func (f *flow) soak(place int) (turn, error) {
	quick, err := f.lot.Case.QuickSoak(f.run, place)
	if err != nil {
		return turn{}, err
	}
	rate := f.lot.stillRateOr(f.run.Settings.StirredAt(f.run.Route, place))
	loading, residual := f.lot.loading(f.run.Route[place].Agent), f.lot.residualOn(f.run.Route[place].Agent)
	order := f.lot.wettest(f.run.Route[place].Agent)
	if f.tally != nil {
		least, most := f.tally.limits.ends()
		f.count(order, func(i int, a *steps.Aside) bool {
			a.Loading, a.ResidualKgPerKg, a.Rate = loading[i], residual[i], rate[i]
			return quick.Leaves(f.water[i], f.kg[i], a, least, most)
		})
		return turn{}, nil
	}
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		a.Loading, a.ResidualKgPerKg, a.Rate = loading[i], residual[i], rate[i]
		return quick.Water(f.water[i], f.kg[i], a), true
	})
	f.lose(place)
	return f.busy(place, "soak-attended"), nil
}

func (l *Lot) stillRateOr(stirred bool) []float64 {
	if stirred {
		return l.stirredRate()
	}
	return l.stillRate()
}

func (f *flow) column(place int) (turn, error) {
	quick, err := f.lot.Case.QuickColumn(f.run, place)
	if err != nil {
		return turn{}, err
	}
	loading, residual, rate := f.lot.loading(f.run.Route[place].Agent), f.lot.residualOn(f.run.Route[place].Agent), f.lot.columnRate()
	t := f.pumped(place)
	f.dryIn(f.lot.wettest(f.run.Route[place].Agent), func(i int, a *steps.Aside) (float64, bool) {
		a.Loading, a.ResidualKgPerKg, a.Rate = loading[i], residual[i], rate[i]
		return quick.Water(f.water[i], f.kg[i], a)
	})
	f.lose(place)
	return t, nil
}

// pumped is the work of a column, which goes with the volume that is pumped.
func (f *flow) pumped(place int) turn {
	o := &f.run.Outcomes[place]
	k := f.lot.Case
	lot := 1e3 * steps.LotVolume(k.Mixture, o.In, k.Job.Site.RoomK)
	back, pump := o.Figure("first runnings to return"), o.Figure("pump time")
	attended := k.Catalog.Practice["column-attended-share"].SI
	own, energy := f.own(place), f.ownEnergy(place+1)
	t := turn{hours: make([]float64, f.lot.n), attended: make([]float64, f.lot.n), energyKWh: make([]float64, f.lot.n)}
	for i, kg := range f.kg {
		more := lot * (kg/o.In.SolventKg - 1) / (lot + back)
		t.hours[i], t.attended[i], t.energyKWh[i] = o.HoursTotal+pump*more, own+attended*pump*more, energy*(1+more)
	}
	return t
}

func (f *flow) salt(place int) (turn, error) {
	quick, err := f.lot.Case.QuickSalt(f.run, place, f.lot.solubilities(f.lot.Case.Job.Site.RoomK))
	if err != nil {
		return turn{}, err
	}
	o := &f.run.Outcomes[place]
	t := f.busy(place, "salt-attended")
	held, cake := make([]float64, f.lot.n), make([]float64, f.lot.n)
	left := f.lot.saltLeft()
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		a.Left = left[i]
		r := quick.Run(f.water[i], f.kg[i], a)
		f.kg[i], held[i], cake[i] = r.SolventKg, r.HeldKg, r.CakeKg
		return r.Water, true
	})
	t.lostKg = map[string][]float64{o.Losses[0].Cause: held}
	t.wasteKg = map[string][]float64{o.Discards[0].What: cake}
	return t, nil
}

func (f *flow) reactive(place int) (turn, error) {
	quick := f.lot.Case.QuickReactive(f.run, place, f.lot.solubilities(reference))
	left := f.lot.reactiveLeft(f.run.Route[place].Agent)
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		a.Left = left[i]
		return quick.Water(f.water[i], a)
	})
	f.lose(place)
	return f.distilled(place), nil
}

// distilled is the heating of a reactive step. Heat-up and distillation go with the
// share of the heat, the reflux does not.
func (f *flow) distilled(place int) turn {
	o := &f.run.Outcomes[place]
	l, practice := f.lot, f.lot.Case.Catalog.Practice
	charges := o.Figure("charges")
	heat, reflux := charges*(o.Figure("heat-up, each charge")+o.Figure("distillation, each charge")), charges*o.Figure("reflux, each charge")
	heated0 := heat + reflux
	share, attended, setUp, spent := l.practice("heat-share"), l.practice("trap-attended-share"), l.practice("reactive-attended"), l.practice("reactive-spent")
	own0, cool0 := f.own(place), o.CoolingWaterL*1e-3
	boil0 := reflux + charges*o.Figure("distillation, each charge")
	t := turn{hours: make([]float64, l.n), attended: make([]float64, l.n), energyKWh: make([]float64, l.n), coolM3: make([]float64, l.n)}
	for i := range t.hours {
		faster := practice["heat-share"].SI / share[i]
		heated := heat*faster + reflux
		t.attended[i] = own0 + attended[i]*heated - practice["trap-attended-share"].SI*heated0 + charges*(setUp[i]-practice["reactive-attended"].SI)/3600
		t.hours[i] = o.HoursTotal + heated - heated0 + charges*(setUp[i]-practice["reactive-attended"].SI)/3600 + (spent[i]-practice["reactive-spent"].SI)/3600
		t.energyKWh[i] = f.ownEnergy(place+1) * heated / heated0
		t.coolM3[i] = cool0 * (reflux + charges*o.Figure("distillation, each charge")*faster) / boil0
	}
	return t
}

// asPlanned is a stage that is not followed through the draws: it leaves what was
// planned, within the band of a carrier distillation.
func (f *flow) asPlanned(place int) turn {
	o := &f.run.Outcomes[place]
	off := f.lot.column(f.lot.factor("carrier-outlet", "water that "+string(o.Kind)+" leaves"))
	for i := range f.water {
		f.water[i] = math.Min(0.5, o.Out.Water()*off[i])
	}
	f.lose(place)
	return turn{}
}
