package steps_test

import (
	"testing"

	"parch/internal/steps"
)

func TestWatch(t *testing.T) {
	eq := equilibrium(t, "toluene", 20)
	o, err := steps.RunTrap(eq, litres(eq.Mixture, 18, 480e-6), 20e-6, rig("light"), rules)
	if err != nil {
		t.Fatal(err)
	}
	rows := o.Watch(5)
	if len(rows) != 5 || rows[0] != o.Course[0] || rows[4] != o.Course[len(o.Course)-1] {
		t.Fatalf("%+v", rows)
	}
	for i, p := range rows {
		if i > 0 && !(p.Hours > rows[i-1].Hours && p.Water < rows[i-1].Water && p.AqueousM3 >= rows[i-1].AqueousM3) {
			t.Errorf("row %d: %+v after %+v", i, p, rows[i-1])
		}
		// toluene boils at 110.6 °C, its azeotrope at 84.1 °C
		if p.PotK < 357 || p.PotK > 384.5 {
			t.Errorf("row %d: the pot boils at %.1f °C", i, p.PotK-273.15)
		}
	}
}

// 0.1 mL (ASTM D95) is 115 mg/kg in 1 L of toluene and 6 in 20 L (arithmetic).
func TestProvedByReading(t *testing.T) {
	near(t, "1 L", steps.ProvedByReading(0.867)*1e6, 115, 0.01)
	near(t, "20 L", steps.ProvedByReading(17.34)*1e6, 5.8, 0.02)
}
