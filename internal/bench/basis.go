package bench

import (
	"cmp"
	"fmt"
	"slices"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// Basis is a number that the answer rests on.
type Basis struct {
	What, Value string
	catalog.Origin
}

func (a *Answer) rests(what, value string, o catalog.Origin) {
	a.Basis = append(a.Basis, Basis{what, value, o})
}

func (a *Answer) restsOn(what string, v *catalog.Value) {
	if v != nil {
		a.rests(what, v.Text, v.Origin)
	}
}

// habit is an operating fact of the catalog.
func (a *Answer) habit(what, key string) {
	if v, ok := a.Case.Catalog.Practice[key]; ok {
		a.restsOn(what, &v)
	}
}

// cite lists what the answer rests on and the references of it all.
func (a *Answer) cite() {
	s := a.Question.Solvent
	a.rests("water in "+s.Name+": activity", fmt.Sprintf("model of quality %s", s.Water.Quality), s.Water.Origin)
	switch a.Kind {
	case steps.Settle:
		a.restsOnSolubility()
		a.habit("time to settle", "settle-time")
		a.habit("left with the interface", "settle-interface")
	case steps.Trap:
		a.restsOnSolubility()
		a.restsOnTrap()
		a.restsOnCarrier()
	case steps.Forerun:
		a.restsOnForerun()
	case steps.Soak, steps.Column:
		a.restsOnSorbent()
	case steps.Salt:
		a.restsOnSalt()
	case steps.Reactive:
		a.restsOnReaction()
	}
	if a.Kind != steps.Settle {
		a.habit("water through the closure of a store, in a week", "storage-rise-septum")
	}
	if a.Question.Agent != nil {
		v, _ := a.Case.Catalog.Verdict(s, a.Agent)
		a.rests("may meet "+s.Name, v.Word+": "+v.Reason, v.Origin)
	}
	a.references()
}

func (a *Answer) restsOnSolubility() {
	w := a.Question.Solvent.Water
	if w.SolubilityBand > 1 {
		a.rests("published solubility of water", fmt.Sprintf("to a factor of %.3g", w.SolubilityBand), w.BandOrigin)
	}
}

func (a *Answer) restsOnTrap() {
	a.habit("heat that reaches the liquid", "heat-share")
	a.habit("lowest outlet claimed", "trap-outlet-minimum")
	a.habit("efficiency at low water", "trap-efficiency")
	a.habit("shortest reflux", "trap-reflux-minimum")
	a.habit("share of it attended", "trap-attended-share")
	a.restsOnCondenser()
	a.heater()
}

func (a *Answer) restsOnCondenser() {
	a.habit("cooling water", "cooling-flow")
	a.habit("cooling water as it comes in", "coolant-tap")
	a.habit("least of the vapour over it", "condenser-difference")
}

func (a *Answer) heater() {
	if a.Question.HeaterW == 0 {
		still, _ := a.Case.Still()
		a.restsOn("heater of the "+still.Name, still.Power)
	}
}

func (a *Answer) restsOnSorbent() {
	q, agent := a.Question, a.Question.Agent
	a.rests("isotherm", "", agent.Isotherm.Origin)
	a.rests("loading after: "+q.Activation.Text, quantity.Format(q.Activation.KgPerKg, quantity.MassRatio, "g/100 g", 2), q.Activation.Origin)
	if pores, ok := agent.PoreSpace[q.Solvent.Key]; ok {
		a.restsOn("pores left by "+q.Solvent.Name, &pores)
	}
	switch {
	case a.Kind == steps.Column:
		a.habit("velocity in the empty tube", "column-velocity")
		a.habit("bed volumes that go back", "column-recycle")
	case q.Stirred:
		a.habit("velocity past the beads", "stir-velocity")
		if q.Powder {
			a.habit("rate of a stirred powder, which is taken to be no slower than such beads", "stirred-slurry-rate")
		}
	default:
		a.restsOn("mixing rate of a still vessel", &q.Solvent.StillRate)
	}
	if a.Figure("water made by condensation") > 0 {
		a.habit("water that a ketone makes", "sieve-ketone-water")
	}
	a.habit("molar volume of water", "water-molar-volume")
	if q.Powder {
		a.habit("diameter of the powder", "powder-diameter")
		a.habit("solvent kept on the filtered powder", "powder-hold-up")
	} else {
		a.restsOn("bead diameter", agent.BeadDiameter)
		a.restsOn("solvent kept on drained beads", agent.HoldUp)
	}
	a.restsOn("bead porosity", agent.BeadPorosity)
	a.restsOn("bead tortuosity", agent.BeadTortuosity)
}

func (a *Answer) restsOnSalt() {
	claim := a.Question.Agent.Claim
	removed := claim.Removed
	if other, ok := claim.Except[a.Question.Solvent.Key]; ok {
		removed = other
	}
	a.restsOn("share of dissolved water removed", &removed)
	a.restsOn("lowest outlet claimed", &claim.Least)
	a.restsOn("at a dose of", &claim.Dose)
	a.habit("in a time of", "salt-contact")
	for _, h := range a.Question.Agent.Hydrates {
		a.restsOn("activity over "+h.Pair, &h.Activity)
	}
	a.restsOn("solvent kept by the cake", a.Question.Agent.HoldUp)
}

func (a *Answer) restsOnReaction() {
	re := a.Question.Agent.Reaction
	a.rests("reaction", re.Equation, re.Need.Origin)
	measured := false
	for _, r := range a.Question.Agent.Residuals {
		if r.Solvent == a.Question.Solvent.Key {
			a.rests("left in "+a.Question.Solvent.Name, r.Water.Text+", "+r.How, r.Water.Origin)
			if factor := a.Case.Catalog.Doubts[catalog.DoubtReactive]; !r.Water.Banded() {
				a.restsOn("how far that may be off, a factor either way", &factor)
			}
			measured = true
		}
	}
	if !measured {
		a.restsOn("activity left by its class", &re.Activity)
	}
	a.restsOn("wettest feed", &re.Feed)
	if !given(a.Question.DoseKgPerM3) {
		a.restsOn("agent charged per agent needed", &re.Surplus)
		a.habit("least agent", "reactive-least")
	}
	if !given(a.Question.TimeS) {
		a.habit("reflux", "reactive-reflux")
	}
	a.habit("left in the pot", "forerun-heel")
	a.habit("heat that reaches the liquid", "heat-share")
	a.heater()
}

// references are the sources of basis and cautions, sorted, each once.
func (a *Answer) references() {
	ids := map[string]bool{}
	for _, b := range a.Basis {
		ids[b.Source] = true
	}
	for _, c := range a.Cautions {
		ids[c.Source] = true
	}
	for id := range ids {
		if source, ok := a.Case.Catalog.Sources[id]; ok {
			a.Sources = append(a.Sources, source)
		}
	}
	slices.SortFunc(a.Sources, func(x, y catalog.Source) int { return cmp.Compare(x.ID, y.ID) })
}
