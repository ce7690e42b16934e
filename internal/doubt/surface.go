package doubt

import (
	"fmt"
	"math"

	"parch/internal/routes"
	"parch/internal/spread"
	"parch/internal/steps"
)

// A step that boils or settles is run in full at a few states of what moves it (the
// pair at 25 °C, its trend with temperature, the water it is given) and read between
// them by polynomials through Chebyshev's points. What the heater and the operator
// do is worked out for each draw from the heat and the amounts read.

// axis is a line of Chebyshev's points.
type axis struct{ at, weight []float64 }

func newAxis(lo, hi float64, points int) axis {
	if points == 1 || !(hi > lo) {
		return axis{[]float64{(lo + hi) / 2}, []float64{1}}
	}
	var a axis
	for k := range points {
		a.at = append(a.at, (lo+hi)/2-(hi-lo)/2*math.Cos(math.Pi*float64(k)/float64(points-1)))
		w := 1.0 - 2*float64(k%2)
		if k == 0 || k == points-1 {
			w /= 2
		}
		a.weight = append(a.weight, w)
	}
	return a
}

// shares are how much each point counts at u, which is kept within the ends
// (barycentric form, Berrut & Trefethen, SIAM Rev. 46 (2004) 501).
func (a *axis) shares(u float64, into []float64) []float64 {
	into = into[:0]
	last := len(a.at) - 1
	u = math.Max(a.at[0], math.Min(a.at[last], u))
	sum := 0.0
	for k, at := range a.at {
		if u == at {
			into = into[:0]
			for j := range a.at {
				if j == k {
					into = append(into, 1)
				} else {
					into = append(into, 0)
				}
			}
			return into
		}
		s := a.weight[k] / (u - at)
		sum += s
		into = append(into, s)
	}
	for k := range into {
		into[k] /= sum
	}
	return into
}

// nodes are the cases in which steps are run in full.
type nodes struct {
	pair, trend axis
	cases       [][]*routes.Case // pair, trend
}

// Facts under which a full run tells heats and amounts, and nothing of the heater.
var bare = map[string]float64{
	"heat-share": 1, "trap-efficiency": 1, "trap-reflux-minimum": 0, "vapour-loss-per-day": 0, "forerun-column": 0,
}

const halfEfficient = 0.5

// nodesAt prepares cases at a share of the way to the ends of the inputs.
func (l *Lot) nodesAt(share float64) (*nodes, error) {
	r := l.nodes.Of(share, func() (r result[*nodes]) {
		r.value, r.err = l.newNodes(share)
		return r
	})
	return r.value, r.err
}

func (l *Lot) newNodes(share float64) (*nodes, error) {
	ends := func(in spread.Input) (lo, hi float64) {
		return math.Log(in.Quantile(nodeTail)), math.Log(in.Quantile(1 - nodeTail))
	}
	lo, hi := ends(l.pair())
	loTrend, hiTrend := ends(l.trend())
	n := &nodes{pair: newAxis(share*lo, share*hi, pairPoints), trend: newAxis(share*loTrend, share*hiTrend, trendPoints)}
	return n, n.fill(l.Case)
}

// nodeTail is the share of draws beyond either end of the nodes; they are read at it.
const nodeTail = 0.002

// Points of the axes.
const pairPoints, trendPoints, waterPoints = 5, 3, 3

func (n *nodes) fill(k *routes.Case) error {
	n.cases = nil
	for _, pair := range n.pair.at {
		var row []*routes.Case
		for _, trend := range n.trend.at {
			d := k.Planned()
			d.PairFactor, d.PairTrend = math.Exp(pair), math.Exp(trend)
			under, err := k.Under(d)
			if err != nil {
				return err
			}
			row = append(row, under.WithPractice(bare))
		}
		n.cases = append(n.cases, row)
	}
	return nil
}

// surface is one stage over pair, trend and ln of the water it is given: what it
// does at once, and what goes with the way from there to where it ends.
type surface struct {
	stop        func() error
	nodes       *nodes
	kind        steps.Kind
	goal        float64 // kg/kg, no lower than is claimed of any still
	water       axis
	values      [][]float64 // at each node, one after the other
	along       axis
	alongValues [][]float64
	bare        steps.Outcome // of one node, for the still's own figures
}

// widerWater is how much further than the draws the water axis goes, so that other
// draws find their place on it.
const widerWater = 0.3

// reaches are the shares of the way to the ends of the inputs at which a step is
// tried: at the ends themselves the model may have no layers.
var reaches = []float64{1, 0.6, 0.3}

