package steps

import (
	"fmt"
	"math"
)

// Steps of the integration over moles of vapour.
const (
	defaultCarrierError = 2e-4
	carrierFirstStep    = 0.01 // of the pot
	carrierLongestStep  = 2.0  // of the pot
	carrierShortestStep = 1e-7 // of the pot
	carrierMostSteps    = 3000
	progressAccuracy    = 1e-5
)

func ignore(*state, *condensed) {}

// march integrates the state over moles of vapour by an embedded pair of third
// and second order (Bogacki & Shampine, Appl. Math. Lett. 2 (1989) 321), until
// progress reaches 1; each accepted step is shown to watch.
func (r *refluxing) march(rate flow, progress func(*state, *condensed) float64, watch func(*state, *condensed)) error {
	slope, c, err := rate(&r.s)
	if err != nil {
		return err
	}
	r.note(&c)
	step := carrierFirstStep * total(r.s.pot)
	for range carrierMostSteps {
		tiny := carrierShortestStep * total(r.s.pot)
		done := progress(&r.s, &c)
		next, last, lastC, off, err := r.advance(rate, &slope, step)
		if err != nil {
			return err
		}
		if !(off <= 1) && step > tiny {
			step *= math.Max(0.2, 0.9/math.Cbrt(off))
			continue
		}
		after := progress(&next, &lastC)
		if after > 1+progressAccuracy && step > tiny {
			step *= math.Max(0.02, math.Min(0.98, (1-done)/(after-done)))
			continue
		}
		r.s, slope, c = next, last, lastC
		r.note(&c)
		watch(&r.s, &c)
		if after > 1-progressAccuracy {
			return nil
		}
		step = math.Min(step*math.Min(4, 0.9/math.Cbrt(math.Max(off, 1e-6))), carrierLongestStep*total(r.s.pot))
	}
	return fmt.Errorf("%s and %s: the distillation did not end in %d steps, at %.3g mg/kg of water in the pot",
		r.m.Pure[solvent].Key, r.m.Pure[carrier].Key, carrierMostSteps, r.dryness(&r.s)*mgPerKg)
}

// advance takes one step; off is its error over what is allowed. Amounts in the
// pot are stepped in their logarithms, in which a trace that falls exponentially
// is a straight line, however fast.
func (r *refluxing) advance(rate flow, k1 *state, h float64) (next, k4 state, c condensed, off float64, err error) {
	g1 := growth(&r.s, k1)
	half := r.s.moved(h/2, g1)
	k2, _, err := rate(&half)
	if err != nil {
		return next, k4, c, 0, err
	}
	g2 := growth(&half, &k2)
	late := r.s.moved(3*h/4, g2)
	k3, _, err := rate(&late)
	if err != nil {
		return next, k4, c, 0, err
	}
	g3 := growth(&late, &k3)
	next = r.s.moved(h, mixed(2.0/9, g1, 1.0/3, g2, 4.0/9, g3))
	next.collect(2*h/9, k1)
	next.collect(h/3, &k2)
	next.collect(4*h/9, &k3)
	next.settle(&r.s, k1)
	if k4, c, err = rate(&next); err != nil {
		return next, k4, c, 0, err
	}
	return next, k4, c, r.stepError(h, &next, g1, g2, g3, growth(&next, &k4)), nil
}

// stepError is the difference of the third and second order results, over what
// is allowed; traces below a part in ten million of the pot do not count.
func (r *refluxing) stepError(h float64, s *state, g1, g2, g3, g4 Fractions) (off float64) {
	allowed := r.plan.StepError
	if allowed <= 0 {
		allowed = defaultCarrierError
	}
	for i := range s.pot {
		e := h * math.Abs(-5.0/72*g1[i]+g2[i]/12+g3[i]/9-g4[i]/8)
		off = math.Max(off, e*s.pot[i]/(allowed*(s.pot[i]+1e-7*total(s.pot))))
	}
	return off
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

const goneShare = 1e-12

func mixed(a float64, x Fractions, b float64, y Fractions, c float64, z Fractions) (m Fractions) {
	for i := range m {
		m[i] = a*x[i] + b*y[i] + c*z[i]
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
	s.heatJ += h * d.heatJ
	s.pushedM3 += h * d.pushedM3
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
	p := Point{
		Hours: (r.heatUpJ + r.s.heatJ) / r.netW() / secondsPerHour,
		Water: r.kg(r.s.pot[water], water) / mass, Carrier: r.kg(r.s.pot[carrier], carrier) / mass,
		BoiledKg: r.s.boiledKg, AqueousM3: r.aqueousM3(), DrawnM3: r.liquidM3(r.s.drawn, r.rig.RoomK),
		PotK: c.pot.TempK, HeadK: c.head.TempK,
	}
	p.LostShare = math.Max(0, 1-r.s.pot[solvent]/r.charge[solvent])
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
