package routes

import (
	"fmt"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// singleSalt stirs in the dose that is given for the least time that reaches the
// goal, the least dose that reaches it, or the usual one: also where no dose reaches
// the goal and more of it is no help.
func (c *Case) singleSalt(a Asked, s *Single) (err error) {
	agent := c.Catalog.Agents[a.Agent]
	rules, rig := c.saltRules(agent), c.saltRig(a.TimeS)
	rig.RinseM3, rig.RinseWater = a.RinseM3, c.Feed.Water()
	dose := rules.ClaimDoseKgPerM3
	if given(a.DoseKgPerM3) {
		dose = a.DoseKgPerM3
	}
	if given(a.Goal) && given(a.DoseKgPerM3) {
		if s.Outcome, err = steps.SaltUntil(c.Mixture, c.Feed, a.Goal, dose, c.salt(agent), rules, rig); err != nil {
			return err
		}
		rig.TimeS = s.Figure("stirred or stood") * 60
		return c.bandOfSalt(agent, s, rules, rig)
	}
	s.Outcome, err = steps.RunSalt(c.Mixture, c.Feed, dose, c.salt(agent), rules, rig)
	if err == nil && given(a.Goal) {
		var solved steps.Outcome
		solved, err = steps.SaltFor(c.Mixture, c.Feed, a.Goal, c.salt(agent), rules, rig)
		if solved.AgentKg < s.AgentKg || solved.Out.Water() < s.Out.Water()*(1-1e-9) {
			s.Outcome = solved
		}
	}
	if err != nil {
		return err
	}
	return c.bandOfSalt(agent, s, rules, rig)
}

func (c *Case) saltRules(a *catalog.Agent) steps.SaltRules {
	return steps.SaltRules{
		LowestOutlet: a.Claim.Least.SI, LowestTarget: a.Claim.Target.SI,
		ClaimTimeS: c.practice("salt-contact"), ClaimDoseKgPerM3: a.Claim.Dose.SI,
	}
}

func (c *Case) saltRig(timeS float64) steps.SaltRig {
	if !given(timeS) {
		timeS = c.practice("salt-contact")
	}
	_, portions := c.vessel()
	return steps.SaltRig{TempK: c.Job.Site.RoomK, TimeS: timeS, AttendedS: c.practice("salt-attended"), Portions: portions}
}

// bandOfSalt takes the share removed and the activities of the hydrates to both
// ends.
func (c *Case) bandOfSalt(agent *catalog.Agent, s *Single, rules steps.SaltRules, rig steps.SaltRig) error {
	removed := agent.Claim.Removed
	if other, ok := agent.Claim.Except[c.Solvent.Key]; ok {
		removed = other
	}
	if !removed.Banded() {
		return nil
	}
	at := func(share float64, activity func(catalog.Value) float64) (float64, error) {
		salt := c.salt(agent)
		salt.ShareRemoved = share
		for i, h := range agent.Hydrates {
			if h.Activity.Banded() {
				salt.Pairs[i].Activity = activity(h.Activity)
			}
		}
		o, err := steps.RunSalt(c.Mixture, c.Feed, s.Figure("dose"), salt, rules, rig)
		return o.Out.Water(), err
	}
	var err error
	if s.Low, err = at(removed.High, func(v catalog.Value) float64 { return v.Low }); err != nil {
		return err
	}
	s.High, err = at(removed.Low, func(v catalog.Value) float64 { return v.High })
	s.Bands = append(s.Bands, fmt.Sprintf("share removed, %.0f to %.0f %%, and the activity of the salt", 100*removed.Low, 100*removed.High))
	return err
}

// singleReactive charges the dose that is given, or need and usual surplus, and
// refluxes for the time that is given, or the usual one. A goal is reached by need
// and surplus in that time or not at all: no more agent and no more time is known to
// leave less than was measured, or than agents of the class leave.
func (c *Case) singleReactive(a Asked, s *Single) (err error) {
	agent, rig := c.reactiveAgent(a.Agent), c.reactiveRig(a.Agent)
	if given(a.TimeS) {
		rig.RefluxS = a.TimeS
	}
	if given(a.DoseKgPerM3) {
		rig.Surplus, rig.LeastKgPerM3 = 1, a.DoseKgPerM3
	}
	found := c.measured(c.Catalog.Agents[a.Agent])
	if s.Outcome, err = steps.RunReactive(c.Mixture, c.Feed, agent, found, rig); err != nil {
		return err
	}
	volumeM3 := steps.LotVolume(c.Mixture, c.Feed, c.Job.Site.RoomK)
	if need := s.Figure("agent needed") / 1e3 / volumeM3; given(a.DoseKgPerM3) && a.DoseKgPerM3 < need*(1-1e-9) {
		return fmt.Errorf("%w: %.3g g/L of %s are under the %.3g g/L that the water takes", steps.ErrNoSense, a.DoseKgPerM3, agent.Name, need)
	}
	s.tellGoal(a.Goal, rig.RefluxS, agent.LeastRefluxS)
	s.Low, s.High = s.Figure("residual, low")*1e-6, s.Figure("residual, high")*1e-6
	if found.Water > 0 {
		s.Bands = append(s.Bands, fmt.Sprintf("what was measured for the pair, %s to %s", quantity.FormatWater(found.Low), quantity.FormatWater(found.High)))
	} else {
		s.Bands = append(s.Bands, fmt.Sprintf("what agents of the class leave, a factor of %.3g either way", agent.ClassBand))
	}
	return nil
}

// tellGoal says whether a reactive step reaches a goal (kg/kg), and with what.
func (s *Single) tellGoal(goal, refluxS, leastS float64) {
	switch {
	case !given(goal):
	case s.Out.Water() <= goal:
		s.RuledBy, s.Why = s.WhyText, steps.AtTarget
		s.WhyText = fmt.Sprintf("%s or less after %.3g h of reflux over %.3g g: the need and its surplus", quantity.FormatWater(goal), refluxS/3600, s.Figure("agent charged"))
	default:
		if refluxS >= leastS {
			s.WhyText += "; neither more agent nor more time is known to leave less"
		}
		s.RuledBy = s.WhyText
	}
}

// wasteClass is that of a spent agent by the price item which the catalog gives it.
// What is neither wet solid nor reactive there goes as reactive, the more careful.
func wasteClass(item string) steps.WasteClass {
	if item == "waste-wet-solid" {
		return steps.WetSolidWaste
	}
	return steps.ReactiveWaste
}

func (c *Case) reactiveAgent(key string) steps.ReactiveAgent {
	a := c.Catalog.Agents[key]
	re := a.Reaction
	return steps.ReactiveAgent{
		Key: key, Name: a.Plain(), Waste: wasteClass(re.Waste), MolarMassKgPerMol: a.MolarMassKgPerMol(), WaterMolPerMol: re.Water, HydrogenMolPerMol: re.Hydrogen, SolventMolPerMol: re.Solvent,
		ClassActivity: re.Activity.SI, ClassBand: re.Activity.High / re.Activity.SI, HandlesBelow: re.Feed.SI, LowestOutlet: c.practice("trap-outlet-minimum"), LeastRefluxS: c.practice("reactive-reflux"),
	}
}

func (c *Case) reactiveRig(key string) steps.ReactiveRig {
	still, charges := c.Still()
	hottestK := 0.0
	if limit := c.Solvent.HottestPot; limit != nil {
		hottestK = limit.SI
	}
	return steps.ReactiveRig{
		PressurePa: c.Job.Site.PressurePa, RoomK: c.Job.Site.RoomK, HeaterW: c.heaterW(still), HeatShare: c.practice("heat-share"),
		RefluxS: c.practice("reactive-reflux"), Surplus: c.Catalog.Agents[key].Reaction.Surplus.SI, LeastKgPerM3: c.practice("reactive-least"),
		HeelShare: c.practice("forerun-heel"), Charges: charges, SetUpS: c.practice("reactive-attended"),
		AttendedShare: c.practice("trap-attended-share"), CoolingFlowM3S: c.practice("cooling-flow"), VapourLossPerDay: c.practice("vapour-loss-per-day"),
		LongestHeatUpS: c.practice("heat-up-maximum"), HighestPotK: hottestK,
	}
}
