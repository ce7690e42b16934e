package steps_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

// A dose found for a time and the time found for that dose are the same soak.
func TestTimeAndDoseAreInverse(t *testing.T) {
	for _, solvent := range []string{"toluene", "tetrahydrofuran", "dichloromethane"} {
		m := mixture(t, solvent)
		feed, sieve, still := litres(m, 1, 225e-6), sieve3A(t, 0.02), bottle(t, solvent, 0.08)
		rapid.Check(t, func(rt *rapid.T) {
			hours := rapid.Float64Range(48, 200).Draw(rt, "hours")
			goal := rapid.Float64Range(40e-6, 200e-6).Draw(rt, "goal")
			sized, err := steps.SoakFor(m, feed, goal, hours*3600, sieve, still)
			if err != nil {
				rt.Fatal(err)
			}
			if sized.Why != steps.AtTarget {
				rt.Skip("no dose is enough: ", sized.WhyText)
			}
			o, err := steps.SoakUntil(m, feed, goal, sized.Figure("dose"), sieve, still)
			if err != nil || o.Why != steps.AtTarget {
				rt.Fatal(err, o.WhyText)
			}
			if took := o.HoursTotal - o.HoursAttended; math.Abs(o.Out.Water()/goal-1) > 1e-9 || math.Abs(took/hours-1) > 1e-6 {
				rt.Fatalf("%g h and %g mg/kg, want %g h and %g", took, o.Out.Water()*1e6, hours, goal*1e6)
			}
		})
	}
}

func TestNoTimeIsEnough(t *testing.T) {
	m := mixture(t, "toluene")
	for _, c := range []struct {
		residual, dose, goal float64
		why                  steps.Stop
	}{
		{0.02, 0.5, 50e-6, steps.AtCapacity},
		{0.075, 100, 0.1e-6, steps.AtFloor},
	} {
		o, err := steps.SoakUntil(m, litres(m, 1, 225e-6), c.goal, c.dose, sieve3A(t, c.residual), bottle(t, "toluene", 0.08))
		if err != nil || o.Why != c.why || !(o.Out.Water() > c.goal) {
			t.Errorf("%+v: %v, %s at %.3g mg/kg: %s", c, err, o.Why, o.Out.Water()*1e6, o.WhyText)
		}
	}
}

// Acetone makes water on the sieve: the goal is met on the way down, before the
// driest moment, or not at all.
func TestUntilTheDriestMoment(t *testing.T) {
	m := mixture(t, "acetone")
	still := bottle(t, "acetone", 0.08)
	still.CondensationPerS = 10e-6 / 3600
	run := func(goal float64) steps.Outcome {
		o, err := steps.SoakUntil(m, litres(m, 1, 2710e-6), goal, 100, sieve3A(t, 0.02), still)
		if err != nil {
			t.Fatal(err)
		}
		return o
	}
	met := run(1000e-6)
	near(t, "water", met.Out.Water(), 1000e-6, 1e-6)
	if h := met.HoursTotal - met.HoursAttended; met.Why != steps.AtTarget || h > met.Figure("driest after") {
		t.Errorf("%s after %g h", met.WhyText, h)
	}
	if missed := run(100e-6); missed.Why != steps.AtPractice {
		t.Errorf("%s", missed.WhyText)
	}
	if _, err := steps.SoakUntil(m, litres(m, 1, 100e-6), 100e-6, 100, sieve3A(t, 0.02), still); !errors.Is(err, steps.ErrNoSense) {
		t.Errorf("a goal that is met already: %v", err)
	}
}
