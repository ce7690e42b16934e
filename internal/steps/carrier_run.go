package steps

import (
	"fmt"
	"math"

	"parch/internal/thermo"
)

const (
	inWater   = thermo.InWater
	inSolvent = thermo.InSolvent
	inCarrier = thermo.InCarrier
)

// half is how much of a carrier distillation is carried out.
type half int

const (
	bothHalves half = iota
	trapOnly
	stripOnly
)

// RunCarrier boils a lot with a carrier under a trap, then strips the carrier.
//
//	pot:  dN_i/dn = -y_i + (1 - beta) x_i,org = -beta x_i,aq
//
// per mole n of vapour, which the receiver parts into organic layer (returned)
// and a share beta of aqueous layer (kept). Before that the receiver fills: from
// the pot with nothing returned, or with dry carrier which the condensate pushes
// into the pot. Stripping is Rayleigh's dN_i/dn = -y_i.
func RunCarrier(eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rig TrapRig, rules TrapRules) (Outcome, error) {
	return runCarrier(bothHalves, eq, feed, plan, rig, rules)
}

// RunCarrierTrap is the first half of RunCarrier. The pot stays hot, with its carrier.
func RunCarrierTrap(eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rig TrapRig, rules TrapRules) (Outcome, error) {
	return runCarrier(trapOnly, eq, feed, plan, rig, rules)
}

func runCarrier(half half, eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rig TrapRig, rules TrapRules) (Outcome, error) {
	if err := plan.check(); err != nil {
		return Outcome{}, err
	}
	r := refluxing{eq: eq, m: eq.Model, plan: plan, rig: rig, rules: rules, half: half}
	if err := r.start(feed); err != nil {
		return Outcome{}, err
	}
	if err := r.fill(); err != nil {
		return Outcome{}, err
	}
	if err := r.reflux(); err != nil {
		return Outcome{}, err
	}
	r.trapped, r.trappedAt, r.trappedJ = r.s, len(r.course), r.spentJ
	if half == bothHalves {
		if err := r.strip(); err != nil {
			return Outcome{}, err
		}
	}
	return r.outcome(feed), nil
}

// StripCarrier is the second half of RunCarrier: it draws what a lot holds of a
// carrier off without return, down to the carrier limit of the plan. Its set-up is
// what it takes to turn the trap off. The dose, the goal and the layers of the plan
// have no part in it.
func StripCarrier(eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rig TrapRig, rules TrapRules) (Outcome, error) {
	plan.DoseKg, plan.PreFilled = 0, false
	if err := plan.checkStrip(); err != nil {
		return Outcome{}, err
	}
	rules.ShortestRefluxS = 0
	r := refluxing{eq: eq, m: eq.Model, plan: plan, rig: rig, rules: rules, half: stripOnly}
	if err := r.start(feed); err != nil {
		return Outcome{}, err
	}
	first, err := r.climb(&r.s)
	if err != nil {
		return Outcome{}, err
	}
	r.note(&first)
	r.trapped, r.trappedAt, r.trappedJ = r.s, len(r.course), r.spentJ
	if err := r.strip(); err != nil {
		return Outcome{}, err
	}
	return r.outcome(feed), nil
}

// refluxing is one charge in the pot, with its receiver.
type refluxing struct {
	eq    *CarrierEquilibrium
	m     *thermo.Ternary
	plan  CarrierPlan
	rig   TrapRig
	rules TrapRules
	half  half

	charge        Fractions // mol of the lot and the dose
	startK        float64
	heatUpJ       float64
	fromK         float64 // of the charge before it is heated
	preFilled     Fractions
	s             state
	potK, spentJ  float64                        // at s: the boiling point, and the heat since the pot began to boil
	trappedJ      float64                        // spent when the trap stopped
	trapped       state                          // when the trap stopped
	trappedAt     int                            // points of the course until then
	near          [MostStages + 1]thermo.Boiling // pot and stages, where they boiled last
	split         thermo.TernarySplit
	why, stripWhy Stop
	whyText       string
	goal          float64 // water/(water + solvent) at which the trap stops
	trapFromJ     float64 // heat spent when the steady return began
	widestBand    float64 // factor on it
	bandBasis     string
	returns       thermo.Returns
	course        []Point
	warnings      []string
}

// Fractions are amounts or fractions of water, solvent and carrier.
type Fractions = thermo.Fractions

// state is what changes while it boils, in moles unless said.
type state struct {
	pot, aqueous, held, drawn Fractions // held: organic layer in the receiver; drawn: stripped off
	boiledMol, boiledKg       float64
	condensedJ                float64 // taken up by the condenser
	pushedM3                  float64 // carrier pushed out of a pre-filled receiver
}

func total(n Fractions) float64 { return n[0] + n[1] + n[2] }

func scaled(n Fractions, by float64) Fractions {
	for i := range n {
		n[i] *= by
	}
	return n
}

func sum(a, b Fractions) Fractions {
	for i := range a {
		a[i] += b[i]
	}
	return a
}

func (r *refluxing) massKg(n Fractions) float64 {
	return n[0]*r.m.Pure[0].MolarMassKgPerMol + n[1]*r.m.Pure[1].MolarMassKgPerMol + n[2]*r.m.Pure[2].MolarMassKgPerMol
}

func (r *refluxing) kg(n float64, component int) float64 {
	return n * r.m.Pure[component].MolarMassKgPerMol
}

