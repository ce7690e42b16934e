package routes

import (
	"fmt"
	"slices"
	"strings"

	"parch/internal/steps"
)

// MostSteps is how many steps a chain has at most.
const MostSteps = 4

// Steps are the steps that a chain may be built from on the lot. Carriers, which are
// charged before anything else, and buying are chains of their own.
func (c *Case) Steps() (all []Stage) {
	stages := []Stage{{Kind: steps.Settle}, {Kind: steps.Trap}, {Kind: steps.Forerun}}
	for _, salt := range c.agents("salt") {
		stages = append(stages, Stage{Kind: steps.Salt, Agent: salt})
	}
	for _, s := range append(stages, c.finishers()...) {
		if reason, _ := c.refuseStage(s, false); reason == "" {
			all = append(all, s)
		}
	}
	return all
}

// order is the order in which steps make sense: free water is drawn off first, much
// water is taken by a salt or a still, the last of it by beads or a reactive agent.
var order = []steps.Kind{steps.Settle, steps.Salt, steps.Trap, steps.Forerun, steps.Soak, steps.Column, steps.Reactive}

// MayFollow gives the reason why a step makes no sense after the steps before it, or "".
func (c *Case) MayFollow(before Route, next Stage) string {
	if len(before) == 0 {
		return ""
	}
	last := before[len(before)-1]
	bed := func(s Stage) bool { return s.Kind == steps.Soak || s.Kind == steps.Column }
	switch {
	case len(before) == MostSteps:
		return fmt.Sprintf("a chain has at most %d steps", MostSteps)
	case next.Kind == steps.Settle:
		return "only the lot as it is delivered holds free water"
	case next == last && bed(next):
		return "the same as one step with a larger dose, or in several charges"
	case next == last:
		return "the same step again leaves what it left"
	case c.dangerousWithCarrier(before, next.Agent) != "":
		return c.dangerousWithCarrier(before, next.Agent)
	case last.Kind == steps.Reactive:
		return "the distillate off a reactive agent is run into its bottle"
	case bed(last) && bed(next) || slices.Index(order, next.Kind) >= slices.Index(order, last.Kind):
		return ""
	case next.Kind == steps.Salt:
		return "a salt takes its share of much water: it comes before a still and before beads"
	case bed(last):
		return "beads are for the last of the water: what a still takes is taken before them"
	}
	return "a forerun takes solvent with the water: a trap that returns it comes first"
}

// dangerousWithCarrier says why an agent must not meet what is left of the carrier of a
// chain, or nothing.
func (c *Case) dangerousWithCarrier(before Route, agent string) string {
	carrier := c.Catalog.Solvents[before.CarrierOf()]
	if carrier == nil || agent == "" {
		return ""
	}
	if v, ok := c.Catalog.Verdict(carrier, agent); ok && v.Word == "dangerous" {
		return fmt.Sprintf("%s is dangerous with the %s that is left: %s", agent, carrier.Name, v.Reason)
	}
	return ""
}

// MayEnd gives the reason why a chain may not end with a step, or "".
func (c *Case) MayEnd(s Stage) string {
	reason, _ := c.refuseStage(s, true)
	return reason
}

// Chains are those with the given ids, of those that are offered as usual and of
// those that the steps allow. Others are left out.
func (c *Case) Chains(usual []Route, ids []string) (all []Route) {
	known := map[string]Route{}
	for _, r := range usual {
		known[r.ID()] = r
	}
	allowed := map[string]Stage{}
	for _, s := range c.Steps() {
		allowed[Route{s}.ID()] = s
	}
	for _, id := range ids {
		r, ok := known[id]
		if !ok {
			r, ok = c.chained(strings.Split(id, "+"), allowed)
		}
		if ok {
			all = append(all, r)
		}
	}
	return all
}

func (c *Case) chained(names []string, allowed map[string]Stage) (r Route, ok bool) {
	for _, name := range names {
		s, ok := allowed[name]
		if !ok || c.MayFollow(r, s) != "" {
			return nil, false
		}
		r = append(r, s)
	}
	return r, c.MayEnd(r[len(r)-1]) == ""
}
