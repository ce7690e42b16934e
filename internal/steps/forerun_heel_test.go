package steps_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

// Whichever way a charge dries, a tenth of its mass and of its moles is left in the
// pot at least, and the share told is the one that stays.
func TestHeelOfEveryForerun(t *testing.T) {
	eqs := []*steps.ForerunEquilibrium{
		boiler(t, mixture(t, "methanol"), atmospherePa), boiler(t, mixture(t, "acetone"), atmospherePa),
		boiler(t, mixture(t, "tetrahydrofuran"), atmospherePa), boiler(t, ideal(0.3), atmospherePa), boiler(t, ideal(3), atmospherePa),
	}
	rapid.Check(t, func(rt *rapid.T) {
		eq := eqs[rapid.IntRange(0, len(eqs)-1).Draw(rt, "mixture")]
		water := math.Exp(rapid.Float64Range(math.Log(1e-4), math.Log(0.5)).Draw(rt, "ln w"))
		goal := water * rapid.SampledFrom([]float64{0, 0.001, 0.01, 0.1, 0.3, 0.6, 0.9}).Draw(rt, "goal")
		feed := steps.Lot{SolventKg: 10 * (1 - water), WaterKg: 10 * water}
		o, err := steps.RunForerun(eq, feed, goal, still(rapid.IntRange(0, 15).Draw(rt, "stages")), drawingRules)
		if errors.Is(err, steps.ErrNoForerun) {
			return
		}
		if err != nil {
			rt.Fatal(err)
		}
		pot, drawn := o.Out, o.Out
		if o.Overhead {
			pot = steps.Lot{SolventKg: feed.SolventKg - drawn.SolventKg, WaterKg: feed.WaterKg - drawn.WaterKg}
		}
		mol := func(l steps.Lot) float64 {
			return l.SolventKg/eq.Mixture.Solvent.MolarMassKgPerMol + l.WaterKg/eq.Mixture.Water.MolarMassKgPerMol
		}
		ofMass, ofMoles := pot.MassKg()/feed.MassKg(), mol(pot)/mol(feed)
		if ofMass < steps.LeastHeel*(1-1e-6) || ofMoles < steps.LeastHeel*(1-1e-6) {
			rt.Fatalf("%s: %.5g of the mass, %.5g of the moles stay in the pot", o.Why, ofMass, ofMoles)
		}
		if o.Why == steps.AtHeel && math.Min(ofMass, ofMoles) > steps.LeastHeel*(1+1e-6) {
			rt.Fatalf("heel: %.5g of the mass, %.5g of the moles stay in the pot", ofMass, ofMoles)
		}
		if said := 1 - o.Figure("drawn off, as a share of the charge")/100; math.Abs(said-ofMass) > 1e-6 {
			rt.Fatalf("%.5g of the mass is told, %.5g stays", said, ofMass)
		}
		if o.Why == steps.AtTarget && math.Abs(o.Out.Water()/goal-1) > 1e-6 {
			rt.Fatalf("%g for a target of %g", o.Out.Water(), goal)
		}
		if o.Out.Water() > feed.Water()*(1+1e-9) {
			rt.Fatalf("from %g to %g", feed.Water(), o.Out.Water())
		}
	})
}

// A simple still takes about three quarters of tetrahydrofuran on the way from
// 500 to 50 mg/kg (computed beforehand by another program from the same set).
func TestSimpleStillWastesTetrahydrofuran(t *testing.T) {
	m := mixture(t, "tetrahydrofuran")
	eq := boiler(t, m, atmospherePa)
	o, err := steps.RunForerun(eq, litres(m, 18, 500e-6), 50e-6, still(0), drawingRules)
	if err != nil {
		t.Fatal(err)
	}
	lost := o.Losses[0].SolventKg / o.In.SolventKg
	if math.Abs(lost-0.75) > 0.05 || len(o.Warnings) == 0 {
		t.Errorf("%.0f %% of the solvent is drawn off; warnings %q", 100*lost, o.Warnings)
	}
	withColumn, err := steps.RunForerun(eq, litres(m, 18, 500e-6), 50e-6, still(10), drawingRules)
	if err != nil {
		t.Fatal(err)
	}
	if l := withColumn.Losses[0].SolventKg / withColumn.In.SolventKg; l > 0.1*lost {
		t.Errorf("ten stages still lose %.1f %%", 100*l)
	}
}

func TestForerunNeverBoilsDry(t *testing.T) {
	m := mixture(t, "tetrahydrofuran")
	eq := boiler(t, m, atmospherePa)
	o, err := steps.RunForerun(eq, litres(m, 18, 5000e-6), 1e-9, still(0), drawingRules)
	if err != nil {
		t.Fatal(err)
	}
	if o.Why != steps.AtHeel || math.Abs(o.Out.MassKg()/o.In.MassKg()-0.1) > 0.01 {
		t.Errorf("stopped for %s with %.3g %% left", o.Why, 100*o.Out.MassKg()/o.In.MassKg())
	}
	thin := drawingRules
	thin.HeelShare = 0.05
	if _, err := steps.RunForerun(eq, litres(m, 18, 5000e-6), 1e-4, still(0), thin); !errors.Is(err, steps.ErrNoForerun) {
		t.Errorf("a heel of 5 %%: %v", err)
	}
}
