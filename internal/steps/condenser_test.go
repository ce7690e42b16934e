package steps_test

import (
	"errors"
	"strings"
	"testing"

	"parch/internal/steps"
)

// By hand: a ball of 1 L has 0.0484 m2; 86 K above the room it loses 21 W at 5 W/(m2 K)
// (an assumption). The 10 kW of a condenser are an assumption too.
func TestHeaterFitsTheCharge(t *testing.T) {
	toluene, furan := equilibrium(t, "toluene", 20), boiler(t, mixture(t, "tetrahydrofuran"), atmospherePa)
	trap := func(litre, watt float64) error {
		r := rig("light")
		r.HeaterW = watt
		_, err := steps.RunTrap(toluene, litres(toluene.Mixture, litre, 300e-6), 100e-6, r, rules)
		return err
	}
	forerun := func(litre, watt float64) error {
		r := still(0)
		r.HeaterW = watt
		_, err := steps.RunForerun(furan, litres(furan.Mixture, litre, 500e-6), 400e-6, r, drawingRules)
		return err
	}
	for _, c := range []struct {
		name string
		err  error
		is   error
		want string
	}{
		{"20 W under 1 L of toluene", trap(1, 20), steps.ErrHeater, "20 W do not keep 1 L at the boil: 86 K above the room it loses 20.8 W at least"},
		{"22 W under it", trap(1, 22), nil, ""},
		{"10 W under 1 L of tetrahydrofuran", forerun(1, 10), steps.ErrHeater, "46 K above the room it loses 11.1 W at least"},
		{"100 kW under 1 L of toluene", trap(1, 1e5), steps.ErrBoilUp, "50 kW of vapour come off 1 L, and the largest glass condensers take up about 10 kW"},
		{"100 kW under tetrahydrofuran", forerun(18, 1e5), steps.ErrBoilUp, "10 kW"},
		{"19 kW under 50 L", forerun(50, 19e3), nil, ""},
	} {
		switch {
		case c.is == nil && c.err != nil:
			t.Errorf("%s: %v", c.name, c.err)
		case c.is != nil && (!errors.Is(c.err, c.is) || !strings.Contains(c.err.Error(), c.want)):
			t.Errorf("%s: %v", c.name, c.err)
		}
	}
}

// Dry toluene boils at 30.4 °C at 5 kPa and its azeotrope with water at 19.1 °C, where
// both layers stand below the boiling liquid (vapour pressures: 5.0 kPa is 2.8 kPa of
// toluene and 2.2 kPa of water at 19.1 °C, handbooks, from memory). What is said to boil
// is the wet lot, and no receiver above the azeotrope takes its vapour.
func TestWetLotBoilsInTheRoom(t *testing.T) {
	m := mixture(t, "toluene")
	eq, err := steps.NewTrapEquilibrium(m, 283.15, 5e3)
	if err != nil {
		t.Fatal(err)
	}
	_, err = steps.RunTrap(eq, litres(m, 1, 5000e-6), 100e-6, rig("light"), rules)
	if want := "toluene with its water boils at 19.1 °C at 5 kPa, not above the room's 20.0 °C, which takes more than 5.3 kPa"; !errors.Is(err, steps.ErrNoTrap) || !strings.Contains(err.Error(), want) {
		t.Error(err)
	}
	if _, err := steps.NewTrapEquilibrium(m, 308.15, 5e3); err == nil || !strings.Contains(err.Error(), "not below 19.1 °C, where wet toluene boils at 5 kPa") {
		t.Error(err)
	}
}
