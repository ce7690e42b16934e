package study

import (
	"maps"
	"slices"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

// Of all usual routes of a lot, each tuned and made sure without leaving any out, none but
// the best costs less than the next best of the ranking.
func TestNextBestOfTheRankingIsTheNextBest(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	for _, name := range []string{"reclaimed-ethyl-acetate", "acetonitrile"} {
		j, c := jobOf(t, name)
		o := Options{Draws: 400, Seed: 1, RankingOnly: true}
		r := compared(t, j, c, o)
		l := &r.Lots[0]
		w, err := newWork(t.Context(), j, j.Lots[0], c, r.prices, o)
		if err != nil {
			t.Fatal(err)
		}
		tuner := &search.Tuner{Case: w.k, Book: r.prices, Objective: search.Cost, Site: w.site}
		all, _ := w.k.Candidates()
		all = slices.DeleteFunc(all, func(r routes.Route) bool { return r.CarrierOf() != "" })
		ran := 0
		for _, route := range all {
			run, err := w.tune(tuner, route)
			if _, refused := refusal(err); refused {
				continue
			}
			if err != nil {
				t.Fatal(err)
			}
			sure, err := w.drawn.sureEnough(&run)
			if err != nil {
				t.Fatal(err)
			}
			if !run.Meets || !sure {
				continue
			}
			ran++
			cost, err := tuner.Value(&run)
			if err != nil {
				t.Fatal(err)
			}
			if next := l.Routes[1]; route.ID() != l.Routes[0].ID && cost < next.Bill.PerLitre.InexactFloat64()*(1-search.Tie) {
				t.Errorf("%s: %s costs %.6g a litre and is not the next best, which is %s at %v", name, route.ID(), cost, next.ID, next.Bill.PerLitre)
			}
		}
		if ran < 5 {
			t.Errorf("%s: only %d routes were sure", name, ran)
		}
	}
}

// A comparison of the job with other prices has the winner that the break-even of the sieve
// price says, on either side of it.
func TestFreshComparisonsFlipAtTheSievePrice(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	j, c := jobOf(t, "reclaimed-ethyl-acetate")
	o := Options{Draws: 400, Seed: 1}
	var b *BreakEven
	now := compared(t, j, c, o)
	for i := range now.Lots[0].BreakEvens {
		if found := &now.Lots[0].BreakEvens[i]; found.Key == SievePrice {
			b = found
		}
	}
	if b == nil || b.Never {
		t.Fatalf("no break-even of the sieve price: %+v", b)
	}
	o.RankingOnly = true
	for side, want := range map[float64]string{0.97: b.Below, 1.03: b.Above} {
		other, dear := withSieves(j, c, b.At*side/b.Now)
		if best := compared(t, other, dear, o).Lots[0].Best(); best.ID != want {
			t.Errorf("sieve at %.4g of the price: %s wins, %s was said", b.At*side/b.Now, best.ID, want)
		}
	}
}

// withSieves multiplies the prices of all sieves, in the job and in the catalog.
func withSieves(j *job.Job, c *catalog.Catalog, factor float64) (*job.Job, *catalog.Catalog) {
	times := decimal.NewFromFloat(factor)
	other, dear := *j, *c
	isSieve := func(item string) bool { a := c.Agents[item]; return a != nil && a.Kind == "sieve" }
	other.Prices = slices.Clone(j.Prices)
	for i := range other.Prices {
		if p := &other.Prices[i]; isSieve(p.Item) {
			p.PerUnit, p.PackPrice = p.PerUnit.Mul(times), p.PackPrice.Mul(times)
		}
	}
	dear.Prices = maps.Clone(c.Prices)
	for item, p := range dear.Prices {
		if isSieve(item) {
			p.Amount = decimal.RequireFromString(p.Amount).Mul(times).String()
			dear.Prices[item] = p
		}
	}
	return &other, &dear
}

// Where a missed target costs, the last step is sized for as much more as pays: cost and
// expected misses of the best come to no more than with the settings that any higher
// assurance leads to.
func TestFailedBatchSizesTheLastStep(t *testing.T) {
	j, c := jobOf(t, "acetonitrile")
	j.Lots[0].FailedBatch = &job.FailedBatch{Amount: decimal.NewFromInt(5000)}
	o := Options{Draws: 2000, Seed: 1, RankingOnly: true}
	total := func(r *Route) float64 { return r.Bill.PerLitre.Add(r.Miss.PerLitre).InexactFloat64() }
	best := compared(t, j, c, o).Lots[0].Best()
	for _, assurance := range []float64{0.95, 0.99, 0.995, 0.999} {
		surer := *j
		surer.Assurance = assurance
		other := compared(t, &surer, c, o).Lots[0].Best()
		given := o
		given.Settings = map[string]map[string]routes.Settings{j.Lots[0].Name: {other.ID: other.Run.Settings}}
		for i, r := range compared(t, j, c, given).Lots[0].Routes {
			if r.ID == other.ID && total(best) > total(&r)*(1+search.Tie) {
				t.Errorf("%s comes to %.6g a litre with its misses; as for an assurance of %g %s (%d) comes to %.6g", best.ID, total(best), assurance, r.ID, i, total(&r))
			}
		}
	}
}

// The start water at which pre-drying pays is that of fresh comparisons: on either side of
// it their winner is of the kind that is said to be ahead, and the answer does not go with
// the water of the lot that it is asked of.
func TestFreshComparisonsFlipAtTheStartWater(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	j, c := jobOf(t, "reclaimed-ethyl-acetate")
	of := func(water float64, o Options) *Lot {
		other := *j
		other.Lots = slices.Clone(j.Lots)
		other.Lots[0].Water = water
		return &compared(t, &other, c, o).Lots[0]
	}
	o := Options{Draws: 400, Seed: 1}
	asked := func(water float64) *BreakEven {
		all := of(water, o).BreakEvens
		i := slices.IndexFunc(all, func(b BreakEven) bool { return b.Key == StartWater })
		if i < 0 || all[i].Never {
			t.Fatalf("from %g: %+v", water, all)
		}
		return &all[i]
	}
	b := asked(j.Lots[0].Water)
	for _, water := range []float64{0.005, 0.02} {
		if other := asked(water); away(other.At, b.At) > 0.03 {
			t.Errorf("asked of %g kg/kg pre-drying pays from %.5g mg/kg, asked of %g kg/kg from %.5g", j.Lots[0].Water, b.At, water, other.At)
		}
	}
	o.RankingOnly = true
	for side, want := range map[float64]string{0.95: b.Below, 1.05: b.Above} {
		if best := of(b.At*side*1e-6, o).Best(); isPreDried(best.Run.Route) != strings.Contains(want, "+") {
			t.Errorf("a lot of %.5g mg/kg is dried by %s, %s was said", b.At*side, best.ID, want)
		}
	}
}
