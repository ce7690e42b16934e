package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/memo"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// ErrNoForerun means that drawing off without return cannot dry the mixture; the
// error says why.
var ErrNoForerun = errors.New("a forerun does not work here")

// ErrHeater means that the heater is too weak for the charge.
var ErrHeater = errors.New("the heater is too weak")

// ErrBoilUp means that the heater boils up more vapour than a condenser takes.
var ErrBoilUp = errors.New("the heater is too strong")

// LeastHeel is the share of a charge, of its mass and of its moles, that always stays
// in the pot: a still is never boiled dry.
const LeastHeel = 0.10

// MostStages is the tallest column that is modelled.
const MostStages = 20

// ForerunRig is a still that returns no condensate from its receiver.
type ForerunRig struct {
	HeaterW     float64
	HeatShare   float64 // of the heater's power that reaches the liquid
	RoomK       float64
	Coolant     Coolant
	Charges     int
	Stages      int     // equilibrium stages of the column above the pot; 0 is a simple still
	RefluxRatio float64 // moles returned to the column per mole drawn off; 0 for a simple still
	HighestPotK float64 // 0: no limit
}

// ForerunRules are the practical sides of drawing off.
type ForerunRules struct {
	HeelShare        float64 // of the charge that stays in the pot, at least LeastHeel
	LowestOutlet     float64 // kg/kg, an outlet is never claimed below it
	SetUpS           float64
	SettleColumnS    float64 // at total reflux before anything is drawn off; only with a column
	AttendedShare    float64 // of the hours at the heater
	ShutDownS        float64 // cool and transfer, each charge
	VapourLossPerDay float64 // share of the charge
	CoolingFlowM3S   float64
	CoolingRiseK     float64
	LongestHeatUpS   float64 // 0: no limit
	StepError        float64 // of ln N allowed in each step; 0: the default
}

// ForerunEquilibrium is the boiling of water and a solvent at one pressure.
type ForerunEquilibrium struct {
	Mixture    *thermo.Mixture
	PressurePa float64
	Azeotrope  thermo.Azeotrope
	DryK       float64 // boiling point of the dry solvent

	climbed memo.Map[foot, climb] // a search draws the same lot off to many goals
}

// foot is where a climb begins.
type foot struct {
	x      float64
	stages int
	guessK float64
}

// climb is the vapour of a pot and of the head of the column above it.
type climb struct {
	pot, head thermo.Vapour
	err       error
}

// NewForerunEquilibrium solves for the azeotrope, or says why the model does not apply.
func NewForerunEquilibrium(m *thermo.Mixture, pressurePa float64) (*ForerunEquilibrium, error) {
	if err := m.CheckPressure(pressurePa); err != nil {
		return nil, fmt.Errorf("%w: %w", ErrNoForerun, err)
	}
	dryK, err := thermo.Boil(m.Solvent, pressurePa)
	if err != nil {
		return nil, err
	}
	az, err := m.FindAzeotrope(pressurePa)
	if err != nil {
		return nil, err
	}
	return &ForerunEquilibrium{Mixture: m, PressurePa: pressurePa, Azeotrope: az, DryK: dryK}, nil
}

// vapour over a liquid of overall water fraction x, as one liquid or two.
func (eq *ForerunEquilibrium) vapour(x, guessK float64) (thermo.Vapour, error) {
	if a := eq.Azeotrope; a.Kind == thermo.Heterogeneous && x > a.Layers.XOrganic && x < a.Layers.XAqueous {
		return thermo.Vapour{TempK: a.TempK, YWater: a.YWater}, nil
	}
	return eq.Mixture.BubbleFrom(x, eq.PressurePa, guessK)
}

// climb is the vapour of a pot and the vapour that leaves the column above it.
// At total reflux the liquid that falls from a stage is as wet as the vapour that
// rises to it:
//
//	x_(k+1) = y_k,  y_0 = y(x_pot)
//
// A finite reflux ratio parts less sharply, so the result is the best a column of
// so many stages can do.
func (eq *ForerunEquilibrium) climb(x float64, stages int, guessK float64) (pot, head thermo.Vapour, err error) {
	c := eq.climbed.Of(foot{x, stages, guessK}, func() (c climb) {
		c.pot, c.head, c.err = eq.climbOnce(x, stages, guessK)
		return c
	})
	return c.pot, c.head, c.err
}

func (eq *ForerunEquilibrium) climbOnce(x float64, stages int, guessK float64) (pot, head thermo.Vapour, err error) {
	if pot, err = eq.vapour(x, guessK); err != nil {
		return pot, pot, err
	}
	head = pot
	for range stages {
		before := head.YWater
		if head, err = eq.vapour(head.YWater, head.TempK); err != nil {
			return pot, head, err
		}
		if math.Abs(head.YWater-before) < 1e-14 {
			break // pinched at the azeotrope
		}
	}
	return pot, head, nil
}

