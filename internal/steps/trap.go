package steps

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// TrapRules are the practical limits of a water-separating trap.
type TrapRules struct {
	LowestOutlet     float64 // kg/kg, a trap's outlet is never claimed below it
	Efficiency       float64 // water removed per vapour against the ideal, below EfficiencyBelow
	EfficiencyBelow  float64 // kg/kg
	ShortestRefluxS  float64
	LongestRefluxS   float64 // 0: no limit
	SetUpS           float64
	AttendedShare    float64 // of the hours at the heater
	ShutDownS        float64 // cool and transfer, each charge
	DrainingS        float64 // attended, each draining
	VapourLossPerDay float64 // share of the charge
	CoolingFlowM3S   float64 // flow that is really run
	CoolingRiseK     float64
	LongestHeatUpS   float64 // 0: no limit
	Closely          bool    // the course has more points
}

// TrapRig is the still and its receiver.
type TrapRig struct {
	HeaterW        float64
	HeatShare      float64 // of the heater's power that reaches the liquid
	Returns        string  // light, heavy or either
	FillVolumeM3   float64 // condensate held before anything returns
	UsableVolumeM3 float64 // aqueous layer held before it must be drained
	RoomK          float64
	Coolant        Coolant
	Charges        int // the lot is boiled in so many equal charges
}

// TrapEquilibrium is what pot and receiver do at one pressure and one receiver
// temperature, whatever the lot and the still.
type TrapEquilibrium struct {
	Mixture               *thermo.Mixture
	ReceiverK, PressurePa float64
	Floor                 thermo.Floor
	Azeotrope             thermo.Azeotrope
}

// NewTrapEquilibrium solves for the trap's floor and the azeotrope, or says why
// no trap works there.
func NewTrapEquilibrium(m *thermo.Mixture, receiverK, pressurePa float64) (*TrapEquilibrium, error) {
	floor, err := m.TrapFloor(receiverK, pressurePa)
	if err != nil {
		return nil, err
	}
	if floor.Return == thermo.None {
		return nil, fmt.Errorf("%w: %s", ErrNoTrap, floor.Reason)
	}
	az, err := m.FindAzeotrope(pressurePa)
	if err != nil {
		return nil, err
	}
	return &TrapEquilibrium{m, receiverK, pressurePa, floor, az}, nil
}

// ErrNoTrap means that a trap cannot dry the mixture; the error says why.
var ErrNoTrap = errors.New("a trap does not work here")

// floorMargin is how close to its floor a trap is run: the vapour needed grows
// without bound as the floor is approached.
const floorMargin = 1.05

// RunTrap boils a lot under a water-separating trap until the pot holds goal
// (kg/kg) or the trap can do no more.
//
// With the receiver full, the pot loses only the aqueous layer:
//
//	dN_i/dn = -l x_i,aq,  l = (y_w - x_w,org)/(x_w,aq - x_w,org)
//
// per mole n of vapour, so N_solvent is linear in N_water and the vapour needed
// is an integral over ln N_water. Before that, the receiver fills with
// condensate and nothing returns.
func RunTrap(eq *TrapEquilibrium, feed Lot, goal float64, rig TrapRig, rules TrapRules) (Outcome, error) {
	if rig.Returns != "either" && rig.Returns != string(eq.Floor.Return) {
		return Outcome{}, fmt.Errorf("%w: %s needs a %s return, the receiver returns the %s layer", ErrNoTrap, eq.Mixture.Solvent.Called(), eq.Floor.Return, rig.Returns)
	}
	if rules.LongestRefluxS > 0 && rules.LongestRefluxS < rules.ShortestRefluxS {
		return Outcome{}, fmt.Errorf("%w: %.3g h of reflux; a trap is run for %.3g h at least", ErrNoTrap, rules.LongestRefluxS/secondsPerHour, rules.ShortestRefluxS/secondsPerHour)
	}
	reach, why := trapReach(feed.Water(), goal, eq.Floor.Water, rules.LowestOutlet)
	b, err := boilTo(eq, feed, reach, rig, rules)
	if err != nil {
		return Outcome{}, err
	}
	if longest := rules.LongestRefluxS; longest > 0 && b.boilUpJ > longest*b.netW() {
		if b, err = boilFor(eq, feed, reach, rig, rules); err != nil {
			return Outcome{}, err
		}
		why = AtTime
	}
	return b.outcome(feed, goal, why), nil
}

