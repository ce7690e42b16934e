package steps

import (
	"fmt"
	"math"
)

// Steps of the integration over moles of vapour. Of 1 600 random runs over all pairs, from
// 1 to 40 °C in the receiver, four moved in one figure by more than 0.5 % with steps ten
// times finer, by 0.8 % at most: two where the activity model has two pairs of layers to
// choose from, in the receiver or in the column, one in a trace of 0.1 mg/kg of water, and
// one by one draining more, which are counted whole.
const (
	defaultCarrierError = 5e-5
	carrierFirstStep    = 0.01            // of the pot
	carrierLongestStep  = 2.0             // of the pot
	carrierShortestStep = goneShare / 100 // of the pot, so that a trace boiled off at a steady rate is followed until it is gone
	carrierMostSteps    = 3000
	carrierLayerStep    = 2e-4 // of the pot: a change of layers is known to so much
	carrierJumpStep     = 1e-6 // of the pot: the end is known to so much where the layers end at once
	progressAccuracy    = 2e-5
	mostGrowth          = 1.0 // of ln n in a step; nothing in the pot should grow
)

func ignore(*state, *condensed) {}

// march integrates the state over moles of vapour by an embedded pair of fifth
// and fourth order (Dormand & Prince, J. Comput. Appl. Math. 6 (1980) 19), until
// progress reaches 1; each accepted step is shown to watch.
func (r *refluxing) march(rate flow, progress func(*state, *condensed) float64, watch func(*state, *condensed)) error {
	slope, c, err := rate(&r.s)
	if err != nil {
		return err
	}
	r.note(&c)
	p := pace{step: carrierFirstStep * total(r.s.pot), least: carrierJumpStep * total(r.s.pot), done: progress(&r.s, &c)}
	for range carrierMostSteps {
		tiny := carrierShortestStep * total(r.s.pot)
		next, last, lastC, off, err := r.advance(rate, &slope, p.step)
		if err != nil {
			return err
		}
		if !(off <= 1) && p.step > tiny {
			p.shorten(off)
			continue
		}
		if !(off < math.Inf(1)) {
			break // even the shortest step came to nothing
		}
		if p.step > carrierLayerStep*total(r.s.pot) && otherLayers(&c, &lastC) {
			p.shorten(mostStretch)
			continue
		}
		after := progress(&next, &lastC)
		if after > 1+progressAccuracy && p.step > r.endStep(after) {
			p.overshot(after)
			continue
		}
		quicker := quickness(&next, &last) / quickness(&r.s, &slope)
		r.s, slope, c = next, last, lastC
		r.note(&c)
		watch(&r.s, &c)
		if after > 1-progressAccuracy {
			return nil
		}
		p.accepted(off, after, quicker, carrierLongestStep*total(r.s.pot))
	}
	return fmt.Errorf("%w: %s and %s, %d steps, %.3g mg/kg of water in the pot", ErrUnsolved,
		r.m.Pure[inSolvent].Called(), r.m.Pure[inCarrier].Called(), len(r.course), r.dryness(&r.s)*mgPerKg)
}

// otherLayers reports whether the layers of the condensate are others than before, as
// where the model shows a third liquid and one of two pairs of layers takes over at once.
func otherLayers(before, after *condensed) bool {
	const far = 0.15 // mole fraction
	a, b := before.split, after.split
	if !a.Exists || !b.Exists {
		return false
	}
	for i := range a.Aqueous {
		if math.Abs(a.Aqueous[i]-b.Aqueous[i]) > far || math.Abs(a.Organic[i]-b.Organic[i]) > far {
			return true
		}
	}
	return false
}

// endStep is the step that is short enough to end with. Progress jumps to infinity
// where the layers end at once, such as an organic layer that shrinks to nothing.
func (r *refluxing) endStep(after float64) float64 {
	if math.IsInf(after, 1) {
		return carrierJumpStep * total(r.s.pot)
	}
	return carrierShortestStep * total(r.s.pot)
}

// The pair of fifth and fourth order: nodes fall away, since the flow depends on
// the state alone.
var (
	stageWeights = [stages][stages]float64{
		{},
		{1.0 / 5},
		{3.0 / 40, 9.0 / 40},
		{44.0 / 45, -56.0 / 15, 32.0 / 9},
		{19372.0 / 6561, -25360.0 / 2187, 64448.0 / 6561, -212.0 / 729},
		{9017.0 / 3168, -355.0 / 33, 46732.0 / 5247, 49.0 / 176, -5103.0 / 18656},
		{35.0 / 384, 0, 500.0 / 1113, 125.0 / 192, -2187.0 / 6784, 11.0 / 84},
	}
	errorWeights = [stages]float64{71.0 / 57600, 0, -71.0 / 16695, 71.0 / 1920, -17253.0 / 339200, 22.0 / 525, -1.0 / 40}
)

const stages = 7

// advance takes one step; off is its error over what is allowed. Amounts in the
// pot are stepped in their logarithms, in which a trace that falls exponentially
// is a straight line, however fast.
func (r *refluxing) advance(flows flow, first *state, h float64) (next, slope state, c condensed, off float64, err error) {
	var k [stages]state
	var g [stages]Fractions
	k[0], g[0] = *first, growth(&r.s, first)
	for i := 1; i < stages; i++ {
		rate := mixed(&stageWeights[i], &g, i)
		if !(h*math.Max(rate[0], math.Max(rate[1], rate[2])) < mostGrowth) {
			return next, slope, c, math.Inf(1), nil
		}
		next = r.s.moved(h, rate)
		if i == stages-1 {
			for j := range i {
				next.collect(h*stageWeights[i][j], &k[j])
			}
			next.dropGone()
			next.settle(&r.s, first)
		}
		if k[i], c, err = flows(&next); err != nil {
			return next, slope, c, 0, err
		}
		g[i] = growth(&next, &k[i])
	}
	off = math.Max(r.stepError(h, &next, mixed(&errorWeights, &g, stages)), r.collectError(h, &next, &k))
	return next, k[stages-1], c, off, nil
}

