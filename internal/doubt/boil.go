package doubt

import (
	"math"

	"parch/internal/steps"
)

// boil takes a trap, a forerun or settling through the draws.
func (f *flow) boil(place int, accounts bool) (turn, error) {
	kind := f.run.Route[place].Kind
	if !accounts && kind == steps.Forerun { // it is drawn until it reads right
		o := &f.run.Outcomes[place]
		f.dry(func(i int, a *steps.Aside) (float64, bool) { return math.Min(f.water[i], o.Out.Water()), true })
		f.lose(place)
		return turn{}, nil
	}
	s, err := f.lot.surfaceOf(f.run, place, f.water)
	if err != nil {
		return f.heated(place), nil
	}
	switch kind {
	case steps.Trap:
		return f.trap(place, s), nil
	case steps.Forerun:
		return f.forerun(place, s), nil
	}
	return f.settle(place, s), nil
}

// heated is a step that the models of the draws cannot follow: its water is as
// planned, its hours go with the share of the heat.
func (f *flow) heated(place int) turn {
	o := &f.run.Outcomes[place]
	f.dry(func(i int, a *steps.Aside) (float64, bool) { return math.Min(f.water[i], o.Out.Water()), true })
	f.lose(place)
	return turn{}
}

func (f *flow) settle(place int, s *surface) turn {
	o := &f.run.Outcomes[place]
	t := turn{lostKg: map[string][]float64{}, wasteKg: map[string][]float64{}}
	var columns [4][]float64
	for k := range columns {
		columns[k] = make([]float64, f.lot.n)
	}
	r := s.reader()
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		v, _ := r.at(a, math.Log(f.water[i]))
		for k, at := range [...]int{atLost, atHeldLost, atAqueousKg, atHeldKg} {
			columns[k][i] = v[at]
		}
		f.kg[i] = math.Max(least, f.kg[i]-v[atLost]-v[atHeldLost])
		return math.Exp(v[atWater]), true
	})
	for k := range 2 {
		t.lostKg[o.Losses[k].Cause], t.wasteKg[o.Discards[k].What] = columns[k], columns[2+k]
	}
	return t
}

// heating is what a still and its operator do in a draw.
type heating struct {
	share, attended, setUp, shutDown, vapour []float64
	share0, attended0, setUp0, shutDown0     float64
	heaterW, charges                         float64
}

func (f *flow) heating(place int, s *surface, setUp string) heating {
	l, p := f.lot, f.lot.Case.Catalog.Practice
	return heating{
		share: l.practice("heat-share"), attended: l.practice("trap-attended-share"), setUp: l.practice(setUp), shutDown: l.practice("trap-shutdown"), vapour: l.practice("vapour-loss-per-day"),
		share0: p["heat-share"].SI, attended0: p["trap-attended-share"].SI, setUp0: p[setUp].SI, shutDown0: p["trap-shutdown"].SI,
		heaterW: s.bare.Condenser.DutyW, charges: s.bare.Figure("still charges"),
	}
}

// book writes hours, attendance, energy and cooling of hot hours (per charge, 0: as
// planned) into a turn.
func (h *heating) book(t *turn, i int, o *steps.Outcome, own, hotH, hot0H, boilH float64, coolFlow, setsUp, cools, drained float64) {
	setUp, shut := setsUp*(h.setUp[i]-h.setUp0)/3600, cools*(h.shutDown[i]-h.shutDown0)/3600
	t.hours[i] = o.HoursTotal + setUp + h.charges*(hotH-hot0H+shut+drained)
	t.attended[i] = own + setUp + h.charges*(hotH*h.attended[i]-hot0H*h.attended0+shut+drained)
	t.energyKWh[i] = h.charges * h.heaterW * hotH / 1e3
	t.coolM3[i] = h.charges * coolFlow * boilH * 3600
}

func (f *flow) newTurn() turn {
	n := f.lot.n
	return turn{hours: make([]float64, n), attended: make([]float64, n), energyKWh: make([]float64, n), coolM3: make([]float64, n),
		lostKg: map[string][]float64{}, wasteKg: map[string][]float64{}}
}

