package routes

import (
	"parch/internal/steps"
)

// Again is the water (kg/kg) that a soak's charge would leave in the next such
// lot if it was used as it is.
func (c *Case) Again(a Asked, s Single) (float64, bool) {
	sorbent, rig := c.soakOf(a)
	sorbent.ResidualKgPerKg = s.Figure("loading after") / 100
	o, err := steps.SoakOver(c.Mixture, c.Feed, s.Figure("dose"), s.Course[len(s.Course)-1].Hours*3600, sorbent, rig)
	return o.Out.Water(), err == nil
}

// SizeOf takes a soak apart: how much sorbent the goal for which its dose was
// solved, or else its outlet, needs in its time for capacity and for speed.
func (c *Case) SizeOf(a Asked, s Single) (steps.SoakSize, error) {
	sorbent, rig := c.soakOf(a)
	goal := a.Goal
	if given(a.DoseKgPerM3) || !given(goal) {
		goal, sorbent.MinDoseKgPerM3, sorbent.MaxDoseKgPerM3 = s.Out.Water(), 0, 2*s.Figure("dose")
	}
	sizes, err := steps.SizeSoak(c.Mixture, c.Feed, goal, sorbent, rig, s.Course[len(s.Course)-1].Hours*3600)
	if err != nil {
		return steps.SoakSize{}, err
	}
	return sizes[0], nil
}

// What a reactive agent is compared with at the bench.
const (
	besideAgent   = "sieve-3a"
	besideDose    = 100.0 // g/L
	besideHistory = "furnace-300"
	BesideHours   = 72.0
)

// Beside is the water (kg/kg) that a still soak over sieve 3A would leave, where
// the solvent allows one.
func (c *Case) Beside() (float64, bool) {
	if v, ok := c.Catalog.Verdict(c.Solvent, besideAgent); !ok || !v.Allowed() {
		return 0, false
	}
	sorbent := c.sorbent(besideAgent, Discard)
	for _, h := range c.Catalog.Histories {
		if h.Key == besideHistory {
			sorbent.ResidualKgPerKg = h.ResidualKgPerKg.SI
		}
	}
	o, err := steps.SoakOver(c.Mixture, c.Feed, besideDose, BesideHours*3600, sorbent, c.soakRig(false))
	return o.Out.Water(), err == nil
}
