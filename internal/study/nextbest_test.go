package study

import (
	"maps"
	"math"
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

// A comparison of the job with other figures has the winner that a break-even says, on
// either side of it. Sieves have one price each: which of several packs is worth buying
// goes with the need, and break-evens keep the prices as they are.
func TestFreshComparisonsFlipAtTheBreakEvens(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	jobs := oneLotEach(t)
	reclaimed, _ := jobOf(t, "reclaimed-ethyl-acetate")
	flips := map[string]int{}
	for _, j := range append(jobs, reclaimed) {
		c := withoutPacks(t)
		o := Options{Draws: 400, Seed: 1}
		now := &compared(t, j, c, o).Lots[0]
		o.RankingOnly = true
		for i := range now.BreakEvens {
			b := &now.BreakEvens[i]
			if b.Never {
				continue
			}
			var at func(x float64) (*job.Job, *catalog.Catalog)
			switch b.Key {
			case SievePrice:
				at = func(x float64) (*job.Job, *catalog.Catalog) { return priced(j, c, x/b.Now, isSieve(c)) }
			case Technician:
				at = func(x float64) (*job.Job, *catalog.Catalog) {
					return priced(j, c, x/b.Now, func(item string) bool { return item == "technician" })
				}
			case SieveUses:
				at = func(x float64) (*job.Job, *catalog.Catalog) { return j, withUses(c, x) }
			default:
				continue
			}
			for side, want := range map[float64]string{0.97: b.Below, 1.03: b.Above} {
				other, cat := at(b.At * side)
				l := &compared(t, other, cat, o).Lots[0]
				if best, said := l.Routes[0], costOf(l, want); !(said <= best.Bill.PerLitre.InexactFloat64()*(1+nextToNothing)) {
					t.Errorf("%s: %s of %.4g: %s wins with %v a litre, %s was said, which costs %.6f", now.Job.Name, b.Key, b.At*side, best.ID, best.Bill.PerLitre, want, said)
				}
				flips[b.Key]++
			}
		}
	}
	t.Logf("%v", flips)
	for _, key := range []string{SievePrice, Technician, SieveUses} {
		if flips[key] == 0 {
			t.Errorf("no break-even of the %s to look at", key)
		}
	}
}

// nextToNothing is the share of a cost that the rounding of hand-overs and stands makes.
const nextToNothing = 5e-4

// costOf a sure route of the ranking, +Inf where it is not among them.
func costOf(l *Lot, id string) float64 {
	for i := range l.Routes {
		if r := &l.Routes[i]; r.ID == id && r.Recommended {
			return r.Bill.PerLitre.InexactFloat64()
		}
	}
	return math.Inf(1)
}

// oneLotEach are jobs of one lot of the demonstration each.
func oneLotEach(t *testing.T) (all []*job.Job) {
	t.Helper()
	name, data := job.Demo()
	j, err := job.Read(name, data, withoutPacks(t))
	if err != nil {
		t.Fatal(err)
	}
	for i := range j.Lots {
		one := *j
		one.Lots = j.Lots[i : i+1]
		all = append(all, &one)
	}
	return all
}

// withoutPacks is the catalog with one price for each item, and an invented one for sieve 4A
// that makes it the next best.
func withoutPacks(t *testing.T) *catalog.Catalog {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	plain := *c
	plain.Prices = maps.Clone(c.Prices)
	for item, p := range plain.Prices {
		if p.Packs = nil; item == "sieve-4a" {
			p.Amount = "14"
		}
		plain.Prices[item] = p
	}
	return &plain
}

func isSieve(c *catalog.Catalog) func(item string) bool {
	return func(item string) bool { a := c.Agents[item]; return a != nil && a.Kind == "sieve" }
}

// priced multiplies prices, in the job and in the catalog.
func priced(j *job.Job, c *catalog.Catalog, factor float64, concerned func(item string) bool) (*job.Job, *catalog.Catalog) {
	times := decimal.NewFromFloat(factor)
	other, dear := *j, *c
	other.Prices = slices.Clone(j.Prices)
	for i := range other.Prices {
		if p := &other.Prices[i]; concerned(p.Item) {
			p.PerUnit, p.PackPrice = p.PerUnit.Mul(times), p.PackPrice.Mul(times)
		}
	}
	dear.Prices = maps.Clone(c.Prices)
	for item, p := range dear.Prices {
		if concerned(item) {
			p.Amount = decimal.RequireFromString(p.Amount).Mul(times).String()
			dear.Prices[item] = p
		}
	}
	return &other, &dear
}

// withUses gives every charge of sieve so many uses.
func withUses(c *catalog.Catalog, uses float64) *catalog.Catalog {
	other := *c
	other.Agents = maps.Clone(c.Agents)
	for key, a := range c.Agents {
		if isSieve(c)(key) {
			used := *a
			used.Lives = &catalog.Value{SI: uses}
			other.Agents[key] = &used
		}
	}
	return &other
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
