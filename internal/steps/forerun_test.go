package steps_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
	"parch/internal/thermo"
)

func constant(value float64) thermo.Correlation {
	return thermo.Correlation{Equation: thermo.DIPPR100, C: [7]float64{value}, Scale: 1}
}

// ideal is a made-up mixture of constant relative volatility: both vapour
// pressures have the same slope, water's is volatility times the solvent's.
func ideal(volatility float64) *thermo.Mixture {
	liquid := func(key string, lnP, molarMass float64) *thermo.Pure {
		return &thermo.Pure{
			Key: key, MolarMassKgPerMol: molarMass, MeltingK: 200, CriticalK: 600,
			VapourPressurePa:    thermo.Correlation{Equation: thermo.DIPPR101, C: [7]float64{lnP, -4500}, Scale: 1},
			HeatOfVaporizationJ: constant(37000), HeatCapacityJPerMolK: constant(120), DensityKgPerM3: constant(900), ViscosityPaS: constant(1e-3),
		}
	}
	return &thermo.Mixture{Water: liquid("light", 23.5+math.Log(volatility), 0.018), Solvent: liquid("heavy", 23.5, 0.072), NRTL: thermo.BinaryNRTL(0, 0, 0, 0, 0.3)}
}

var drawingRules = steps.ForerunRules{
	HeelShare: 0.1, SetUpS: 1800, SettleColumnS: 1800, AttendedShare: 0.5, ShutDownS: 1800,
	CoolingFlowM3S: 2e-3 / 60, CoolingRiseK: 10,
}

func still(stages int) steps.ForerunRig {
	r := steps.ForerunRig{HeaterW: 1600, HeatShare: 0.5, RoomK: 293.15, Charges: 1, Stages: stages}
	if stages > 0 {
		r.RefluxRatio = 5
	}
	return r
}

func boiler(t testing.TB, m *thermo.Mixture, pressurePa float64) *steps.ForerunEquilibrium {
	t.Helper()
	eq, err := steps.NewForerunEquilibrium(m, pressurePa)
	if err != nil {
		t.Fatal(err)
	}
	return eq
}

// molar is a lot of one kmol with the mole fraction x of water.
func molar(m *thermo.Mixture, x float64) steps.Lot {
	return steps.Lot{WaterKg: 1e3 * x * m.Water.MolarMassKgPerMol, SolventKg: 1e3 * (1 - x) * m.Solvent.MolarMassKgPerMol}
}

// An ideal mixture in a simple still has a closed form (Rayleigh 1902): with the
// relative volatility a of water,
//
//	ln(N0/N) = (ln(x0/x) - a ln((1 - x0)/(1 - x)))/(a - 1)
//
// and n stages at total reflux raise a to a^(n+1) (Fenske, Ind. Eng. Chem. 24
// (1932) 482). Needs no data.
func TestIdealForerun(t *testing.T) {
	for _, c := range []struct {
		volatility, x0, x float64
		stages            int
	}{{2.5, 0.2, 0.02, 0}, {4, 0.01, 1e-4, 0}, {1.3, 0.1, 0.08, 0}, {1.5, 0.1, 0.001, 3}, {1.1, 0.3, 0.1, 10}, {1.2, 0.02, 1e-4, 20}} {
		m := ideal(c.volatility)
		a := math.Pow(c.volatility, float64(c.stages+1))
		want := math.Exp(-(math.Log(c.x0/c.x) - a*math.Log((1-c.x0)/(1-c.x))) / (a - 1))
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), molar(m, c.x0), m.MassFraction(c.x), still(c.stages), drawingRules)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		got := (o.Out.SolventKg/m.Solvent.MolarMassKgPerMol + o.Out.WaterKg/m.Water.MolarMassKgPerMol) / 1e3
		if o.Why != steps.AtTarget {
			t.Errorf("%+v: stopped for %s", c, o.Why)
		}
		near(t, "moles left", got, want, 0.001)
	}
}

