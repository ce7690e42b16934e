package search

import (
	"math"
	"reflect"
	"slices"

	"parch/internal/routes"
)

// Sizes of a search.
const (
	coarsePoints = 9   // of ln(hand-over) along one hand-over
	mostProduct  = 120 // combinations of the axes that are all tried
	mostRefined  = 40  // runs of one refinement, for each hand-over
	shortAxis    = 4   // values that are all tried where a long axis is walked
	pairedWithin = 2   // places between two axes that are tried together
)

// everywhere scans the hand-overs coarsely, each point with the axes found best at
// its neighbour and around them, and refines around the best.
func (g *tuning) everywhere() {
	grid := g.grid()
	lowest := make([]trial, len(grid)) // the best at each point
	for i, u := range grid {
		kept := g.best
		start := spot{make([]int, len(g.axes)), u}
		g.best = trial{score: math.Inf(1)}
		if i > 0 && kept.spot.at != nil {
			start.at = slices.Clone(kept.spot.at)
			g.descend(start, false)
		} else {
			g.allAxes(start)
		}
		if lowest[i] = g.best; kept.score <= g.best.score {
			g.best = kept
		}
	}
	if !g.found() {
		return
	}
	g.refineValleys(lowest)
	before := g.best.score
	g.allAxes(g.best.spot.clone())
	if g.hasLate() {
		g.lateAxes()
	}
	if g.best.score < before {
		g.refine(0.25 / (coarsePoints - 1))
	}
	if g.hasLate() {
		g.lateAcross(grid)
	}
}

// lateAxes goes downhill along all axes, and along the late ones in pairs.
func (g *tuning) lateAxes() {
	g.descend(g.best.spot.clone(), true)
	g.inPairs()
}

// worthARound is the share of the score that a round over all hand-overs lowers it by at
// least; less than a tie, which comes on top.
const worthARound = 1e-3

// lateAcross goes downhill from the best spot's axes at all hand-overs, as often as that
// is worth a round, and at those beside the best: the more lots go over a charge, the more
// it pays to hand over dry.
func (g *tuning) lateAcross(grid [][]float64) {
	for g.worth(func() { g.acrossGrid(grid); g.lateAxes() }) {
		g.refine(1.0 / (coarsePoints - 1))
	}
	if g.worth(func() { g.acrossGrid(g.beside(g.best.spot.u)) }) {
		g.refine(1.0 / (coarsePoints - 1) / besidePoints)
	}
}

// worth makes a round and reports whether it was worth it; where it was not the best is
// what it was before.
func (g *tuning) worth(round func()) bool {
	kept := g.best
	if round(); g.best.score < kept.score*(1-worthARound) {
		return true
	}
	g.best = kept
	return false
}

// besidePoints divide the way to the next coarse hand-over.
const besidePoints = 4

// beside are the hand-overs within a coarse step of one, moved one by one.
func (g *tuning) beside(u []float64) (all [][]float64) {
	for i := range u {
		for k := 1 - besidePoints; k < besidePoints; k++ {
			v := slices.Clone(u)
			v[i] += float64(k) / besidePoints * (g.hi[i] - g.lo[i]) / (coarsePoints - 1)
			if v[i] = math.Min(math.Max(v[i], g.lo[i]), g.hi[i]); k != 0 {
				all = append(all, v)
			}
		}
	}
	return all
}

// acrossGrid goes downhill from the best spot's axes at each of the hand-overs.
func (g *tuning) acrossGrid(grid [][]float64) {
	at := g.best.spot.clone().at
	for _, u := range grid {
		g.descend(spot{at, u}, true)
	}
}

// refineValleys refines around every point of a line of hand-overs that lies lower
// than both its neighbours: where apparatus changes a cost may have several valleys.
func (g *tuning) refineValleys(line []trial) {
	const width = 1.0 / (coarsePoints - 1)
	best := g.best
	if len(g.places) != 1 {
		g.refine(width)
		return
	}
	at := func(i int) float64 {
		if i < 0 || i >= len(line) {
			return math.Inf(1)
		}
		return line[i].score
	}
	for i := range line {
		if math.IsInf(at(i), 1) || at(i-1) < at(i) || at(i+1) < at(i) {
			continue
		}
		g.best = line[i]
		if g.refine(width); g.best.score < best.score {
			best = g.best
		}
	}
	g.best = best
}

