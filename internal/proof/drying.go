package proof

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/steps"
)

// The bench of the published dryings where they do not say: bottles of about
// 0.3 L, 0.08 m deep, at 25 °C, over sieves from a furnace of 300 °C. The depth
// is that of the fit of the mixing rates.
const (
	benchK      = 298.15
	benchM3     = 0.3e-3
	benchDepthM = 0.08
	usualDryer  = "furnace-300"
)

const (
	soakLimit     = 2.0 // factor, of a soak against a measured drying
	reactiveLimit = 10  // factor, the band of the class floors of reactive agents
)

// Dryings computes the measured dryings of the checks alone.
func Dryings(cat *catalog.Catalog, all *catalog.Checks) (rows []Row) {
	for _, d := range all.Dryings {
		rows = append(rows, dryingRow(cat, d, nil))
	}
	return rows
}

// dryingRow computes what a step leaves where a drying was measured. What the
// catalog recalls of the same measurement for reactive agents is not used: their
// class floor is.
func dryingRow(cat *catalog.Catalog, d catalog.Drying, why reasons) Row {
	row := Row{
		Quantity: "drying", Subject: d.Solvent, Partner: d.Agent, Condition: howDried(d),
		Published: 1e6 * d.Left, Unit: "mg/kg", Limit: soakLimit, LimitUnit: "factor",
		Kind: d.Kind, Confidence: d.Confidence, Source: d.ID + ": " + d.Source,
	}
	if cat.Agents[d.Agent].Kind == "reactive" {
		row.Limit = reactiveLimit
		row.Condition += "; class floor"
	}
	left, err := leftBy(cat, d)
	row.Computed = 1e6 * left
	return why.excuse(row.judge(err))
}

// errIdle is no figure to hold against a drying: what went in comes out.
var errIdle = errors.New("the agent's class floor lies above the water of the start, so that the step claims nothing")

var errNoTime = errors.New("the time of contact is not stated")

func leftBy(cat *catalog.Catalog, d catalog.Drying) (float64, error) {
	a, s := cat.Agents[d.Agent], cat.Solvents[d.Solvent]
	b := bench{cat, s, a, d}
	if d.From == 0 {
		return math.NaN(), errors.New("the water of the start is not stated")
	}
	var o steps.Outcome
	var err error
	switch {
	case a.Kind == "reactive":
		o, err = b.reflux()
	case d.TimeS == 0 || d.DoseKgPerM3 == 0:
		return math.NaN(), errNoTime
	case a.Kind == "salt":
		o, err = b.salt()
	default:
		o, err = b.soak()
	}
	switch {
	case err != nil:
		return math.NaN(), err
	case a.Kind == "reactive" && o.Out.Water() >= d.From*(1-1e-9):
		return math.NaN(), errIdle
	}
	return o.Out.Water(), nil
}

// bench is a measured drying as the steps see it.
type bench struct {
	cat     *catalog.Catalog
	solvent *catalog.Solvent
	agent   *catalog.Agent
	d       catalog.Drying
}

func (b *bench) practice(key string) float64 { return b.cat.Practice[key].SI }

func (b *bench) lot() steps.Lot {
	kg := benchM3 * b.solvent.Density.At(benchK)
	return steps.Lot{SolventKg: kg * (1 - b.d.From), WaterKg: kg * b.d.From, TempK: benchK}
}