// The first drop off a column of n stages at total reflux, with a constant
// volatility a (Fenske, Ind. Eng. Chem. 24 (1932) 482). Needs no data.
//
//	y/(1 - y) = a^(n+1) x/(1 - x)
func TestFirstDropFollowsFenske(t *testing.T) {
	for _, c := range []struct {
		volatility, x float64
		stages        int
	}{{2.5, 0.2, 0}, {1.5, 0.1, 1}, {1.5, 0.01, 4}, {1.1, 0.3, 10}, {1.2, 1e-4, 20}, {3, 1e-6, 7}} {
		m := ideal(c.volatility)
		want := math.Pow(c.volatility, float64(c.stages+1)) * c.x / (1 - c.x)
		rules := drawingRules
		rules.HeelShare = 1 - 1e-4*c.x*(1+want)/want // of the water, a ten-thousandth is drawn
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), molar(m, c.x), 1e-9, still(c.stages), rules)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		drop := m.MoleFraction(o.Figure("water in what is drawn off") / 100)
		near(t, "ratio in the first drop", drop/(1-drop), want, 0.001)
	}
}

// The distillate of an ideal mixture whose water is the heavy one, by the same form.
// The wet heel is lighter by the mole than the charge, so a tenth of the mass is left
// before a tenth of the moles:
//
//	m/m0 = N/N0 (x M_w + (1 - x) M_s)/(x0 M_w + (1 - x0) M_s)
func TestIdealProductOverhead(t *testing.T) {
	for _, c := range []struct {
		volatility, x0, goal float64
	}{{1 / 3.0, 0.02, 0}, {1 / 3.0, 0.02, 0.9}, {1 / 3.0, 0.3, 0}, {1 / 8.0, 0.05, 0}, {1 / 1.5, 0.6, 0}} {
		m := ideal(c.volatility)
		molar0 := c.x0*m.Water.MolarMassKgPerMol + (1-c.x0)*m.Solvent.MolarMassKgPerMol
		left := func(x float64) float64 {
			return math.Exp((math.Log(x/c.x0) + c.volatility*math.Log((1-c.x0)/(1-x))) / (c.volatility - 1))
		}
		ofMass := func(x float64) float64 {
			return left(x) * (x*m.Water.MolarMassKgPerMol + (1-x)*m.Solvent.MolarMassKgPerMol) / molar0
		}
		lo, hi := c.x0, 1-1e-12
		for range 200 {
			if x := (lo + hi) / 2; ofMass(x) > steps.LeastHeel {
				lo = x
			} else {
				hi = x
			}
		}
		water := (c.x0 - left(lo)*lo) / (1 - left(lo))
		feed := molar(m, c.x0)
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), feed, c.goal, still(0), drawingRules)
		if err != nil {
			t.Fatal(err)
		}
		if o.Why != steps.AtHeel || !strings.Contains(o.WhyText, "10 % of the charge stays in the pot") {
			t.Errorf("%+v: stopped for %s: %s", c, o.Why, o.WhyText)
		}
		near(t, "water of the distillate", m.MoleFraction(o.Out.Water()), water, 0.001)
		near(t, "product", o.Out.MassKg(), 0.9*feed.MassKg(), 1e-6)
	}
}

// Of an ideal mixture over enough stages the distillate is dry until the pot is
// water: all the solvent comes over, and all the water stays (a limit that needs no
// data). The goal is not what ends it.
func TestOnlyWaterIsLeft(t *testing.T) {
	m := ideal(1 / 8.0)
	feed := molar(m, 0.6) // 27.3 % of its mass; a thousandth of solvent is 0.1 % more
	for _, goal := range []float64{0, 0.01} {
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), feed, goal, still(12), drawingRules)
		if err != nil {
			t.Fatal(err)
		}
		if o.Why != steps.AtWater || !strings.Contains(o.WhyText, "27.4 % of the charge") {
			t.Errorf("to %g: stopped for %s: %s", goal, o.Why, o.WhyText)
		}
		near(t, "product", o.Out.SolventKg, feed.SolventKg, 0.005)
		if o.Out.Water() > 1e-6 || o.Losses[0].SolventKg > 0.005*feed.SolventKg {
			t.Errorf("to %g: the product holds %g water, the heel %g kg of solvent", goal, o.Out.Water(), o.Losses[0].SolventKg)
		}
	}
}

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