// boilTo takes one charge down to the water fraction reach (kg/kg).
func boilTo(eq *TrapEquilibrium, feed Lot, reach float64, rig TrapRig, rules TrapRules) (*boiling, error) {
	b := &boiling{eq: eq, m: eq.Mixture, rig: rig, rules: rules}
	b.lowest = math.Min(feed.Water(), math.Max(rules.LowestOutlet, floorMargin*eq.Floor.Water))
	if err := b.start(feed); err != nil {
		return nil, err
	}
	if err := b.fill(); err != nil {
		return nil, err
	}
	return b, b.reflux(reach)
}

// boilFor takes one charge as far as it comes in the longest time of the rules,
// short of the water fraction reach (kg/kg) that takes longer.
func boilFor(eq *TrapEquilibrium, feed Lot, reach float64, rig TrapRig, rules TrapRules) (*boiling, error) {
	longestS := rules.LongestRefluxS
	b, err := boilTo(eq, feed, 1, rig, rules)
	if err != nil {
		return nil, err
	}
	if fillS := b.boilUpJ / b.netW(); fillS >= longestS {
		return nil, fmt.Errorf("%w: in %.3g h of reflux the receiver is not full, which takes %.3g h", ErrNoTrap, longestS/secondsPerHour, fillS/secondsPerHour)
	}
	lnReach, err := thermo.Brent(func(ln float64) float64 {
		if b, err = boilTo(eq, feed, math.Exp(ln), rig, rules); err != nil {
			return math.NaN()
		}
		return b.boilUpJ/b.netW()/longestS - 1
	}, math.Log(reach), math.Log(b.m.MassFraction(b.fraction())), 1e-10)
	if err != nil {
		return nil, err
	}
	return boilTo(eq, feed, math.Exp(lnReach), rig, rules)
}

// trapReach is the water a trap is run to, and why it stops there.
func trapReach(feed, goal, floor, lowest float64) (reach float64, why Stop) {
	reach, why = goal, AtTarget
	if lowest >= reach*(1-1e-9) {
		reach, why = lowest, AtPractice
	}
	if f := floorMargin * floor; f >= reach*(1-1e-9) {
		reach, why = f, AtFloor
	}
	return math.Min(reach, feed), why
}

// boiling is one charge in the pot.
type boiling struct {
	eq    *TrapEquilibrium
	m     *thermo.Mixture
	rig   TrapRig
	rules TrapRules

	lowest           float64 // kg/kg, the least water a trap can claim
	water, solvent   float64 // mol in the pot
	charged          float64 // solvent at the start, mol
	startK           float64
	heatUpJ, boilUpJ float64
	condensedJ       float64 // taken up by the condenser
	potK             float64
	boiledMol        float64
	boiledKg         float64
	aqueousMol       float64 // collected
	heldWaterMol     float64 // in the organic layer kept in the receiver
	heldSolventMol   float64
	course           []Point
}

func (b *boiling) start(feed Lot) error {
	charges := float64(b.rig.Charges)
	b.water = feed.WaterKg / charges / b.m.Water.MolarMassKgPerMol
	b.solvent = feed.SolventKg / charges / b.m.Solvent.MolarMassKgPerMol
	b.charged = b.solvent
	az := b.eq.Azeotrope
	if az.Kind == thermo.Heterogeneous && b.fraction() > az.Layers.XAqueous {
		return fmt.Errorf("%w: at %.3g %% water the pot is water with a little %s; settle it first", ErrNoTrap, 100*feed.Water(), b.m.Solvent.Called())
	}
	v, err := b.vapour(b.fraction())
	if err != nil {
		return err
	}
	b.startK, b.potK = v.TempK, v.TempK
	x := b.fraction()
	if err := boilsInTheRoom(b.m.Solvent.Called()+" with its water", b.startK, b.rig.RoomK, b.eq.PressurePa, func(tK float64) float64 { return b.m.BubblePressure(x, tK) }); err != nil {
		return fmt.Errorf("%w: %w", ErrNoTrap, err)
	}
	if err := b.checkCoolant(); err != nil {
		return fmt.Errorf("%w: %w", ErrNoTrap, err)
	}
	b.heatUpJ = b.m.WarmJ(b.water, b.solvent, b.rig.RoomK, b.startK)
	charge := hotCharge{b.heatUpJ, (b.water + b.solvent) * b.m.MolarVolume(x, b.rig.RoomK), b.startK - b.rig.RoomK}
	return checkHeater(b.rig.HeaterW, b.rig.HeatShare, b.rules.LongestHeatUpS, charge)
}

