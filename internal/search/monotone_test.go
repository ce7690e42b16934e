package search

import (
	"maps"
	"math"
	"testing"

	"github.com/shopspring/decimal"
	"pgregory.net/rapid"

	"parch/internal/costs"
)

// noise is how well a hand-over is refined, as a share of the cost. The hand-overs are
// not rounded to two digits here: that alone may cost as much. Nor are shorter stands
// taken for up to Tie more: what is monotone is the least that a lot can cost, and
// TestTheShorterOfTwoThatCostTheSame and the last check here hold what is told to it.
const noise = 1e-4

// A lower target never costs less, a higher wage never lowers a cost, and taking an
// agent away never improves the optimum, whatever the lot.
func TestMonotone(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom(solventsTried).Draw(rt, "solvent")
		target := rapid.Float64Range(20, 400).Draw(rt, "target")
		water := target * rapid.Float64Range(1.5, 40).Draw(rt, "times wetter")
		litres := rapid.Float64Range(2, 40).Draw(rt, "litres")
		tuner := tunerOf(t, lotYAML("cost", solvent, litres, 24, water, target, ""))
		tuner.Exact = true
		cost, agent := cheapest(rt, tuner, "")
		if math.IsInf(cost, 1) {
			return
		}

		told := *tuner
		told.Exact = false
		if c, _ := cheapest(rt, &told, ""); c < cost*(1-noise) || c > cost*(1+noise)*(1+Tie) {
			rt.Errorf("%.8g is told, %.8g is the least", c, cost)
		}

		lower := tuner.Case.Lot
		lower.Target = math.Max(15e-6, lower.Target*rapid.Float64Range(0.3, 0.95).Draw(rt, "lower"))
		drier := *tuner
		drier.Case = tuner.Case.With(lower)
		if c, _ := cheapest(rt, &drier, ""); lower.Target < tuner.Case.Lot.Target && c < cost*(1-noise) {
			rt.Errorf("%g costs %.8g, %g costs %.8g", tuner.Case.Lot.Target, cost, lower.Target, c)
		}

		dearer := *tuner
		dearer.Case, dearer.Book = tuner.Case.With(tuner.Case.Lot), withWage(tuner.Book, rapid.Float64Range(1.01, 3).Draw(rt, "wage"))
		if c, _ := cheapest(rt, &dearer, ""); c < cost*(1-noise) {
			rt.Errorf("a higher wage lowers %.8g to %.8g", cost, c)
		}

		without := *tuner
		without.Case = tuner.Case.With(tuner.Case.Lot)
		if c, _ := cheapest(rt, &without, agent); agent != "" && c < cost*(1-noise) {
			rt.Errorf("without %s %.8g becomes %.8g", agent, cost, c)
		}
	})
}

// cheapest of all routes without an agent, and an agent of the best.
func cheapest(t *rapid.T, tuner *Tuner, without string) (float64, string) {
	f := Field{Tuner: tuner}
	offered, _ := tuner.Case.Candidates()
	for _, r := range offered {
		uses := false
		for _, s := range r {
			uses = uses || without != "" && s.Agent == without
		}
		if !uses {
			f.Routes = append(f.Routes, r)
		}
	}
	won, _, err := f.Cheapest(nil, math.Inf(1))
	if err != nil {
		t.Fatal(err)
	}
	for _, s := range won.Route {
		if s.Agent != "" {
			return won.Cost, s.Agent
		}
	}
	return won.Cost, ""
}

func withWage(book costs.Book, factor float64) costs.Book {
	book = maps.Clone(book)
	p := book["technician"]
	p.PerUnit = p.PerUnit.Mul(decimal.NewFromFloat(factor))
	book["technician"] = p
	return book
}
