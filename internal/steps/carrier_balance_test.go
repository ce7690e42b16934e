package steps_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

// Six stages strip water at a steady rate until none is left; the carrier is
// then still to be driven off. Found by a random run of the balances below.
func TestCarrierRunOutlivesItsWater(t *testing.T) {
	eq := carrierEquilibrium(t, "n-n-dimethylformamide", "toluene", 10)
	water := math.Exp(-9.126953125)
	feed := carrierLot(eq, 12.064460898202128, water)
	plan := withColumn(feed, 0.15447425842285156, 6)
	plan.Goal = water * 0.06698720507519904
	r := rig("either")
	r.HeaterW, r.Charges = 624.7940301895142, 2
	o, err := steps.RunCarrier(eq, feed, plan, r, rules)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "water", o.Balance.WaterOutKg+o.Balance.WaterRemovedKg, o.Balance.WaterInKg, 1e-8)
	if last := o.Course[len(o.Course)-1]; last.Water > plan.Goal || last.Carrier > 1.001*plan.CarrierLimit {
		t.Errorf("ended at %.3g water and %.3g carrier; wanted %.3g and %.3g", last.Water, last.Carrier, plan.Goal, plan.CarrierLimit)
	}
}

// The head of the dried pot is richer in carrier than the pot, yet the solvent
// leaves first: no run may end with the carrier alone as its product.
func TestCarrierKeepsItsSolvent(t *testing.T) {
	refused := 0
	for _, solvent := range []string{"1-butanol", "2-propanol"} {
		for _, receiver := range []float64{10, 25} {
			eq := carrierEquilibrium(t, solvent, "toluene", receiver)
			water := math.Exp(-2.5)
			feed := carrierLot(eq, 13.072277426719666, water)
			plan := withColumn(feed, 0.786956688551476, 6)
			plan.PreFilled, plan.Goal = true, water*0.010920191308129679
			r := rig("either")
			r.HeaterW, r.Charges = 1437, 1
			o, err := steps.RunCarrier(eq, feed, plan, r, rules)
			switch {
			case errors.Is(err, steps.ErrNoCarrier):
				if strings.Contains(err.Error(), "before stripping") {
					refused++
				}
			case err != nil:
				t.Error(err)
			case o.Out.SolventKg <= o.Out.CarrierKg:
				t.Errorf("%s at %g °C: %g kg of solvent and %g kg of carrier", solvent, receiver, o.Out.SolventKg, o.Out.CarrierKg)
			}
		}
	}
	if refused == 0 {
		t.Error("no run was refused for its product")
	}
}

