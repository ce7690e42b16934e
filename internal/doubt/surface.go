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

func (l *Lot) nodesOf() (*nodes, error) {
	if l.nodes != nil {
		return l.nodes, nil
	}
	ends := func(in spread.Input) (lo, hi float64) {
		return math.Log(in.Quantile(nodeTail)), math.Log(in.Quantile(1 - nodeTail))
	}
	lo, hi := ends(l.pair())
	loTrend, hiTrend := ends(l.trend())
	var last error
	for _, share := range []float64{1, 0.6, 0.3, 0} { // the ends may lie where the model has no layers
		n := &nodes{pair: newAxis(share*lo, share*hi, pairPoints), trend: newAxis(share*loTrend, share*hiTrend, trendPoints)}
		if last = n.fill(l.Case); last == nil {
			l.nodes = n
			return n, nil
		}
	}
	return nil, last
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
			if (under.Trap == nil) != (k.Trap == nil) {
				return fmt.Errorf("water and %s part in one and not in the other", k.Solvent.Name)
			}
			row = append(row, under.WithPractice(bare))
		}
		n.cases = append(n.cases, row)
	}
	return nil
}

// surface is one stage over pair, trend and ln of the water it is given.
type surface struct {
	nodes  *nodes
	water  axis
	values [][]float64 // at each node, one after the other
	kind   steps.Kind
	goal   float64 // kg/kg
	past   bool    // filling the receiver goes past the goal
	bare   steps.Outcome
}

// surfaceOf runs a stage in full at all nodes, or finds it done already.
func (l *Lot) surfaceOf(run *routes.Run, place int, waters []float64) (*surface, error) {
	o := &run.Outcomes[place]
	lo, hi := math.Inf(1), 0.0
	for _, w := range waters {
		if !math.IsInf(w, 1) {
			lo, hi = math.Min(lo, w), math.Max(hi, w)
		}
	}
	margin := math.Pow(lo/hi, widerWater)
	lo, hi = lo*margin, math.Min(hi/margin, 0.99)
	goal := l.goal(run, place)
	key := fmt.Sprint(run.Route[max(0, place-1):min(len(run.Route), place+2)].ID(), place, run.Settings.Stages, o.In, goal)
	if s, ok := l.boiled[key]; ok {
		return s, nil
	}
	n, err := l.nodesOf()
	if err != nil {
		return nil, err
	}
	points := waterPoints
	if hi < 1.2*lo {
		points = 2
	}
	s := &surface{nodes: n, water: newAxis(math.Log(lo), math.Log(hi), points), kind: o.Kind, goal: goal}
	for _, row := range n.cases {
		for _, k := range row {
			for _, lnWater := range s.water.at {
				v, err := s.full(k, run, place, math.Exp(lnWater))
				if err != nil {
					return nil, err
				}
				s.values = append(s.values, v)
			}
		}
	}
	l.boiled[key] = s
	return s, nil
}

// widerWater is how much further than the draws the water axis goes, so that other
// draws find their place on it.
const widerWater = 0.3

func (l *Lot) goal(run *routes.Run, place int) float64 {
	if place < len(run.Route)-1 {
		return run.Settings.HandOverMgPerKg[place] * 1e-6
	}
	if aim := run.Settings.AimMgPerKg; aim > 0 {
		return aim * 1e-6
	}
	return l.Case.Goal()
}

// least keeps logarithms of amounts that may be nothing.
const least = 1e-9

// full is what a full run says at a node.
func (s *surface) full(k *routes.Case, run *routes.Run, place int, water float64) ([]float64, error) {
	lot := run.Outcomes[place].In
	lot.WaterKg = lot.SolventKg * water / (1 - water)
	o, err := k.Stage(run, place, lot)
	if err != nil {
		return nil, err
	}
	s.bare = o
	switch s.kind {
	case steps.Trap:
		second, err := k.WithPractice(map[string]float64{"trap-efficiency": halfEfficient}).Stage(run, place, lot)
		if err != nil {
			return nil, err
		}
		return s.trapValues(&o, &second, water, k.Catalog.Practice["trap-efficiency-below"].SI), nil
	case steps.Forerun:
		return []float64{
			math.Log(o.Out.Water()), o.Figure("heat-up, each charge"), math.Log(o.Figure("drawing off, each charge") + least), o.Out.SolventKg,
			math.Log(o.Losses[0].SolventKg + least), math.Log(o.Discards[0].Kg + least),
		}, nil
	}
	return []float64{math.Log(o.Out.Water()), o.Out.SolventKg, o.Losses[0].SolventKg, o.Losses[1].SolventKg, o.Discards[0].Kg, o.Discards[1].Kg}, nil
}

// reader reads a surface at one draw after the other.
type reader struct {
	s                   *surface
	pair, trend, water  []float64
	values              []float64
	lastPair, lastTrend float64
	lastWater           float64
}

func (s *surface) reader() *reader { return &reader{s: s, values: make([]float64, len(s.values[0]))} }

// at reads all values.
func (r *reader) at(a *steps.Aside, lnWater float64) []float64 {
	s := r.s
	r.pair = s.nodes.pair.shares(a.Shift.Ln25, r.pair)
	r.trend = s.nodes.trend.shares(a.Shift.LnTrend, r.trend)
	r.water = s.water.shares(lnWater, r.water)
	clear(r.values)
	node := 0
	for _, p := range r.pair {
		for _, t := range r.trend {
			for _, w := range r.water {
				share := p * t * w
				for k, v := range s.values[node] {
					r.values[k] += share * v
				}
				node++
			}
		}
	}
	return r.values
}