// stepError is the difference of the results of both orders over what is allowed, of
// what counts before the step or after it: a trace that boils off within one long step
// would take any amount of vapour with it.
func (r *refluxing) stepError(h float64, s *state, difference Fractions) (off float64) {
	allowed := r.allowed()
	for i := range s.pot {
		e := h * math.Abs(difference[i])
		off = math.Max(off, e*math.Max(counts(&r.s, i), counts(s, i))/allowed)
	}
	if math.IsNaN(off) {
		return math.Inf(1)
	}
	return off
}

// collectError is the same of what was collected so far, the aqueous layer and the heat:
// they may be little beside the pot, or go on while hardly anything leaves it.
func (r *refluxing) collectError(h float64, s *state, k *[stages]state) float64 {
	var aqueous, heat float64
	for j := range k {
		aqueous += errorWeights[j] * total(k[j].aqueous)
		heat += errorWeights[j] * k[j].condensedJ
	}
	off := math.Abs(h*heat) / s.condensedJ
	if aqueous != 0 {
		off = math.Max(off, math.Abs(h*aqueous)/total(s.aqueous))
	}
	if math.IsNaN(off) {
		return math.Inf(1)
	}
	return off / r.allowed()
}

// allowed is the error of a step.
func (r *refluxing) allowed() float64 {
	if r.plan.StepError > 0 {
		return r.plan.StepError
	}
	return defaultCarrierError
}

// growth is d ln n/dv of the amounts in the pot. What is gone stays gone.
func growth(s, d *state) (g Fractions) {
	for i := range g {
		if s.pot[i] > goneShare*total(s.pot) {
			g[i] = d.pot[i] / s.pot[i]
		}
	}
	return g
}

// quickness is the largest growth or decay of what counts in the pot, per mole of vapour.
func quickness(s, d *state) (largest float64) {
	for i, g := range growth(s, d) {
		largest = math.Max(largest, math.Abs(g)*counts(s, i))
	}
	return largest
}

// counts is 1 for a component of the pot and falls to 0 for a trace, below a part in
// ten million.
func counts(s *state, i int) float64 { return s.pot[i] / (s.pot[i] + 1e-7*total(s.pot)) }

// goneShare is the mole share below which a component is gone: under 0.001 mg/kg of water.
const goneShare = 1e-9

// mixed is the weighted sum of the first n growths.
func mixed(weights *[stages]float64, g *[stages]Fractions, n int) (m Fractions) {
	for j := range n {
		for i := range m {
			m[i] += weights[j] * g[j][i]
		}
	}
	return m
}

// moved is the state with the pot grown at the rate g over h.
func (s state) moved(h float64, g Fractions) state {
	for i := range s.pot {
		s.pot[i] *= math.Exp(h * g[i])
	}
	return s
}

// collect adds h times a flow to everything but the pot.
func (s *state) collect(h float64, d *state) {
	for i := range s.pot {
		s.aqueous[i] += h * d.aqueous[i]
		s.held[i] += h * d.held[i]
		s.drawn[i] += h * d.drawn[i]
	}
	s.boiledMol += h * d.boiledMol
	s.boiledKg += h * d.boiledKg
	s.condensedJ += h * d.condensedJ
	s.pushedM3 += h * d.pushedM3
}

// dropGone empties the pot of what is gone. A column would raise even such a trace
// to a share of the head that counts, for ever, as it is not followed any more.
func (s *state) dropGone() {
	all := total(s.pot)
	for i := range s.pot {
		if s.pot[i] < goneShare*all {
			s.pot[i] = 0
		}
	}
}

// settle puts what the rounding of the step left over where the flow goes, so
// that each amount is in one place only.
func (s *state) settle(before, d *state) {
	for i := range s.pot {
		rest := before.all(i) - s.all(i)
		switch {
		case d.drawn != Fractions{}:
			s.drawn[i] += rest
		case d.held != Fractions{}:
			s.held[i] += rest
		default:
			s.aqueous[i] += rest
		}
	}
}

func (s *state) all(i int) float64 { return s.pot[i] + s.aqueous[i] + s.held[i] + s.drawn[i] }

// note adds the present state to the course.
func (r *refluxing) note(c *condensed) {
	mass := r.massKg(r.s.pot)
	r.potK, r.spentJ = c.pot.TempK, r.heatJ(&r.s, c.pot.TempK)
	p := Point{
		Hours: (r.heatUpJ + r.spentJ) / r.netW() / secondsPerHour,
		Water: r.kg(r.s.pot[inWater], inWater) / mass, Carrier: r.kg(r.s.pot[inCarrier], inCarrier) / mass,
		BoiledKg: r.s.boiledKg, AqueousM3: r.aqueousM3(), DrawnM3: r.liquidM3(r.s.drawn, r.rig.RoomK),
		PotK: c.pot.TempK, HeadK: c.head.TempK,
	}
	p.LostShare = math.Max(0, 1-r.s.pot[inSolvent]/r.charge[inSolvent])
	if n := len(r.course); n > 0 && r.course[n-1].Hours == p.Hours {
		return
	}
	r.course = append(r.course, p)
}

func (r *refluxing) aqueousM3() float64 { return r.liquidM3(r.s.aqueous, r.eq.ReceiverK) }

func (r *refluxing) liquidM3(n Fractions, tK float64) float64 {
	if total(n) <= 0 {
		return 0
	}
	return total(n) * r.m.MolarVolume(scaled(n, 1/total(n)), tK)
}