// RunForerun draws distillate off a lot until goal (kg/kg; 0: as far as it goes) or
// the heel is reached. Where water is the more volatile, or leaves with the azeotrope, the
// dry solvent stays in the pot and the distillate is lost; where the solvent is
// the more volatile, the distillate is the product and a wet heel stays behind.
//
//	dN_w/dN = y_w,  so  d ln N/dx = 1/(y - x)   (Rayleigh, Phil. Mag. 4 (1902) 521)
func RunForerun(eq *ForerunEquilibrium, feed Lot, goal float64, rig ForerunRig, rules ForerunRules) (Outcome, error) {
	d := drawing{eq: eq, m: eq.Mixture, rig: rig, rules: rules, allowedError: rules.StepError}
	if d.allowedError <= 0 {
		d.allowedError = defaultDrawingError
	}
	if err := d.check(feed); err != nil {
		return Outcome{}, err
	}
	if err := d.start(feed); err != nil {
		return Outcome{}, err
	}
	d.goal = goal
	var err error
	if d.overhead {
		err = d.collect(goal)
	} else {
		err = d.strip(goal)
	}
	if err != nil {
		return Outcome{}, err
	}
	return d.outcome(feed), nil
}

// CheckForerun says whether a lot can be brought to the boil and drawn over at all,
// or why it cannot.
func CheckForerun(eq *ForerunEquilibrium, feed Lot, rig ForerunRig, rules ForerunRules) error {
	d := drawing{eq: eq, m: eq.Mixture, rig: rig, rules: rules}
	if err := d.check(feed); err != nil {
		return err
	}
	return d.start(feed)
}

// Overhead reports whether the solvent of a lot is the more volatile, so that what
// is drawn off is the product.
func (eq *ForerunEquilibrium) Overhead(feed Lot) bool {
	x := eq.Mixture.MoleFraction(feed.Water())
	v, err := eq.vapour(x, eq.DryK)
	return err == nil && eq.Azeotrope.Kind == thermo.NoAzeotrope && v.YWater < x
}

// drawing is one charge under distillation.
type drawing struct {
	eq    *ForerunEquilibrium
	m     *thermo.Mixture
	rig   ForerunRig
	rules ForerunRules

	mol0, x0 float64 // charge and its water fraction
	overhead bool    // the distillate is the product
	tempK    float64 // of the feed
	startK   float64
	heatUpJ  float64

	goal         float64 // kg/kg that ends it, no lower than may be claimed; 0: none
	at           point
	lnLeft       float64 // ln(moles in the pot/moles charged)
	boilUpJ      float64
	carriedJ     float64 // by the vapour that is drawn off, above the liquid at the temperature of the feed
	why          Stop
	firstY       float64 // water fraction of the first distillate
	course       []Point
	allowedError float64 // of ln N, each step
}

func (d *drawing) check(feed Lot) error {
	r := d.rig
	switch {
	case r.Stages < 0 || r.Stages > MostStages:
		return fmt.Errorf("%w: %d stages; allowed are 0 to %d", ErrNoForerun, r.Stages, MostStages)
	case d.rules.HeelShare < LeastHeel || d.rules.HeelShare >= 1:
		return fmt.Errorf("%w: a heel of %.3g %%; at least %.0f %% of the charge stays in the pot", ErrNoForerun, 100*d.rules.HeelShare, 100*LeastHeel)
	case r.Charges < 1:
		return fmt.Errorf("%w: %d still charges", ErrNoForerun, r.Charges)
	case r.RefluxRatio < 0 || (r.Stages > 0 && r.RefluxRatio == 0):
		return fmt.Errorf("%w: a column of %d stages needs a reflux ratio above 0", ErrNoForerun, r.Stages)
	case !(feed.WaterKg > 0 && feed.SolventKg > 0):
		return fmt.Errorf("%w: the lot holds %.3g kg of water and %.3g kg of solvent", ErrNoForerun, feed.WaterKg, feed.SolventKg)
	}
	return nil
}

// start brings the charge to the boil and finds out which way it dries.
func (d *drawing) start(feed Lot) error {
	charges := float64(d.rig.Charges)
	water := feed.WaterKg / charges / d.m.Water.MolarMassKgPerMol
	solvent := feed.SolventKg / charges / d.m.Solvent.MolarMassKgPerMol
	d.mol0, d.x0 = water+solvent, water/(water+solvent)
	var err error
	if d.at, err = d.sample(logit(d.x0)); err != nil {
		return err
	}
	d.startK, d.firstY = d.at.potK, d.at.y
	d.tempK = feed.TempK
	if d.tempK == 0 {
		d.tempK = d.rig.RoomK
	}
	d.tempK = boilingAlready(d.tempK, d.startK)
	if err := d.checkTemperatures(); err != nil {
		return err
	}
	if d.startK > d.tempK {
		d.heatUpJ = d.m.WarmJ(water, solvent, d.tempK, d.startK)
	}
	charge := hotCharge{d.heatUpJ, d.mol0 * d.m.MolarVolume(d.x0, d.rig.RoomK), d.startK - d.rig.RoomK}
	if err := checkHeater(d.rig.HeaterW, d.rig.HeatShare, d.rules.LongestHeatUpS, charge); err != nil {
		return err
	}
	return d.choose()
}

