package bench

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// agent finds the agent by key, name, formula or alias and sees to it that the step works with it.
func (r *reader) agent() {
	r.q.Activation = noActivation()
	typed, ok := r.flags["agent"]
	kinds := uses[r.q.Kind].agents
	if !ok || len(kinds) == 0 {
		return
	}
	agent := findAgent(r.cat, typed)
	switch {
	case agent == nil:
		hint := r.agentsOffered()
		if near := document.Nearest(typed, slices.Collect(maps.Keys(r.cat.Agents))); len(near) > 0 {
			hint = "did you mean " + strings.Join(near, " or ") + "?"
		}
		r.mistake(fmt.Sprintf("--agent: %s is not a drying agent of the catalog", quantity.Quote(typed)), hint)
		return
	case !slices.Contains(kinds, agent.Kind):
		if why := r.neverWith(agent); why != "" {
			r.mistake(fmt.Sprintf("--agent: %s is not for %s, and not for this solvent in any step: %s", agent.Key, r.q.Kind, why), "there is no way to override this; "+r.agentsOffered())
			return
		}
		r.mistake(fmt.Sprintf("--agent: %s is not for %s%s", agent.Key, r.q.Kind, stepFor(agent)), r.agentsOffered())
		return
	}
	r.q.Agent = agent
	if agent.Isotherm != nil {
		r.activated()
	}
}

// findAgent finds an agent by key or name, else by its formula or by what else it is
// called, so that a user's own agent is never taken for another.
func findAgent(c *catalog.Catalog, typed string) *catalog.Agent {
	typed = bare(typed)
	for _, words := range []func(*catalog.Agent) []string{
		func(a *catalog.Agent) []string { return []string{a.Key, a.Name} },
		func(a *catalog.Agent) []string { return append([]string{a.Formula}, a.Aliases...) },
	} {
		for _, key := range slices.Sorted(maps.Keys(c.Agents)) {
			if slices.ContainsFunc(words(c.Agents[key]), func(word string) bool { return word != "" && bare(word) == typed }) {
				return c.Agents[key]
			}
		}
	}
	return nil
}

// bare is a name without what people write one way or another.
func bare(name string) string {
	return strings.NewReplacer(" ", "", "-", "", "å", "a", "ångström", "a", "angstrom", "a").Replace(strings.ToLower(name))
}

// neverWith says why an agent must never meet the solvent, with its source, or nothing.
func (r *reader) neverWith(agent *catalog.Agent) string {
	if r.q.Solvent == nil {
		return ""
	}
	v, ok := r.cat.Verdict(r.q.Solvent, agent.Key)
	if !ok || v.Word != "dangerous" {
		return ""
	}
	why := fmt.Sprintf("%s with %s is dangerous: %s", agent.Name, r.q.Solvent.Name, v.Reason)
	if source, ok := r.cat.Sources[v.Source]; ok {
		why += fmt.Sprintf(" [%s: %s; %s]", source.ID, source.Reference, v.Confidence)
	}
	return why
}

// stepFor names the step that an agent belongs to.
func stepFor(a *catalog.Agent) string {
	for _, k := range []steps.Kind{steps.Salt, steps.Reactive, steps.Soak} {
		if slices.Contains(uses[k].agents, a.Kind) {
			return fmt.Sprintf("; ask for the step %s", k)
		}
	}
	return ""
}

// agentsOffered lists the agents of the step, for the solvent where it is known.
func (r *reader) agentsOffered() string {
	var keys []string
	for _, key := range slices.Sorted(maps.Keys(r.cat.Agents)) {
		if !slices.Contains(uses[r.q.Kind].agents, r.cat.Agents[key].Kind) {
			continue
		}
		if r.q.Solvent != nil {
			if v, ok := r.cat.Verdict(r.q.Solvent, key); !ok || !v.Allowed() {
				continue
			}
		}
		keys = append(keys, key)
	}
	if r.q.Solvent == nil {
		return "agents: " + strings.Join(keys, ", ")
	}
	if len(keys) == 0 {
		return "no agent of this step suits " + r.q.Solvent.Name
	}
	return fmt.Sprintf("agents for %s: %s", r.q.Solvent.Name, strings.Join(keys, ", "))
}
