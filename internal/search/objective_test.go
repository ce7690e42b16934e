package search

import (
	"math"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/routes"
	"parch/internal/steps"
)

// 2 h at 48 and 3 kWh at 0.20 are 96.60 for 20 L: 4.83 a litre; 10 h, 0.5 kg, 3 kWh.
// Against a cheapest route with 2.415 a litre, 20 h, 0.25 kg and 3 kWh that is
// 0.4 x 2 + 0.3 x 0.5 + 0.2 x 2 + 0.1 x 1 = 1.45.
func TestWeightsByHand(t *testing.T) {
	price := func(unit, text string) costs.Price {
		return costs.Price{Unit: unit, PerUnit: decimal.RequireFromString(text)}
	}
	book := costs.Book{"technician": price("hour", "48"), "electricity": price("kwh", "0.20")}
	run := routes.Run{HoursTotal: 10, WasteKg: 0.5, EnergyKWh: 3, LitresDelivered: 20, Uses: []routes.StageUse{
		{Use: steps.Use{Head: steps.Labour, Item: "technician", Unit: "hour", Quantity: 2}},
		{Use: steps.Use{Head: steps.Energy, Item: "electricity", Unit: "kwh", Quantity: 3}},
	}}
	for o, want := range map[Objective]float64{Cost: 4.83, Time: 10, Waste: 0.5, Energy: 3} {
		if got, err := o.Of(&run, book, 40); err != nil || math.Abs(got-want) > 1e-12 {
			t.Errorf("%s: %g, %v; want %g", o, got, err, want)
		}
	}
	mix := Mix{
		Weights: map[Objective]float64{Cost: 0.4, Time: 0.3, Waste: 0.2, Energy: 0.1},
		Unit:    map[Objective]float64{Cost: 2.415, Time: 20, Waste: 0.25, Energy: 3},
	}
	if got, err := mix.Of(&run, book, 40); err != nil || math.Abs(got-1.45) > 1e-12 {
		t.Errorf("weighed: %g, %v; want 1.45", got, err)
	}
	if _, err := Objective("noise").Of(&run, book, 40); err == nil {
		t.Error("an objective that does not exist has a value")
	}
}
