package steps

import (
	"fmt"
	"math"
)

// point is the still at one composition of the pot.
type point struct {
	logit       float64 // ln(x/(1 - x)) of the pot's water fraction x
	x, y        float64 // water fractions of pot and distillate
	slope       float64 // d ln N/d logit = x (1 - x)/(y - x)
	latent      float64 // J per mole drawn off, what the column returns included
	potK, headK float64
}

func logit(x float64) float64 { return math.Log(x / (1 - x)) }

// sample evaluates the still at one composition of the pot.
func (d *drawing) sample(l float64) (point, error) {
	x := 1 / (1 + math.Exp(-l))
	pot, head, err := d.eq.climb(x, d.rig.Stages, d.at.potK)
	if err != nil {
		return point{}, err
	}
	p := point{logit: l, x: x, y: head.YWater, potK: pot.TempK, headK: head.TempK}
	p.slope = x * (1 - x) / (p.y - x)
	water, solvent := d.m.Water.HeatOfVaporizationJ.At(pot.TempK), d.m.Solvent.HeatOfVaporizationJ.At(pot.TempK)
	p.latent = (1 + d.rig.RefluxRatio) * (pot.YWater*water + (1-pot.YWater)*solvent)
	return p, nil
}

// Steps of the march, in ln(x/(1 - x)).
const (
	firstStep     = 0.25
	longestStep   = 1.0
	shortestStep  = 1e-9
	mostSteps     = 4000
	wettestLogit  = 6.9 // a pot of water: a thousandth of its moles is solvent
	eventAccuracy = 1e-9
)

// defaultDrawingError is the error of ln N allowed in each step.
const defaultDrawingError = 1e-7

// march follows d ln N/d logit = slope towards the logit end, until over reports
// (by a value of 0) that something else ends it. Simpson's rule over a step and over
// its halves; the difference governs the step.
func (d *drawing) march(end float64, over func() float64) error {
	step := math.Copysign(firstStep, end-d.at.logit)
	d.note()
	for range mostSteps {
		last := math.Abs(step) >= math.Abs(end-d.at.logit)
		if last {
			step = end - d.at.logit
		}
		from, lnLeft, boilUpJ, carriedJ, before := d.at, d.lnLeft, d.boilUpJ, d.carriedJ, over()
		off, err := d.advance(step)
		if err != nil {
			return err
		}
		tiny := math.Abs(step) < shortestStep
		after := over()
		switch {
		case !(off <= d.allowedError) && !tiny:
			d.at, d.lnLeft, d.boilUpJ, d.carriedJ = from, lnLeft, boilUpJ, carriedJ
			step /= 2
			continue
		case after > eventAccuracy && !tiny:
			d.at, d.lnLeft, d.boilUpJ, d.carriedJ = from, lnLeft, boilUpJ, carriedJ
			step *= math.Max(0.02, math.Min(0.98, before/(before-after)))
			continue
		}
		d.note()
		if last || after > -eventAccuracy {
			return nil
		}
		if off < d.allowedError/30 {
			step = math.Copysign(math.Min(2*math.Abs(step), longestStep), step)
		}
	}
	return fmt.Errorf("the distillation of %s did not end in %d steps: %.3g of the charge left at %.3g mol/mol water",
		d.m.Solvent.Called(), mostSteps, math.Exp(d.lnLeft), d.at.x)
}

// advance takes one step of the march; off is the error of ln N in it.
func (d *drawing) advance(step float64) (off float64, err error) {
	var p [5]point
	p[0] = d.at
	for i := 1; i < len(p); i++ {
		if p[i], err = d.sample(d.at.logit + step*float64(i)/4); err != nil {
			return 0, err
		}
	}
	s := step / 4
	half := s / 3 * (p[0].slope + 4*p[1].slope + p[2].slope)
	whole := half + s/3*(p[2].slope+4*p[3].slope+p[4].slope)
	coarse := 2 * s / 3 * (p[0].slope + 4*p[2].slope + p[4].slope)
	lnN := [5]float64{
		0, s / 12 * (5*p[0].slope + 8*p[1].slope - p[2].slope),
		half, half + s/12*(5*p[2].slope+8*p[3].slope-p[4].slope), whole,
	}
	var vapour [5]float64 // J per unit of logit, above the liquid in the pot at the start of the step
	for i := range p {
		drawn := -d.mol0 * math.Exp(d.lnLeft+lnN[i]) * p[i].slope
		vapour[i] = drawn * (p[i].latent + d.m.WarmJ(p[i].y, 1-p[i].y, d.at.potK, p[i].potK))
	}
	overJ := s / 3 * (vapour[0] + 4*vapour[1] + 2*vapour[2] + 4*vapour[3] + vapour[4])
	water0, solvent0 := d.pot()
	fromK := d.at.potK
	d.at, d.lnLeft = p[4], d.lnLeft+whole
	water, solvent := d.pot()
	d.boilUpJ += overJ + d.m.WarmJ(water, solvent, fromK, d.at.potK) // the pot warms as it loses water
	d.carriedJ += overJ + d.m.WarmJ(water0-water, solvent0-solvent, d.tempK, fromK)
	return math.Abs(whole-coarse) / 15, nil
}

