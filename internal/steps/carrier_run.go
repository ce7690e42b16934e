package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

const (
	water   = thermo.InWater
	solvent = thermo.InSolvent
	carrier = thermo.InCarrier
)

// RunCarrier boils a lot with a carrier under a trap, then strips the carrier.
//
//	pot:  dN_i/dn = -y_i + (1 - beta) x_i,org = -beta x_i,aq
//
// per mole n of vapour, which the receiver parts into organic layer (returned)
// and a share beta of aqueous layer (kept). Before that the receiver fills: from
// the pot with nothing returned, or with dry carrier which the first organic
// layer pushes into the pot. Stripping is Rayleigh's dN_i/dn = -y_i.
func RunCarrier(eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rig TrapRig, rules TrapRules) (Outcome, error) {
	if err := plan.check(); err != nil {
		return Outcome{}, err
	}
	r := refluxing{eq: eq, m: eq.Model, plan: plan, rig: rig, rules: rules}
	if err := r.start(feed); err != nil {
		return Outcome{}, err
	}
	if err := r.fill(); err != nil {
		return Outcome{}, err
	}
	if err := r.reflux(); err != nil {
		return Outcome{}, err
	}
	r.trapped = r.s
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

	charge        Fractions // mol of the lot and the dose
	startK        float64
	heatUpJ       float64
	s             state
	trapped       state                          // when the trap stopped
	near          [MostStages + 1]thermo.Boiling // pot and stages, where they boiled last
	split         thermo.TernarySplit
	why, stripWhy Stop
	whyText       string
	goal          float64 // water/(water + solvent) at which the trap stops
	trapFromJ     float64 // heat spent and pot left when the steady return began
	trapFromKg    float64
	corrected     bool    // whether the organic layer's water came from tie-lines
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
	heatJ                     float64
	pushedM3                  float64 // carrier pushed out of a pre-filled receiver
}

func total(n Fractions) float64 { return n[0] + n[1] + n[2] }

func scaled(n Fractions, by float64) Fractions {
	for i := range n {
		n[i] *= by
	}
	return n
}

func (r *refluxing) massKg(n Fractions) float64 {
	return n[0]*r.m.Pure[0].MolarMassKgPerMol + n[1]*r.m.Pure[1].MolarMassKgPerMol + n[2]*r.m.Pure[2].MolarMassKgPerMol
}

func (r *refluxing) kg(n float64, component int) float64 {
	return n * r.m.Pure[component].MolarMassKgPerMol
}

// dryness is water/(water + solvent) by mass in the pot.
func (r *refluxing) dryness(s *state) float64 {
	w := r.kg(s.pot[water], water)
	return w / (w + r.kg(s.pot[solvent], solvent))
}

func (r *refluxing) netW() float64 { return r.rig.HeaterW * r.rig.HeatShare }

func (r *refluxing) start(feed Lot) error {
	charges := float64(r.rig.Charges)
	doseKg := r.plan.DoseKg / charges
	r.s.pot = Fractions{
		feed.WaterKg / charges / r.m.Pure[water].MolarMassKgPerMol,
		feed.SolventKg / charges / r.m.Pure[solvent].MolarMassKgPerMol,
		(doseKg + feed.CarrierKg/charges) / r.m.Pure[carrier].MolarMassKgPerMol,
	}
	if !(feed.WaterKg > 0 && feed.SolventKg > 0) {
		return fmt.Errorf("%w: the lot holds %.3g kg of water and %.3g kg of solvent", ErrNoCarrier, feed.WaterKg, feed.SolventKg)
	}
	r.charge = r.s.pot
	if r.plan.PreFilled {
		fill := r.rig.FillVolumeM3 / r.carrierM3()
		if fill >= r.s.pot[carrier] {
			return fmt.Errorf("%w: the receiver takes %.3g kg of carrier, the dose of a charge is %.3g kg", ErrNoCarrier, r.kg(fill, carrier), doseKg)
		}
		r.s.pot[carrier] -= fill
		r.s.held[carrier] = fill
	}
	var err error
	if r.near[0], err = r.m.Boil(r.s.pot, r.eq.PressurePa, thermo.Boiling{}); err != nil {
		return err
	}
	r.startK = r.near[0].TempK
	if r.startK <= r.rig.RoomK {
		return fmt.Errorf("%w: the pot boils at %.1f °C at %.4g kPa, not above the room's %.1f °C", ErrNoCarrier, r.startK-273.15, r.eq.PressurePa/1e3, r.rig.RoomK-273.15)
	}
	r.heatUpJ = r.sensible(r.s.pot, r.rig.RoomK, r.startK)
	return checkHeater(r.heatUpJ, r.netW(), r.rules.LongestHeatUpS, total(r.s.pot)*r.m.MolarVolume(scaled(r.s.pot, 1/total(r.s.pot)), r.rig.RoomK))
}