// surfaceOf runs a stage in full at all nodes, or finds it done already.
func (l *Lot) surfaceOf(run *routes.Run, place int, waters []float64) (*surface, error) {
	goal := l.Case.GoalOf(run, place)
	next := steps.Kind("")
	if place+1 < len(run.Route) {
		next = run.Route[place+1].Kind // a pot that goes on hot
	}
	key := fmt.Sprint(ahead(run, place), run.Route[place], next, run.Settings.Stages, run.Settings.PressureKPa, run.Settings.Receiver, run.Settings.ReceiverC, run.Outcomes[place].In, goal)
	r := l.boiled.Of(key, func() (r result[*surface]) {
		r.value, r.err = l.newSurface(run, place, goal, waters)
		return r
	})
	return r.value, r.err
}

func (l *Lot) newSurface(run *routes.Run, place int, goal float64, waters []float64) (*surface, error) {
	lo, hi := math.Inf(1), 0.0
	for _, w := range waters {
		if !math.IsInf(w, 1) {
			lo, hi = math.Min(lo, w), math.Max(hi, w)
		}
	}
	margin := math.Pow(lo/hi, widerWater)
	lo, hi = lo*margin, math.Min(hi/margin, 0.99)
	var last error
	for _, share := range reaches {
		var n *nodes
		if n, last = l.nodesAt(share); last != nil {
			continue
		}
		s := &surface{nodes: n, kind: run.Outcomes[place].Kind, goal: math.Max(goal, l.Case.Catalog.Practice["trap-outlet-minimum"].SI), stop: l.stopped}
		if last = s.fill(run, place, lo, hi); last == nil {
			return s, nil
		}
	}
	return nil, last
}

// pointsFor are as many as a span of water asks for.
func pointsFor(lo, hi float64) int {
	if hi < 1.3*lo {
		return 2
	}
	return waterPoints
}

// fill runs the stage at all nodes: first what it does at once, then along the way.
// The way begins clear of the goal and of every floor.
func (s *surface) fill(run *routes.Run, place int, lo, hi float64) (err error) {
	s.water = newAxis(math.Log(lo), math.Log(hi), pointsFor(lo, hi))
	if s.values, err = s.each(run, place, s.water, s.atOnce); err != nil || s.kind == steps.Settle {
		return err
	}
	clear := 1.1
	if s.kind == steps.Forerun {
		clear = 1.02
	}
	from := math.Max(lo, clear*s.goal)
	for _, v := range s.values {
		from = math.Max(from, clear*trapMargin*math.Exp(v[atFloor]))
	}
	to := math.Max(from, hi)
	s.along = newAxis(math.Log(from), math.Log(to), pointsFor(from, to))
	s.alongValues, err = s.each(run, place, s.along, s.onTheWay)
	return err
}

// each runs something at all nodes of an axis.
func (s *surface) each(run *routes.Run, place int, water axis, one func(k *routes.Case, run *routes.Run, place int, lot steps.Lot) ([]float64, error)) (all [][]float64, err error) {
	for _, row := range s.nodes.cases {
		for _, k := range row {
			for _, lnWater := range water.at {
				lot := run.Outcomes[place].In
				w := math.Exp(lnWater)
				lot.WaterKg = lot.SolventKg * w / (1 - w)
				if err := s.stop(); err != nil {
					return nil, err
				}
				v, err := one(k, run, place, lot)
				if err != nil {
					return nil, err
				}
				all = append(all, v)
			}
		}
	}
	return all, nil
}

// Values of what a stage does at once: heats in hours of the heater, each charge.
const (
	atFloor     = iota // ln; of a trap
	atWater            // ln, once the receiver is full; of settling: in the product
	atHeatUp           // to the boil
	atBoil             // to fill the receiver
	atAqueousM3        // each charge
	atLost             // solvent: in the aqueous layer, or in the drawn water
	atAqueousKg
	atHeldLost // in the receiver, or with the interface
	atHeldKg
	atCount
)

// atOnce is a trap whose goal is met when its receiver is full, a forerun of which
// nothing is drawn, or settling.
func (s *surface) atOnce(k *routes.Case, run *routes.Run, place int, lot steps.Lot) ([]float64, error) {
	o, err := k.Stage(run, place, lot, 1)
	if err != nil {
		return nil, err
	}
	s.bare = o
	v := make([]float64, atCount)
	v[atFloor], v[atWater] = math.Log(least), math.Log(o.Out.Water())
	switch s.kind {
	case steps.Trap:
		v[atFloor], v[atHeatUp], v[atBoil] = math.Log(o.Floor), o.Figure("heat-up, each charge"), o.Figure("reflux, each charge")
		v[atAqueousM3] = o.Figure("aqueous layer, each charge") * 1e-6
	case steps.Forerun:
		v[atHeatUp] = o.Figure("heat-up, each charge")
		return v, nil
	}
	v[atLost], v[atHeldLost] = o.Losses[0].SolventKg, o.Losses[1].SolventKg
	v[atAqueousKg], v[atHeldKg] = o.Discards[0].Kg, o.Discards[1].Kg
	return v, nil
}