// sameBoilingK is within what two boiling points of one liquid agree: each is found to
// 0.1 microkelvin.
const sameBoilingK = 1e-6

// boilingAlready is the temperature of a lot that is handed over hot: no heat is told that
// only brings one figure for its boiling point to the other.
func boilingAlready(tK, boilK float64) float64 {
	if math.Abs(tK-boilK) < sameBoilingK {
		return boilK
	}
	return tK
}

// choose tells the product from the waste, or says that the lot cannot dry.
func (d *drawing) choose() error {
	az := d.eq.Azeotrope
	if d.at.y > d.x0*(1+1e-9) {
		return nil
	}
	if az.Kind != thermo.NoAzeotrope && d.x0 > az.YWater {
		return fmt.Errorf("%w: the lot holds %.3g %% water, more than the azeotrope's %.3g %%: drawing that off leaves a wetter pot",
			ErrNoForerun, 100*d.m.MassFraction(d.x0), 100*d.m.MassFraction(az.YWater))
	}
	if d.at.y > d.x0*(1-1e-6) {
		return fmt.Errorf("%w: liquid and vapour are alike at %.3g %% water", ErrNoForerun, 100*d.m.MassFraction(d.x0))
	}
	d.overhead = true
	return nil
}

func (d *drawing) checkTemperatures() error {
	kPa := d.eq.PressurePa / 1e3
	if err := boilsInTheRoom(d.m.Solvent.Called()+" with its water", d.startK, d.rig.RoomK, d.eq.PressurePa, func(tK float64) float64 { return d.m.BubblePressure(d.x0, tK) }); err != nil {
		return fmt.Errorf("%w: %w", ErrNoForerun, err)
	}
	if err := d.checkCoolant(); err != nil {
		return fmt.Errorf("%w: %w", ErrNoForerun, err)
	}
	if hottest := math.Max(d.startK, d.eq.DryK); d.rig.HighestPotK > 0 && hottest > d.rig.HighestPotK {
		return fmt.Errorf("%w: the pot reaches %.1f °C at %.4g kPa, the limit is %.1f °C; dry %s boils there at %.3g kPa",
			ErrNoForerun, hottest-273.15, kPa, d.rig.HighestPotK-273.15, d.m.Solvent.Called(), d.m.Solvent.VapourPressurePa.At(d.rig.HighestPotK)/1e3)
	}
	return nil
}

// checkCoolant refuses a first distillate that the condenser does not take. It is
// all condensed where it would begin to boil.
func (d *drawing) checkCoolant() error {
	distillate, err := d.eq.vapour(d.firstY, d.at.headK)
	if err != nil {
		return err
	}
	c := condense(d.rig.HeaterW, d.rig.HeatShare, d.rules.CoolingFlowM3S, d.rules.CoolingRiseK)
	return d.rig.Coolant.takes(c, distillate.TempK, d.eq.PressurePa, func(tK float64) float64 {
		return d.m.BubblePressure(d.firstY, tK)
	})
}

func (d *drawing) netW() float64 { return d.rig.HeaterW * d.rig.HeatShare }

// reached words the reason for stopping, and says which of the two is the product.
func (d *drawing) reached(feed Lot) string {
	product := "; the pot is the product"
	switch {
	case d.why == AtWater:
		product = "; the distillate is the product"
	case d.overhead:
		product = "; the distillate is the product, the wet heel stays behind"
	}
	if lowest := d.rules.LowestOutlet; d.overhead && d.drawn().water() < lowest*(1-1e-6) {
		product += fmt.Sprintf(": computed at %s, but moist air keeps an outlet at %s or more", quantity.FormatWater(d.drawn().water()), quantity.FormatWater(lowest))
	}
	return d.reason(feed) + product
}

func (d *drawing) reason(feed Lot) string {
	ofMass, lowest := quantity.FormatShare(d.leftOfMass()), quantity.FormatWater(d.rules.LowestOutlet)
	switch d.why {
	case AtHeel:
		if ofMoles := quantity.FormatShare(math.Exp(d.lnLeft)); ofMoles != ofMass && math.Exp(d.lnLeft) < d.leftOfMass() {
			ofMass += fmt.Sprintf(" (%s of its moles)", ofMoles)
		}
		return fmt.Sprintf("heel: %s of the charge stays in the pot", ofMass)
	case AtWater:
		return fmt.Sprintf("only water left: the solvent has come over, and the %s of the charge that stays in the pot is water", ofMass)
	case AtFloor:
		return fmt.Sprintf("floor: even the first distillate holds %s, all of it %s", quantity.FormatWater(d.m.MassFraction(d.firstY)), quantity.FormatWater(d.drawn().water()))
	case AtPractice:
		if feed.Water() <= d.rules.LowestOutlet {
			return fmt.Sprintf("practical limit: the lot holds %s, and moist air keeps an outlet at %s or more: nothing is drawn off", quantity.FormatWater(feed.Water()), lowest)
		}
		return fmt.Sprintf("practical limit: moist air keeps an outlet at %s or more", lowest)
	default:
		return fmt.Sprintf("hand-over at %s reached", quantity.FormatWater(d.goal))
	}
}
