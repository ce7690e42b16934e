package bench

import (
	"fmt"
	"slices"
	"strings"

	"parch/internal/document"
	"parch/internal/steps"
)

// use is what a step takes and needs of the flags, and the agents it works with.
type use struct {
	takes, needs []string
	agents       []string // kinds of agent; none: the step takes no agent
}

// every step takes these.
var common = []string{"solvent", "water", "volume", "temperature", "reagent"}

var uses = map[steps.Kind]use{
	steps.Settle:   {takes: []string{"free-water"}},
	steps.Trap:     {takes: []string{"to", "free-water", "power", "receiver", "pressure", "peroxide", "hours", "carrier", "dose", "stages", "returns"}},
	steps.Forerun:  {takes: []string{"to", "free-water", "power", "pressure", "peroxide", "stages"}},
	steps.Salt:     {takes: []string{"agent", "to", "dose", "hours", "free-water", "rinse"}, needs: []string{"agent"}, agents: []string{"salt"}},
	steps.Soak:     {takes: []string{"agent", "to", "dose", "hours", "stirred", "activated", "height", "free-water", "charges", "powder"}, needs: []string{"agent"}, agents: []string{"sieve", "oxide"}},
	steps.Column:   {takes: []string{"agent", "to", "dose", "activated"}, needs: []string{"agent"}, agents: []string{"sieve", "oxide"}},
	steps.Reactive: {takes: []string{"agent", "to", "dose", "hours", "power", "pressure", "peroxide"}, needs: []string{"agent"}, agents: []string{"reactive"}},
}

// Kinds are the steps that can be asked for, in the order in which a lot meets them.
var Kinds = []steps.Kind{steps.Settle, steps.Trap, steps.Forerun, steps.Salt, steps.Soak, steps.Column, steps.Reactive}

// kind finds the step, or says what may be asked for.
func kind(typed string) (steps.Kind, error) {
	var known []string
	for _, k := range Kinds {
		known = append(known, string(k))
	}
	switch word := strings.ToLower(strings.TrimSpace(typed)); {
	case slices.Contains(known, word):
		return steps.Kind(word), nil
	case word == "carrier":
		return "", &Mistake{`"carrier" is not a step`, "a carrier is boiled out under a trap: parch step trap --carrier C"}
	}
	hint := "steps: " + strings.Join(known, ", ")
	if near := document.Nearest(typed, known); len(near) > 0 {
		hint = "did you mean " + near[0] + "?"
	}
	return "", &Mistake{fmt.Sprintf("%q is not a step", typed), hint}
}

// fit refuses flags that mean nothing to a step and asks for those it needs.
func (r *reader) fit() {
	u := uses[r.q.Kind]
	allowed := slices.Concat(common, u.takes)
	var odd []string
	for name := range r.flags {
		if !slices.Contains(allowed, name) {
			odd = append(odd, name)
		}
	}
	for name, on := range map[string]bool{"stirred": r.q.Stirred, "powder": r.q.Powder} {
		if on && !slices.Contains(allowed, name) {
			odd = append(odd, name)
		}
	}
	slices.Sort(odd)
	for _, name := range odd {
		r.mistake(fmt.Sprintf("--%s does not apply to %s%s", name, r.q.Kind, why(r.q.Kind, name)), "it takes --"+strings.Join(allowed, ", --"))
	}
	if _, carried := r.flags["carrier"]; r.q.Kind == steps.Trap && !carried {
		for _, name := range []string{"dose", "stages"} {
			if _, ok := r.flags[name]; ok {
				r.mistake(fmt.Sprintf("--%s does not apply to trap without --carrier", name), "name the carrier with --carrier, or leave it out")
			}
		}
	}
	for _, name := range append([]string{"water"}, u.needs...) {
		if _, ok := r.flags[name]; !ok {
			r.missing(name)
		}
	}
}

// why a flag does not apply, where that is worth a word.
func why(k steps.Kind, name string) string {
	switch {
	case name == "free-water":
		return ": free water is let settle first"
	case name == "to" && k == steps.Settle:
		return ": it leaves the solvent saturated"
	case name == "returns" && k == steps.Forerun:
		return ": nothing goes back to the pot"
	}
	return ""
}

func (r *reader) missing(name string) {
	hint := ""
	switch name {
	case "water":
		hint = `give the water of the lot: --water "225 mg/kg"`
	case "agent":
		hint = r.agentsOffered()
	}
	r.mistake(fmt.Sprintf("%s needs --%s", r.q.Kind, name), hint)
}
