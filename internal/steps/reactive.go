package steps

import (
	"cmp"
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// ReactiveAgent is an agent that takes water up by reaction and is distilled off.
type ReactiveAgent struct {
	Key, Name         string     // Name: "" is Key
	Waste             WasteClass // of the spent agent; "": reactive
	MolarMassKgPerMol float64
	WaterMolPerMol    float64 // taken by a mole at its working stage
	HydrogenMolPerMol float64 // given off by a mole that has reacted in full
	SolventMolPerMol  float64 // solvent bound by a mole of surplus (magnesium in an alcohol); 0: it stays as it is
	ClassActivity     float64 // of water at 25 °C, as agents of this kind are seen to leave
	ClassBand         float64 // factor either way
	HandlesBelow      float64 // kg/kg; a wetter lot has to be pre-dried
	LowestOutlet      float64 // kg/kg, least that is claimed of an unmeasured pair: moist air reaches the distillate; 0: none
	LeastRefluxS      float64 // below it the wet end of the band is claimed; 0: not stated
}

// called is the agent's name for the reader.
func (a ReactiveAgent) called() string { return cmp.Or(a.Name, a.Key) }

// wasteClass of the spent agent, surplus and heel.
func (a ReactiveAgent) wasteClass() WasteClass { return cmp.Or(a.Waste, ReactiveWaste) }

// Measured is a residual that was found for the pair in print.
type Measured struct {
	Water     float64 // kg/kg; 0: none is known
	Low, High float64 // kg/kg, its own band; 0: none is stated
	Source    string
}

// band is that of the figure itself where none is stated.
func (m Measured) band() (low, high float64) {
	low, high = m.Low, m.High
	if low == 0 {
		low = m.Water
	}
	return low, math.Max(high, m.Water)
}

// ReactiveRig is the still and how it is run.
type ReactiveRig struct {
	PressurePa       float64
	RoomK            float64
	HeaterW          float64
	HeatShare        float64
	RefluxS          float64 // over the agent, before anything is drawn off
	Surplus          float64 // agent charged over agent needed, 1 or more
	LeastKgPerM3     float64 // agent that is charged in any case
	HeelShare        float64 // of the charge, left with the agent; never under 10 %
	Charges          int
	SetUpS           float64 // attended, each charge: charge, watch the start, collect
	AttendedShare    float64 // of the hours at the heater
	CoolingFlowM3S   float64
	VapourLossPerDay float64 // share of the charge
	LongestHeatUpS   float64 // 0: no limit
	HighestPotK      float64 // 0: no limit
}

// leastHeel is never boiled away: residues of peroxides and surplus agent stay
// under liquid (university EHS guidance: 10 % of the original volume).
const leastHeel = 0.10

// ErrPreDry means that a lot is too wet for a reactive agent.
var ErrPreDry = errors.New("too wet for a reactive agent")

// ErrNoReactive means that a lot cannot be boiled over an agent; the error says why.
var ErrNoReactive = errors.New("boiling over an agent does not work here")

// HydrogenM3PerKg is the hydrogen from a kilogram of agent that reacts in full,
// as an ideal gas at tK and 101.325 kPa.
func (a ReactiveAgent) HydrogenM3PerKg(tK float64) float64 {
	return a.HydrogenMolPerMol / a.MolarMassKgPerMol * thermo.GasConstant * tK / atmospherePa
}

// hydrogenK is the temperature at which volumes of hydrogen are given.
const hydrogenK = 293.15

// charge is what is put to a lot, and what comes of it. All of the agent that is
// not spent on water is surplus.
type charge struct {
	needKg, chargedKg, surplusKg float64
	hydrogenNowM3, hydrogenLater float64 // m3
	boundSolventKg               float64
}

func (a ReactiveAgent) charge(m *thermo.Mixture, waterKg, volumeM3 float64, rig ReactiveRig) charge {
	var c charge
	c.needKg = waterKg / m.Water.MolarMassKgPerMol / a.WaterMolPerMol * a.MolarMassKgPerMol
	c.chargedKg = math.Max(rig.Surplus*c.needKg, rig.LeastKgPerM3*volumeM3)
	c.surplusKg = c.chargedKg - c.needKg
	perKg := a.HydrogenM3PerKg(hydrogenK)
	c.hydrogenNowM3, c.hydrogenLater = perKg*c.needKg, perKg*c.surplusKg
	if a.SolventMolPerMol > 0 { // the solvent itself uses the surplus up
		c.hydrogenNowM3, c.hydrogenLater = perKg*c.chargedKg, 0
		c.boundSolventKg = c.surplusKg / a.MolarMassKgPerMol * a.SolventMolPerMol * m.Solvent.MolarMassKgPerMol
	}
	return c
}

// residual is the water left in the distillate, with its band.
type residual struct {
	water, low, high float64
	why              Stop
	text             string
	unmeasured       string // what to warn of where only the class is known
}

// residual takes what was measured for the pair, else the activity that agents of
// this kind leave with their band. Equilibrium says nothing here: it lies many
// decades lower.
func (a ReactiveAgent) residual(m *thermo.Mixture, feed Lot, found Measured, rig ReactiveRig) (residual, error) {
	r := residual{why: AtMeasured}
	if found.Water > 0 {
		r.water = found.Water
		r.low, r.high = found.band()
		r.text = fmt.Sprintf("measured: %s left %s in %s (%s)", a.called(), quantity.FormatWater(found.Water), m.Solvent.Called(), found.Source)
	} else {
		r.why = AtFloor
		at := func(activity float64) float64 {
			w, err := WaterAtActivity(m, math.Min(1, activity), referenceK)
			if err != nil {
				return math.NaN()
			}
			return w
		}
		r.water, r.low, r.high = at(a.ClassActivity), at(a.ClassActivity/a.ClassBand), at(a.ClassActivity*a.ClassBand)
		if math.IsNaN(r.low + r.water + r.high) {
			return r, fmt.Errorf("%s in %s: no solution of that activity was found", a.called(), m.Solvent.Called())
		}
		r.text = fmt.Sprintf("class floor: no measurement for %s in %s; agents of its kind leave a water activity near %.2g, here %s, %s to %s",
			a.called(), m.Solvent.Called(), a.ClassActivity, quantity.FormatWater(r.water), quantity.FormatWater(r.low), quantity.FormatWater(r.high))
	}
	if found.Water == 0 && r.low < a.LowestOutlet {
		if r.water < a.LowestOutlet {
			r.why = AtPractice
		}
		r.text += fmt.Sprintf("; droplets and moist air keep a distillate at %s or more", quantity.FormatWater(a.LowestOutlet))
		r.low, r.water, r.high = math.Max(r.low, a.LowestOutlet), math.Max(r.water, a.LowestOutlet), math.Max(r.high, a.LowestOutlet)
	}
	if rig.RefluxS < a.LeastRefluxS {
		r.water = r.high
		r.text += fmt.Sprintf("; refluxed for less than %.3g h, so %s is taken", a.LeastRefluxS/secondsPerHour, quantity.FormatWater(r.high))
	}
	if fed := feed.Water(); r.water >= fed {
		if r.water = fed; found.Water > 0 {
			r.text += "; the lot is no wetter than that and is not dried"
		} else {
			r.text += "; the lot is no wetter than that, so no drying is claimed"
		}
	}
	r.low, r.high = math.Min(r.low, feed.Water()), math.Min(r.high, feed.Water())
	if found.Water == 0 {
		r.unmeasured = fmt.Sprintf("nothing was measured for %s in %s: %s; the figure shown is no measurement", a.called(), m.Solvent.Called(), r.mayLeave())
	}
	return r, nil
}

// mayLeave says within what an agent leaves a lot of which only its class is known.
func (r residual) mayLeave() string {
	low, high := quantity.FormatWater(r.low), quantity.FormatWater(r.high)
	if low == high {
		return fmt.Sprintf("no less than %s is claimed, whatever its class may do", low)
	}
	return fmt.Sprintf("it may leave anything between %s and %s of this lot, which is the band of its class", low, high)
}

func (a ReactiveAgent) check(feed Lot, solvent string, rig ReactiveRig) error {
	if w := feed.Water(); w > a.HandlesBelow {
		return fmt.Errorf("%w: %s with %s; pre-dry it below %s before %s meets it", ErrPreDry, solvent, quantity.FormatWater(w), quantity.FormatWater(a.HandlesBelow), a.called())
	}
	return errors.Join(
		checkAmount("a surplus", "times the need", rig.Surplus, 1, 1000),
		checkAmount("a heel", "%", 100*rig.HeelShare, 0, 90),
		checkAmount("a heater", "kW", rig.HeaterW/1e3, 1e-3, 1e3),
		checkAmount("a share of the heat", "%", 100*rig.HeatShare, 1, 100),
		checkAmount("a reflux", "h", rig.RefluxS/secondsPerHour, 0, 24*30),
		checkAmount("a number of charges", "", float64(rig.Charges), 1, 1e4))
}
