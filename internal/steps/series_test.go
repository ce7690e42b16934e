package steps_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"parch/internal/steps"
)

// The dose found for several charges brings the last of them to the goal, and a
// time found does too.
func TestSeriesSolved(t *testing.T) {
	m := fromPerry(t, "ethanol")
	feed, sieve, rig := litres(m, 1, 1500e-6), sieve3A(t, 0.02), stirred(t, "ethanol")
	dosed, err := steps.SeriesFor(m, feed, 20e-6, day(1), 2, sieve, rig)
	if err != nil || dosed.Why != steps.AtTarget {
		t.Fatalf("%q, %v", dosed.WhyText, err)
	}
	near(t, "reached", dosed.Out.Water(), 20e-6, 1e-6)
	one, err := steps.SoakFor(m, feed, 20e-6, day(1), sieve, rig)
	if err != nil || dosed.AgentKg >= one.AgentKg {
		t.Errorf("two charges take %g kg, one %g: %v", dosed.AgentKg, one.AgentKg, err)
	}
	dose := dosed.Figure("dose")
	timed, err := steps.SeriesUntil(m, feed, 20e-6, dose, 2, sieve, rig)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "hours of each", (timed.HoursTotal-0.8)/2, 24, 1e-4)
	for name, run := range map[string]func() (steps.Outcome, error){
		"dose": func() (steps.Outcome, error) { return steps.SeriesFor(m, feed, 1e-6, day(1), 2, sieve, rig) },
		"time": func() (steps.Outcome, error) { return steps.SeriesUntil(m, feed, 1e-6, 100, 2, sieve, rig) },
	} {
		if o, err := run(); err != nil || o.Why != steps.AtFloor || o.Out.Water() < 1e-6 {
			t.Errorf("%s below the floor: %q, %v", name, o.WhyText, err)
		}
	}
}

// Water beyond what two charges can hold is missed for want of capacity, by a given
// dose too; a goal within their reach for want of time.
func TestWhatASeriesMissesBy(t *testing.T) {
	m := mixture(t, "ethanol")
	sieve, rig := sieve3A(t, 0.02), bottle(t, "ethanol", 0.08)
	for _, c := range []struct {
		water, hours      float64
		ofDose, givenDose steps.Stop
	}{
		{0.3, 24, steps.AtCapacity, steps.AtCapacity},
		{1500e-6, 2, steps.AtTime, steps.AtTarget}, // a given dose takes the time it needs
	} {
		feed := litres(m, 1, c.water)
		o, err := steps.SeriesFor(m, feed, 50e-6, c.hours*3600, 2, sieve, rig)
		if err != nil || o.Why != c.ofDose {
			t.Errorf("dose for %g kg/kg: %q, %v", c.water, o.WhyText, err)
		}
		if o, err = steps.SeriesUntil(m, feed, 50e-6, 100, 2, sieve, rig); err != nil || o.Why != c.givenDose {
			t.Errorf("time for %g kg/kg: %q, %v", c.water, o.WhyText, err)
		}
	}
}

// Cakes of powder that would drink up a lot are not charged: what is missed is told of
// as much as leaves a twentieth.
func TestSeriesLeavesSomeOfTheLot(t *testing.T) {
	m := mixture(t, "toluene")
	powder := sieve3A(t, 0.02)
	powder.HoldUpM3PerKg = 2e-3 // two charges of 300 kg/m3 hold more than all
	o, err := steps.SeriesFor(m, litres(m, 1, 400e-6), 1e-9, day(1), 2, powder, bottle(t, "toluene", 0.08))
	if err != nil || o.Why != steps.AtFloor {
		t.Fatalf("%q, %v", o.WhyText, err)
	}
	near(t, "left of the lot", o.Out.SolventKg/o.In.SolventKg, 0.05, 1e-3)
}