// carrierM3 is the molar volume of the carrier in the receiver.
func (r *refluxing) carrierM3() float64 {
	return r.m.MolarVolume(Fractions{carrier: 1}, r.eq.ReceiverK)
}

// sensible is the heat that warms amounts n from one temperature to another.
func (r *refluxing) sensible(n Fractions, fromK, toK float64) (heatJ float64) {
	mid := (fromK + toK) / 2
	for i := range n {
		if n[i] > 0 {
			heatJ += n[i] * r.m.Pure[i].HeatCapacityJPerMolK.At(mid) * (toK - fromK)
		}
	}
	return heatJ
}

func (r *refluxing) latent(y Fractions, tK float64) (heatJ float64) {
	for i := range y {
		heatJ += y[i] * r.m.Pure[i].HeatOfVaporizationJ.At(tK)
	}
	return heatJ
}

// condensed is a mole of vapour at the head and what the receiver makes of it.
type condensed struct {
	pot, head thermo.Boiling
	split     thermo.TernarySplit
}

// climb boils the pot and follows its vapour up the column. At total reflux,
// and with the organic layer returned it is nearly that, the liquid on a stage
// is like the vapour that rises to it.
func (r *refluxing) climb(s *state) (c condensed, err error) {
	x := s.pot
	for k := range r.plan.Stages + 1 {
		if r.near[k], err = r.m.Boil(x, r.eq.PressurePa, r.near[k]); err != nil {
			return c, err
		}
		c.head = r.near[k]
		if k > 0 && alike(x, c.head.Y) {
			break // pinched at an azeotrope
		}
		x = c.head.Y
	}
	c.pot = r.near[0]
	return c, nil
}

// alike reports whether a vapour is like its liquid.
func alike(x, y Fractions) bool {
	const share = 1e-6
	for i := range x {
		if math.Abs(y[i]-x[i]) > share*x[i] {
			return false
		}
	}
	return true
}

// condense boils the pot and parts a mole of the head's vapour in the receiver.
func (r *refluxing) condense(s *state) (c condensed, err error) {
	if c, err = r.climb(s); err != nil {
		return c, err
	}
	c.split, err = r.part(c.head.Y)
	return c, err
}

// part splits amounts or fractions n at the receiver's temperature, with the
// water of the organic layer from tie-lines where they are known.
func (r *refluxing) part(n Fractions) (thermo.TernarySplit, error) {
	z := scaled(n, 1/total(n))
	split, err := r.m.FlashFrom(z, r.eq.ReceiverK, r.split)
	if err != nil {
		return split, err
	}
	if split.Exists {
		r.split = split
	}
	wet, known := r.m.Rewet(split, z, r.eq.ReceiverK, r.eq.Organic, r.plan.OrganicWater)
	r.corrected = r.corrected || known
	return wet, nil
}

// flow is the change of state per mole of vapour.
type flow func(s *state) (state, condensed, error)

// vapour is a mole at the head, kept from the pot. As much vapour leaves the pot
// (constant molar overflow), whose latent heat counts.
func (r *refluxing) vapour(c *condensed) state {
	y := c.head.Y
	return state{pot: scaled(y, -1), boiledMol: 1, boiledKg: r.massKg(c.pot.Y), heatJ: r.latent(c.pot.Y, c.pot.TempK)}
}