// checkCoolant refuses a vapour that the condenser does not take. The lowest at
// which it may have to is the boiling point of the azeotrope.
func (b *boiling) checkCoolant() error {
	tK, x := b.startK, b.fraction()
	if az := b.eq.Azeotrope; az.Kind != thermo.NoAzeotrope && az.TempK < tK {
		tK, x = az.TempK, az.YWater
	}
	c := condense(b.rig.HeaterW, b.rig.HeatShare, b.rules.CoolingFlowM3S, b.rules.CoolingRiseK)
	return b.rig.Coolant.takes(c, tK, b.eq.PressurePa, func(tK float64) float64 { return b.m.BubblePressure(x, tK) })
}

func (b *boiling) fraction() float64 { return b.water / (b.water + b.solvent) }

// twoLiquids reports whether a pot of water fraction x boils as two layers.
func (b *boiling) twoLiquids(x float64) bool {
	return b.eq.Azeotrope.Kind == thermo.Heterogeneous && x > b.eq.Azeotrope.Layers.XOrganic && x < b.eq.Azeotrope.Layers.XAqueous
}

// vapour over a pot of overall water fraction x.
func (b *boiling) vapour(x float64) (thermo.Vapour, error) {
	if b.twoLiquids(x) {
		return thermo.Vapour{TempK: b.eq.Azeotrope.TempK, YWater: b.eq.Azeotrope.YWater}, nil
	}
	return b.m.BubbleFrom(x, b.eq.PressurePa, b.startK)
}

// latent is the heat that evaporates one mole of vapour, J/mol.
func (b *boiling) latent(v thermo.Vapour) float64 {
	return v.YWater*b.m.Water.HeatOfVaporizationJ.At(v.TempK) + (1-v.YWater)*b.m.Solvent.HeatOfVaporizationJ.At(v.TempK)
}

// condensing is what a mole of vapour gives off as it becomes a liquid at the
// receiver's temperature, J/mol.
func (b *boiling) condensing(v thermo.Vapour) float64 {
	return b.latent(v) + b.m.WarmJ(v.YWater, 1-v.YWater, b.eq.ReceiverK, v.TempK)
}

// boil books the heat of a stretch in which the pot lost water and solvent (mol), all
// of it left behind in the receiver, and came to boil at tK: what the condenser took,
// the rise of what is in the pot, and what was left behind is colder than the pot was.
//
//	Q = sum V (L + h(T_pot) - h(T_rec)) + d(N h(T_pot)) + dN_gone h(T_rec)
func (b *boiling) boil(condensedJ, water, solvent, tK float64) {
	b.condensedJ += condensedJ
	b.boilUpJ += condensedJ + b.m.WarmJ(b.water, b.solvent, b.potK, tK) + b.m.WarmJ(water, solvent, b.potK, b.eq.ReceiverK)
	b.potK = tK
}

func (b *boiling) molarMass(yWater float64) float64 {
	return yWater*b.m.Water.MolarMassKgPerMol + (1-yWater)*b.m.Solvent.MolarMassKgPerMol
}

// aqueousShare is the share of the condensate that leaves as aqueous layer.
func (b *boiling) aqueousShare(yWater float64) float64 {
	l := b.eq.Floor.Layers
	return (yWater - l.XOrganic) / (l.XAqueous - l.XOrganic)
}

// A step of the filling takes at most this share of the water in the pot, and
// at most this share of the fill. From 50 % of water down to where it is gone that
// comes to less than 500 steps.
const (
	fillWaterShare = 0.05
	fillShare      = 1.0 / 24
	mostFillSteps  = 2000
)

