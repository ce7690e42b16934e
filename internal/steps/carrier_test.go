package steps_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
	"parch/internal/thermo"
)

// three is water, a solvent and a carrier of the catalog, from a set fitted to
// all three where there is one.
func three(t testing.TB, solvent, carrier string) (*thermo.Ternary, *thermo.OrganicLayer, steps.CarrierDoubt) {
	t.Helper()
	c := shelf(t)
	key := [2]string{solvent, carrier}
	s, k := c.Solvents[solvent], c.Solvents[carrier]
	m := &thermo.Ternary{Pure: [3]*thermo.Pure{&c.Solvents["water"].Pure, &s.Pure, &k.Pure}}
	m.Limits = append(append(m.Limits, s.Water.Limits...), k.Water.Limits...)
	doubt := steps.CarrierDoubt{}
	if pair := c.Pairs[key]; pair != nil {
		m.NRTL = thermo.JoinPairs(s.Water.NRTL, k.Water.NRTL, pair.NRTL)
		m.SpuriousGapBelowK = pair.SpuriousGapBelowK
	}
	if set := c.Ternaries[key]; set != nil {
		m.NRTL, m.Extra = set.NRTL, set.Extra
		doubt.FittedFactor = set.Band
	}
	var organic *thermo.OrganicLayer
	if l := c.Layers[key]; l != nil {
		organic = &l.OrganicLayer
	}
	return m, organic, doubt
}

func carrierEquilibrium(t testing.TB, solvent, carrier string, receiverC float64) *steps.CarrierEquilibrium {
	t.Helper()
	m, organic, doubt := three(t, solvent, carrier)
	eq, err := steps.NewCarrierEquilibrium(m, organic, doubt, receiverC+273.15, atmospherePa)
	if err != nil {
		t.Fatal(err)
	}
	return eq
}

func carrierLot(eq *steps.CarrierEquilibrium, l, water float64) steps.Lot {
	return litres(&thermo.Mixture{Water: eq.Model.Pure[0], Solvent: eq.Model.Pure[1]}, l, water)
}

func carrierPlan(feed steps.Lot, share float64) steps.CarrierPlan {
	return steps.CarrierPlan{DoseKg: share * feed.SolventKg, Goal: 500e-6, CarrierLimit: 2000e-6, HeelShare: 0.1, OrganicWater: 1}
}

func TestCarrierLook(t *testing.T) {
	for _, c := range []struct {
		solvent, carrier string
		water, dose      float64
	}{
		{"ethanol", "cyclohexane", 0.05, 0.3}, {"ethanol", "toluene", 0.05, 0.3}, {"2-propanol", "cyclohexane", 0.05, 0.3}, {"2-propanol", "diisopropyl-ether", 0.05, 0.3},
		{"n-n-dimethylformamide", "toluene", 0.02, 0.1}, {"dimethyl-sulfoxide", "toluene", 0.02, 0.1}, {"pyridine", "toluene", 0.02, 0.2}, {"acetonitrile", "dichloromethane", 0.02, 0.3},
		{"acetonitrile", "benzene", 0.02, 0.3}, {"1-butanol", "toluene", 0.05, 0.2}, {"tert-butanol", "cyclohexane", 0.05, 0.3}, {"tetrahydrofuran", "dichloromethane", 0.02, 0.3},
		{"acetic-acid", "n-butyl-acetate", 0.05, 0.2}, {"1-4-dioxane", "cyclohexane", 0.02, 0.2}, {"n-methyl-2-pyrrolidone", "toluene", 0.02, 0.1}, {"acetone", "dichloromethane", 0.02, 0.3},
		{"2-butanone", "cyclohexane", 0.05, 0.3},
	} {
		m, organic, doubt := three(t, c.solvent, c.carrier)
		eq, err := steps.NewCarrierEquilibrium(m, organic, doubt, 293.15, atmospherePa)
		if err != nil {
			t.Log(c, err)
			continue
		}
		feed := carrierLot(eq, 10, c.water)
		for _, pre := range []bool{true} {
			for _, n := range []int{0, 3, 8} {
				plan := carrierPlan(feed, c.dose)
				plan.PreFilled = pre
				plan.Stages = n
				if n > 0 {
					plan.RefluxRatio = 3
				}
				o, err := steps.RunCarrier(eq, feed, plan, rig("either"), rules)
				if err != nil {
					t.Log(c, n, err)
					continue
				}
				t.Logf("%+v n %v: az %.1f K_c %.3g; %s | out %.0f mg/kg water, %.0f carrier; trap stop %.0f; reflux %.2f h strip %.2f h; lost %.1f %% solvent; points %d; %q", c, n, eq.Azeotrope.TempK-273.15, eq.CarrierVolatility, o.WhyText, o.Out.Water()*1e6, o.Out.Carrier()*1e6,
					o.Figure("water in the pot when the trap stops"), o.Figure("reflux, each charge"), o.Figure("stripping, each charge"), 100*o.Balance.SolventRemovedKg/o.In.SolventKg, len(o.Course), o.Warnings)
			}
		}
	}
	_ = errors.Is
	_ = math.Abs
	_ = rapid.Check
}

func BenchmarkCarrier(b *testing.B) {
	eq := carrierEquilibrium(b, "ethanol", "cyclohexane", 20)
	feed := carrierLot(eq, 10, 0.05)
	for b.Loop() {
		p := carrierPlan(feed, 0.3)
		p.Stages, p.RefluxRatio = 5, 3
		if _, err := steps.RunCarrier(eq, feed, p, rig("either"), rules); err != nil {
			b.Fatal(err)
		}
	}
}
