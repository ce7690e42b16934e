package routes

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"sort"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/steps"
	"parch/internal/thermo"
)

// carriers are the solvents that could carry water out of this one: those with an
// activity model, sorted. A lot that a plain trap dries needs none, and one that may
// not be heated has none: the plain trap tells why.
func (c *Case) carriers() (keys []string) {
	if reason, _ := c.refuseHeating(); c.Trap != nil || reason != "" {
		return nil
	}
	for pair := range c.Catalog.Pairs {
		if pair[0] == c.Solvent.Key {
			keys = append(keys, pair[1])
		}
	}
	sort.Strings(keys)
	return keys
}

// withCarrier is a trap with a carrier, and the stripping of it from the hot pot.
func withCarrier(key string) Route {
	return Route{{Kind: steps.Trap, Carrier: key}, {Kind: steps.Forerun}}
}

// Strips reports whether stage i draws off the carrier of the trap before it.
func (r Route) Strips(i int) bool {
	return i > 0 && r[i].Kind == steps.Forerun && r[i-1].Carrier != ""
}

// CarrierOf is the carrier that a route uses, or "".
func (r Route) CarrierOf() string {
	for _, s := range r {
		if s.Carrier != "" {
			return s.Carrier
		}
	}
	return ""
}

// CarrierAccepted reports whether the job names a carrier.
func (c *Case) CarrierAccepted(key string) bool { return slices.Contains(c.Job.Accept.Carriers, key) }

// refuseCarrier gives the reason why a carrier is not offered, or "".
func (c *Case) refuseCarrier(key string) (reason, source string) {
	carrier, ok := c.Catalog.Carriers[key]
	if !ok {
		return fmt.Sprintf("%s is no carrier of the catalog", key), ""
	}
	for _, class := range carrier.NotWith {
		if class == c.Solvent.Class {
			return fmt.Sprintf("%s reacts with %s: %s", key, c.Solvent.Name, carrier.NotWithReason), carrier.NotWithOrigin.Source
		}
	}
	if carrier.ByName && !c.CarrierAccepted(key) {
		return carrier.Reason + ": name it under accept: carriers", carrier.Source
	}
	if h := c.Catalog.Solvents[key].Hazards; h.FormsPeroxides() && !c.CarrierAccepted(key) {
		return fmt.Sprintf("test first: %s forms peroxides (class %s); name it under accept: carriers once it is tested", key, h.PeroxideClass), h.Source
	}
	if reason, source = c.refuseHeating(); reason != "" {
		return reason, source
	}
	if _, err := c.carrierAt(key); err != nil {
		return err.Error(), c.pairSource(key)
	}
	return "", ""
}

func (c *Case) pairSource(key string) string {
	if p := c.Catalog.Pairs[[2]string{c.Solvent.Key, key}]; p != nil {
		return p.Source
	}
	return ""
}

// carrierEquilibrium is what was found for a carrier.
type carrierEquilibrium struct {
	eq     *steps.CarrierEquilibrium
	layers thermo.TernaryLayers // of its azeotrope; a Return of None: not known
	err    error
}

// carrierAt is the equilibrium of a carrier with the receiver as cold as the site has it.
func (c *Case) carrierAt(key string) (*steps.CarrierEquilibrium, error) {
	known := c.carrierKnown(key)
	return known.eq, known.err
}

func (c *Case) carrierKnown(key string) carrierEquilibrium {
	return c.site.carrier(key, func() (k carrierEquilibrium) {
		if k.eq, k.err = c.newCarrier(key); k.err == nil {
			k.layers = k.eq.Layers()
		}
		return k
	})
}

func (c *Case) newCarrier(key string) (*steps.CarrierEquilibrium, error) {
	model, err := mixture.Ternary(c.Catalog, c.Solvent.Key, key)
	if err != nil {
		return nil, fmt.Errorf("%w: %w", steps.ErrNoCarrier, err)
	}
	pair := [2]string{c.Solvent.Key, key}
	var organic *thermo.OrganicLayer
	if l := c.Catalog.Layers[pair]; l != nil {
		organic = &l.OrganicLayer
	}
	doubt := steps.CarrierDoubt{AlcoholInHydrocarbon: slices.Contains(alcohols, c.Solvent.Class)}
	for _, s := range []*catalog.Solvent{c.Solvent, c.Catalog.Solvents[key]} {
		doubt.PairsFactor = math.Max(doubt.PairsFactor, c.Catalog.Doubts[catalog.PairDoubt(s.Water.Quality)].SI)
	}
	if set := c.Catalog.Ternaries[pair]; set != nil {
		doubt.FittedFactor = set.Band
	}
	return steps.NewCarrierEquilibrium(model, organic, doubt, c.Job.Site.ReceiverK, c.Job.Site.PressurePa)
}

