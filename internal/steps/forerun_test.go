package steps_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"parch/internal/steps"
)

// The least outlet bounds what is claimed of a distillate, not how far it is drawn:
// without a goal the same is drawn with the bound and without it. A goal below the
// bound is the bound, a goal above it ends the drawing where all that was collected
// holds it.
func TestLeastOutletIsAClaim(t *testing.T) {
	m := ideal(1 / 8.0)
	eq, feed := boiler(t, m, atmospherePa), molar(m, 0.05)
	bounded := drawingRules
	bounded.LowestOutlet = 0.01
	free, errA := steps.RunForerun(eq, feed, 0, still(0), drawingRules)
	bound, errB := steps.RunForerun(eq, feed, 0, still(0), bounded)
	if err := errors.Join(errA, errB); err != nil {
		t.Fatal(err)
	}
	if free.Out.Water() >= 0.01 || bound.Why != steps.AtHeel || !strings.Contains(bound.WhyText, "computed at") {
		t.Errorf("%g; %s: %s", free.Out.Water(), bound.Why, bound.WhyText)
	}
	near(t, "drawn", bound.Out.SolventKg, free.Out.SolventKg, 1e-9)
	near(t, "claimed", bound.Out.Water(), 0.01, 1e-9)
	for _, c := range []struct {
		goal, holds float64
		why         steps.Stop
	}{{0.003, 0.003, steps.AtTarget}, {0.001, 0.0025, steps.AtPractice}, {0.0025, 0.0025, steps.AtTarget}} {
		bounded.LowestOutlet = 0.0025
		o, err := steps.RunForerun(eq, feed, c.goal, still(0), bounded)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "collected", o.Figure("water in what is drawn off")/100, c.holds, 1e-6)
		if o.Why != c.why {
			t.Errorf("to %g: stopped for %s: %s", c.goal, o.Why, o.WhyText)
		}
	}
	// A lot drier than the bound is claimed to come out as it went in.
	bounded.LowestOutlet = 0.05
	if o, err := steps.RunForerun(eq, feed, 0, still(0), bounded); err != nil || math.Abs(o.Out.Water()/o.In.Water()-1) > 1e-9 || len(o.Warnings) == 0 {
		t.Errorf("%v: %g from %g, warnings %q", err, o.Out.Water(), o.In.Water(), o.Warnings)
	}
}

func TestForerunRefusals(t *testing.T) {
	m := mixture(t, "tetrahydrofuran")
	eq := boiler(t, m, atmospherePa)
	lot := litres(m, 18, 500e-6)
	for name, c := range map[string]struct {
		lot   steps.Lot
		eq    *steps.ForerunEquilibrium
		spoil func(*steps.ForerunRig)
		want  string
	}{
		"wetter than the azeotrope": {litres(m, 18, 0.2), eq, func(*steps.ForerunRig) {}, "azeotrope"},
		"hot pot":                   {lot, eq, func(r *steps.ForerunRig) { r.HighestPotK = 330 }, "limit is 56.9 °C"},
		"boils in the room":         {lot, boiler(t, m, 5e3), func(*steps.ForerunRig) {}, "room"},
		"warm coolant":              {lot, eq, func(r *steps.ForerunRig) { r.Coolant.InK = 345 }, "coolant"},
		"too many stages":           {lot, eq, func(r *steps.ForerunRig) { r.Stages = 21 }, "0 to 20"},
		"no reflux":                 {lot, eq, func(r *steps.ForerunRig) { r.Stages = 5 }, "reflux"},
		"no heat":                   {lot, eq, func(r *steps.ForerunRig) { r.HeaterW = 0 }, "heat"},
	} {
		r := still(0)
		c.spoil(&r)
		_, err := steps.RunForerun(c.eq, c.lot, 50e-6, r, drawingRules)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v", name, err)
		}
	}
	weak := still(0)
	weak.HeaterW = 20
	limited := drawingRules
	limited.LongestHeatUpS = 4 * 3600
	if _, err := steps.RunForerun(eq, lot, 50e-6, weak, limited); !errors.Is(err, steps.ErrHeater) {
		t.Errorf("20 W under 18 L: %v", err)
	}
}

