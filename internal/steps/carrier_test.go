package steps_test

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"parch/internal/steps"
)

func TestCarrierRefusals(t *testing.T) {
	m, organic, doubt := three(t, "acetone", "dichloromethane")
	if _, err := steps.NewCarrierEquilibrium(m, organic, doubt, 293.15, atmospherePa); !errors.Is(err, steps.ErrNoCarrier) || !strings.Contains(err.Error(), "does not leave") {
		t.Errorf("dichloromethane from acetone: %v", err)
	}
	m, organic, doubt = three(t, "ethanol", "benzene")
	if _, err := steps.NewCarrierEquilibrium(m, organic, doubt, 277.15, atmospherePa); err == nil || !strings.Contains(err.Error(), "freezes") {
		t.Errorf("a receiver of benzene at 4 °C: %v", err)
	}
	m, organic, doubt = three(t, "methanol", "toluene")
	if _, err := steps.NewCarrierEquilibrium(m, organic, doubt, 283.15, atmospherePa); err == nil || !strings.Contains(err.Error(), "mix") {
		t.Errorf("the false gap of methanol and toluene at 10 °C: %v", err)
	}
	m, organic, doubt = three(t, "ethanol", "cyclohexane")
	if _, err := steps.NewCarrierEquilibrium(m, organic, doubt, 340, atmospherePa); err == nil || !strings.Contains(err.Error(), "not below") {
		t.Errorf("a receiver at 67 °C: %v", err)
	}
	eq := carrierEquilibrium(t, "ethanol", "cyclohexane", 20)
	feed := carrierLot(eq, 10, 0.05)
	if _, err := steps.RunCarrier(eq, feed, withColumn(feed, 0.3, 5), rig("heavy"), rules); err == nil || !strings.Contains(err.Error(), "light return") {
		t.Errorf("a heavy return for cyclohexane: %v", err)
	}
	if _, err := steps.RunCarrier(eq, feed, carrierPlan(feed, 0.3), rig("either"), rules); err == nil || !strings.Contains(err.Error(), "one liquid") {
		t.Errorf("no column: %v", err)
	}
	small := withColumn(feed, 0.001, 5)
	small.PreFilled = true
	if _, err := steps.RunCarrier(eq, feed, small, rig("either"), rules); err == nil || !strings.Contains(err.Error(), "receiver takes") {
		t.Errorf("a dose smaller than the receiver: %v", err)
	}
	dry := withColumn(feed, 0.3, 5)
	dry.HeelShare = 0
	if _, err := steps.RunCarrier(eq, feed, dry, rig("either"), rules); err == nil || !strings.Contains(err.Error(), "heel") {
		t.Errorf("no heel: %v", err)
	}
}

// More water in the organic layer leaves a wetter pot, and less time a wetter one.
func TestCarrierBandAndTime(t *testing.T) {
	eq := carrierEquilibrium(t, "2-propanol", "diisopropyl-ether", 20)
	feed := carrierLot(eq, 10, 0.05)
	stops := map[float64]float64{}
	for _, factor := range []float64{1, 2} {
		plan := withColumn(feed, 0.3, 3)
		plan.Goal, plan.OrganicWater = 100e-6, factor
		o, err := steps.RunCarrier(eq, feed, plan, rig("either"), rules)
		if err != nil {
			t.Fatal(err)
		}
		stops[factor] = o.Figure("water in the pot when the trap stops")
	}
	if !(stops[2] > 1.2*stops[1]) {
		t.Errorf("the trap stops at %.0f mg/kg, with twice the water in the organic layer at %.0f", stops[1], stops[2])
	}
	plan := withColumn(feed, 0.3, 3)
	plan.LongestS = 1800
	o, err := steps.RunCarrier(eq, feed, plan, rig("either"), rules)
	if err != nil {
		t.Fatal(err)
	}
	if o.Why != steps.AtTime || o.Figure("water in the pot when the trap stops") < stops[1] {
		t.Errorf("half an hour: %s, %.0f mg/kg", o.Why, o.Figure("water in the pot when the trap stops"))
	}
}

// The dose that is chosen reaches the goal with less lost than the doses beside it.
func TestChooseCarrierDose(t *testing.T) {
	eq := carrierEquilibrium(t, "n-n-dimethylformamide", "toluene", 20)
	feed := carrierLot(eq, 10, 0.02)
	plan := withColumn(feed, 0, 5)
	best, err := steps.ChooseCarrierDose(eq, feed, plan, func(float64) steps.TrapRig { return rig("either") }, rules)
	if err != nil {
		t.Fatal(err)
	}
	if best.Out.Water() > plan.Goal || best.Out.Carrier() > plan.CarrierLimit*1.001 {
		t.Errorf("%.0f mg/kg of water and %.0f of carrier are left", best.Out.Water()*1e6, best.Out.Carrier()*1e6)
	}
	for _, share := range steps.CarrierDoses {
		plan.DoseKg = share * feed.SolventKg
		o, err := steps.RunCarrier(eq, feed, plan, rig("either"), rules)
		if err == nil && o.Out.Water() <= plan.Goal && o.Balance.SolventRemovedKg+o.CarrierLostKg < best.Balance.SolventRemovedKg+best.CarrierLostKg-1e-9 {
			t.Errorf("a dose of %.2g kg loses less than %.2g kg", plan.DoseKg, best.CarrierKg)
		}
	}
}

func BenchmarkCarrier(b *testing.B) {
	for _, c := range []struct {
		solvent, carrier string
		stages           int
	}{{"n-n-dimethylformamide", "toluene", 3}, {"ethanol", "cyclohexane", 3}, {"1-butanol", "toluene", 0}} {
		b.Run(fmt.Sprintf("%s with %s, %d stages", c.solvent, c.carrier, c.stages), func(b *testing.B) {
			eq := carrierEquilibrium(b, c.solvent, c.carrier, 20)
			feed := carrierLot(eq, 10, 0.05)
			for b.Loop() {
				if _, err := steps.RunCarrier(eq, feed, withColumn(feed, 0.3, c.stages), rig("either"), rules); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
