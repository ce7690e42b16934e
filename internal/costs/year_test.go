package costs_test

import (
	"math"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

func years(n float64) *catalog.Value {
	r, err := quantity.Parse("1 yr", quantity.Time)
	if err != nil {
		panic(err)
	}
	return &catalog.Value{SI: n * r.SI}
}

// yearOf is a route with a still of 1000 EUR over 5 years, of which 10 % a year
// break, and a charge of 2 kg of sieve that serves ten times.
func yearOf(t *testing.T, writeOff string) (*costs.Arrangement, *costs.Year, costs.Plan) {
	t.Helper()
	cat := exampleCatalog()
	cat.Apparatus = map[string]*catalog.Apparatus{"still-20l": {Key: "still-20l", Life: years(5), Breakage: &catalog.Value{SI: 0.1}}}
	j := &job.Job{Currency: "EUR", Date: "2026-12-01", WriteOff: writeOff, Interest: 0.06, Lots: []job.Lot{{BatchesPerYear: 10}}, Prices: []job.Price{
		{Item: "still-20l", Unit: "each", PerUnit: d("1000"), Date: "2026-10-01"},
		own("sieve-3a", "kg", "5", "150", "2026-10-01", job.Terms{}),
	}}
	book, err := costs.NewBook(cat, j)
	if err != nil {
		t.Fatal(err)
	}
	run := routes.Run{
		LitresDelivered: 10,
		Outcomes:        []steps.Outcome{{Kind: steps.Soak, Agent: "sieve-3a", AgentKg: 2}},
		Uses: []routes.StageUse{
			{Stage: 1, Use: steps.Use{Head: steps.Labour, Item: "technician", Unit: "hour", Quantity: 1}},
			{Stage: 1, Use: steps.Use{Head: steps.Agent, Item: "sieve-3a", Unit: "kg", Quantity: 0.2}},
			{Stage: 1, Use: steps.Use{Head: steps.Equipment, Item: "still-20l", Unit: "each", Quantity: 0.1 + 1.0/5, PerYear: true}},
		},
	}
	site := costs.NewArrangement(cat, j)
	site.Apply(&run, 10)
	plan := costs.Plan{Lot: "a", Run: &run, BatchesPerYear: 10}
	bill, err := book.Bill(run.Uses, 10, 10, "EUR")
	if err != nil {
		t.Fatal(err)
	}
	y, err := site.Yearly(cat, j, book, plan, &bill)
	if err != nil {
		t.Fatal(err)
	}
	return site, y, plan
}

// On paper, EUR a year for 10 batches: labour 10 x 50 = 500; sieve 10 x 0.2 x 30 = 60;
// still 0.3 x 1000 = 300, of which 200 are written off and 100 replace what breaks.
//
//	cost          860
//	later years   860 - 200                       = 660 paid out
//	first year    660 + 1000 still + 150 - 60     = 1750 (a 5 kg pack for the 2 kg charge)
func TestYearByHand(t *testing.T) {
	_, y, _ := yearOf(t, job.StraightLine)
	for what, c := range map[string][2]decimal.Decimal{
		"cost": {y.Cost, d("860")}, "equipment": {y.Equipment, d("1000")}, "packs": {y.PackCost, d("150")},
		"first year": {y.FirstYear, d("1750")}, "later years": {y.LaterYears, d("660")},
	} {
		if !c[0].Round(6).Equal(c[1]) {
			t.Errorf("%s: %s, want %s", what, c[0], c[1])
		}
	}
	if math.Abs(y.Regenerations-9) > 1e-9 {
		t.Errorf("%g charges regenerated, want 9 of 10", y.Regenerations)
	}
	// Annuity at 6 % over 5 years, capital recovery factor 0.23740: the cost rises by
	// 237.40 - 200, what is paid out stays.
	_, a, _ := yearOf(t, job.Annuity)
	if a.Cost.StringFixed(2) != "897.40" || !a.LaterYears.Round(6).Equal(d("660")) || !a.FirstYear.Round(6).Equal(d("1750")) {
		t.Errorf("annuity: cost %s, first year %s, later years %s", a.Cost.StringFixed(2), a.FirstYear, a.LaterYears)
	}
}

// A still of 1000 that saves 400 a year against buying dry pays back in 2.5 years; over
// its 5 years at 6 % it is worth 400 x 4.21236 - 1000 = 684.95 (present worth factor of
// tables of engineering economy, 4.2124).
func TestInvestment(t *testing.T) {
	site, y, plan := yearOf(t, job.StraightLine)
	buy := &costs.Year{LaterYears: y.LaterYears.Add(d("400"))}
	dearer := &costs.Year{LaterYears: y.LaterYears.Add(d("900"))}
	site.Invest([]costs.Alternative{{ID: "still", Plan: plan, Year: y}, {ID: "dearer", Year: dearer}, {ID: "buy", Year: buy}, {ID: "no price"}})
	v := y.Investment
	if v == nil || v.Against != "buy" || math.Abs(v.PaybackYears-2.5) > 1e-9 || math.Abs(v.Years-5) > 1e-9 || v.PresentValue.StringFixed(2) != "684.95" {
		t.Fatalf("%+v", v)
	}
	if buy.Investment != nil {
		t.Error("a route without equipment to buy is no investment")
	}
	// It never pays back where nothing is saved.
	cheap := &costs.Year{LaterYears: y.LaterYears.Sub(d("10"))}
	site.Invest([]costs.Alternative{{ID: "still", Plan: plan, Year: y}, {ID: "buy", Year: cheap}})
	if v := y.Investment; !math.IsNaN(v.PaybackYears) || !v.PresentValue.IsNegative() {
		t.Errorf("%+v", v)
	}
}
