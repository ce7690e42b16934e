package routes_test

import (
	"errors"
	"math"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

func asked(k steps.Kind, carrier string) routes.Asked {
	nan := math.NaN()
	return routes.Asked{Stage: routes.Stage{Kind: k, Carrier: carrier}, Goal: nan, DoseKgPerM3: nan, TimeS: nan}
}

// A trap by itself goes to 1.05 of its floor, or to the 20 mg/kg of practice; its band
// is that of the published solubility, which the floor goes with.
func TestATrapByItself(t *testing.T) {
	for _, solvent := range []string{"toluene", "cyclohexane", "dichloromethane", "ethyl-acetate"} {
		k := caseOf(t, solvent, "saturated", "10 mg/kg", "")
		s, err := k.Single(asked(steps.Trap, ""))
		if err != nil {
			t.Fatal(err)
		}
		ends := func(factor float64) float64 { return math.Max(20e-6, 1.05*factor*k.Trap.Floor.Water) }
		same(t, solvent+": outlet", s.Out.Water(), ends(1))
		if band := k.Solvent.Water.SolubilityBand; band > 1 {
			same(t, solvent+": low", s.Low, ends(1/band))
			same(t, solvent+": high", s.High, ends(band))
		} else if !math.IsNaN(s.Low) || !math.IsNaN(s.High) {
			t.Errorf("%s: a band from %g to %g that nobody knows", solvent, s.Low, s.High)
		}
	}
}

func same(t *testing.T, what string, got, want float64) {
	t.Helper()
	if !(math.Abs(got/want-1) <= 1e-6) {
		t.Errorf("%s: %.8g, want %.8g", what, got, want)
	}
}

// The dose of carrier that is chosen, given as such, comes to the same; twice the
// band on the organic layer's water holds the outlet, and the water balance closes.
func TestACarrierByItself(t *testing.T) {
	k := caseOf(t, "dimethylformamide", "2 %", "500 mg/kg", "")
	a := asked(steps.Trap, "toluene")
	a.Stages = 6
	chosen, err := k.Single(a)
	if err != nil {
		t.Fatal(err)
	}
	b := chosen.Balance
	same(t, "water balance", b.WaterOutKg+b.WaterRemovedKg, b.WaterInKg)
	if !(chosen.Low <= chosen.Out.Water() && chosen.Out.Water() <= chosen.High) {
		t.Errorf("%g outside %g to %g", chosen.Out.Water(), chosen.Low, chosen.High)
	}
	a.DoseKgPerM3 = chosen.CarrierKg / steps.LotVolume(k.Mixture, k.Feed, k.Job.Site.RoomK)
	given, err := k.Single(a)
	if err != nil {
		t.Fatal(err)
	}
	same(t, "outlet", given.Out.Water(), chosen.Out.Water())
	same(t, "hours", given.HoursTotal, chosen.HoursTotal)
}

// The shortest column that spares the lot is one over which the forerun runs; over
// the next shorter one it would waste it.
func TestTheSparingColumn(t *testing.T) {
	k := caseOf(t, "tetrahydrofuran", "500 mg/kg", "50 mg/kg", ", peroxide: {reading: 0 mg/L, date: 2026-12-01}")
	stages, share, ok := k.SparingColumn(50e-6)
	if !ok {
		t.Fatal("no column")
	}
	a := asked(steps.Forerun, "")
	a.Goal = 50e-6
	for _, n := range k.ColumnStages() {
		a.Stages = n
		s, err := k.Single(a)
		switch {
		case n < stages && !errors.Is(err, routes.ErrWasteful):
			t.Errorf("%d stages: %v", n, err)
		case n == stages && err == nil:
			same(t, "share drawn off", s.Balance.SolventRemovedKg/s.In.SolventKg, share)
		case n == stages:
			t.Error(err)
		}
	}
}
