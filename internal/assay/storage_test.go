package assay

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// Saturation pressures of water, Pa: IAPWS-95 values as printed in steam tables
// (from memory): 0.01 °C 611.66, 20 °C 2339, 40 °C 7385.
func TestSaturationPa(t *testing.T) {
	for c, pa := range map[float64]float64{0.01: 611.66, 20: 2339, 40: 7385, 60: 19946} {
		near(t, "saturation", SaturationPa(c+273.15), pa, 0.006)
	}
}

// g/m3 of water in air, arithmetic of others with the Magnus equation.
func TestAirWater(t *testing.T) {
	for _, c := range []struct{ celsius, humidity, gramsPerM3 float64 }{{20, 0.5, 8.6}, {20, 0.3, 5.2}, {25, 0.6, 13.8}, {30, 0.8, 24}} {
		near(t, "air", 1e3*AirWaterKgPerM3(c.celsius+273.15, c.humidity), c.gramsPerM3, 0.015)
	}
}

func toluene() Store {
	return Store{VolumeM3: 2.5e-3, Water: 5e-6, KgPerM3: 867, AirWaterKgPerM3: AirWaterKgPerM3(293.15, 0.5)}
}

// About 10 mg/kg for a litre of air on a litre of solvent left (density 0.87).
func TestWettingPerLitreDrawn(t *testing.T) {
	s := toluene()
	near(t, "per litre in 2.5 L", 2.5*s.PerLitre(), 9.94e-6, 0.01)
	// by hand: ln(2.5/1.5) x 8.62 mg/L/0.867 kg/L
	near(t, "after a litre", s.After(1e-3, 0)-5e-6, math.Log(2.5/1.5)*9.94e-6, 0.01)
	dry := s
	dry.AirWaterKgPerM3 = 0
	if w := dry.After(2e-3, 0); w != 5e-6 {
		t.Errorf("under dry gas it rises to %g", w)
	}
	s.Equilibrium = 8e-6
	if w := s.After(2.4e-3, 100); w != 8e-6 {
		t.Errorf("it rises to %g, over the equilibrium with the air", w)
	}
}

func TestUseBy(t *testing.T) {
	s := toluene()
	u, err := s.UseBy(15e-6)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "stop at", u.LeastVolumeM3, 2.5e-3*math.Exp(-10/9.94), 0.01)
	if !math.IsInf(u.Days, 1) {
		t.Errorf("nothing leaks, yet it lasts %g days", u.Days)
	}
	near(t, "there it holds", s.After(s.VolumeM3-u.LeastVolumeM3, 0), 15e-6, 1e-9)
	s.LeakPerDay = 5e-6 / 7 // a good septum that is often pierced: 5 mg/kg a week (memory)
	if u, err = s.UseBy(15e-6); err != nil {
		t.Fatal(err)
	}
	near(t, "days", u.Days, 14, 1e-9)
	s.DrawnM3PerDay = 0.1e-3
	if u, err = s.UseBy(15e-6); err != nil {
		t.Fatal(err)
	}
	if !(u.Days < 14) || math.Abs(s.After(u.Days*0.1e-3, u.Days)/15e-6-1) > 1e-6 {
		t.Errorf("drawn from daily: %+v", u)
	}
	if u, _ = s.UseBy(5e-6); u.Days != 0 {
		t.Errorf("at the limit already: %+v", u)
	}
	s.KgPerM3 = 0
	if _, err := s.UseBy(15e-6); !errors.Is(err, ErrStore) {
		t.Errorf("no density: %v", err)
	}
}

// The closed form against small steps of drawing and leaking.
func TestStoreAgainstSmallSteps(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		s := toluene()
		s.LeakPerDay = rapid.Float64Range(0, 3e-6).Draw(rt, "leak")
		s.DrawnM3PerDay = rapid.Float64Range(1e-6, 1e-3).Draw(rt, "drawn")
		days := rapid.Float64Range(0.1, 0.9).Draw(rt, "share") * s.VolumeM3 / s.DrawnM3PerDay
		water, volume := s.Water, s.VolumeM3
		const steps = 20000
		dt := days / steps
		for range steps {
			half := volume - s.DrawnM3PerDay*dt/2
			water += s.AirWaterKgPerM3/s.KgPerM3*s.DrawnM3PerDay*dt/half + s.LeakPerDay*s.VolumeM3/half*dt
			volume -= s.DrawnM3PerDay * dt
		}
		if got := s.After(days*s.DrawnM3PerDay, days); math.Abs(got/water-1) > 1e-6 {
			rt.Fatalf("%g, by small steps %g", got, water)
		}
	})
}
