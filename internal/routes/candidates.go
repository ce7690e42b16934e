package routes

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// Candidates lists the chains worth running on the lot and those that are not
// offered, each with its reason. The order is fixed.
func (c *Case) Candidates() ([]Route, []Excluded) {
	var offered []Route
	var excluded []Excluded
	told := map[string]bool{}
	for _, r := range c.chains() {
		stage, reason, source := c.refuse(r)
		if reason == "" {
			offered = append(offered, r)
			continue
		}
		// what is refused by itself is told once, not in every chain that holds it
		if id := (Route{stage}).ID(); !told[id] {
			told[id] = true
			excluded = append(excluded, Excluded{ID: id, Reason: reason, Source: source})
		}
	}
	if reason, source := c.RefuseOven(); reason != "" && slices.ContainsFunc(offered, usesSieve) {
		excluded = append(excluded, Excluded{ID: Regenerate, Reason: reason, Source: source})
	}
	return offered, excluded
}

func usesSieve(r Route) bool { return r.count(steps.Soak, steps.Column) > 0 }

// chains are the orders in which the steps make sense: free water first, bulk
// water by boiling or a salt, the rest over a sorbent or a reactive agent; or a
// dry grade bought instead.
func (c *Case) chains() []Route {
	forerun := Stage{Kind: steps.Forerun}
	bulk := []Route{nil, {{Kind: steps.Trap}}, {forerun}, {{Kind: steps.Trap}, forerun}}
	for _, key := range c.carriers() {
		bulk = append(bulk, withCarrier(key))
	}
	for _, salt := range c.agents("salt") {
		bulk = append(bulk, Route{{Kind: steps.Salt, Agent: salt}})
	}
	var all []Route
	for _, first := range []Route{nil, {{Kind: steps.Settle}}} {
		for _, second := range bulk {
			head := append(slices.Clone(first), second...)
			if len(head) > 0 {
				all = append(all, head)
			}
			if c.Trap != nil && head.count(steps.Forerun) > 0 {
				continue // what a trap returns a forerun would lose: no sieve follows it
			}
			for _, last := range c.finishers() {
				all = append(all, append(slices.Clone(head), last))
			}
		}
	}
	return append(all, Route{{Kind: steps.Buy}})
}

// finishers are the steps that can take a lot to its target.
func (c *Case) finishers() []Stage {
	var all []Stage
	for _, agent := range c.agents("sieve", "oxide") {
		all = append(all, Stage{Kind: steps.Soak, Agent: agent}, Stage{Kind: steps.Column, Agent: agent})
	}
	for _, agent := range c.agents("reactive") {
		all = append(all, Stage{Kind: steps.Reactive, Agent: agent})
	}
	return all
}

// agents of the kinds, sorted.
func (c *Case) agents(kinds ...string) []string {
	var keys []string
	for key, a := range c.Catalog.Agents {
		if slices.Contains(kinds, a.Kind) {
			keys = append(keys, key)
		}
	}
	sort.Strings(keys)
	return keys
}

// refuse returns the stage for which a route is not offered and the reason, or "".
func (c *Case) refuse(r Route) (stage Stage, reason, source string) {
	for i, s := range r {
		if reason, source = c.refuseStage(s, i == len(r)-1); reason != "" {
			return s, reason, source
		}
	}
	return Stage{}, "", ""
}

func (c *Case) refuseStage(s Stage, last bool) (reason, source string) {
	if slices.Contains(c.Job.Exclude.Steps, string(s.Kind)) {
		return fmt.Sprintf("the job excludes the step %q", s.Kind), "job"
	}
	if reason = c.refuseHazard(s); reason != "" {
		return reason, "job"
	}
	switch s.Kind {
	case steps.Trap:
		if s.Carrier != "" {
			return c.refuseCarrier(s.Carrier)
		}
		return c.refuseTrap()
	case steps.Forerun:
		return c.refuseHeating()
	case steps.Settle:
		return c.refuseSettle()
	case steps.Salt:
		return c.refuseSalt(s.Agent, last)
	case steps.Soak, steps.Column:
		return c.refuseSorbent(s.Agent)
	case steps.Reactive:
		return c.refuseReactive(s.Agent)
	case steps.Buy:
		return c.refuseBuy()
	}
	return "", ""
}

func (c *Case) refuseTrap() (reason, source string) {
	if reason, source = c.refuseHeating(); reason != "" {
		return reason, source
	}
	if c.Trap == nil {
		return c.NoTrap.Error(), c.Solvent.Water.Source
	}
	if _, err := c.receiver(c.Trap, ""); err != nil {
		return err.Error(), "equipment"
	}
	return "", ""
}

// leastExcess is how far above saturation a lot without declared free water must
// lie before settling is offered: the solubility is not known better.
const leastExcess = 1.02