// Water, solvent, carrier and heat close, whatever the lot, the dose and the still.
func TestCarrierBalances(t *testing.T) {
	var eqs []*steps.CarrierEquilibrium
	for _, k := range [][2]string{{"ethanol", "cyclohexane"}, {"2-propanol", "toluene"}, {"n-n-dimethylformamide", "toluene"}, {"acetonitrile", "dichloromethane"}, {"1-butanol", "toluene"}} {
		for _, receiver := range []float64{10, 25} {
			eqs = append(eqs, carrierEquilibrium(t, k[0], k[1], receiver))
		}
	}
	ran := 0
	rapid.Check(t, func(rt *rapid.T) {
		eq := rapid.SampledFrom(eqs).Draw(rt, "mixture")
		water := math.Exp(rapid.Float64Range(math.Log(100e-6), math.Log(0.3)).Draw(rt, "ln w"))
		feed := carrierLot(eq, rapid.Float64Range(1, 40).Draw(rt, "litres"), water)
		plan := withColumn(feed, rapid.Float64Range(0.05, 1).Draw(rt, "dose"), rapid.IntRange(0, 6).Draw(rt, "stages"))
		plan.PreFilled = rapid.Bool().Draw(rt, "pre-filled")
		plan.Goal = water * rapid.Float64Range(0.01, 0.9).Draw(rt, "goal")
		r := rig("either")
		r.HeaterW = rapid.Float64Range(300, 4000).Draw(rt, "W")
		r.Charges = rapid.IntRange(1, 3).Draw(rt, "charges")
		o, err := steps.RunCarrier(eq, feed, plan, r, rules)
		switch {
		case errors.Is(err, steps.ErrNoCarrier), errors.Is(err, steps.ErrHeater): // 300 W do not keep 40 L at the boil
			return
		case err != nil:
			rt.Fatal(err)
		}
		ran++
		b := o.Balance
		closes(rt, "water", b.WaterInKg, b.WaterOutKg+b.WaterRemovedKg)
		closes(rt, "solvent", b.SolventInKg, b.SolventOutKg+b.SolventRemovedKg)
		closes(rt, "carrier", b.CarrierAddedKg, b.CarrierOutKg+b.CarrierRemovedKg)
		closes(rt, "heat", b.HeatInJ, b.HeatUsedJ)
		last := o.Course[len(o.Course)-1]
		if !(o.Out.SolventKg > 0 && o.Out.WaterKg > 0 && o.Out.CarrierKg >= 0 && o.HoursTotal > 0 && last.PotK > 300) {
			rt.Fatalf("out %+v after %g h, pot at %g K", o.Out, o.HoursTotal, last.PotK)
		}
		timeGoesOn(rt, o)
		for _, l := range o.Losses {
			if l.SolventKg < -1e-9*feed.SolventKg {
				rt.Fatalf("%s: %g kg", l.Cause, l.SolventKg)
			}
		}
	})
	if ran == 0 {
		t.Error("no run went through")
	}
}

// The course ends when the hours of heating up, reflux and stripping are over, also
// where the trap is done before the shortest reflux.
func TestCarrierCourseKeepsTheClock(t *testing.T) {
	eq := carrierEquilibrium(t, "n-n-dimethylformamide", "toluene", 20)
	feed := carrierLot(eq, 1, 0.02)
	o, err := steps.RunCarrier(eq, feed, withColumn(feed, 0.3, 5), rig("either"), rules)
	if err != nil {
		t.Fatal(err)
	}
	want := o.Figure("heat-up, each charge") + o.Figure("reflux, each charge") + o.Figure("stripping, each charge")
	near(t, "hours at the end of the course", o.Course[len(o.Course)-1].Hours, want, 1e-9)
	if reflux := o.Figure("reflux, each charge"); reflux != rules.ShortestRefluxS/3600 {
		t.Errorf("%g h of reflux: the case is one of the shortest reflux no more", reflux)
	}
}

// A pot that is handed over boiling takes no heat to boil, to the last digit, and one that
// is a kelvin colder does.
func TestStrippingStartsHot(t *testing.T) {
	for _, k := range [][2]string{{"n-n-dimethylformamide", "toluene"}, {"acetonitrile", "dichloromethane"}, {"ethanol", "cyclohexane"}, {"1-butanol", "toluene"}} {
		eq := carrierEquilibrium(t, k[0], k[1], 10)
		for _, water := range []float64{0.01, 0.02, 0.03, 0.05} {
			feed := carrierLot(eq, 12, water)
			plan := withColumn(feed, 0.4, 6)
			plan.Goal = water / 10
			trap, err := steps.RunCarrierTrap(eq, feed, plan, rig("either"), rules)
			if err != nil {
				t.Fatal(k, err)
			}
			heatUp := func(lot steps.Lot) float64 {
				strip, err := steps.StripCarrier(eq, lot, plan, rig("either"), rules)
				if err != nil {
					t.Fatal(k, err)
				}
				return strip.Figure("heat-up, each charge")
			}
			colder := trap.Out
			colder.TempK--
			if hot, cold := heatUp(trap.Out), heatUp(colder); hot != 0 || cold < 1e-3 {
				t.Errorf("%v, %g %% of water: a boiling pot takes %g h to heat up, one that is 1 K colder %g h", k, 100*water, hot, cold)
			}
		}
	}
}
