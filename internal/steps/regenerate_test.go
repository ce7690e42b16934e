package steps_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/history"
	"parch/internal/steps"
)

func bench() steps.Oven {
	return steps.Oven{Name: "drying oven", EnergyJ: 7 * 3.6e6, LoadKg: 5, Shared: true, HeatingS: 12 * 3600, CoolingS: 7200, AttendedS: 1440, SpareMarginK: 50}
}

func swept() steps.Flush {
	return steps.Flush{Done: true, GasM3PerKg: 0.5, TimeS: 7200, AttendedS: 600, LeftShare: 0.01, CondensedShare: 0.8}
}

func used(t *testing.T, kg, loading float64) steps.UsedSieve {
	s := sieve3A(t, 0.02)
	s.HeatOfSorptionJPerMol, s.HeatCapacityJPerKgK = 64e3, 1050
	return steps.UsedSieve{Sorbent: s, Kg: kg, LoadingKgPerKg: loading, SolventKg: kg * 0.25e-3 * 867, IgnitionK: 535 + 273.15, Flammable: true}
}

// The heat in the beads of a kilogram at 20 g/100 g to 300 °C is near 0.31 kWh
// (arithmetic elsewhere: 0.96 kJ/kg/K x 280 K and 0.20 kg x 4.2 MJ/kg); the oven
// takes 7 kWh a run whatever its load (common practice).
func TestRegenerationHeat(t *testing.T) {
	m := mixture(t, "toluene")
	u := used(t, 1, 0.20)
	u.Sorbent.HeatOfSorptionJPerMol, u.Sorbent.HeatCapacityJPerKgK = 4.2e6*0.018015, 960
	u.SolventKg = 0
	o, err := steps.RunRegenerate(m, u, steps.Flush{}, bench(), baked(300), history.DefaultPickup)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "water driven off", o.Figure("water driven off"), 180, 0.02)
	near(t, "heat in the beads", o.Figure("heat the beads need"), 0.31-0.02*4.2/3.6, 0.03)
	near(t, "a fifth of a run", o.EnergyKWh, 7.0/5, 1e-9)
	near(t, "loading after", o.Figure("loading after"), 2.0, 0.03)
	alone := bench()
	alone.Shared = false
	if o, err = steps.RunRegenerate(m, u, steps.Flush{}, alone, baked(300), history.DefaultPickup); err != nil {
		t.Fatal(err)
	}
	near(t, "a whole run", o.EnergyKWh, 7, 1e-9)
}

// Autoignition temperatures of IEC 60079-20-1: toluene 535 °C, diethyl ether
// 175 °C (memory). An oven within 50 K of it is refused unless the beads are
// flushed; unflushed beads are never without the danger.
func TestOvensAndSolvent(t *testing.T) {
	m := mixture(t, "toluene")
	run := func(ignitionC, ovenC float64, flush steps.Flush) (steps.Outcome, error) {
		u := used(t, 2, 0.05)
		u.IgnitionK = ignitionC + 273.15
		return steps.RunRegenerate(m, u, flush, bench(), baked(ovenC), history.DefaultPickup)
	}
	for _, c := range []struct{ ignitionC, ovenC float64 }{{175, 300}, {320, 271}, {330, 300}} {
		if _, err := run(c.ignitionC, c.ovenC, steps.Flush{}); !errors.Is(err, steps.ErrIgnition) || !strings.Contains(err.Error(), "flush") {
			t.Errorf("%g °C for a solvent that ignites at %g: %v", c.ovenC, c.ignitionC, err)
		}
		if o, err := run(c.ignitionC, c.ovenC, swept()); err != nil || len(o.Warnings) == 0 {
			t.Errorf("flushed: %v, %q", err, o.Warnings)
		}
	}
	if o, err := run(535, 300, steps.Flush{}); err != nil || len(o.Warnings) == 0 || !strings.HasPrefix(o.Warnings[0], "danger") {
		t.Errorf("toluene at 300 °C, not flushed: %q, %v", o.Warnings, err)
	}
	if o, err := run(535, 300, swept()); err != nil || len(o.Warnings) != 0 {
		t.Errorf("toluene at 300 °C, flushed: %q, %v", o.Warnings, err)
	}
	if _, err := run(-273.15, 300, steps.Flush{}); !errors.Is(err, steps.ErrNoIgnition) {
		t.Errorf("no temperature known: %v", err)
	}
}

// A cool oven in room air leaves beads wetter than they came, and says so.
func TestRegenerationCanGainNothing(t *testing.T) {
	m := mixture(t, "toluene")
	o, err := steps.RunRegenerate(m, used(t, 2, 0.03), swept(), bench(), baked(120), history.DefaultPickup)
	if err != nil || len(o.Warnings) < 2 || !strings.Contains(o.Warnings[0], "gains nothing") {
		t.Fatalf("%q, %v", o.Warnings, err)
	}
	near(t, "loading stays", o.Figure("loading after"), 3, 1e-9)
	vacuum := baked(200)
	vacuum.VacuumPa = 100
	better, err := steps.RunRegenerate(m, used(t, 2, 0.1), swept(), bench(), vacuum, history.DefaultPickup)
	if err != nil {
		t.Fatal(err)
	}
	plain, err := steps.RunRegenerate(m, used(t, 2, 0.1), swept(), bench(), baked(200), history.DefaultPickup)
	if err != nil || better.Out.WaterKg >= plain.Out.WaterKg {
		t.Errorf("vacuum leaves %g kg, air %g kg, %v", better.Out.WaterKg, plain.Out.WaterKg, err)
	}
}