// A condenser does not take a vapour that condenses next to its cooling water.
// Water boils at 17.5 °C at 2 kPa and at 22.4 °C at 2.7 kPa (steam tables); 10 K
// between vapour and water are common practice, no source.
func TestForerunRefusesVapourNextToTheCoolant(t *testing.T) {
	m := mixture(t, "n-n-dimethylformamide")
	lot := litres(m, 5, 0.01)
	rig := still(5)
	rig.HeaterW, rig.Coolant = 1300, steps.Coolant{InK: 283.15, DifferenceK: 10}
	_, err := steps.RunForerun(boiler(t, m, 2e3), lot, 200e-6, rig, drawingRules)
	const want = "condenses at 17.5 °C at 2 kPa, the coolant comes in at 10.0 °C and leaves at 14.7 °C: a condenser wants 10 K between the two on average (common practice), which takes 2.7 kPa or more"
	if !errors.Is(err, steps.ErrNoForerun) || !strings.Contains(err.Error(), want) {
		t.Errorf("at 2 kPa: %v", err)
	}
	if _, err := steps.RunForerun(boiler(t, m, 2.75e3), lot, 200e-6, rig, drawingRules); err != nil {
		t.Errorf("at 2.75 kPa: %v", err)
	}
	// A simple still boils hot, and what comes over would boil far below the pot.
	rig.Stages, rig.RefluxRatio, rig.Coolant.InK = 0, 0, 308.15
	if _, err := steps.RunForerun(boiler(t, m, 2e3), lot, 200e-6, rig, drawingRules); !errors.Is(err, steps.ErrNoForerun) {
		t.Errorf("without a column and with a coolant of 35 °C: %v", err)
	}
}

// The usual way below the floor of a trap: no second set-up and heat-up.
func TestTrapThenForerun(t *testing.T) {
	eq := equilibrium(t, "ethyl-acetate", 20)
	feed := litres(eq.Mixture, 15, 30000e-6)
	switchOver := drawingRules
	switchOver.SetUpS, switchOver.LowestOutlet = 600, 20e-6
	trap, forerun, err := steps.RunTrapThenForerun(eq, feed, 12000e-6, 500e-6, rig("light"), rules, still(0), switchOver)
	if err != nil {
		t.Fatal(err)
	}
	if trap.Out.SolventKg != forerun.In.SolventKg || trap.Out.WaterKg != forerun.In.WaterKg {
		t.Errorf("the forerun starts from %+v, the trap ends with %+v", forerun.In, trap.Out)
	}
	if forerun.Figure("heat-up, each charge") > 0.05 {
		t.Errorf("the hot pot takes %.2g h to heat up", forerun.Figure("heat-up, each charge"))
	}
	near(t, "water", forerun.Out.Water(), 500e-6, 0.001)
	apart, err := steps.RunTrap(eq, feed, 12000e-6, rig("light"), rules)
	if err != nil {
		t.Fatal(err)
	}
	cold := apart.Out
	second, err := steps.RunForerun(boiler(t, eq.Mixture, atmospherePa), cold, 500e-6, still(0), drawingRules)
	if err != nil {
		t.Fatal(err)
	}
	if trap.HoursTotal+forerun.HoursTotal >= apart.HoursTotal+second.HoursTotal-0.5 {
		t.Errorf("one operation takes %.2f h, two take %.2f h", trap.HoursTotal+forerun.HoursTotal, apart.HoursTotal+second.HoursTotal)
	}
}

func BenchmarkForerun(b *testing.B) {
	for _, stages := range []int{0, 10} {
		b.Run(map[int]string{0: "simple", 10: "ten stages"}[stages], func(b *testing.B) {
			m := mixture(b, "tetrahydrofuran")
			eq := boiler(b, m, atmospherePa)
			for b.Loop() {
				if _, err := steps.RunForerun(eq, litres(m, 18, 500e-6), 50e-6, still(stages), drawingRules); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
