package steps_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

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
