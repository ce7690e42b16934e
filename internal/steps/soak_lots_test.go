package steps_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

// A charge used again as it is: followed lot by lot elsewhere, each lot reaches the
// goal and none leaves more than the last is said to leave; the lots share what the
// beads keep, and more lots ask for more sieve.
func TestLotsOverOneCharge(t *testing.T) {
	solvents := []string{"toluene", "dichloromethane", "tetrahydrofuran", "ethyl-acetate"}
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom(solvents).Draw(rt, "solvent")
		m := mixture(t, solvent)
		feed := litres(m, 5, math.Exp(rapid.Float64Range(math.Log(100e-6), math.Log(3e-3)).Draw(rt, "ln w")))
		goal := feed.Water() * rapid.Float64Range(0.01, 0.5).Draw(rt, "share")
		sieve := sieve3A(t, rapid.Float64Range(0.005, 0.03).Draw(rt, "residual"))
		hours, lots := rapid.Float64Range(4, 200).Draw(rt, "hours"), rapid.IntRange(2, steps.MostLots).Draw(rt, "lots")
		rig := stirred(t, solvent)
		once, err := steps.SoakFor(m, feed, goal, hours*3600, sieve, rig)
		if err != nil {
			rt.Fatal(err)
		}
		rig.Lots = lots
		again, err := steps.SoakFor(m, feed, goal, hours*3600, sieve, rig)
		if errors.Is(err, steps.ErrWetSieve) {
			return // so many lots are more than the largest dose holds
		}
		if err != nil {
			rt.Fatal(err)
		}
		closesTightly(rt, again.Balance)
		if again.AgentKg < once.AgentKg*(1-1e-9) {
			rt.Fatalf("%g kg for %d lots, %g for one", again.AgentKg, lots, once.AgentKg)
		}
		if again.Why != steps.AtTarget {
			return
		}
		if again.Out.Water() > goal*(1+1e-6) || again.Out.Water() < again.Floor*(1-1e-9) {
			rt.Fatalf("%g after %d lots, floor %g, goal %g", again.Out.Water(), lots, again.Floor, goal)
		}
		if held := again.AgentKg * sieve.HoldUpM3PerKg * 1e3; math.Abs(again.SolventLostL*float64(lots)/held-1) > 1e-9 {
			rt.Fatalf("%g L lost of each of %d lots, %g L held", again.SolventLostL, lots, held)
		}
		rig.Lots = 0
		life, err := steps.FollowSieve(m, feed, goal*(1+1e-6), hours*3600, sieve, rig,
			steps.LifeRules{Kg: again.AgentKg, FreshKgPerKg: sieve.ResidualKgPerKg, MostCycles: 9}, lots)
		if err != nil {
			rt.Fatal(err)
		}
		if life.RegenerateBefore != 0 {
			rt.Fatalf("%d lots, but followed lot by lot: %s", lots, life.Verdict)
		}
		for _, b := range life.Batches {
			if b.Outlet > again.Out.Water()*(1+1e-9) {
				rt.Fatalf("lot %d leaves %g, the last is said to leave %g", b.Number, b.Outlet, again.Out.Water())
			}
		}
	})
}

// A ketone makes water on the beads, and thirteen lots turn them to dust.
func TestLotsThatAreRefused(t *testing.T) {
	m := mixture(t, "toluene")
	for name, change := range map[string]func(r *steps.SoakRig){
		"water made on the beads": func(r *steps.SoakRig) { r.Lots, r.CondensationPerS = 2, 1e-9 },
		"too many":                func(r *steps.SoakRig) { r.Lots = steps.MostLots + 1 },
		"less than none":          func(r *steps.SoakRig) { r.Lots = -1 },
	} {
		rig := bottle(t, "toluene", 0.08)
		change(&rig)
		if _, err := steps.SoakFor(m, litres(m, 1, 200e-6), 20e-6, day(1), sieve3A(t, 0.02), rig); !errors.Is(err, steps.ErrNoSense) {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// The quick form of several charges, and of several lots over one, gives what the
// soaks themselves give.
func TestQuickSoakInEveryForm(t *testing.T) {
	for _, solvent := range []string{"toluene", "ethanol", "ethyl-acetate"} {
		m := mixture(t, solvent)
		sieve, feed := sieve3A(t, 0.02), litres(m, 18, 900e-6)
		for _, form := range []struct{ charges, lots int }{{1, 1}, {2, 1}, {3, 1}, {1, 2}, {1, 12}} {
			rig := bottle(t, solvent, 0.25)
			rig.Lots = form.lots
			const kg, hours = 2.7, 24.0
			quick, err := steps.NewQuickSoak(m, feed, kg, hours*3600, form.charges, sieve, rig)
			if err != nil {
				t.Fatal(err)
			}
			full, err := steps.SoakSeries(m, feed, steps.EqualCharges(form.charges, kg, hours*3600), sieve, rig)
			if err != nil {
				t.Fatalf("%s, %+v: %v", solvent, form, err)
			}
			got := quick.Water(feed.Water(), feed.SolventKg, &steps.Aside{Loading: 1, ResidualKgPerKg: 0.02, Rate: 1})
			near(t, solvent, got, full.Out.Water(), 2e-3)
		}
	}
}

// A hand-over next to what came in, or at what only the largest dose reaches, has its
// dose: the search for one meets no wall at its ends.
func TestGoalsAtTheEndsOfTheDoses(t *testing.T) {
	m, rig, sieve := mixture(t, "ethyl-acetate"), bottle(t, "ethyl-acetate", 0.25), sieve3A(t, 0.02)
	feed := litres(m, 2, 80e-6)
	most, err := steps.SoakOver(m, feed, sieve.MaxDoseKgPerM3, 24*3600, sieve, rig)
	if err != nil {
		t.Fatal(err)
	}
	for _, goal := range []float64{feed.Water() * (1 - 1e-15), feed.Water() * (1 - 1e-9), most.Out.Water(), most.Out.Water() * (1 + 1e-15)} {
		o, err := steps.SoakFor(m, feed, goal, 24*3600, sieve, rig)
		if err != nil || o.Out.Water() > goal*(1+1e-9) {
			t.Errorf("a goal of %.12g mg/kg from %.12g: %.12g, %v", 1e6*goal, 1e6*feed.Water(), 1e6*o.Out.Water(), err)
		}
	}
}