// A stirred powder is as fast as it is kept suspended, where beads stirred the same
// way are slower than that; one that settles is no faster than beads.
func TestPowder(t *testing.T) {
	m := mixture(t, "toluene")
	powder := sieve3A(t, 0.02)
	powder.BeadDiameterM, powder.DispersionPerS = 50e-6, 2.0/3600
	rate := func(sorbent steps.Sorbent, rig steps.SoakRig) float64 {
		o, err := steps.SoakOver(m, litres(m, 1, 225e-6), 50, day(1), sorbent, rig)
		if err != nil {
			t.Fatal(err)
		}
		if still := !rig.Stirred && sorbent.DispersionPerS > 0; still != hasWord(o.Warnings, "the powder settles") {
			t.Errorf("warnings %q", o.Warnings)
		}
		return o.Figure("rate constant K")
	}
	still := bottle(t, "toluene", 0.08)
	near(t, "stirred, 1/h", rate(powder, stirred(t, "toluene")), 2, 0.02)
	near(t, "settled against beads", rate(powder, still), rate(sieve3A(t, 0.02), still), 1e-12)
}

func hasWord(all []string, word string) bool {
	return slices.ContainsFunc(all, func(s string) bool { return strings.Contains(s, word) })
}

// The sizes of several charges lead to the goal, each in its time; more time never
// asks for more, and one charge is sized as by SizeSoak.
func TestSizesOfASeries(t *testing.T) {
	m := fromPerry(t, "ethanol")
	feed, sieve, rig := litres(m, 1, 1500e-6), sieve3A(t, 0.02), stirred(t, "ethanol")
	sizes, err := steps.SizeSeries(m, feed, 20e-6, 2, sieve, rig, steps.SoakTimes...)
	if err != nil {
		t.Fatal(err)
	}
	for i, s := range sizes {
		o, err := steps.SoakSeries(m, feed, steps.EqualCharges(2, s.DoseGrams/1e3, s.Hours*3600), sieve, rig)
		if err != nil || !s.Enough {
			t.Fatalf("%+v, %v", s, err)
		}
		near(t, "reached", o.Out.Water(), 20e-6, 1e-6)
		if s.DoseGrams < s.CapacityGrams*(1-1e-6) || i > 0 && s.DoseGrams > sizes[i-1].DoseGrams*(1+1e-9) {
			t.Errorf("%+v after %+v", s, sizes[max(0, i-1)])
		}
	}
	one, err := steps.SizeSeries(m, feed, 20e-6, 1, sieve, rig, day(1))
	if err != nil {
		t.Fatal(err)
	}
	whole, err := steps.SizeSoak(m, feed, 20e-6, sieve, rig, day(1))
	if err != nil || one[0] != whole[0] || sizes[1].DoseGrams >= whole[0].DoseGrams {
		t.Errorf("%+v, %+v, %v", one[0], whole[0], err)
	}
}

// One more lot over charges that are as good as fresh is the series itself; over used ones
// it is wetter, and over full ones there is no drying (needs no outside value). What both
// took, by hand from their loadings, is what the lot lost.
func TestOverUsedCharges(t *testing.T) {
	m, sorbent, rig := mixture(t, "toluene"), sieve3A(t, 0.02), bottle(t, "toluene", 0.2)
	feed := litres(m, 10, 450e-6)
	first, err := steps.SoakSeries(m, feed, []steps.Charge{{Kg: 0.3, TimeS: 86400}, {Kg: 0.3, TimeS: 86400}}, sorbent, rig)
	if err != nil {
		t.Fatal(err)
	}
	over := func(a, b float64) float64 {
		out, err := steps.OverUsed(m, feed, []steps.UsedCharge{{Kg: 0.3, LoadingKgPerKg: a}, {Kg: 0.3, LoadingKgPerKg: b}}, 86400, sorbent, rig)
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	near(t, "over fresh charges", over(0.02, 0.02), first.Out.Water(), 1e-9)
	a, b := first.Figure("loading after, charge 1")/100, first.Figure("loading after, charge 2")/100
	taken := 0.3*(a-0.02) + 0.3*(b-0.02)
	near(t, "taken by both; a little stays with the solvent on the beads", taken, first.Balance.WaterInKg-first.Balance.WaterOutKg, 0.02)
	if again := over(a, b); !(again > first.Out.Water()) {
		t.Errorf("%g over used charges, %g over fresh ones", again, first.Out.Water())
	}
	if wet := over(0.22, 0.22); !math.IsNaN(wet) {
		t.Errorf("beads that are full leave %g", wet)
	}
}
