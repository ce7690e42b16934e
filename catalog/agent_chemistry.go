package catalog

import (
	"math"

	"parch/internal/document"
	"parch/internal/quantity"
)

// readChemistry reads what salts and reactive agents do with water.
func (s *shelf) readChemistry(a *Agent, f document.Fields) {
	var kgPerMol float64
	if n := f.Get("formula"); n != nil {
		count, err := parseFormula(a.Formula)
		if err != nil {
			n.Fail("%v", err)
		}
		kgPerMol = count.kgPerMol()
	}
	if f.Has("hydrates") || f.Has("reaction") {
		f.Need("formula")
	}
	for _, item := range items(f.Get("hydrates")) {
		a.Hydrates = append(a.Hydrates, s.hydrate(item, kgPerMol))
	}
	checkHydrates(f.Get("hydrates"), a.Hydrates)
	if n := f.Get("claim"); n != nil {
		a.Claim = s.claim(n)
	}
	if n := f.Get("reaction"); n != nil {
		a.Reaction = s.reaction(n, kgPerMol)
	}
	for _, item := range items(f.Get("residuals")) {
		a.Residuals = append(a.Residuals, s.residual(item))
	}
}

func (s *shelf) hydrate(n *document.Node, kgPerMol float64) Hydrate {
	f := n.Map("pair", "water", "capacity", "activity", "heat")
	h := Hydrate{
		Pair: f.Need("pair").Text(), Water: positive(f, "water", quantity.Number),
		Capacity: s.value(f.Need("capacity"), quantity.MassRatio), Activity: s.value(f.Need("activity"), quantity.Number),
		Heat: s.value(f.Need("heat"), quantity.HeatPerMole),
	}
	checkStoichiometry(f.Get("capacity"), h.Capacity.SI, h.Water*waterKgPerMol/kgPerMol, "kg/kg")
	if h.Activity.SI <= 0 || h.Activity.SI >= 1 {
		f.Get("activity").Fail("%q is not between 0 and 1", h.Activity.Text)
	}
	checkHydrateHeat(f.Get("heat"), h)
	return h
}

// checkHydrateHeat compares the heat of a hydrate with its activity: the entropy of
// binding a mole of liquid water, (R T ln a + H)/T, is 8 to 50 J/(mol K) for salts
// in the tables of the National Bureau of Standards (from memory).
func checkHydrateHeat(n *document.Node, h Hydrate) {
	const least, most, ambientK = 8.0, 50.0, 298.15
	activity := h.Activity.SI
	if h.Activity.Banded() && h.Activity.Confidence == Assumption {
		return // an effective activity is no equilibrium
	}
	lost := h.Heat.SI/ambientK + gasConstant*math.Log(activity)
	if n != nil && h.Heat.SI > 0 && !(lost >= least && lost <= most) {
		n.Fail("%q with the activity %s leaves %.0f J/(mol K) for the entropy of binding water; %g to %g is expected", h.Heat.Text, h.Activity.Text, lost, least, most)
	}
}

// checkHydrates: each further pair forms at a higher activity.
func checkHydrates(n *document.Node, pairs []Hydrate) {
	for i := 1; i < len(pairs); i++ {
		if pairs[i].Activity.SI <= pairs[i-1].Activity.SI {
			n.Fail("the activity of %s is not above that of the pair before it", pairs[i].Pair)
		}
	}
}

// stoichiometryWithin is how far a figure may be from the formula.
const stoichiometryWithin = 0.01

func checkStoichiometry(n *document.Node, stated, computed float64, unit string) {
	if n != nil && stated > 0 && !(math.Abs(stated/computed-1) <= stoichiometryWithin) {
		n.Fail("%.4g %s by the formula, not %.4g", computed, unit, stated)
	}
}

func (s *shelf) claim(n *document.Node) *Claim {
	f := n.Map("removed", "except", "least", "dose", "target")
	c := &Claim{
		Removed: s.value(f.Need("removed"), quantity.Share), Except: s.bySolvent(f.Get("except"), quantity.Share),
		Least: s.value(f.Need("least"), quantity.WaterContent),
		Dose:  s.value(f.Need("dose"), quantity.MassConcentration), Target: s.value(f.Need("target"), quantity.WaterContent),
	}
	if c.Least.SI >= c.Target.SI && f.Has("least") && f.Has("target") {
		f.Get("least").Fail("%q is not below the lowest target, %q", c.Least.Text, c.Target.Text)
	}
	return c
}

// molarGasM3 is the volume of a mole of gas at 20 °C and 101.325 kPa.
const molarGasM3 = gasConstant * 293.15 / standardPa

const gasConstant = 8.314462618 // J/(mol K)

func (s *shelf) reaction(n *document.Node, kgPerMol float64) *Reaction {
	f := n.Map("equation", "water", "hydrogen", "solvent", "need", "gas", "surplus", "activity", "feed", "waste")
	r := &Reaction{
		Equation: f.Need("equation").Text(), Water: positive(f, "water", quantity.Number),
		Need: s.value(f.Need("need"), quantity.MassRatio), Surplus: s.value(f.Need("surplus"), quantity.Number),
		Activity: s.value(f.Need("activity"), quantity.Number), Feed: s.value(f.Need("feed"), quantity.WaterContent),
		Waste: f.Need("waste").OneOf(keysOf(services)...),
	}
	if h := f.Get("hydrogen"); h != nil {
		r.Hydrogen = positive(f, "hydrogen", quantity.Number)
		r.GasM3 = s.gas(f.Need("gas"))
	} else if f.Has("gas") {
		f.Get("gas").Fail(`stands without "hydrogen"`)
	}
	if f.Has("solvent") {
		r.Solvent = positive(f, "solvent", quantity.Number)
	}
	checkStoichiometry(f.Get("need"), r.Need.SI, kgPerMol/(r.Water*waterKgPerMol), "kg/kg")
	checkStoichiometry(f.Get("gas"), r.GasM3.SI, r.Hydrogen*molarGasM3/kgPerMol, "m3/kg")
	if r.Surplus.SI < 1 || r.Surplus.SI > 50 {
		f.Get("surplus").Fail("%q is outside 1 to 50", r.Surplus.Text)
	}
	if r.Activity.SI <= 0 || r.Activity.SI >= 1 {
		f.Get("activity").Fail("%q is not between 0 and 1", r.Activity.Text)
	}
	return r
}

// gas reads a volume of gas per mass of agent, such as "1.14 m3/kg".
func (s *shelf) gas(n *document.Node) Value {
	if n == nil {
		return Value{}
	}
	f := n.Map(with("value")...)
	v := Value{Text: f.Need("value").Text(), Origin: s.origin(f)}
	reading, _ := f.Get("value").Quantity(quantity.HoldUp)
	v.SI = reading.SI
	return v
}

func (s *shelf) residual(n *document.Node) Residual {
	f := n.Map(with("solvent", "water", "band", "time", "how")...)
	r := Residual{Solvent: keyOf(f.Need("solvent"), s.cat.Solvents), How: f.Need("how").Text()}
	r.Water = Value{Text: f.Need("water").Text(), Origin: s.origin(f)}
	if reading, ok := f.Get("water").Quantity(quantity.WaterContent); ok {
		r.Water.SI = reading.SI
		checkRange(f.Get("water"), reading.SI, quantity.WaterContent)
	}
	if band := f.Get("band"); band != nil {
		r.Water.Low, r.Water.High = span(band, quantity.WaterContent)
	}
	if t := f.Get("time"); t != nil {
		reading, _ := t.Quantity(quantity.Time)
		r.TimeS = reading.SI
	}
	return r
}
