package steps_test

import (
	"math"
	"testing"

	"parch/internal/steps"
	"parch/internal/thermo"
)

// immiscible is a made-up mixture whose liquids hardly dissolve in each other.
func immiscible() *thermo.Mixture {
	m := ideal(1.2)
	m.NRTL = thermo.BinaryNRTL(6, 0, 6, 0, 0.2)
	m.Water.DensityKgPerM3 = constant(1000)
	m.Water.MeltingK, m.Solvent.MeltingK = 200, 200
	return m
}

// ideally is a trap without hold-up, losses and practical limits.
func ideally() (steps.TrapRig, steps.TrapRules) {
	r := rig("light")
	r.FillVolumeM3 = 1e-12
	return r, steps.TrapRules{Efficiency: 1, CoolingRiseK: 10, CoolingFlowM3S: 1e-5}
}

func immiscibleTrap(t *testing.T) *steps.TrapEquilibrium {
	t.Helper()
	eq, err := steps.NewTrapEquilibrium(immiscible(), 293.15, atmospherePa)
	if err != nil {
		t.Fatal(err)
	}
	return eq
}

func boiledMol(t *testing.T, eq *steps.TrapEquilibrium, feed steps.Lot, goal float64, meanWater float64) float64 {
	t.Helper()
	r, rules := ideally()
	o, err := steps.RunTrap(eq, feed, goal, r, rules)
	if err != nil {
		t.Fatal(err)
	}
	m := eq.Mixture
	kgPerMol := meanWater*m.Water.MolarMassKgPerMol + (1-meanWater)*m.Solvent.MolarMassKgPerMol
	return o.Figure("vapour boiled up, each charge") / kgPerMol
}

// Two immiscible liquids boil at constant vapour: the water taken per mole of
// vapour is that of the azeotrope, whatever is left. Needs no data.
func TestImmisciblePotGivesConstantRate(t *testing.T) {
	eq := immiscibleTrap(t)
	m := eq.Mixture
	y := eq.Azeotrope.YWater
	for _, c := range []struct{ from, to float64 }{{0.4, 0.2}, {0.2, 0.1}, {0.1, 0.02}} {
		feed := molar(m, c.from)
		mol := boiledMol(t, eq, feed, m.MassFraction(c.to), y)
		x := eq.Floor.Layers.XAqueous
		taken := 1e3 * (c.from - c.to) / (1 - c.to/x) // water that leaves as aqueous layer, mol
		rate := (y - eq.Floor.Layers.XOrganic) / (x - eq.Floor.Layers.XOrganic) * x
		near(t, "vapour", mol, taken/rate, 0.001)
	}
}

// A dilute pot with constant K falls exponentially towards the floor:
//
//	x = x_f + (x_0 - x_f) exp(-K n/N)
//
// Needs no data.
func TestDilutePotFallsExponentially(t *testing.T) {
	eq := immiscibleTrap(t)
	m := eq.Mixture
	floor := eq.Floor.XPot
	for _, c := range []struct{ from, to float64 }{{8 * floor, 2 * floor}, {4 * floor, 1.2 * floor}} {
		v, err := m.Bubble(floor, atmospherePa)
		if err != nil {
			t.Fatal(err)
		}
		k := v.YWater / floor
		want := 1e3 / k * math.Log((c.from-floor)/(c.to-floor))
		mol := boiledMol(t, eq, molar(m, c.from), m.MassFraction(c.to), k*floor)
		near(t, "vapour", mol, want, 0.001)
	}
}

// A receiver is full when its volume of condensate has gone over, however the vapour
// changes on the way. Volumes are those of the pure liquids at its temperature, added up.
func TestAFilledReceiverHoldsItsVolume(t *testing.T) {
	for _, c := range []struct {
		solvent string
		water   float64
	}{{"toluene", 500e-6}, {"toluene", 3000e-6}, {"ethyl-acetate", 20000e-6}, {"cyclohexane", 60e-6}} {
		eq := equilibrium(t, c.solvent, 20)
		r, rules := ideally()
		r.FillVolumeM3 = 60e-6
		feed := litres(eq.Mixture, 3, c.water)
		o, err := steps.RunTrap(eq, feed, 0.999*c.water, r, rules) // dry enough when the receiver is full
		if err != nil {
			t.Fatal(err)
		}
		m := eq.Mixture
		held := o.Balance.WaterRemovedKg/m.Water.MolarMassKgPerMol*m.MolarVolume(1, eq.ReceiverK) +
			o.Balance.SolventRemovedKg/m.Solvent.MolarMassKgPerMol*m.MolarVolume(0, eq.ReceiverK)
		near(t, c.solvent+": receiver", held, r.FillVolumeM3, 1e-9)
	}
}