// fill boils the receiver full; nothing returns (Rayleigh, dN_i/dn = -y_i, by
// the midpoint rule over equal volumes of condensate). The organic layer of that
// condensate stays in the receiver.
func (b *boiling) fill() error {
	v, err := b.vapour(b.fraction())
	if err != nil {
		return err
	}
	b.note()
	totalM3 := b.rig.FillVolumeM3
	if err := b.outlasts(totalM3); err != nil {
		return err
	}
	leftM3 := totalM3
	for n := 0; leftM3 > 0; n++ {
		if n == mostFillSteps {
			return fmt.Errorf("%w: the filling of the receiver with %s, %d steps, %.3g of it to go, %.3g mg/kg of water in the pot", ErrUnsolved,
				b.m.Solvent.Called(), n, leftM3/totalM3, b.m.MassFraction(b.fraction())*mgPerKg)
		}
		stepM3 := math.Min(leftM3, fillShare*totalM3)
		if v.YWater > 0 {
			stepM3 = math.Min(stepM3, fillWaterShare*b.water/v.YWater*b.condensateM3(v))
		}
		if leftM3-stepM3 < 1e-9*totalM3 {
			stepM3 = leftM3
		}
		half := stepM3 / b.condensateM3(v) / 2
		mid, err := b.vapour((b.water - half*v.YWater) / (b.water + b.solvent - half))
		if err != nil {
			return err
		}
		step := stepM3 / b.condensateM3(mid)
		b.water -= step * mid.YWater
		b.solvent -= step * (1 - mid.YWater)
		b.countUnreturned(step, mid)
		lost := step * mid.YWater
		if b.fraction() < goneShare { // the trace goes over too
			b.heldWaterMol += b.water
			lost += b.water
			b.water = 0
		}
		if v, err = b.vapour(b.fraction()); err != nil {
			return err
		}
		b.boil(step*b.condensing(mid), lost, step*(1-mid.YWater), v.TempK)
		leftM3 -= stepM3
	}
	b.note()
	return nil
}

// condensateM3 is the volume of a mole of condensed vapour in the receiver.
func (b *boiling) condensateM3(v thermo.Vapour) float64 {
	return b.m.MolarVolume(v.YWater, b.eq.ReceiverK)
}

// outlasts reports ErrNoTrap where a fill of the receiver leaves too little in the pot.
func (b *boiling) outlasts(fillM3 float64) error {
	if fillM3 >= b.solvent*b.m.MolarVolume(0, b.eq.ReceiverK) {
		return fmt.Errorf("%w: the receiver holds %.3g L and would take the whole charge", ErrNoTrap, 1e3*fillM3)
	}
	if potM3 := (b.water + b.solvent) * b.m.MolarVolume(b.fraction(), b.eq.ReceiverK); fillM3 > (1-leastHeel)*potM3 {
		return fmt.Errorf("%w: the receiver holds %.3g L before anything returns, which would leave less than %.0f %% of the charge in the pot", ErrNoTrap, 1e3*fillM3, 100*leastHeel)
	}
	return nil
}

// countUnreturned books step moles of vapour that fill the receiver.
func (b *boiling) countUnreturned(step float64, v thermo.Vapour) {
	aqueous := math.Min(1, math.Max(0, b.aqueousShare(v.YWater)))
	xAq := b.eq.Floor.Layers.XAqueous
	b.boiledMol += step
	b.boiledKg += step * b.molarMass(v.YWater)
	b.aqueousMol += step * aqueous
	b.heldWaterMol += step * (v.YWater - aqueous*xAq)
	b.heldSolventMol += step * (1 - v.YWater - aqueous*(1-xAq))
}

func (b *boiling) note() {
	x := b.fraction()
	p := Point{
		Hours: (b.heatUpJ + b.boilUpJ) / b.netW() / secondsPerHour, Water: b.m.MassFraction(x),
		BoiledKg: b.boiledKg, AqueousM3: b.aqueousM3(), LostShare: math.Max(0, 1-b.solvent/b.charged),
	}
	if v, err := b.vapour(x); err == nil {
		p.PotK, p.HeadK = v.TempK, v.TempK
	}
	b.course = append(b.course, p)
}

