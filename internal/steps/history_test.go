package steps_test

import (
	"errors"
	"strings"
	"testing"

	"parch/internal/history"
)

const roomWaterPa = 1169 // 20 °C, 50 % (Magnus equation)

func baked(ovenC float64) history.Activation {
	return history.Activation{OvenK: ovenC + 273.15, RoomK: 293.15, RoomWaterPa: roomWaterPa}
}

// Residual loadings after a 300 °C furnace were fitted to published dryings, and
// the pick-up in handling follows from them. What it gives for cooler ovens is
// printed beside values from memory, not asserted.
func TestHistoriesFollowFromTheOven(t *testing.T) {
	for _, c := range []struct {
		ovenC, gramsPer100 float64
		closedHot, memory  bool
	}{{300, 2.0, false, false}, {300, 1.0, true, false}, {250, 2.5, false, true}, {200, 3.5, false, true}, {150, 6, false, true}} {
		a := baked(c.ovenC)
		a.ClosedHot = c.closedHot
		r, err := history.ResidualLoading(sieve3A(t, 0).Loading, a, history.DefaultPickup)
		if err != nil {
			t.Fatal(err)
		}
		if c.memory {
			t.Logf("%g °C: %.2g g/100 g, from memory %g: ratio %.2f", c.ovenC, 100*r.KgPerKg, c.gramsPer100, 100*r.KgPerKg/c.gramsPer100)
		} else {
			near(t, "residual loading", 100*r.KgPerKg, c.gramsPer100, 0.03)
		}
		if !(r.Low < r.KgPerKg && r.KgPerKg < r.High) || !strings.Contains(r.Notes[0], "assumed") {
			t.Errorf("%g °C: band %g to %g, %q", c.ovenC, r.Low, r.High, r.Notes)
		}
	}
}

// Loadings of 3A in ovens purged with air of a stated dew point, as tabulated with
// the isotherm (Henry extrapolation below 0.1 bar): the oven's part alone.
func TestPurgedOvens(t *testing.T) {
	for _, c := range []struct{ ovenC, waterPa, gramsPer100 float64 }{
		{200, 611.2, 1.02}, {200, 1228, 1.54}, {250, 12.84, 0.00963}, {250, 1228, 0.592}, {300, 611.2, 0.120}, {300, 1228, 0.223},
	} {
		a := baked(c.ovenC)
		a.PurgePa = c.waterPa
		r, err := history.ResidualLoading(sieve3A(t, 0).Loading, a, history.DefaultPickup)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "oven", 100*r.OvenKgPerKg, c.gramsPer100, 0.02)
	}
}

func TestHistoryMovesTheRightWay(t *testing.T) {
	q := func(change func(*history.Activation)) float64 {
		a := baked(250)
		change(&a)
		r, err := history.ResidualLoading(sieve3A(t, 0).Loading, a, history.DefaultPickup)
		if err != nil {
			t.Fatal(err)
		}
		return r.KgPerKg
	}
	fresh := q(func(*history.Activation) {})
	vacuum := q(func(a *history.Activation) { a.VacuumPa = 100 })
	month := q(func(a *history.Activation) { a.Days = 30 })
	open := q(func(a *history.Activation) { a.Days, a.LeftOpen = 3, true })
	years := q(func(a *history.Activation) { a.Days, a.LeftOpen = 1000, true })
	if !(vacuum < fresh && fresh < month && month < open && open < years) {
		t.Errorf("vacuum %g, fresh %g, a month %g, three days open %g, years open %g", vacuum, fresh, month, open, years)
	}
	near(t, "left open for years", years, sieve3A(t, 0).Loading(roomWaterPa, 293.15), 1e-6)
	bad := baked(900)
	bad.Days = -1
	if _, err := history.ResidualLoading(sieve3A(t, 0).Loading, bad, history.DefaultPickup); !errors.Is(err, history.ErrNoSense) {
		t.Errorf("a 900 °C oven: %v", err)
	}
	if r, _ := history.ResidualLoading(sieve3A(t, 0).Loading, baked(120), history.DefaultPickup); len(r.Notes) != 2 {
		t.Errorf("a 120 °C oven goes without a remark: %q", r.Notes)
	}
}
