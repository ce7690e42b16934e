package routes_test

import (
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"parch/catalog"
	"parch/internal/routes"
	"parch/internal/steps"
)

// The limits of a salt (common practice, no source): never the last step for a target
// under 100 mg/kg, and no claim under 50 mg/kg.
const leastSaltTarget, leastSaltOutlet = 100, 50e-6

// Random jobs: no route that is offered or that the steps allow in a chain ends with a
// salt for a low target, and no salt in a route that runs leaves less than it may claim.
func TestSaltsInRoutesOfRandomJobs(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	solvents := slices.DeleteFunc(slices.Sorted(maps.Keys(c.Solvents)), func(key string) bool { return c.Solvents[key].Water == nil })
	ran, refused := 0, 0
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom(solvents).Draw(rt, "solvent")
		water := math.Exp(rapid.Float64Range(math.Log(120), math.Log(9000)).Draw(rt, "ln water"))
		target := min(rapid.SampledFrom([]float64{5, 49, 60, 99.9, 100, 101, 250}).Draw(rt, "target"), 0.9*water)
		k := caseOf(t, solvent, fmt.Sprintf("%.6g mg/kg", water), fmt.Sprintf("%.6g mg/kg", target), ", peroxide: {reading: 0 mg/L, date: 2026-11-28}")
		all, _ := k.Candidates()
		for _, r := range slices.Concat(all, chainsOf(k)) {
			last := r[len(r)-1]
			if last.Kind == steps.Salt && target < leastSaltTarget {
				rt.Fatalf("%s may end a job of %s with a target of %g mg/kg", r.ID(), solvent, target)
			}
		}
		r := rapid.SampledFrom(withSalt(slices.Concat(all, chainsOf(k)))).Draw(rt, "route")
		run, err := k.Run(r, settingsOf(r))
		if errors.Is(err, routes.ErrRefused) {
			refused++
			return
		}
		if err != nil {
			rt.Fatalf("%s of %s: %v", r.ID(), solvent, err)
		}
		ran++
		for i, o := range run.Outcomes {
			if r[i].Kind == steps.Salt && o.Out.Water() < min(leastSaltOutlet, o.In.Water())*(1-1e-9) {
				rt.Fatalf("%s of %s: the salt claims %g from %g", r.ID(), solvent, o.Out.Water(), o.In.Water())
			}
		}
	})
	if ran < 20 {
		t.Errorf("only %d routes ran, %d were refused", ran, refused)
	}
}

// chainsOf are all chains of one and two steps that the steps allow.
func chainsOf(k *routes.Case) (all []routes.Route) {
	for _, first := range k.Steps() {
		if k.MayFollow(nil, first) != "" {
			continue
		}
		if k.MayEnd(first) == "" {
			all = append(all, routes.Route{first})
		}
		for _, next := range k.Steps() {
			if before := (routes.Route{first}); k.MayFollow(before, next) == "" && k.MayEnd(next) == "" {
				all = append(all, routes.Route{first, next})
			}
		}
	}
	return all
}

func withSalt(all []routes.Route) []routes.Route {
	all = slices.DeleteFunc(slices.Clone(all), func(r routes.Route) bool {
		return !slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Kind == steps.Salt })
	})
	if len(all) == 0 { // no salt may meet this solvent
		return []routes.Route{soak3A}
	}
	return all
}
