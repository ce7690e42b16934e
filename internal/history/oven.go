// Package history reads how a sieve was activated and kept, and infers the water that
// it still holds.
package history

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
)

// Activation is what was done to a sieve before it is used.
type Activation struct {
	OvenK       float64
	VacuumPa    float64 // pressure in a vacuum oven; 0: none, an oven in room air
	PurgePa     float64 // water in a dry gas swept through; 0: none is
	ClosedHot   bool    // bottled hot, at once
	Days        float64 // since then
	LeftOpen    bool    // stood open to the room in those days
	RoomK       float64
	RoomWaterPa float64 // partial pressure of water in the room
}

// Pickup is what a sieve takes from the air after the oven. All of it is assumed
// rather than measured, so each has a band, low and high.
type Pickup struct {
	HandlingKgPerKg, HandlingHotKgPerKg [3]float64 // low, usual, high: bottled cool, bottled hot
	ClosedPerDay, OpenPerDay            [3]float64 // share of the way to the room's own loading, per day
}

// DefaultPickup follows from the residual loadings of furnace-activated beads
// fitted to published dryings (2.0 g/100 g, 1 to 2.5, after 300 °C), less the
// 0.2 g/100 g that 3A keeps at 300 °C in room air. The shares per day are
// assumptions: a shut tin takes months, an open tray about a day.
var DefaultPickup = Pickup{
	HandlingKgPerKg:    [3]float64{0.008, 0.018, 0.023},
	HandlingHotKgPerKg: [3]float64{0.004, 0.008, 0.018},
	ClosedPerDay:       [3]float64{0.0002, 0.001, 0.005},
	OpenPerDay:         [3]float64{0.5, 2, 10},
}

// Residual is what a sieve still holds, with its band and what it rests on.
type Residual struct {
	KgPerKg, Low, High        float64
	OvenKgPerKg, AddedKgPerKg float64 // the oven's own equilibrium; handling and standing
	Notes                     []string
}

// ResidualLoading adds up a sieve's history: the equilibrium with what water the
// oven's gas held, what handling put back, and the way towards the room's own
// loading since,
//
//	q = q_room - (q_room - q_oven - q_handling) exp(-k t)
//
// A vacuum oven is taken to hold nothing but water vapour at its pressure.
//
// Loading is the isotherm of the sorbent, kg/kg over a pressure of water (Pa) at tK.
func ResidualLoading(loading func(waterPa, tK float64) float64, a Activation, p Pickup) (Residual, error) {
	if err := a.check(); err != nil {
		return Residual{}, err
	}
	room := loading(a.RoomWaterPa, a.RoomK)
	oven := math.Min(room, loading(a.ovenWaterPa(), a.OvenK))
	handling, perDay := p.HandlingKgPerKg, p.ClosedPerDay
	if a.ClosedHot {
		handling = p.HandlingHotKgPerKg
	}
	if a.LeftOpen {
		perDay = p.OpenPerDay
	}
	after := func(i int) float64 {
		start := math.Min(room, oven+handling[i])
		return room - (room-start)*math.Exp(-perDay[i]*a.Days)
	}
	r := Residual{Low: after(0), KgPerKg: after(1), High: after(2), OvenKgPerKg: oven}
	r.AddedKgPerKg = r.KgPerKg - oven
	r.Notes = append(r.Notes, fmt.Sprintf("the oven leaves %.2g g/100 g (isotherm at %.0f °C, %s Pa of water); handling and standing add %.2g g/100 g, which is assumed: %.2g to %.2g in all",
		100*oven, a.OvenK-273.15, quantity.Significant(a.ovenWaterPa(), 3), 100*r.AddedKgPerKg, 100*r.Low, 100*r.High))
	if a.OvenK < lowestActivationK {
		r.Notes = append(r.Notes, fmt.Sprintf("%.0f °C does not activate a sieve: in room air it can end wetter than it began", a.OvenK-273.15))
	}
	return r, nil
}

// lowestActivationK: an oven at 120 °C makes a sieve wetter, not drier (common
// practice, no source); from 150 °C on it begins to dry one.
const lowestActivationK = 423.15

func (a Activation) ovenWaterPa() float64 {
	switch {
	case a.VacuumPa > 0:
		return a.VacuumPa
	case a.PurgePa > 0:
		return a.PurgePa
	}
	return a.RoomWaterPa
}

// ErrNoSense: no sieve was ever treated so.
var ErrNoSense = errors.New("outside physical sense")

func (a Activation) check() error {
	if err := checkAmount("an oven temperature", "°C", a.OvenK-273.15, 20, 650); err != nil {
		return err
	}
	if err := checkAmount("a time since", "d", a.Days, 0, 36500); err != nil {
		return err
	}
	return checkAmount("a vacuum", "Pa", a.VacuumPa, 0, 110e3)
}

func checkAmount(what, unit string, value, low, high float64) error {
	if value >= low && value <= high {
		return nil
	}
	return fmt.Errorf("%w: %s of %.6g %s; allowed: %.4g to %.4g %s", ErrNoSense, what, value, unit, low, high, unit)
}
