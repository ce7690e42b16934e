package assay

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/thermo"
)

// SaturationPa is the vapour pressure of water over liquid water in air, by the
// Magnus equation with the coefficients of WMO-No. 8, annex 4.B (after Sonntag
// 1990; from memory), -45 to 60 °C, 0.6 %:
//
//	e = 611.2 Pa exp(17.62 t/(243.12 °C + t))
func SaturationPa(tK float64) float64 {
	t := tK - 273.15
	return 611.2 * math.Exp(17.62*t/(243.12+t))
}

const waterKgPerMol = 0.018015

// AirWaterKgPerM3 is the water in a volume of air at tK and a relative humidity
// (0 to 1), as an ideal gas: 8.6 mg in each litre at 20 °C and 50 %.
func AirWaterKgPerM3(tK, humidity float64) float64 {
	return humidity * SaturationPa(tK) * waterKgPerMol / (thermo.GasConstant * tK)
}

// Store is dried solvent in a bottle or drum, and how it is drawn from.
type Store struct {
	VolumeM3        float64 // when it is closed
	Water           float64 // kg/kg then
	KgPerM3         float64
	AirWaterKgPerM3 float64 // of the air that takes the place of what is drawn; 0: dry gas does
	LeakPerDay      float64 // kg/kg a day through closure and wall, at the full volume
	Equilibrium     float64 // kg/kg, the solution in equilibrium with the room's air; it gets no wetter
	DrawnM3PerDay   float64
}

// ErrStore means that a store is described by impossible numbers.
var ErrStore = errors.New("impossible store")

func (s Store) check() error {
	if !(s.VolumeM3 > 0 && s.KgPerM3 > 0 && s.Water >= 0 && s.AirWaterKgPerM3 >= 0 && s.LeakPerDay >= 0 && s.DrawnM3PerDay >= 0) {
		return fmt.Errorf("%w: volume and density above zero, no other number below zero", ErrStore)
	}
	return nil
}

// After is the water when drawnM3 have been drawn over a number of days. Air
// brings its water into what is left, and so does the leak, each litre drawn
// leaving less to share it:
//
//	dw = c_air dV/(rho (V_0 - V)) + leak V_0/(V_0 - V) dt
//
// All the water of the air is taken up (worst case). With a steady draw both are
// logarithms of V_0/(V_0 - V).
func (s Store) After(drawnM3, days float64) float64 {
	left := s.VolumeM3 - drawnM3
	if left <= 0 {
		return s.limit(math.Inf(1))
	}
	ln := math.Log(s.VolumeM3 / left)
	leak := s.LeakPerDay * days
	if drawnM3 > 0 {
		leak *= s.VolumeM3 / drawnM3 * ln
	}
	return s.limit(s.Water + s.AirWaterKgPerM3/s.KgPerM3*ln + leak)
}

func (s Store) limit(water float64) float64 {
	if s.Equilibrium > 0 {
		return math.Min(water, math.Max(s.Equilibrium, s.Water))
	}
	return water
}

// PerLitre is how fast the water rises when the first litre is drawn, kg/kg a litre.
func (s Store) PerLitre() float64 { return s.AirWaterKgPerM3 / s.KgPerM3 / s.VolumeM3 * 1e-3 }

// UseBy is how far a store may be drawn down, and when it is over.
type UseBy struct {
	LeastVolumeM3 float64 // stop drawing here; 0: it may be emptied
	Days          float64 // +Inf where the limit is never passed
	Why           string
}

// UseBy finds what is left and the day when the store passes limit (kg/kg).
func (s Store) UseBy(limit float64) (UseBy, error) {
	if err := s.check(); err != nil {
		return UseBy{}, err
	}
	if s.Water >= limit {
		return UseBy{s.VolumeM3, 0, "it is at the limit already"}, nil
	}
	if s.Equilibrium > 0 && s.Equilibrium <= limit {
		return UseBy{0, math.Inf(1), "the room's air cannot wet it beyond the limit"}, nil
	}
	u := UseBy{Days: math.Inf(1), Why: "nothing is drawn and nothing leaks"}
	if rise := s.AirWaterKgPerM3 / s.KgPerM3; rise > 0 {
		u.LeastVolumeM3 = s.VolumeM3 * math.Exp(-(limit-s.Water)/rise)
	}
	switch {
	case s.DrawnM3PerDay > 0:
		return s.drawnUntil(u, limit)
	case s.LeakPerDay > 0:
		u.Days, u.Why = (limit-s.Water)/s.LeakPerDay, "water through closure and wall"
	}
	return u, nil
}

// drawnUntil finds the day on which a steadily drawn store passes limit.
func (s Store) drawnUntil(u UseBy, limit float64) (UseBy, error) {
	empty := s.VolumeM3 / s.DrawnM3PerDay
	last := empty * (1 - 1e-12)
	above := func(days float64) float64 { return s.After(days*s.DrawnM3PerDay, days) - limit }
	if above(last) <= 0 {
		return UseBy{0, empty, "it is empty before it is too wet"}, nil
	}
	days, err := thermo.Brent(above, 0, last, 1e-9*empty)
	if err != nil {
		return u, err
	}
	u.Days, u.LeastVolumeM3 = days, s.VolumeM3-days*s.DrawnM3PerDay
	u.Why = "water with the air drawn in, and through closure and wall"
	return u, nil
}