// Water, solvent and heat close, whatever the lot and the column.
func TestForerunBalances(t *testing.T) {
	var eqs []*steps.ForerunEquilibrium
	for _, s := range []string{"toluene", "tetrahydrofuran", "acetonitrile", "ethyl-acetate"} {
		eqs = append(eqs, boiler(t, mixture(t, s), atmospherePa), boiler(t, mixture(t, s), 50e3))
	}
	for _, a := range []float64{0.2, 0.8, 1.3, 5} {
		eqs = append(eqs, boiler(t, ideal(a), atmospherePa))
	}
	rapid.Check(t, func(rt *rapid.T) {
		eq := rapid.SampledFrom(eqs).Draw(rt, "mixture")
		water := math.Exp(rapid.Float64Range(math.Log(1e-6), math.Log(0.5)).Draw(rt, "ln w"))
		kg := rapid.Float64Range(0.5, 60).Draw(rt, "kg")
		lot := steps.Lot{SolventKg: kg * (1 - water), WaterKg: kg * water, TempK: 293.15}
		r := still(rapid.IntRange(0, 20).Draw(rt, "stages"))
		r.Charges = rapid.IntRange(1, 4).Draw(rt, "charges")
		rules := drawingRules
		rules.VapourLossPerDay, rules.LowestOutlet = 0.005, 20e-6
		o, err := steps.RunForerun(eq, lot, water*rapid.Float64Range(0.001, 1.5).Draw(rt, "goal"), r, rules)
		if errors.Is(err, steps.ErrNoForerun) {
			return
		}
		if err != nil {
			rt.Fatal(err)
		}
		b := o.Balance
		closes(rt, "water", b.WaterInKg, b.WaterOutKg+b.WaterRemovedKg)
		closes(rt, "solvent", b.SolventInKg, b.SolventOutKg+b.SolventRemovedKg)
		closes(rt, "heat", b.HeatInJ, b.HeatUsedJ)
		timeGoesOn(rt, o)
		if left := o.Course[len(o.Course)-1].LostShare; !(left >= 0 && left <= 1) {
			rt.Fatalf("lost share %g", left)
		}
		if !(o.Out.SolventKg > 0 && o.Out.WaterKg >= 0 && o.HoursTotal > 0) {
			rt.Fatalf("%+v", o.Out)
		}
	})
}

// The heat of drawing off, by equal small portions of vapour (explicit Euler) and the
// balance as it stands: vapour made, and a pot that warms as it loses water. Another
// method, same model.
func TestForerunHeatAgainstFineSteps(t *testing.T) {
	for _, c := range []struct {
		solvent         string
		kPa             float64
		water, goal     float64
		stages          int
		leastWarmingPct float64 // of the heat, so that the case is one of a pot that warms
	}{
		{"n-n-dimethylformamide", 10, 0.05, 500e-6, 0, 3},
		{"n-n-dimethylformamide", 10, 0.05, 500e-6, 3, 3},
		{"tetrahydrofuran", 101.325, 0.02, 500e-6, 12, 0.1},
		{"methanol", 101.325, 0.1, 0, 0, 0.5},
	} {
		m := mixture(t, c.solvent)
		eq := boiler(t, m, c.kPa*1e3)
		feed, r := litres(m, 10, c.water), still(c.stages)
		o, err := steps.RunForerun(eq, feed, c.goal, r, drawingRules)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		water, solvent := feed.WaterKg/m.Water.MolarMassKgPerMol, feed.SolventKg/m.Solvent.MolarMassKgPerMol
		target := (o.In.MassKg() - o.Figure("drawn off, as a share of the charge")/100*o.In.MassKg())
		const portions = 20000
		dn := (water + solvent) / portions
		var latentJ, warmJ, potK float64
		for water*m.Water.MolarMassKgPerMol+solvent*m.Solvent.MolarMassKgPerMol > target {
			x := water / (water + solvent)
			v, err := m.BubbleFrom(x, eq.PressurePa, 350)
			if err != nil {
				t.Fatal(err)
			}
			if potK > 0 {
				warmJ += (water*m.Water.HeatCapacityJPerMolK.At(v.TempK) + solvent*m.Solvent.HeatCapacityJPerMolK.At(v.TempK)) * (v.TempK - potK)
			}
			potK = v.TempK
			latentJ += dn * (1 + r.RefluxRatio) * (v.YWater*m.Water.HeatOfVaporizationJ.At(v.TempK) + (1-v.YWater)*m.Solvent.HeatOfVaporizationJ.At(v.TempK))
			head := v
			for range c.stages {
				if head, err = m.BubbleFrom(head.YWater, eq.PressurePa, head.TempK); err != nil {
					t.Fatal(err)
				}
			}
			water, solvent = water-dn*head.YWater, solvent-dn*(1-head.YWater)
		}
		if share := 100 * warmJ / (latentJ + warmJ); share < c.leastWarmingPct {
			t.Errorf("%+v: warming is %.2g %% of the heat", c, share)
		}
		settleS := 0.0
		if c.stages > 0 {
			settleS = drawingRules.SettleColumnS
		}
		near(t, c.solvent+": drawing off", o.Figure("drawing off, each charge"), ((latentJ+warmJ)/(r.HeaterW*r.HeatShare)+settleS)/3600, 0.005)
	}
}