// carrierReceiver is the named receiver, or the first, owned ones before others, that
// returns the layer of the carrier's azeotrope.
func (c *Case) carrierReceiver(key, receiver string) (*catalog.Apparatus, error) {
	l := c.carrierKnown(key).layers
	for _, a := range c.receiversFor(string(l.Return)) {
		if receiver == "" || a.Key == receiver {
			return a, nil
		}
	}
	if receiver != "" {
		with := fmt.Sprintf("with %s %s", c.Catalog.Solvents[key].Name, c.Solvent.Name)
		return nil, c.wrongReceiver(needsReturn(with, l.Return, l.OrganicKgPerM3, l.AqueousKgPerM3), receiver)
	}
	return nil, fmt.Errorf("%w: no receiver returns the %s layer", steps.ErrNoCarrier, l.Return)
}

// CarrierDoses are the doses that a search tries, in kg per kg of solvent.
var CarrierDoses = []float64{0.1, 0.25, 0.5, 1}

// UsualCarrierDose is the dose at which carriers are compared.
const UsualCarrierDose = 0.25

func (c *Case) carrierPlan(choice choice, lot steps.Lot) steps.CarrierPlan {
	plan := steps.CarrierPlan{
		DoseKg: choice.dose * lot.SolventKg, OrganicWater: 1, CarrierLimit: c.practice("carrier-limit"),
		Stages: choice.stages, HeelShare: c.practice("forerun-heel"),
	}
	if choice.stages > 0 {
		plan.RefluxRatio = c.practice("forerun-reflux")
	}
	return plan
}

func (c *Case) carrierRig(returns string, fillM3, usableM3 float64, lot steps.Lot, doseM3 float64) steps.TrapRig {
	still, charges := smallestThatFits(c.ownedOrAll("still"), c.volume()+doseM3)
	return steps.TrapRig{
		HeaterW: c.heaterW(still), HeatShare: c.practice("heat-share"), Returns: returns,
		FillVolumeM3: fillM3, UsableVolumeM3: usableM3, RoomK: c.Job.Site.RoomK, Coolant: c.coolant(), Charges: charges,
	}
}

// boilWithCarrier runs the trap of a carrier as far as it goes.
func (c *Case) boilWithCarrier(key string, lot steps.Lot, goal float64, choice choice) (steps.Outcome, error) {
	eq, err := c.carrierAt(key)
	if err != nil {
		return steps.Outcome{}, err
	}
	receiver, err := c.carrierReceiver(key, choice.receiver)
	if err != nil {
		return steps.Outcome{}, err
	}
	rules := c.trapRules()
	if receiver.SetUp != nil {
		rules.SetUpS += receiver.SetUp.SI
	}
	plan := c.carrierPlan(choice, lot)
	plan.Goal, plan.PreFilled = goal, receiver.PreFilled
	rig := c.carrierRig(receiver.Returns, receiver.FillVolume.SI, receiver.Volume.SI, lot, plan.DoseKg/c.carrierDensity(key))
	o, err := steps.RunCarrierTrap(eq, lot, plan, rig, rules)
	o.Apparatus = receiver.Key
	return o, err
}

// carrierDensity at room temperature, kg/m3.
func (c *Case) carrierDensity(key string) float64 {
	return c.Catalog.Solvents[key].Pure.DensityKgPerM3.At(c.Job.Site.RoomK)
}

// stripCarrier draws the carrier off the hot pot.
func (c *Case) stripCarrier(key string, lot steps.Lot, choice choice) (steps.Outcome, error) {
	eq, err := c.carrierAt(key)
	if err != nil {
		return steps.Outcome{}, err
	}
	rules := c.trapRules()
	rules.SetUpS = c.practice("draining-time")
	rig := c.carrierRig("either", 1, 1, lot, lot.CarrierKg/c.carrierDensity(key))
	o, err := steps.StripCarrier(eq, lot, c.carrierPlan(choice, lot), rig, rules)
	if err != nil {
		return o, err
	}
	if column := c.columnOf(choice.stages); column != nil {
		o.Apparatus = column.Key
	}
	if o.Why != steps.AtTarget {
		return o, refusal{errors.New(o.WhyText)}
	}
	if lost := o.Balance.SolventRemovedKg / lot.SolventKg; lost > wastefulForerun {
		return o, refusal{fmt.Errorf("stripping %s over %d stages would take %.0f %% of the lot with it", key, choice.stages, 100*lost)}
	}
	return o, nil
}