// dryness is water/(water + solvent) by mass in the pot.
func (r *refluxing) dryness(s *state) float64 {
	w := r.kg(s.pot[inWater], inWater)
	return w / (w + r.kg(s.pot[inSolvent], inSolvent))
}

// water is the mass fraction of water in the pot, kg/kg, carrier included: what Karl
// Fischer reads of a sample.
func (r *refluxing) water(s *state) float64 {
	return r.kg(s.pot[inWater], inWater) / r.massKg(s.pot)
}

func (r *refluxing) netW() float64 { return r.rig.HeaterW * r.rig.HeatShare }

func (r *refluxing) start(feed Lot) error {
	charges := float64(r.rig.Charges)
	doseKg := r.plan.DoseKg / charges
	r.s.pot = Fractions{
		feed.WaterKg / charges / r.m.Pure[inWater].MolarMassKgPerMol,
		feed.SolventKg / charges / r.m.Pure[inSolvent].MolarMassKgPerMol,
		(doseKg + feed.CarrierKg/charges) / r.m.Pure[inCarrier].MolarMassKgPerMol,
	}
	if !(feed.WaterKg > 0 && feed.SolventKg > 0) {
		return fmt.Errorf("%w: the lot holds %.3g kg of water and %.3g kg of solvent", ErrNoCarrier, feed.WaterKg, feed.SolventKg)
	}
	r.charge = r.s.pot
	if r.plan.PreFilled {
		fill := r.rig.FillVolumeM3 / r.carrierM3()
		if fill >= r.s.pot[inCarrier] {
			return fmt.Errorf("%w: the receiver takes %.3g kg of carrier, the dose of a charge is %.3g kg", ErrNoCarrier, r.kg(fill, inCarrier), doseKg)
		}
		r.s.pot[inCarrier] -= fill
		r.s.held[inCarrier] = fill
		r.preFilled = r.s.held
	}
	var err error
	if r.near[0], err = r.m.Boil(r.s.pot, r.eq.PressurePa, thermo.Boiling{}); err != nil {
		return err
	}
	r.startK = r.near[0].TempK
	whole := scaled(r.s.pot, 1/total(r.s.pot))
	if err := boilsInTheRoom("the pot", r.startK, r.rig.RoomK, r.eq.PressurePa, func(tK float64) float64 { return r.m.BubblePressure(whole, tK) }); err != nil {
		return fmt.Errorf("%w: %w", ErrNoCarrier, err)
	}
	if err := r.checkCoolant(); err != nil {
		return fmt.Errorf("%w: %w", ErrNoCarrier, err)
	}
	if r.fromK = math.Min(feed.TempK, r.startK); feed.TempK == 0 {
		r.fromK = r.rig.RoomK
	}
	r.fromK = boilingAlready(r.fromK, r.startK)
	r.potK = r.startK
	r.heatUpJ = r.sensible(r.s.pot, r.fromK, r.startK)
	charge := hotCharge{r.heatUpJ, total(r.s.pot) * r.m.MolarVolume(whole, r.rig.RoomK), r.startK - r.rig.RoomK}
	return checkHeater(r.rig.HeaterW, r.rig.HeatShare, r.rules.LongestHeatUpS, charge)
}

// checkCoolant refuses a vapour that the condenser does not take. The lowest at
// which it may have to is the boiling point of the azeotrope.
func (r *refluxing) checkCoolant() error {
	az := r.eq.Azeotrope
	c := condense(r.rig.HeaterW, r.rig.HeatShare, r.rules.CoolingFlowM3S, r.rules.CoolingRiseK)
	return r.rig.Coolant.takes(c, math.Min(az.TempK, r.startK), r.eq.PressurePa, func(tK float64) float64 {
		return r.m.BubblePressure(az.Y, tK)
	})
}

// carrierM3 is the molar volume of the carrier in the receiver.
func (r *refluxing) carrierM3() float64 {
	return r.m.MolarVolume(Fractions{inCarrier: 1}, r.eq.ReceiverK)
}

// sensible is the heat that warms amounts n from one temperature to another.
func (r *refluxing) sensible(n Fractions, fromK, toK float64) (heatJ float64) {
	for i := range n {
		if n[i] != 0 {
			heatJ += n[i] * r.m.Pure[i].WarmJPerMol(fromK, toK)
		}
	}
	return heatJ
}

// heatJ is what a pot that now boils at potK was given since it began to boil: what the
// condenser took, the rise of the pot, and what was left behind is colder than the pot
// was.
//
//	Q = sum V (L + h(T_pot) - h(T_rec)) + N h(T_pot) + N_gone h(T_rec), h(T_start) = 0
func (r *refluxing) heatJ(s *state, potK float64) float64 {
	gone := sum(sum(s.aqueous, s.held), s.drawn)
	return s.condensedJ + r.sensible(s.pot, r.startK, potK) + r.sensible(sum(gone, scaled(r.preFilled, -1)), r.startK, r.eq.ReceiverK)
}

// usedJ is the same from the lot in the room on, heat-up included.
func (r *refluxing) usedJ() float64 {
	gone := sum(sum(r.s.aqueous, r.s.held), r.s.drawn)
	return r.s.condensedJ + r.sensible(r.s.pot, r.fromK, r.potK) + r.sensible(sum(gone, scaled(r.preFilled, -1)), r.fromK, r.eq.ReceiverK)
}

func (r *refluxing) latent(y Fractions, tK float64) (heatJ float64) {
	for i := range y {
		heatJ += y[i] * r.m.Pure[i].HeatOfVaporizationJ.At(tK)
	}
	return heatJ
}