// filling returns nothing.
func (r *refluxing) filling(s *state) (state, condensed, error) {
	c, err := r.climb(s)
	if err != nil {
		return state{}, c, err
	}
	d := r.vapour(&c)
	d.held = c.head.Y
	return d, c, nil
}

// pushing keeps the organic layer and returns as much dry carrier by volume.
func (r *refluxing) pushing(s *state) (state, condensed, error) {
	c, err := r.condense(s)
	if err != nil {
		return state{}, c, err
	}
	d := r.vapour(&c)
	organic, aqueous := c.head.Y, Fractions{}
	if c.split.Exists {
		organic, aqueous = scaled(c.split.Organic, 1-c.split.AqueousShare), scaled(c.split.Aqueous, c.split.AqueousShare)
	}
	d.aqueous, d.held = aqueous, organic
	d.pushedM3 = total(organic) * r.m.MolarVolume(scaled(organic, 1/total(organic)), r.eq.ReceiverK)
	returned := Fractions{carrier: d.pushedM3 / r.carrierM3()}
	d.held[carrier] -= returned[carrier]
	d.pot[carrier] += returned[carrier]
	d.heatJ += r.sensible(returned, r.eq.ReceiverK, c.pot.TempK)
	return d, c, nil
}

// returning returns the organic layer of the condensate.
func (r *refluxing) returning(s *state) (state, condensed, error) {
	c, err := r.condense(s)
	if err != nil {
		return state{}, c, err
	}
	aqueous := scaled(c.split.Aqueous, c.split.AqueousShare*r.efficiency(s))
	if !c.split.Exists {
		aqueous = Fractions{}
	}
	d := r.vapour(&c)
	d.pot, d.aqueous = scaled(aqueous, -1), aqueous
	returned := c.head.Y
	for i := range returned {
		returned[i] -= aqueous[i]
	}
	d.heatJ += r.sensible(returned, r.eq.ReceiverK, c.pot.TempK)
	return d, c, nil
}

// stripping draws the head of the column off.
func (r *refluxing) stripping(s *state) (state, condensed, error) {
	c, err := r.climb(s)
	if err != nil {
		return state{}, c, err
	}
	d := r.vapour(&c)
	d.drawn = c.head.Y
	boiled := 1 + r.plan.RefluxRatio
	d.boiledMol, d.boiledKg, d.heatJ = boiled, boiled*d.boiledKg, boiled*d.heatJ
	return d, c, nil
}

// fill gets the receiver full and the organic layer of it to a place of its own.
func (r *refluxing) fill() error {
	if r.plan.PreFilled {
		return r.march(r.pushing, func(s *state, _ *condensed) float64 { return s.pushedM3 / r.rig.FillVolumeM3 }, ignore)
	}
	full := func(s *state, _ *condensed) float64 {
		n := total(s.held)
		if n == 0 {
			return 0
		}
		return n * r.m.MolarVolume(scaled(s.held, 1/n), r.eq.ReceiverK) / r.rig.FillVolumeM3
	}
	if err := r.march(r.filling, full, ignore); err != nil {
		return err
	}
	split, err := r.part(r.s.held)
	if err != nil || !split.Exists {
		return err
	}
	n := total(r.s.held)
	r.s.aqueous = scaled(split.Aqueous, n*split.AqueousShare)
	for i := range r.s.held {
		r.s.held[i] -= r.s.aqueous[i]
	}
	return nil
}

// slowestRemoval ends the trap: to boil as much as the whole pot over once more
// would take less than this share of its water.
const slowestRemoval = 0.05