func (b *boiling) netW() float64 { return b.rig.HeaterW * b.rig.HeatShare }

func (b *boiling) aqueousM3() float64 {
	return b.aqueousMol * b.m.MolarVolume(b.eq.Floor.Layers.XAqueous, b.eq.ReceiverK)
}

// reflux runs the steady return down to the water fraction reach (kg/kg).
func (b *boiling) reflux(reach float64) error {
	end, factor := b.m.MoleFraction(reach), math.E // of water between two points of the course
	if b.rules.Closely {
		factor = 1.2
	}
	if b.twoLiquids(b.fraction()) {
		stop := math.Max(end, b.eq.Azeotrope.Layers.XOrganic)
		if err := b.segment(stop); err != nil {
			return err
		}
	}
	corner := b.m.MoleFraction(b.rules.EfficiencyBelow)
	for b.fraction() > end*(1+1e-12) {
		stop := math.Max(end, b.fraction()/factor)
		if corner < b.fraction()*(1-1e-12) && corner > stop {
			stop = corner
		}
		if err := b.segment(stop); err != nil {
			return err
		}
	}
	return nil
}

const quadraturePoints = 24

// segment takes the pot down to the water mole fraction x along the straight
// line N_solvent(N_water) that the removal of aqueous layer draws.
func (b *boiling) segment(x float64) error {
	if x >= b.fraction() {
		return nil // filling the receiver went past it
	}
	xAq := b.eq.Floor.Layers.XAqueous
	solventPerWater := (1 - xAq) / xAq
	water0, solvent0 := b.water, b.solvent
	rest := solvent0 - solventPerWater*water0
	water1 := x * rest / (1 - x*(1+solventPerWater))
	efficiency := 1.0
	if b.m.MassFraction(x) < b.rules.EfficiencyBelow*(1-1e-9) {
		efficiency = b.rules.Efficiency
	}
	two := b.twoLiquids((x + b.fraction()) / 2)
	var failed error
	perLnWater := func(lnWater float64) (mol, kg, joule float64) {
		water := math.Exp(lnWater)
		v := thermo.Vapour{TempK: b.eq.Azeotrope.TempK, YWater: b.eq.Azeotrope.YWater}
		if !two {
			var err error
			if v, err = b.m.BubbleFrom(water/(water+rest+solventPerWater*water), b.eq.PressurePa, b.startK); err != nil {
				failed = err
			}
		}
		l := b.aqueousShare(v.YWater)
		if l <= 0 { // a wet pot may give a drier vapour than a less wet one
			failed = fmt.Errorf("%w: the condensate of a pot at %s does not split at %.3g °C; start from a drier lot", ErrNoTrap,
				quantity.FormatWater(b.m.MassFraction(water/(water+rest+solventPerWater*water))), b.eq.ReceiverK-273.15)
		}
		mol = water / (l * xAq) / efficiency
		return mol, mol * b.molarMass(v.YWater), mol * b.condensing(v)
	}
	mol, kg, condensedJ := integrate3(perLnWater, math.Log(water1), math.Log(water0))
	if failed != nil {
		return failed
	}
	b.boiledMol += mol
	b.boiledKg += kg
	b.aqueousMol += (water0 - water1) / xAq
	b.water, b.solvent = water1, rest+solventPerWater*water1
	v, err := b.vapour(b.fraction())
	if err != nil {
		return err
	}
	b.boil(condensedJ, water0-water1, solvent0-b.solvent, v.TempK)
	b.note()
	return nil
}

// integrate3 integrates three quantities at once by Gauss-Legendre quadrature.
func integrate3(f func(u float64) (a, b, c float64), lo, hi float64) (a, b, c float64) {
	mid, half := (lo+hi)/2, (hi-lo)/2
	for i, node := range legendre.nodes {
		fa, fb, fc := f(mid + half*node)
		weight := half * legendre.weights[i]
		a += weight * fa
		b += weight * fb
		c += weight * fc
	}
	return a, b, c
}

// legendre holds nodes and weights on -1 to 1.
var legendre = func() (r struct{ nodes, weights [quadraturePoints]float64 }) {
	quad.Legendre{}.FixedLocations(r.nodes[:], r.weights[:], -1, 1)
	return r
}()