// found reports whether any spot could be run.
func (g *tuning) found() bool { return !math.IsInf(g.best.score, 1) }

func (g *tuning) hasLate() bool {
	return slices.ContainsFunc(g.axes, func(a axis) bool { return a.late })
}

// around looks near a spot.
func (g *tuning) around(s spot) {
	g.descend(s, false)
	if !g.found() {
		return
	}
	g.refine(0.25 / (coarsePoints - 1))
	before := g.best.score
	if g.descend(g.best.spot.clone(), true); g.best.score < before {
		g.refine(0.25 / (coarsePoints - 1))
	}
}

// grid are the coarse hand-overs: a line for one, a lattice in which the water
// falls from step to step for several.
func (g *tuning) grid() [][]float64 {
	grid := [][]float64{nil}
	for i := range g.places {
		points := coarsePoints
		switch {
		case g.lo[i] == g.hi[i]:
			points = 1
		case len(g.places) > 1:
			points = 4
		}
		var next [][]float64
		for _, head := range grid {
			for k := range points {
				u := g.lo[i] + (g.hi[i]-g.lo[i])*float64(k)/float64(max(1, points-1))
				if i == 0 || u < head[i-1] {
					next = append(next, append(append([]float64{}, head...), u))
				}
			}
		}
		grid = next
	}
	return grid
}

// allAxes tries every combination of the axes at the hand-overs of a spot or,
// where those are too many, every value of each axis in turn until none helps.
func (g *tuning) allAxes(s spot) {
	product := g.combinations()
	if product > mostProduct {
		g.sweep(s)
		return
	}
	at := s.clone()
	for i, a := range g.axes {
		if !a.late {
			at.at[i] = 0
		}
	}
	for range product {
		g.try(at)
		for i := len(at.at) - 1; i >= 0; i-- { // the last axis turns fastest
			if g.axes[i].late {
				continue
			}
			if at.at[i]++; at.at[i] < g.axes[i].count {
				break
			}
			at.at[i] = 0
		}
	}
}

func (g *tuning) combinations() int {
	product := 1
	for _, a := range g.axes {
		if !a.late {
			product *= a.count
		}
	}
	return product
}

// sweep tries all values of one axis after another, from the best found so far,
// until a round brings nothing.
func (g *tuning) sweep(s spot) {
	s = s.clone()
	lowest := g.try(s)
	for better := true; better; {
		better = false
		for i, a := range g.axes {
			if a.late {
				continue
			}
			before := lowest
			lowest = g.along(s, i, lowest)
			better = better || lowest < before
		}
	}
}

// descend moves along the axes while that helps: from neighbour to neighbour, or
// over all values of a short axis; along late axes only where asked.
func (g *tuning) descend(s spot, lateToo bool) {
	s = s.clone()
	lowest := g.try(s)
	for better := true; better; {
		better = false
		for i, a := range g.axes {
			before := lowest
			if a.late && !lateToo {
				continue
			}
			if a.count <= shortAxis {
				lowest = g.along(s, i, lowest)
			} else {
				lowest = g.downhill(s, i, lowest)
			}
			better = better || lowest < before
		}
	}
}

// inPairs walks a late axis from the best to either side and the axis beside it
// downhill at each value, until that brings nothing: how long a sieve stands and how
// many lots go over it rise together, and neither alone helps.
func (g *tuning) inPairs() {
	for before := math.Inf(1); g.best.score < before; {
		before = g.best.score
		for i := range g.axes {
			for k := max(0, i-pairedWithin); k <= i+pairedWithin && k < len(g.axes); k++ {
				if k != i && g.axes[i].late {
					g.ridge(g.best.spot.clone(), i, k, 1)
					g.ridge(g.best.spot.clone(), i, k, -1)
				}
			}
		}
	}
}