func TestRegenerationBalances(t *testing.T) {
	m := mixture(t, "toluene")
	rapid.Check(t, func(rt *rapid.T) {
		u := used(t, rapid.Float64Range(0.1, 20).Draw(rt, "kg"), rapid.Float64Range(0.001, 0.2).Draw(rt, "loading"))
		o, err := steps.RunRegenerate(m, u, swept(), bench(), baked(rapid.Float64Range(130, 320).Draw(rt, "oven")), history.DefaultPickup)
		if err != nil {
			rt.Fatal(err)
		}
		closesTightly(rt, o.Balance)
		if o.Out.WaterKg > o.In.WaterKg || o.Balance.WaterRemovedKg < 0 || len(o.Losses) != 0 {
			rt.Fatalf("%+v", o.Balance)
		}
	})
}

// A charge of sieve that is carried on takes up what each batch brings until the
// target would be missed; 18 L of toluene bring 7.3 g a batch.
func TestFollowSieve(t *testing.T) {
	m := mixture(t, "toluene")
	rules := steps.LifeRules{Kg: 0.3, FreshKgPerKg: 0.02, FadePerCycle: 0.005, DustPerBatch: 0.001, DiscardBelow: 0.8, MostCycles: 10}
	life, err := steps.FollowSieve(m, litres(m, 18, 480e-6), 15e-6, 200*3600, sieve3A(t, 0), stirred(t, "toluene"), rules, 40)
	if err != nil {
		t.Fatal(err)
	}
	if life.RegenerateBefore < 3 || !strings.Contains(life.Verdict, "regenerate before batch") {
		t.Fatalf("%s after %d batches", life.Verdict, life.RegenerateBefore)
	}
	for i, b := range life.Batches {
		if !b.Reaches || b.Outlet > 15e-6 || b.Number != i+1 {
			t.Errorf("batch %d: %g", b.Number, b.Outlet)
		}
		if i > 0 && !b.RegeneratedFirst && !b.RenewedFirst && b.Outlet <= life.Batches[i-1].Outlet {
			t.Errorf("batch %d is drier than the one before it on the same charge", b.Number)
		}
	}
	first := life.Batches[0]
	near(t, "a batch brings", first.WaterTakenKg, 18*0.8668*(480e-6-first.Outlet), 0.01)
	near(t, "make-up", life.MakeUpKg, 40*0.001*0.3, 1e-9)
	if life.Regenerations == 0 || life.SolventHeldKg == 0 {
		t.Errorf("%+v", life)
	}
	// "regenerate before batch n": without it, batch n would have missed the target
	n := life.RegenerateBefore
	carried := sieve3A(t, (1-0.001)*life.Batches[n-2].LoadingAfter+0.001*0.02)
	o, err := steps.SoakOver(m, litres(m, 18, 480e-6), 0.3/steps.LotVolume(m, litres(m, 18, 480e-6), 298.15), 200*3600, carried, stirred(t, "toluene"))
	if err == nil && o.Out.Water() <= 15e-6 {
		t.Errorf("batch %d would have reached %g", n, o.Out.Water())
	}
}

func TestFollowSieveToItsEnd(t *testing.T) {
	m := mixture(t, "toluene")
	rules := steps.LifeRules{Kg: 0.3, FreshKgPerKg: 0.02, FadePerCycle: 0.05, DiscardBelow: 0.8, MostCycles: 30, RegenerateAfter: 1}
	life, err := steps.FollowSieve(m, litres(m, 18, 480e-6), 15e-6, 200*3600, sieve3A(t, 0), stirred(t, "toluene"), rules, 12)
	if err != nil {
		t.Fatal(err)
	}
	// 0.95^4 = 0.815, 0.95^5 = 0.774: renewed instead of a fifth regeneration
	if b := life.Batches[5]; !b.RenewedFirst || b.CapacityShare != 1 || math.Abs(life.Batches[4].CapacityShare-math.Pow(0.95, 4)) > 1e-12 {
		t.Errorf("batch 6: %+v after %+v", b, life.Batches[4])
	}
	if life.Renewals != 2 || life.Regenerations != 9 {
		t.Errorf("%d renewals, %d regenerations", life.Renewals, life.Regenerations)
	}
	rules.Kg = 0.02
	life, err = steps.FollowSieve(m, litres(m, 18, 480e-6), 15e-6, 3600, sieve3A(t, 0), stirred(t, "toluene"), rules, 3)
	if err != nil || !strings.Contains(life.Verdict, "even a fresh charge") {
		t.Errorf("%q, %v", life.Verdict, err)
	}
	rules.Kg = math.NaN()
	if _, err := steps.FollowSieve(m, litres(m, 18, 480e-6), 15e-6, 3600, sieve3A(t, 0), stirred(t, "toluene"), rules, 0); !errors.Is(err, steps.ErrNoSense) {
		t.Errorf("no charge, no batches: %v", err)
	}
}