// Values along the way, over its length. A trap has one above and one below the
// water at which its efficiency falls; its amounts go with the water removed.
const (
	wayAbove = iota // boil-up
	wayBelow        // at full efficiency
	wayAqueousM3
	wayLost
	wayAqueousKg
	wayOut   // ln of the outlet over where it should end, of a forerun
	wayCount // a forerun's boil-up, loss and discard are held as logarithms
)

// least keeps logarithms of amounts that may be nothing.
const least = 1e-9

func (s *surface) onTheWay(k *routes.Case, run *routes.Run, place int, lot steps.Lot) ([]float64, error) {
	o, err := k.Stage(run, place, lot, s.goal)
	if err != nil {
		return nil, err
	}
	v := make([]float64, wayCount)
	if s.kind == steps.Forerun {
		way := math.Log(lot.Water() / s.goal)
		v[wayAbove] = math.Log(o.Figure("drawing off, each charge")/way + least)
		v[wayLost], v[wayAqueousKg] = math.Log(o.Losses[0].SolventKg/way+least), math.Log(o.Discards[0].Kg/way+least)
		v[wayOut] = math.Log(o.Out.Water() / s.goal)
		return v, nil
	}
	full, err := k.Stage(run, place, lot, 1)
	if err != nil {
		return nil, err
	}
	slow := 0.0
	corner := k.Catalog.Practice["trap-efficiency-below"].SI
	if o.Out.Water() < corner {
		second, err := k.WithPractice(map[string]float64{"trap-efficiency": halfEfficient}).Stage(run, place, lot, s.goal)
		if err != nil {
			return nil, err
		}
		slow = second.Figure("reflux, each charge") - o.Figure("reflux, each charge") // 1/0.5 - 1 = 1
	}
	from, to := full.Out.Water(), o.Out.Water()
	above, below := spans(from, to, o.Floor, corner)
	v[wayAbove] = perWay(o.Figure("reflux, each charge")-full.Figure("reflux, each charge")-slow, above)
	v[wayBelow] = perWay(slow, below)
	v[wayAqueousM3] = perWay((o.Figure("aqueous layer, each charge")-full.Figure("aqueous layer, each charge"))*1e-6, from-to)
	v[wayLost] = perWay(o.Losses[0].SolventKg-full.Losses[0].SolventKg, from-to)
	v[wayAqueousKg] = perWay(o.Discards[0].Kg-full.Discards[0].Kg, from-to)
	return v, nil
}

func perWay(amount, way float64) float64 {
	if !(way > 1e-12) {
		return 0
	}
	return amount / way
}

// spans measure the way from one water content to another above a floor f: the
// vapour needed goes about with ln((w_1 - f)/(w_2 - f)).
func spans(from, to, floor, corner float64) (above, below float64) {
	way := func(from, to float64) float64 {
		if !(from > to) {
			return 0
		}
		floor := math.Min(floor, to/trapMargin)
		return math.Log((from - floor) / (to - floor))
	}
	return way(from, math.Max(corner, to)), way(math.Min(corner, from), to)
}

// trapMargin is how close to its floor a trap is run.
const trapMargin = 1.05

// reader reads a surface at one draw after the other.
type reader struct {
	s                         *surface
	pair, trend, water, along []float64
	atOnce, onTheWay          []float64
}

func (s *surface) reader() *reader {
	return &reader{s: s, atOnce: make([]float64, atCount), onTheWay: make([]float64, wayCount)}
}

// at reads all values.
func (r *reader) at(a *steps.Aside, lnWater float64) (atOnce, onTheWay []float64) {
	s := r.s
	r.pair = s.nodes.pair.shares(a.Shift.Ln25, r.pair)
	r.trend = s.nodes.trend.shares(a.Shift.LnTrend, r.trend)
	r.water = s.water.shares(lnWater, r.water)
	r.sum(r.water, s.values, r.atOnce)
	if s.alongValues != nil {
		r.along = s.along.shares(lnWater, r.along)
		r.sum(r.along, s.alongValues, r.onTheWay)
	}
	return r.atOnce, r.onTheWay
}

func (r *reader) sum(water []float64, values [][]float64, into []float64) {
	clear(into)
	node := 0
	for _, p := range r.pair {
		for _, t := range r.trend {
			for _, w := range water {
				share := p * t * w
				for k, v := range values[node] {
					into[k] += share * v
				}
				node++
			}
		}
	}
}