func (c *Case) refuseSettle() (reason, source string) {
	known := c.saturated()
	saturated, ok, err := known.water, known.partly, known.err
	switch {
	case err != nil:
		return err.Error(), c.Solvent.Water.Source
	case !ok:
		return fmt.Sprintf("nothing settles: water and %s form no second layer at %.0f °C", c.Solvent.Name, c.Job.Site.RoomK-273.15), c.Solvent.Water.Source
	case c.Lot.FreeWaterM3 == 0 && c.Feed.Water() <= leastExcess*saturated:
		return fmt.Sprintf("nothing settles: %s holds %s at %.0f °C, the lot has %s", c.Solvent.Name, quantity.FormatWater(saturated), c.Job.Site.RoomK-273.15, quantity.FormatWater(c.Feed.Water())), c.Solvent.Water.Source
	}
	return "", ""
}

// refuseAgent asks the matrix. A missing pair is a refusal. Unsuitable pairs
// pass only if the job accepts them by name, dangerous ones never.
func (c *Case) refuseAgent(agent string) (reason, source string) {
	if slices.Contains(c.Job.Exclude.Agents, agent) {
		return fmt.Sprintf("the job excludes %s", agent), "job"
	}
	v, ok := c.Catalog.Verdict(c.Solvent, agent)
	if !ok {
		return fmt.Sprintf("no data on %s with %s", agent, c.Solvent.Name), ""
	}
	if v.Word == "unsuitable" && slices.Contains(c.Job.Accept.Unsuitable, agent) {
		return "", ""
	}
	if !v.Allowed() {
		return fmt.Sprintf("%s: %s%s", v.Word, v.Reason, ownMark(v)), v.Source
	}
	return "", ""
}

// ownMark follows a verdict that is the user's own.
func ownMark(v catalog.Verdict) string {
	if v.Own {
		return " (own data)"
	}
	return ""
}

// refuseSorbent keeps gels and oxides back unless the job accepts them by name:
// what they hold after activation is not known, and the history of a lot is that
// of a molecular sieve.
func (c *Case) refuseSorbent(agent string) (reason, source string) {
	if reason, source = c.refuseAgent(agent); reason != "" {
		return reason, source
	}
	if a := c.Catalog.Agents[agent]; a.Kind == "oxide" && !c.accepted(agent) {
		return fmt.Sprintf("what %s holds after activation is not known; name it under accept: agents, and the sieve's history is taken for it", a.Name), "assumption"
	}
	return "", ""
}

func (c *Case) accepted(agent string) bool {
	return slices.Contains(c.Job.Accept.Unsuitable, agent) || slices.Contains(c.Job.Accept.Agents, agent)
}

func (c *Case) refuseBuy() (reason, source string) {
	if _, ok := c.Catalog.Prices[c.Solvent.Key+"-dry"]; ok {
		return "", ""
	}
	for _, p := range c.Job.Prices {
		if p.Item == c.Solvent.Key+"-dry" {
			return "", ""
		}
	}
	return fmt.Sprintf("no price for dry %s", c.Solvent.Name), ""
}

// inWhatWay says what is not plain of a soak.
func inWhatWay(choice choice) string {
	switch {
	case choice.charges > 1:
		return fmt.Sprintf(" in %d charges", choice.charges)
	case choice.lots > 1:
		return fmt.Sprintf(", %d lots over a charge", choice.lots)
	}
	return ""
}

// UnsuitableMark stands in the label of a route behind an agent that is unsuitable for
// the solvent and was accepted by name.
const UnsuitableMark = " (unsuitable, accepted by the job)"

// Label is a route in words.
func (c *Case) Label(r Route, settings Settings) string {
	parts := make([]string, len(r))
	for i, s := range r {
		switch s.Kind {
		case steps.Settle:
			parts[i] = "settle"
		case steps.Trap:
			parts[i] = "boil out under a trap"
			if s.Carrier != "" {
				parts[i] = "boil out with " + c.Catalog.Solvents[s.Carrier].Name + " under a trap"
			}
		case steps.Forerun:
			parts[i] = c.forerunLabel(r, i, settings)
		case steps.Salt:
			parts[i] = "stir with " + c.Catalog.Agents[s.Agent].Name
		case steps.Soak:
			parts[i] = "stand over " + c.Catalog.Agents[s.Agent].Name
			if settings.at(r, i).stirred {
				parts[i] = "stir over " + c.Catalog.Agents[s.Agent].Name
			}
			parts[i] += inWhatWay(settings.at(r, i))
		case steps.Column:
			parts[i] = "pump through " + c.Catalog.Agents[s.Agent].Name
		case steps.Reactive:
			parts[i] = "distil off " + c.Catalog.Agents[s.Agent].Name
		case steps.Buy:
			parts[i] = "buy dry"
		}
		if v, ok := c.Catalog.Verdict(c.Solvent, s.Agent); ok && s.Agent != "" && v.Word == "unsuitable" {
			parts[i] += UnsuitableMark
		}
	}
	return strings.Join(parts, ", ")
}

// forerunLabel says what is drawn off, and at which pressure.
func (c *Case) forerunLabel(r Route, i int, settings Settings) string {
	label := "draw off a forerun"
	switch {
	case r.Strips(i):
		return "draw off the carrier"
	case c.Overhead():
		label = "distil off a wet heel"
	}
	if k := r[:i].count(steps.Forerun); k < len(settings.PressureKPa) && settings.PressureKPa[k] > 0 {
		label += fmt.Sprintf(" at %g kPa", settings.PressureKPa[k])
	}
	return label
}
