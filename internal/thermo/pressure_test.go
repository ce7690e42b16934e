package thermo_test

import (
	"math"
	"testing"
)

// A liquid boils at the pressure at which its bubble point is found, whether it
// boils as one liquid or two.
func TestBubblePressureIsOfTheBubblePoint(t *testing.T) {
	for _, s := range []string{"toluene", "n-n-dimethylformamide", "tetrahydrofuran"} {
		m := mixture(t, s)
		const pressurePa = 60e3
		az, err := m.FindAzeotrope(pressurePa)
		if err != nil {
			t.Fatal(err)
		}
		for _, x := range []float64{0.003, 0.3, 0.7} {
			tK := az.TempK
			if l := az.Layers; !(l.XOrganic < x && x < l.XAqueous) {
				v, err := m.Bubble(x, pressurePa)
				if err != nil {
					t.Fatal(err)
				}
				tK = v.TempK
			}
			if p := m.BubblePressure(x, tK); math.Abs(p/pressurePa-1) > 1e-6 {
				t.Errorf("%s at %.3g water and %.2f K: %.6g Pa, want %.6g", s, x, tK, p, pressurePa)
			}
		}
	}
}
