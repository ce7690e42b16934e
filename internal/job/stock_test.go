package job

import (
	"math"
	"testing"

	"parch/catalog"
)

// A solvent on the shelf may be given by volume. Toluene weighs 862.2 g/L at 25 °C (handbook value, from
// memory); the catalog's densities are held to 1 %.
func TestStockOfASolventByVolume(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	text := "site: {room: 25 °C}\nstock: [{item: toluene-dry, on hand: 20 L, safety stock: 1 kg}]\n" +
		"lots: [{solvent: toluene, batch: 18 L, water: 300 mg/kg, target: 50 mg/kg}]\n"
	j, err := Read("job.yaml", []byte(text), cat)
	if err != nil {
		t.Fatal(err)
	}
	if s := j.Stock[0]; math.Abs(s.OnHandKg/17.244-1) > 0.01 || s.SafetyKg != 1 {
		t.Errorf("20 L of toluene at 25 °C are %g kg, safety stock %g kg; want 17.24 and 1", s.OnHandKg, s.SafetyKg)
	}
}
