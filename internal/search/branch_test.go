package search

import (
	"errors"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/routes"
	"parch/internal/steps"
)

// What a chain comes to at its best is never less than the bound that it is left
// alone by: each of its measures, by the bound for one way to treat its sorbents. A
// chain with a step that has nothing to do is no better than the one without it.
func TestBoundsHold(t *testing.T) {
	held := 0
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom(solventsTried).Draw(rt, "solvent")
		target := rapid.Float64Range(20, 300).Draw(rt, "target")
		water := target * rapid.Float64Range(3, 60).Draw(rt, "times wetter")
		objective := rapid.SampledFrom(Objectives).Draw(rt, "objective")
		tuner := tunerOf(t, lotYAML(string(objective), solvent, rapid.Float64Range(2, 40).Draw(rt, "litres"), 24, water, target, ""))
		if tuner.Case.Dry() || tuner.Case.Limit.CannotShow != "" {
			return
		}
		all := tuner.Case.Steps()
		bounds := tuner.NewBounds(all)
		branch := bounds.Root()
		for len(branch.Route) < rapid.IntRange(1, 3).Draw(rt, "steps") {
			next := rapid.SampledFrom(all).Draw(rt, "next")
			if tuner.Case.MayFollow(branch.Route, next) != "" {
				return
			}
			longer, err := bounds.Extend(branch, next)
			if err != nil {
				return
			}
			rough := bounds.Rough(branch, next)
			branch = longer
			run, err := tuner.Tune(branch.Route)
			if errors.Is(err, routes.ErrRefused) || errors.Is(err, ErrTooSlow) || err == nil && (!run.Meets || idle(&run)) {
				continue
			}
			if err != nil {
				rt.Fatal(err)
			}
			got, err := tuner.MeasuresOf(&run)
			if err != nil {
				rt.Fatal(err)
			}
			if !branch.Ends {
				rt.Errorf("%s reaches the limit, yet its bound says that it cannot", branch.Route.ID())
			}
			held++
			for _, least := range [][]Measures{rough, bounds.Of(branch)} {
				if !anyBelow(least, got) {
					rt.Errorf("%s from %g to %g mg/kg comes to %+v, bounds %+v", branch.Route.ID(), water, target, got, least)
				}
			}
		}
	})
	if held < 20 {
		t.Errorf("%d chains were held against their bounds: too few to tell", held)
	}
}

// idle reports a step that took no water.
func idle(run *routes.Run) bool {
	return slices.ContainsFunc(run.Outcomes, func(o steps.Outcome) bool { return o.Out.Water() > o.In.Water()*(1-1e-9) })
}

// anyBelow reports whether a run lies above one of the bounds in everything.
func anyBelow(bounds []Measures, m Measures) bool {
	const slack = 1 + 1e-9
	for _, b := range bounds {
		if b.PerLitre <= m.PerLitre*slack && b.Attended <= m.Attended*slack && b.WasteKg <= m.WasteKg*slack && b.EnergyKWh <= m.EnergyKWh*slack && b.Time <= m.Time*slack {
			return true
		}
	}
	return false
}

// Acetone condenses on a sieve, so that its longest stand is not its driest: salt and
// a short stirred stand reach what four weeks do not, and the bound knows.
func TestBoundOfASolventThatMakesWater(t *testing.T) {
	tuner := tunerOf(t, lotYAML("cost", "acetone", 10, 24, 100000, 100, ""))
	bounds := tuner.NewBounds(tuner.Case.Steps())
	branch := bounds.Root()
	for _, s := range []routes.Stage{{Kind: steps.Salt, Agent: "magnesium-sulfate"}, {Kind: steps.Soak, Agent: "sieve-3a"}} {
		var err error
		if branch, err = bounds.Extend(branch, s); err != nil {
			t.Fatal(err)
		}
	}
	run, err := tuner.Tune(branch.Route)
	if err != nil || !run.Meets {
		t.Fatalf("%v: %g mg/kg", err, run.WaterOut*1e6)
	}
	if !branch.Ends {
		t.Errorf("%s leaves %.3g mg/kg, yet its bound says that it cannot reach the limit", branch.Route.ID(), run.WaterOut*1e6)
	}
}
