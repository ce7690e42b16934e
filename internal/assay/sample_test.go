package assay

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func near(t *testing.T, what string, got, want, share float64) {
	t.Helper()
	if !(math.Abs(got/want-1) <= share) {
		t.Errorf("%s = %.6g, want %.6g within %g %%", what, got, want, 100*share)
	}
}

// 50 to 100 ug of water: 5 to 10 g of a solvent with 10 mg/kg, 0.5 to 1 g at 100.
// A method for hydrocarbons injects 5 g to reach 2 mg/kg: 10 ug, its lower limit.
func TestSampleFor(t *testing.T) {
	s := SampleFor(10e-6, 20e-3)
	near(t, "low", s.LowKg, 5e-3, 1e-9)
	near(t, "high", s.HighKg, 10e-3, 1e-9)
	if s = SampleFor(100e-6, 5e-3); s.LowKg > 0.51e-3 || s.Note != "" {
		t.Errorf("%+v", s)
	}
	if s = SampleFor(2e-6, 5e-3); s.LowKg != 5e-3 || s.HighKg != 5e-3 || s.Note == "" {
		t.Errorf("2 mg/kg and 5 g: %+v", s)
	}
	if s = SampleFor(0, 5e-3); s.HighKg != 5e-3 || s.Note == "" {
		t.Errorf("no water: %+v", s)
	}
}

// By the law of propagation: with nothing but the repeatability, U is the guard of
// Accept. By hand, 15 mg/kg in 5 g: 1 ug of drift is 0.2 mg/kg, 2 % of a standard
// 0.3 mg/kg, the repeatability 7/2.77 = 2.527 mg/kg; for n = 2
// u = sqrt(2.527^2/2 + 0.2^2/2 + 0.3^2) = 1.8177, U = 3.635 mg/kg.
func TestUncertainty(t *testing.T) {
	near(t, "repeatability alone", Uncertainty(15e-6, coulometric, Sources{}), Accept(15e-6, coulometric).Uncertainty, 1e-12)
	near(t, "with drift and standard", Uncertainty(15e-6, coulometric, Sources{SampleKg: 5e-3, DriftKg: 1e-9, Standard: 0.02}), 3.635e-6, 1e-3)
	many := coulometric
	many.Injections = 100000
	near(t, "the standard stays", Uncertainty(15e-6, many, Sources{Standard: 0.02}), 2*0.02*15e-6, 0.01)
}

// Target 15, lot 12 mg/kg: U may be 3 at most, so n >= (2 x 2.527/3)^2 = 2.84.
func TestInjectionsFor(t *testing.T) {
	if n, ok := InjectionsFor(15e-6, 12e-6, coulometric, 20); !ok || n != 3 {
		t.Errorf("%d, %v, want 3", n, ok)
	}
	if _, ok := InjectionsFor(5e-6, 1e-6, coulometric, 20); ok {
		t.Error("5 mg/kg is below the detection limit and shown all the same")
	}
	if _, ok := InjectionsFor(15e-6, 14.9e-6, coulometric, 20); ok {
		t.Error("14.9 of 15 mg/kg is shown with 20 injections")
	}
	rapid.Check(t, func(rt *rapid.T) {
		target, water := rapid.Float64Range(9e-6, 500e-6).Draw(rt, "target"), rapid.Float64Range(0, 500e-6).Draw(rt, "water")
		n, ok := InjectionsFor(target, water, coulometric, 12)
		m := coulometric
		m.Injections = n
		if shown := water <= Accept(target, m).AcceptAt; shown != ok {
			rt.Fatalf("%d injections: shown %v, said %v", n, shown, ok)
		}
	})
}

func TestWork(t *testing.T) {
	w := Plan{Samples: 2, Injections: 3, SampleS: 300, InjectionS: 300, ConditioningS: 1800, SharedBy: 3}.Work()
	if w.Tests != 6 || w.AttendedS != 2400 || w.TotalS != 3000 {
		t.Errorf("%+v", w)
	}
}
