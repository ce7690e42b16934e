package study_test

import (
	"math"
	"testing"

	"parch/internal/study"
)

// Weighed objectives are in units of the route that is cheapest by itself: the score
// of every route follows from its own cost and hours and those of that route.
func TestScoresOfWeighedObjectives(t *testing.T) {
	const lot = "exclude: {steps: [trap, forerun, column, reactive]}\n" +
		"lots:\n- {solvent: toluene, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, target: 60 mg/kg}\n"
	cheapest := compare(t, lot, study.Options{}).Lots[0].Routes[0]
	litre, hours := cheapest.Bill.PerLitre.InexactFloat64(), cheapest.Run.HoursTotal
	routes := compare(t, "objective: {cost: 0.6, time: 0.4}\n"+lot, study.Options{}).Lots[0].Routes
	ranked, last := 0, 0.0
	for _, r := range routes {
		if r.Rank == 0 {
			continue
		}
		ranked++
		want := 0.6*r.Bill.PerLitre.InexactFloat64()/litre + 0.4*r.Run.HoursTotal/hours
		if math.Abs(r.Objective-want) > 1e-6*want || r.Objective < last*(1-1e-9) {
			t.Errorf("%s at rank %d: score %.6g, want %.6g, after %.6g", r.ID, r.Rank, r.Objective, want, last)
		}
		last = r.Objective
	}
	if ranked < 3 || routes[0].Objective > 1+1e-9 {
		t.Errorf("%d routes, the best with %g: the cheapest as it was scores 1", ranked, routes[0].Objective)
	}
}

// Where the cheapest route takes none of what is weighed, the least that another takes is
// the unit: energy of bought solvent is zero, so a trap scores by its own energy.
func TestScoresWhereTheCheapestTakesNone(t *testing.T) {
	const lot = "exclude: {steps: [soak, forerun, column, reactive, salt]}\n" +
		"prices: [{item: toluene-dry, pack: 20 L, price: 1 EUR, date: 2026-10-01, water: 10 mg/kg}]\n" +
		"lots:\n- {solvent: toluene, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, target: 60 mg/kg}\n"
	byCost := compare(t, lot, study.Options{}).Lots[0].Routes
	if byCost[0].ID != "buy" || byCost[0].Run.EnergyKWh != 0 {
		t.Fatalf("%s is cheapest, with %g kWh", byCost[0].ID, byCost[0].Run.EnergyKWh)
	}
	litre, least := byCost[0].Bill.PerLitre.InexactFloat64(), math.Inf(1)
	for _, r := range byCost[1:] {
		if r.Rank > 0 {
			least = math.Min(least, r.Run.EnergyKWh)
		}
	}
	others := 0
	for _, r := range compare(t, "objective: {cost: 0.5, energy: 0.5}\n"+lot, study.Options{}).Lots[0].Routes {
		want := 0.5*r.Bill.PerLitre.InexactFloat64()/litre + 0.5*r.Run.EnergyKWh/least
		if r.Rank > 0 && math.Abs(r.Objective-want) > 1e-6*want {
			t.Errorf("%s: score %.6g, want %.6g", r.ID, r.Objective, want)
		}
		if r.Rank > 0 && r.ID != "buy" {
			others++
		}
	}
	if others == 0 {
		t.Error("nothing is compared with buying")
	}
}
