package steps_test

import (
	"testing"

	"parch/internal/steps"
)

// A lot that still holds some carrier goes through as one liquid: it ends as dry
// as the same lot without, and solvent, carrier and water close.
func TestCarrierAboard(t *testing.T) {
	m := mixture(t, "toluene")
	plain := litres(m, 5, 300e-6)
	mixed := plain
	mixed.SolventKg, mixed.CarrierKg = 0.97*plain.SolventKg, 0.03*plain.SolventKg
	rig := flask()
	rig.RinseM3, rig.RinseWater = 0.2e-3, 1e-4
	for name, run := range map[string]func(steps.Lot) (steps.Outcome, error){
		"soak": func(l steps.Lot) (steps.Outcome, error) {
			return steps.SoakFor(m, l, 15e-6, day(2), sieve3A(t, 0.02), stirred(t, "toluene"))
		},
		"series": func(l steps.Lot) (steps.Outcome, error) {
			return steps.SoakSeries(m, l, steps.EqualCharges(2, 0.3, day(1)), sieve3A(t, 0.02), stirred(t, "toluene"))
		},
		"column": func(l steps.Lot) (steps.Outcome, error) {
			return steps.ColumnFor(m, l, 15e-6, sieve3A(t, 0.02), tube("toluene", 2e-4))
		},
		"salt": func(l steps.Lot) (steps.Outcome, error) {
			return steps.RunSalt(m, l, 50, salt("magnesium-sulfate"), claims, rig)
		},
		"reactive": func(l steps.Lot) (steps.Outcome, error) {
			return steps.RunReactive(m, l, reactive("calcium-hydride"), steps.Measured{}, pot())
		},
	} {
		want, err := run(plain)
		if err != nil {
			t.Fatal(err)
		}
		got, err := run(mixed)
		if err != nil {
			t.Fatal(err)
		}
		b := got.Balance
		near(t, name+": water", got.Out.WaterKg, want.Out.WaterKg, 1e-12)
		near(t, name+": water balance", b.WaterInKg+b.WaterAddedKg, b.WaterOutKg+b.WaterRemovedKg, 1e-10)
		near(t, name+": solvent balance", b.SolventInKg+b.SolventAddedKg, b.SolventOutKg+b.SolventRemovedKg, 1e-10)
		near(t, name+": carrier balance", mixed.CarrierKg, b.CarrierOutKg+b.CarrierRemovedKg, 1e-10)
		near(t, name+": liquid", got.Out.SolventKg+got.Out.CarrierKg, want.Out.SolventKg, 1e-12)
		if got.In != mixed || got.Out.CarrierKg != b.CarrierOutKg || got.CarrierLostKg != b.CarrierRemovedKg {
			t.Errorf("%s: %+v", name, got.Balance)
		}
	}
}
