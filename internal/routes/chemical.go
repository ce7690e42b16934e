package routes

import (
	"fmt"
	"math"

	"parch/catalog"
	"parch/internal/steps"
)

// runSalt stirs in the usual dose, or as the last step the least that reaches
// the goal.
func (c *Case) runSalt(lot steps.Lot, goal float64, agent string, last bool) (steps.Outcome, error) {
	a := c.Catalog.Agents[agent]
	rules, rig := c.saltRules(a), c.saltRig(math.NaN())
	if last {
		return steps.SaltFor(c.Mixture, lot, goal, c.salt(a), rules, rig)
	}
	return steps.RunSalt(c.Mixture, lot, rules.ClaimDoseKgPerM3, c.salt(a), rules, rig)
}

func (c *Case) salt(a *catalog.Agent) steps.SaltAgent {
	s := steps.SaltAgent{
		Key: a.Key, Name: a.Plain(), MolarMassKgPerMol: a.MolarMassKgPerMol(), ShareRemoved: a.Claim.Removed.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI,
	}
	if other, ok := a.Claim.Except[c.Solvent.Key]; ok {
		s.ShareRemoved = other.SI
	}
	s.ShareRemoved = c.shareRemoved(s.ShareRemoved)
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

// runReactive boils the lot over an agent and distils it off. The spent agent is
// seen to by people trained for it, which takes its own time.
func (c *Case) runReactive(lot steps.Lot, agent string) (steps.Outcome, error) {
	o, err := steps.RunReactive(c.Mixture, lot, c.reactiveAgent(agent), c.measured(c.Catalog.Agents[agent]), c.reactiveRig(agent))
	o.HoursTotal += c.practice("reactive-spent") / 3600
	return o, err
}

// measured is what the agent was found to leave in this solvent, if anything.
func (c *Case) measured(a *catalog.Agent) steps.Measured {
	for _, r := range a.Residuals {
		if r.Solvent != c.Solvent.Key {
			continue
		}
		m := steps.Measured{Water: r.Water.SI, Low: r.Water.Low, High: r.Water.High, Source: string(r.Water.Confidence) + ", " + r.Water.Source}
		if !r.Water.Banded() {
			factor := c.Catalog.Doubts[catalog.DoubtReactive].SI
			m.Low, m.High = m.Water/factor, m.Water*factor
		}
		return m
	}
	return steps.Measured{}
}

// IsMeasured reports whether a residual of a reactive agent is known in this solvent.
func (c *Case) IsMeasured(agent string) bool { return c.measured(c.Catalog.Agents[agent]).Water > 0 }

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