// pot is what is in it, mol.
func (d *drawing) pot() (water, solvent float64) {
	left := d.mol0 * math.Exp(d.lnLeft)
	return left * d.at.x, left * (1 - d.at.x)
}

// strip draws water off until the pot holds goal.
func (d *drawing) strip(goal float64) error {
	d.why = AtTarget
	if goal < d.rules.LowestOutlet {
		d.goal, d.why = d.rules.LowestOutlet, AtPractice
	}
	end := logit(d.m.MoleFraction(d.goal))
	if end >= d.at.logit {
		d.note()
		return nil
	}
	if err := d.march(end, d.lnOverHeel); err != nil {
		return err
	}
	if d.at.logit > end+eventAccuracy {
		d.why = AtHeel
	}
	return nil
}

// collect draws the product off until all that is collected holds goal, the heel is
// reached or the pot is water. Without a goal (0) it goes on to one of the latter.
func (d *drawing) collect(goal float64) error {
	reached := AtTarget
	if goal > 0 && goal < d.rules.LowestOutlet {
		d.goal, reached = d.rules.LowestOutlet, AtPractice
	}
	first := d.m.MassFraction(d.firstY)
	tooWet := func() float64 {
		water := d.drawn().water()
		if d.goal == 0 || first > d.goal || d.lnLeft > -1e-6 || !(water > 0) { // nothing drawn yet, or too dry to tell from none
			return math.Inf(-1)
		}
		return math.Log(water / d.goal)
	}
	if err := d.march(wettestLogit, func() float64 { return math.Max(d.lnOverHeel(), tooWet()) }); err != nil {
		return err
	}
	switch {
	case d.goal > 0 && first > d.goal:
		d.why = AtFloor
	case tooWet() >= -10*eventAccuracy:
		d.why = reached
	case d.lnOverHeel() >= -10*eventAccuracy:
		d.why = AtHeel
	default:
		d.why = AtWater
	}
	return nil
}

// lnOverHeel is 0 where no more may leave the pot and below that before: the heel is
// a share of the charge's mass and of its moles, whichever is met first. A pot that
// dries grows heavier by the mole, so that its moles rule; a wet heel grows lighter.
func (d *drawing) lnOverHeel() float64 {
	return math.Log(d.rules.HeelShare / math.Min(math.Exp(d.lnLeft), d.leftOfMass()))
}

// leftOfMass is the share of the charge's mass that is in the pot.
func (d *drawing) leftOfMass() float64 {
	return math.Exp(d.lnLeft) * d.molarMass(d.at.x) / d.molarMass(d.x0)
}

// molarMass is kg per mole of a pot of water fraction x.
func (d *drawing) molarMass(x float64) float64 {
	return x*d.m.Water.MolarMassKgPerMol + (1-x)*d.m.Solvent.MolarMassKgPerMol
}

// drawnOff is the distillate of one charge so far, kg.
type drawnOff struct{ waterKg, solventKg float64 }

func (o drawnOff) water() float64 { return o.waterKg / (o.waterKg + o.solventKg) }

func (d *drawing) drawn() drawnOff {
	if d.lnLeft == 0 {
		return drawnOff{}
	}
	left := d.mol0 * math.Exp(d.lnLeft)
	water := math.Max(0, d.mol0*d.x0-left*d.at.x)
	solvent := math.Max(0, d.mol0-left-water)
	return drawnOff{water * d.m.Water.MolarMassKgPerMol, solvent * d.m.Solvent.MolarMassKgPerMol}
}

func (d *drawing) drawnM3() float64 {
	o := d.drawn()
	return o.waterKg/d.m.Water.DensityKgPerM3.At(d.rig.RoomK) + o.solventKg/d.m.Solvent.DensityKgPerM3.At(d.rig.RoomK)
}

// note adds the present state to the course: the water of what will be the
// product, and the solvent that is not.
func (d *drawing) note() {
	o := d.drawn()
	solvent0 := d.mol0 * (1 - d.x0) * d.m.Solvent.MolarMassKgPerMol
	p := Point{
		Hours: (d.heatUpJ + d.boilUpJ) / d.netW() / secondsPerHour,
		Water: d.m.MassFraction(d.at.x), LostShare: math.Max(0, o.solventKg/solvent0),
		DrawnM3: d.drawnM3(), PotK: d.at.potK, HeadK: d.at.headK,
	}
	if d.overhead {
		p.LostShare = 1 - p.LostShare
		p.Water = d.m.MassFraction(d.firstY)
		if d.lnLeft < 0 {
			p.Water = o.water()
		}
	}
	d.course = append(d.course, p)
}