// reflux runs the steady return until the goal is reached or the trap can do no more.
func (r *refluxing) reflux() error {
	if err := r.firstLayers(); err != nil {
		return err
	}
	goal := math.Max(r.plan.Goal, r.rules.LowestOutlet)
	r.why = AtTarget
	if goal > r.plan.Goal {
		r.why = AtPractice
	}
	r.goal, r.trapFromJ, r.trapFromKg = goal, r.s.heatJ, r.massKg(r.s.pot)
	first, err := r.condense(&r.s)
	if err != nil || r.dryness(&r.s) <= goal {
		return err
	}
	wet := math.Log(r.dryness(&r.s) / goal)
	brisk := math.Log(r.briskness(&r.s, &first))
	lnHeel := math.Log(r.leastKg() / r.trapFromKg)
	if !(brisk > 0) || lnHeel >= 0 {
		r.why, r.whyText = r.ended(&r.s, &first)
		return nil
	}
	progress := func(s *state, c *condensed) float64 {
		if stop, _ := r.blocked(s, c); stop != "" {
			return math.Inf(1)
		}
		done := math.Max(1-math.Log(r.dryness(s)/goal)/wet, 1-math.Log(r.briskness(s, c))/brisk)
		done = math.Max(done, math.Log(r.massKg(s.pot)/r.trapFromKg)/lnHeel)
		return math.Max(done, r.timeSpent(s))
	}
	var last condensed
	err = r.march(r.returning, progress, func(s *state, c *condensed) {
		r.watch(s, c)
		last = *c
	})
	if err == nil && r.dryness(&r.s) > goal*(1+1e-4) {
		r.why, r.whyText = r.ended(&r.s, &last)
	}
	return err
}

func (r *refluxing) leastKg() float64 { return r.plan.HeelShare * r.massKg(r.charge) }

// briskness is the share of the pot's water that boiling as much as the whole
// pot over would take at the present rate, over slowestRemoval.
func (r *refluxing) briskness(s *state, c *condensed) float64 {
	if !c.split.Exists {
		return 0
	}
	taken := c.split.AqueousShare * c.split.Aqueous[water] * r.efficiency(s)
	return taken * total(s.pot) / s.pot[water] / slowestRemoval
}

// timeSpent is the share of the longest time under the trap.
func (r *refluxing) timeSpent(s *state) float64 {
	if r.plan.LongestS <= 0 {
		return 0
	}
	return (s.heatJ - r.trapFromJ) / r.netW() / r.plan.LongestS
}

func (r *refluxing) efficiency(s *state) float64 {
	if r.dryness(s) < r.rules.EfficiencyBelow {
		return r.rules.Efficiency
	}
	return 1
}

// blocked says why the receiver cannot go on with a condensate.
func (r *refluxing) blocked(s *state, c *condensed) (stop Stop, text string) {
	pot := quantity.FormatWater(r.dryness(s))
	l := r.m.Settle(c.split, r.eq.ReceiverK)
	switch {
	case !c.split.Exists:
		return AtOneLayer, fmt.Sprintf("no second layer: the condensate of a pot at %s is one liquid at %.0f °C", pot, r.eq.ReceiverK-273.15)
	case l.Return == thermo.None:
		return AtExchange, fmt.Sprintf("%s, with %s in the pot", l.Reason, pot)
	case r.carrierFree(c.split.Aqueous) <= r.dryness(s):
		return AtFloor, fmt.Sprintf("floor: with %s in the pot the aqueous layer is no wetter", pot)
	case !r.fits(l.Return):
		return AtExchange, fmt.Sprintf("the layers change places with %s in the pot: organic %.0f, aqueous %.0f kg/m3", pot, l.OrganicKgPerM3, l.AqueousKgPerM3)
	}
	return "", ""
}

// ended says why a trap that has not reached its goal has come to its end.
func (r *refluxing) ended(s *state, c *condensed) (stop Stop, text string) {
	if stop, text = r.blocked(s, c); stop != "" {
		return stop, text
	}
	pot := quantity.FormatWater(r.dryness(s))
	switch {
	case r.timeSpent(s) > 1-1e-4:
		return AtTime, fmt.Sprintf("time: %.3g h under the trap are over, with %s in the pot", r.plan.LongestS/secondsPerHour, pot)
	case r.massKg(s.pot) < r.leastKg()*(1+1e-3):
		return AtHeel, fmt.Sprintf("heel: the aqueous layer has taken all but %.0f %% of the charge", 100*r.plan.HeelShare)
	}
	return AtFloor, fmt.Sprintf("floor: with %s in the pot hardly any second layer forms at %.0f °C", pot, r.eq.ReceiverK-273.15)
}

