package steps_test

import (
	"testing"

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

// withColumn is the usual plan: a few stages between pot and receiver, so that
// the lowest-boiling mixture reaches it.
func withColumn(feed steps.Lot, share float64, stages int) steps.CarrierPlan {
	p := carrierPlan(feed, share)
	p.Stages, p.RefluxRatio = stages, 3
	return p
}