func (b *bench) soak() (steps.Outcome, error) {
	a := b.agent
	sorbent := steps.Sorbent{
		Key: a.Key, Loading: a.Isotherm.LoadingKgPerKg, ResidualKgPerKg: b.residual(), CapacityShare: 1,
		BeadDiameterM: a.BeadDiameter.SI, BeadKgPerM3: a.BeadDensity.SI, Porosity: a.BeadPorosity.SI, Tortuosity: a.BeadTortuosity.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI,
	}
	if pores, ok := a.PoreSpace[b.d.Solvent]; ok {
		sorbent.PoreShare = pores.SI
	}
	rig := steps.SoakRig{
		TempK: benchK, Vessels: 1, AttendedS: b.practice("soak-attended"), WaterMolarM3: b.practice("water-molar-volume"),
		DepthM: benchDepthM, StillRatePerS: b.solvent.StillRate.SI, RateDepthM: b.practice("still-rate-depth"),
		Stirred: b.d.How == "stirred", RelativeVelocityMS: b.practice("stir-velocity"),
	}
	if strings.HasPrefix(b.d.Form, "powder") {
		sorbent.DispersionPerS = b.practice("stirred-slurry-rate")
	}
	if b.solvent.Class == "ketone" {
		rig.CondensationPerS = b.practice("sieve-ketone-water") / 3600
	}
	return steps.SoakOver(mixture.Pair(b.cat, b.solvent), b.lot(), b.d.DoseKgPerM3, b.d.TimeS, sorbent, rig)
}

// residual is what a sieve from a furnace still holds.
func (b *bench) residual() float64 {
	for _, h := range b.cat.Histories {
		if h.Key == usualDryer {
			return h.ResidualKgPerKg.SI
		}
	}
	return math.NaN()
}

func (b *bench) salt() (steps.Outcome, error) {
	a := b.agent
	salt := steps.SaltAgent{Key: a.Key, MolarMassKgPerMol: a.MolarMassKgPerMol(), ShareRemoved: a.Claim.Removed.SI, HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI}
	if other, ok := a.Claim.Except[b.d.Solvent]; ok {
		salt.ShareRemoved = other.SI
	}
	for _, h := range a.Hydrates {
		salt.Pairs = append(salt.Pairs, steps.HydratePair{Name: h.Pair, Activity: h.Activity.SI, WaterMolPerMol: h.Water, HeatJPerMolWater: h.Heat.SI})
	}
	rules := steps.SaltRules{LowestOutlet: a.Claim.Least.SI, LowestTarget: a.Claim.Target.SI, ClaimTimeS: b.practice("salt-contact"), ClaimDoseKgPerM3: a.Claim.Dose.SI}
	rig := steps.SaltRig{TempK: benchK, TimeS: b.d.TimeS, AttendedS: b.practice("salt-attended"), Portions: 1}
	return steps.RunSalt(mixture.Pair(b.cat, b.solvent), b.lot(), b.d.DoseKgPerM3, salt, rules, rig)
}

// reflux boils over a reactive agent; agents left standing cold are no reflux.
func (b *bench) reflux() (steps.Outcome, error) {
	if b.d.How != "reflux" {
		return steps.Outcome{}, fmt.Errorf("%s, not refluxed: the step boils the lot over the agent", b.d.How)
	}
	a := b.agent
	re := a.Reaction
	agent := steps.ReactiveAgent{
		Key: a.Key, MolarMassKgPerMol: a.MolarMassKgPerMol(), WaterMolPerMol: re.Water, HydrogenMolPerMol: re.Hydrogen, SolventMolPerMol: re.Solvent,
		ClassActivity: re.Activity.SI, ClassBand: re.Activity.High / re.Activity.SI, HandlesBelow: re.Feed.SI, LeastRefluxS: b.practice("reactive-reflux"),
	}
	refluxS := b.d.TimeS
	if refluxS == 0 {
		refluxS = b.practice("reactive-reflux")
	}
	rig := steps.ReactiveRig{
		PressurePa: b.practice("site-pressure"), RoomK: b.practice("site-room"), HeaterW: 300, HeatShare: b.practice("heat-share"),
		RefluxS: refluxS, Surplus: re.Surplus.SI, HeelShare: b.practice("forerun-heel"), Charges: 1,
	}
	return steps.RunReactive(mixture.Pair(b.cat, b.solvent), b.lot(), agent, steps.Measured{}, rig)
}