// watch notes what changes at an accepted step: the return needed, and how well
// the water of the organic layer is known.
func (r *refluxing) watch(s *state, c *condensed) {
	if !c.split.Exists {
		return
	}
	if factor, basis := r.eq.Band(r.m.Mass(c.split.Organic)); factor > r.widestBand {
		r.widestBand, r.bandBasis = factor, basis
	}
	if l := r.m.Settle(c.split, r.eq.ReceiverK); l.Return != r.returns && l.Return != thermo.None {
		r.warnings = append(r.warnings, fmt.Sprintf("the layers change places with %s in the pot: from here on the receiver must return the %s one",
			quantity.FormatWater(r.dryness(s)), l.Return))
		r.returns = l.Return
	}
}

// firstLayers checks that the condensate splits, and the return fits.
func (r *refluxing) firstLayers() error {
	c, err := r.condense(&r.s)
	if err != nil {
		return err
	}
	l := r.m.Settle(c.split, r.eq.ReceiverK)
	if l.Return == thermo.None {
		w := r.m.Mass(c.head.Y)
		return fmt.Errorf("%w: %s; it holds %.3g %% water, %.3g %% %s and %.3g %% %s", ErrNoCarrier, l.Reason,
			100*w[water], 100*w[solvent], r.m.Pure[solvent].Key, 100*w[carrier], r.m.Pure[carrier].Key)
	}
	r.returns = l.Return
	if !r.fits(l.Return) {
		return fmt.Errorf("%w: the layers need a %s return (organic %.0f, aqueous %.0f kg/m3), the receiver returns the %s layer",
			ErrNoCarrier, l.Return, l.OrganicKgPerM3, l.AqueousKgPerM3, r.rig.Returns)
	}
	if layer, pot := r.carrierFree(c.split.Aqueous), r.dryness(&r.s); layer <= pot {
		return fmt.Errorf("%w: without the carrier the aqueous layer holds %.3g %% water, the pot %.3g %%: the solvent would leave first",
			ErrNoCarrier, 100*layer, 100*pot)
	}
	return nil
}

// carrierFree is water/(water + solvent) by mass in a layer.
func (r *refluxing) carrierFree(layer Fractions) float64 {
	return r.dryness(&state{pot: layer})
}

func (r *refluxing) fits(needed thermo.Returns) bool {
	return r.rig.Returns == "either" || r.rig.Returns == string(needed)
}

// strip draws carrier off until the product holds no more than its limit.
func (r *refluxing) strip() error {
	carrierShare := func(s *state) float64 { return r.kg(s.pot[carrier], carrier) / r.massKg(s.pot) }
	r.stripWhy = AtTarget
	first := math.Log(carrierShare(&r.s) / r.plan.CarrierLimit)
	if first <= 0 {
		return nil
	}
	if err := r.strippable(carrierShare(&r.s)); err != nil {
		return err
	}
	lnHeel := math.Log(r.leastKg() / r.massKg(r.s.pot))
	start := r.massKg(r.s.pot)
	if lnHeel >= 0 {
		r.stripWhy = AtHeel
		return nil
	}
	progress := func(s *state, _ *condensed) float64 {
		return math.Max(1-math.Log(carrierShare(s)/r.plan.CarrierLimit)/first, math.Log(r.massKg(s.pot)/start)/lnHeel)
	}
	if err := r.march(r.stripping, progress, ignore); err != nil {
		return err
	}
	if carrierShare(&r.s) > r.plan.CarrierLimit*(1+1e-4) {
		r.stripWhy = AtHeel
	}
	return nil
}

// strippable refuses a pot whose vapour holds less carrier than the pot itself:
// beyond the azeotrope the solvent would leave and the carrier stay.
func (r *refluxing) strippable(potShare float64) error {
	c, err := r.climb(&r.s)
	if err != nil {
		return err
	}
	if head := r.m.Mass(c.head.Y)[carrier]; head <= potShare {
		return fmt.Errorf("%w: the dried pot holds %.3g %% %s, its vapour %.3g %%: the solvent would leave first; take less carrier",
			ErrNoCarrier, 100*potShare, r.m.Pure[carrier].Key, 100*head)
	}
	return nil
}
