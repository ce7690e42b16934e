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
		v := r.at(a, math.Log(f.water[i]))
		f.kg[i] = v[1]
		for k := range columns {
			columns[k][i] = v[2+k]
		}
		return math.Exp(v[0]), true
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
		v := r.at(a, math.Log(f.water[i]))
		boilH := settleH + math.Exp(v[2])/h.share[i]
		flow := math.Max(practice["cooling-flow"].SI, s.bare.Condenser.NeededM3PerS*h.share[i])
		h.book(&t, i, o, own, v[1]/h.share[i]+boilH, hot0, boilH, flow, setsUp, 1, 0)
		drawn[i], discarded[i] = math.Exp(v[4]), math.Exp(v[5])
		vapour[i] = v[3] * h.vapour[i] * boilH / 24
		f.kg[i] = v[3] - vapour[i]
		return math.Exp(v[0]), true
	})
	t.lostKg[o.Losses[0].Cause], t.lostKg[o.Losses[1].Cause], t.wasteKg[o.Discards[0].What] = drawn, vapour, discarded
	return t
}

// The values of a trap's surface. Heats are hours of the heater, each charge.
const (
	trapFloor = iota // ln
	trapOut          // ln
	trapHeatUp
	trapAbove // boil-up above the corner of the efficiency, over spanAbove
	trapBelow // below it at full efficiency, over spanBelow
	trapAqueousM3
	trapAqueousLost // solvent; these three over the water removed
	trapAqueousKg
	trapHeldLost
	trapHeldKg
	trapKept
	trapValueCount
)

// spans measure the way from one water content to another above a floor f:
// the vapour needed goes about with ln((w_1 - f)/(w_2 - f)).
func spans(in, out, floor, corner float64) (above, below float64) {
	way := func(from, to float64) float64 {
		if !(from > to) {
			return 0
		}
		floor := math.Min(floor, 0.97*to)
		return math.Log((from - floor) / (to - floor))
	}
	return leastSpan + way(in, math.Max(corner, out)), leastSpan + way(math.Min(corner, in), out)
}

const leastSpan = 0.02

func (s *surface) trapValues(o, second *steps.Outcome, in, corner float64) []float64 {
	v := make([]float64, trapValueCount)
	out := o.Out.Water()
	above, below := spans(in, out, o.Floor, corner)
	slow := second.Figure("reflux, each charge") - o.Figure("reflux, each charge") // 1/0.5 - 1 = 1
	removed := in - out + 1e-9
	v[trapFloor], v[trapOut] = math.Log(o.Floor), math.Log(out)
	v[trapHeatUp] = o.Figure("heat-up, each charge")
	v[trapAbove], v[trapBelow] = (o.Figure("reflux, each charge")-slow)/above, slow/below
	v[trapAqueousM3] = o.Figure("aqueous layer, each charge") * 1e-6 / removed
	v[trapAqueousLost], v[trapAqueousKg] = o.Losses[0].SolventKg/removed, o.Discards[0].Kg/removed
	v[trapHeldLost], v[trapHeldKg] = o.Losses[1].SolventKg, o.Discards[1].Kg
	v[trapKept] = o.Out.SolventKg
	if out < math.Max(s.goal, trapMargin*o.Floor)*(1-1e-6) && out < in*(1-1e-6) {
		s.past = true
	}
	return v
}

// trapMargin is how close to its floor a trap is run.
const trapMargin = 1.05

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
	lowest, shortest := practice["trap-outlet-minimum"].SI, practice["trap-reflux-minimum"].SI/3600
	usable, draining := l.Case.ReceiverTakesM3(), practice["draining-time"].SI/3600
	drainings := func(m3 float64) float64 { return math.Max(1, math.Ceil(m3/usable-1e-9)) }
	drainings0 := o.Figure("drainings, each charge")
	hot0, own := o.Figure("heat-up, each charge")+o.Figure("reflux, each charge"), f.own(place)
	r := s.reader()
	f.dry(func(i int, a *steps.Aside) (float64, bool) {
		in := f.water[i]
		v := r.at(a, math.Log(in))
		floor := math.Exp(v[trapFloor])
		out := math.Min(in, math.Max(math.Max(s.goal, trapMargin*floor), lowest))
		if s.past {
			out = math.Exp(v[trapOut])
		}
		above, below := spans(in, out, floor, corner)
		removed := in - out + 1e-9
		boilH := math.Max(shortest, (v[trapAbove]*above+v[trapBelow]*below/efficiency[i])/h.share[i])
		flow := math.Max(practice["cooling-flow"].SI, s.bare.Condenser.NeededM3PerS*h.share[i])
		more := draining * (drainings(v[trapAqueousM3]*removed) - drainings0)
		h.book(&t, i, o, own, v[trapHeatUp]/h.share[i]+boilH, hot0, boilH, flow, 1, cools, more)
		lost[0][i], lost[1][i] = v[trapAqueousLost]*removed, v[trapHeldLost]
		lost[2][i] = v[trapKept] * h.vapour[i] * boilH / 24
		waste[0][i], waste[1][i] = v[trapAqueousKg]*removed, v[trapHeldKg]
		f.kg[i] = v[trapKept] - lost[2][i]
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
