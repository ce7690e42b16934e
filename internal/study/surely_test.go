package study

import (
	"math"
	"slices"
	"testing"
)

// What is asked beyond the ranking is asked of routes that are sure enough: no break-even,
// no cell of other lots and no place in the trade-off goes to one of which the ranking
// says that it is not. As things are a route costs there what it does in the ranking, or
// a little less, as its settings are not rounded and its stand may be a longer one.
func TestOnlySureRoutesAreAskedOf(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	for _, name := range workedJobs {
		r, c := workedWith(t, name, Options{Draws: 400, Seed: 1})
		l := &r.Lots[0]
		if !l.OfSure() {
			t.Fatalf("%s: no route is sure", name)
		}
		unsure := map[string]bool{}
		for _, route := range l.Routes {
			unsure[route.ID] = route.Meets() && !route.Recommended
		}
		for _, b := range l.BreakEvens {
			if unsure[b.Below] || unsure[b.Above] {
				t.Errorf("%s, %s: %s below, %s above; one is not sure", name, b.Key, b.Below, b.Above)
			}
		}
		for _, p := range l.Front {
			if unsure[p.ID] || unsure[p.DominatedBy] {
				t.Errorf("%s: %s in the trade-off, beaten by %q; one is not sure", name, p.ID, p.DominatedBy)
			}
		}
		for _, row := range l.WhatIf.Cells {
			if k := slices.IndexFunc(row, func(c WhatIfCell) bool { return unsure[c.ID] }); k >= 0 {
				t.Errorf("%s: %s is not sure and the cheapest of another lot", name, row[k].ID)
			}
		}
		if l.Job.FreeWaterM3 > 0 {
			continue // asked of the dissolved water alone
		}
		full := *r
		full.Book = r.prices
		q, err := newQuestion(t.Context(), &full, l, c)
		if err != nil {
			t.Fatal(err)
		}
		asked := 0
		for i := range l.Routes {
			route := &l.Routes[i]
			if _, ok := q.now[route.ID]; !ok || !route.Recommended {
				continue
			}
			cost, err := q.field(q.tuner(q.k, q.book), nil).Cost(route.Run.Route) // q.now may hold a floor
			if err != nil {
				t.Fatal(err)
			}
			if math.IsInf(cost, 1) {
				continue
			}
			if share := cost / route.Bill.PerLitre.InexactFloat64(); share > 1.001 || share < 0.97 {
				t.Errorf("%s: %s costs %.5g of what it does in the ranking", name, route.ID, share)
			}
			asked++
		}
		if asked == 0 {
			t.Errorf("%s: no cost was compared", name)
		}
	}
}
