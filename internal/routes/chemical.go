package routes

import (
	"fmt"

	"parch/catalog"
	"parch/internal/steps"
)

// runSalt stirs in the usual dose, or as the last step the least that reaches
// the goal.
func (c *Case) runSalt(lot steps.Lot, goal float64, agent string, last bool) (steps.Outcome, error) {
	a := c.Catalog.Agents[agent]
	rules := steps.SaltRules{
		LowestOutlet: a.Claim.Least.SI, LowestTarget: a.Claim.Target.SI,
		ClaimTimeS: c.practice("salt-contact"), ClaimDoseKgPerM3: a.Claim.Dose.SI,
	}
	_, portions := c.vessel()
	rig := steps.SaltRig{TempK: c.Job.Site.RoomK, TimeS: c.practice("salt-contact"), AttendedS: c.practice("salt-attended"), Portions: portions}
	if last {
		return steps.SaltFor(c.Mixture, lot, goal, c.salt(a), rules, rig)
	}
	return steps.RunSalt(c.Mixture, lot, a.Claim.Dose.SI, c.salt(a), rules, rig)
}

func (c *Case) salt(a *catalog.Agent) steps.SaltAgent {
	s := steps.SaltAgent{
		Key: a.Key, MolarMassKgPerMol: a.MolarMassKgPerMol(), ShareRemoved: a.Claim.Removed.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI,
	}
	if other, ok := a.Claim.Except[c.Solvent.Key]; ok {
		s.ShareRemoved = other.SI
	}
	if a.UselessAbove != nil {
		s.UselessAboveK = a.UselessAbove.SI
	}
	for _, h := range a.Hydrates {
		s.Pairs = append(s.Pairs, steps.HydratePair{Name: h.Pair, Activity: h.Activity.SI, WaterMolPerMol: h.Water, HeatJPerMolWater: h.Heat.SI})
	}
	return s
}

// refuseSalt keeps a salt from ending a route to a target that no salt may claim.
func (c *Case) refuseSalt(agent string, last bool) (reason, source string) {
	if reason, source = c.refuseAgent(agent); reason != "" {
		return reason, source
	}
	claim := c.Catalog.Agents[agent].Claim
	if last && c.Lot.Target < claim.Target.SI {
		return fmt.Sprintf("a salt is not the last step for a target under %s", claim.Target.Text), claim.Target.Source
	}
	return "", ""
}

// runReactive boils the lot over an agent and distils it off.
func (c *Case) runReactive(lot steps.Lot, agent string) (steps.Outcome, error) {
	a := c.Catalog.Agents[agent]
	re := a.Reaction
	still, charges := c.Still()
	return steps.RunReactive(c.Mixture, lot, steps.ReactiveAgent{
		Key: agent, MolarMassKgPerMol: a.MolarMassKgPerMol(), WaterMolPerMol: re.Water, HydrogenMolPerMol: re.Hydrogen, SolventMolPerMol: re.Solvent,
		ClassActivity: re.Activity.SI, ClassBand: re.Activity.High / re.Activity.SI, HandlesBelow: re.Feed.SI, LeastRefluxS: c.practice("reactive-reflux"),
	}, c.measured(a), steps.ReactiveRig{
		PressurePa: c.Job.Site.PressurePa, RoomK: c.Job.Site.RoomK, HeaterW: c.heaterW(still), HeatShare: c.practice("heat-share"),
		RefluxS: c.practice("reactive-reflux"), Surplus: re.Surplus.SI, LeastKgPerM3: c.practice("reactive-least"),
		HeelShare: c.practice("forerun-heel"), Charges: charges, SetUpS: c.practice("reactive-attended"),
		AttendedShare: c.practice("trap-attended-share"), CoolingFlowM3S: c.practice("cooling-flow"), VapourLossPerDay: c.practice("vapour-loss-per-day"),
	})
}

// measured is what the agent was found to leave in this solvent, if anything.
func (c *Case) measured(a *catalog.Agent) steps.Measured {
	for _, r := range a.Residuals {
		if r.Solvent != c.Solvent.Key {
			continue
		}
		m := steps.Measured{Water: r.Water.SI, Source: string(r.Water.Confidence) + ", " + r.Water.Source}
		if r.Water.Banded() {
			m.Band = r.Water.High / r.Water.Low
		}
		return m
	}
	return steps.Measured{}
}

// onlyWhenAsked is computed only where the job accepts it by name: it is never
// the preferred agent.
const onlyWhenAsked = "sodium"

func (c *Case) refuseReactive(agent string) (reason, source string) {
	if reason, source = c.refuseAgent(agent); reason != "" {
		return reason, source
	}
	if agent == onlyWhenAsked && !c.accepted(agent) {
		v, _ := c.Catalog.Verdict(c.Solvent, agent)
		return "not offered unless the job accepts it by name: " + v.Reason, v.Source
	}
	return c.refuseHeating()
}