// A thousand times wider steps change the result by less than 0.5 %.
func TestForerunStepControl(t *testing.T) {
	for _, c := range []struct {
		solvent string
		water   float64
		stages  int
	}{{"tetrahydrofuran", 500e-6, 0}, {"tetrahydrofuran", 0.03, 12}, {"acetonitrile", 0.05, 5}, {"ethyl-acetate", 0.02, 3}} {
		m := mixture(t, c.solvent)
		eq := boiler(t, m, atmospherePa)
		wide, fine := drawingRules, drawingRules
		wide.StepError, fine.StepError = 1e-5, 1e-10
		a, errA := steps.RunForerun(eq, litres(m, 10, c.water), 60e-6, still(c.stages), wide)
		b, errB := steps.RunForerun(eq, litres(m, 10, c.water), 60e-6, still(c.stages), fine)
		if errA != nil || errB != nil {
			t.Errorf("%+v: %v, %v", c, errA, errB)
			continue
		}
		near(t, c.solvent+": product", a.Out.SolventKg, b.Out.SolventKg, 0.005)
		near(t, c.solvent+": drawn off", a.Losses[0].SolventKg, b.Losses[0].SolventKg, 0.005)
		near(t, c.solvent+": water", a.Out.WaterKg, b.Out.WaterKg, 0.005)
		near(t, c.solvent+": hours", a.HoursTotal, b.HoursTotal, 0.005)
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

func TestWatch(t *testing.T) {
	eq := equilibrium(t, "toluene", 20)
	o, err := steps.RunTrap(eq, litres(eq.Mixture, 18, 480e-6), 20e-6, rig("light"), rules)
	if err != nil {
		t.Fatal(err)
	}
	rows := o.Watch(5)
	if len(rows) != 5 || rows[0] != o.Course[0] || rows[4] != o.Course[len(o.Course)-1] {
		t.Fatalf("%+v", rows)
	}
	for i, p := range rows {
		if i > 0 && !(p.Hours > rows[i-1].Hours && p.Water < rows[i-1].Water && p.AqueousM3 >= rows[i-1].AqueousM3) {
			t.Errorf("row %d: %+v after %+v", i, p, rows[i-1])
		}
		// toluene boils at 110.6 °C, its azeotrope at 84.1 °C
		if p.PotK < 357 || p.PotK > 384.5 {
			t.Errorf("row %d: the pot boils at %.1f °C", i, p.PotK-273.15)
		}
	}
}

// 0.1 mL (ASTM D95) is 115 mg/kg in 1 L of toluene and 6 in 20 L (arithmetic).
func TestProvedByReading(t *testing.T) {
	near(t, "1 L", steps.ProvedByReading(0.867)*1e6, 115, 0.01)
	near(t, "20 L", steps.ProvedByReading(17.34)*1e6, 5.8, 0.02)
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