// ridge takes a step along axis i again and again, and goes downhill along k after each.
func (g *tuning) ridge(s spot, i, k, step int) {
	for s.at[i] += step; s.at[i] >= 0 && s.at[i] < g.axes[i].count; s.at[i] += step {
		g.downhill(s, k, g.try(s))
	}
}

// along tries all values of an axis and leaves the spot at the best.
func (g *tuning) along(s spot, i int, lowest float64) float64 {
	kept := s.at[i]
	for v := range g.axes[i].count {
		if v == kept {
			continue
		}
		s.at[i] = v
		if score := g.try(s); score < lowest {
			lowest, kept = score, v
		}
	}
	s.at[i] = kept
	return lowest
}

// downhill walks along an axis, to either side, until it rises.
func (g *tuning) downhill(s spot, i int, lowest float64) float64 {
	for _, step := range []int{1, -1} {
		for next := s.at[i] + step; next >= 0 && next < g.axes[i].count; next = s.at[i] + step {
			before := s.at[i]
			s.at[i] = next
			score := g.try(s)
			if score >= lowest {
				s.at[i] = before
				break
			}
			lowest = score
		}
	}
	return lowest
}

// refine moves the hand-overs of the best spot within a share of their range.
func (g *tuning) refine(share float64) {
	if slices.Equal(g.lo, g.hi) {
		return
	}
	at := g.best.spot.clone()
	lo, hi := make([]float64, len(g.lo)), make([]float64, len(g.lo))
	for i := range g.lo {
		width := share * (g.hi[i] - g.lo[i])
		lo[i], hi[i] = math.Max(g.lo[i], at.u[i]-width), math.Min(g.hi[i], at.u[i]+width)
	}
	refined(func(u []float64) float64 { return g.try(spot{at.at, u}) }, lo, hi, mostRefined*len(lo))
}

// nearest is the spot next to settings of another lot.
func (g *tuning) nearest(warm routes.Settings) spot {
	s := spot{make([]int, len(g.axes)), make([]float64, len(g.places))}
	for i, place := range g.places {
		s.u[i] = (g.lo[i] + g.hi[i]) / 2
		if place < len(warm.HandOverMgPerKg) && warm.HandOverMgPerKg[place] > 0 {
			s.u[i] = math.Min(g.hi[i], math.Max(g.lo[i], math.Log(warm.HandOverMgPerKg[place])))
		}
	}
	shape := cloned(g.blank)
	copy(shape.SoakHours, warm.SoakHours)
	copy(shape.Stages, warm.Stages)
	copy(shape.Stirred, warm.Stirred)
	copy(shape.Sieve, warm.Sieve)
	copy(shape.Receiver, warm.Receiver)
	copy(shape.ReceiverC, warm.ReceiverC)
	copy(shape.CarrierDose, warm.CarrierDose)
	copy(shape.PressureKPa, warm.PressureKPa)
	shape.Charges, shape.LotsOverCharge = slices.Clone(warm.Charges), slices.Clone(warm.LotsOverCharge)
	for i, a := range g.axes {
		for v := range a.count {
			probe := cloned(shape)
			if a.set(&probe, v); reflect.DeepEqual(probe, shape) {
				s.at[i] = v
			}
		}
	}
	return s
}

// round prefers hand-overs of two digits where they cost next to nothing: they
// are numbers that somebody reads off a titrator.
func (g *tuning) round() {
	if len(g.places) == 0 {
		return
	}
	const next = 1e-4 // share of the objective
	exact := g.best
	s := exact.spot.clone()
	for i := range s.u {
		s.u[i] = math.Log(significant(math.Exp(s.u[i]), 2))
		if s.u[i] < g.lo[i]-1e-9 || s.u[i] > g.hi[i] {
			return
		}
	}
	g.best.score = math.Inf(1)
	if g.try(s); g.best.score > exact.score*(1+next) {
		g.best = exact
	}
}