func (f *flow) forerun(place int, s *surface) turn {
	o, l := &f.run.Outcomes[place], f.lot
	h := f.heating(place, s, "forerun-attended")
	t := f.newTurn()
	drawn, vapour, discarded := make([]float64, l.n), make([]float64, l.n), make([]float64, l.n)
	practice := l.Case.Catalog.Practice
	settleH := 0.0
	if o.Figure("equilibrium stages of the column") > 0 {
		settleH = practice["forerun-column"].SI / 3600
	}
	hot := place > 0 && f.run.Route[place-1].Kind == steps.Trap
	setsUp := 1.0
	if hot {
		setsUp = 0
	}
	hot0 := o.Figure("heat-up, each charge") + o.Figure("drawing off, each charge")
	own := f.own(place)
	r := s.reader()
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		in := f.water[i]
		v, along := r.at(a, math.Log(in))
		way := math.Max(0, math.Log(in/s.goal))
		boilH := settleH + way*math.Exp(along[wayAbove])/h.share[i]
		flow := math.Max(practice["cooling-flow"].SI, s.bare.Condenser.NeededM3PerS*h.share[i])
		h.book(&t, i, o, own, v[atHeatUp]/h.share[i]+boilH, hot0, boilH, flow, setsUp, 1, 0)
		drawn[i], discarded[i] = way*math.Exp(along[wayLost]), way*math.Exp(along[wayAqueousKg])
		vapour[i] = (f.kg[i] - drawn[i]) * h.vapour[i] * boilH / 24
		f.kg[i] = math.Max(least, f.kg[i]-drawn[i]-vapour[i])
		return math.Min(in, s.goal*math.Exp(along[wayOut])), true
	})
	t.lostKg[o.Losses[0].Cause], t.lostKg[o.Losses[1].Cause], t.wasteKg[o.Discards[0].What] = drawn, vapour, discarded
	return t
}

func (f *flow) trap(place int, s *surface) turn {
	o, l := &f.run.Outcomes[place], f.lot
	practice := l.Case.Catalog.Practice
	h := f.heating(place, s, "trap-setup")
	t := f.newTurn()
	var lost [3][]float64
	var waste [2][]float64
	for k := range lost {
		lost[k] = make([]float64, l.n)
	}
	for k := range waste {
		waste[k] = make([]float64, l.n)
	}
	goesOn := place+1 < len(f.run.Route) && f.run.Route[place+1].Kind == steps.Forerun
	cools := 1.0
	if goesOn {
		cools = 0
	}
	efficiency, corner := l.practice("trap-efficiency"), practice["trap-efficiency-below"].SI
	shortest := practice["trap-reflux-minimum"].SI / 3600
	usable, draining := l.Case.Catalog.Apparatus[o.Apparatus].Volume.SI, practice["draining-time"].SI/3600
	drainings := func(m3 float64) float64 { return math.Max(1, math.Ceil(m3/usable-1e-9)) }
	drainings0 := o.Figure("drainings, each charge")
	hot0, own := o.Figure("heat-up, each charge")+o.Figure("reflux, each charge"), f.own(place)
	r := s.reader()
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		in := f.water[i]
		v, along := r.at(a, math.Log(in))
		floor, filled := math.Exp(v[atFloor]), math.Exp(v[atWater])
		out := math.Min(math.Min(in, filled), math.Max(s.goal, trapMargin*floor))
		above, below := spans(filled, out, floor, corner)
		boilH := math.Max(shortest, (v[atBoil]+along[wayAbove]*above+along[wayBelow]*below/efficiency[i])/h.share[i])
		flow := math.Max(practice["cooling-flow"].SI, s.bare.Condenser.NeededM3PerS*h.share[i])
		removed := math.Max(0, filled-out)
		more := draining * (drainings(v[atAqueousM3]+along[wayAqueousM3]*removed) - drainings0)
		h.book(&t, i, o, own, v[atHeatUp]/h.share[i]+boilH, hot0, boilH, flow, 1, cools, more)
		lost[0][i], lost[1][i] = v[atLost]+along[wayLost]*removed, v[atHeldLost]
		lost[2][i] = (f.kg[i] - lost[0][i] - lost[1][i]) * h.vapour[i] * boilH / 24
		waste[0][i], waste[1][i] = v[atAqueousKg]+along[wayAqueousKg]*removed, v[atHeldKg]
		f.kg[i] = math.Max(least, f.kg[i]-lost[0][i]-lost[1][i]-lost[2][i])
		return out, true
	})
	for k := range lost {
		t.lostKg[o.Losses[k].Cause] = lost[k]
	}
	for k := range waste {
		t.wasteKg[o.Discards[k].What] = waste[k]
	}
	return t
}
