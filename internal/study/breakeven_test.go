package study

import (
	"context"
	"encoding/json"
	"fmt"
	"maps"
	"math"
	"os"
	"runtime"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

func worked(t *testing.T, name string) (*Report, *catalog.Catalog) {
	t.Helper()
	return workedWith(t, name, Options{})
}

func workedWith(t *testing.T, name string, o Options) (*Report, *catalog.Catalog) {
	t.Helper()
	j, c := jobOf(t, name)
	return compared(t, j, c, o), c
}

// jobOf reads a worked job, to be changed.
func jobOf(t *testing.T, name string) (*job.Job, *catalog.Catalog) {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	data, err := os.ReadFile("../../testdata/jobs/" + name + ".yaml")
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read(name, data, c)
	if err != nil {
		t.Fatal(err)
	}
	return j, c
}

func compared(t *testing.T, j *job.Job, c *catalog.Catalog, o Options) *Report {
	t.Helper()
	r, err := Compare(t.Context(), j, c, o)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

var workedJobs = []string{"saturated-toluene", "reclaimed-ethyl-acetate", "acetonitrile"}

// at is the job with one figure changed: what each break-even was asked of, put
// together anew.
func (q *question) at(t *testing.T, b *BreakEven, x float64) *search.Tuner {
	switch b.Key {
	case Volume:
		return q.withLot(func(l *job.Lot) { l.BatchesPerYear = x * 12 / (l.BatchM3 * 1e3) })
	case Technician:
		return q.priced(x/b.Now, "technician")
	case SievePrice:
		return q.priced(x/b.Now, q.sieves()...)
	case SieveUses:
		cat := *q.k.Catalog
		cat.Agents = maps.Clone(cat.Agents)
		for _, key := range q.sieves() {
			a := *cat.Agents[key]
			lives := *a.Lives
			lives.SI, a.Lives = x, &lives
			cat.Agents[key] = &a
		}
		k := q.k.With(q.k.Lot)
		k.Catalog = &cat
		return q.tuner(k, q.book)
	}
	t.Fatalf("no figure %s", b.Key)
	return nil
}

// Where the order of two routes changes their costs differ by less than 0.01 %, and on
// either side the one is cheaper that is said to be; where one of the two ceases to be
// possible the order changes too. Where it never changes the same route is the cheapest
// over the whole range. The routes are tuned anew, without what the search knew.
func TestOrderChangesAtTheBreakEven(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	kinds := map[string]int{}
	for _, name := range workedJobs {
		for _, draws := range []int{0, 400} {
			r, c := workedWith(t, name, Options{Draws: draws, Seed: 1})
			full := *r
			full.Book = r.prices
			q, err := newQuestion(context.Background(), &full, &r.Lots[0], c)
			if err != nil {
				t.Fatal(err)
			}
			q.warm = nil
			anchors := q.asIs()
			if _, err := q.startWaters().settled(anchors); err != nil && !search.NoOffer(err) {
				t.Fatal(err)
			}
			for i := range r.Lots[0].BreakEvens {
				b := &r.Lots[0].BreakEvens[i]
				what := fmt.Sprintf("%s, %d draws, %s", name, draws, b.Key)
				switch {
				case !b.Never:
					kinds["flip"]++
					q.checkFlip(t, what, b, anchors)
				case b.Key != Receiver && b.Key != StartWater && b.Key != Volume:
					kinds["never"]++
					q.checkNever(t, what, b)
				}
			}
		}
	}
	if kinds["flip"] < 6 || kinds["never"] < 2 {
		t.Errorf("%v: too few to tell", kinds)
	}
}

// costAt is the cost a litre of a route with a figure of the job at x; +Inf where it
// cannot be had.
func (q *question) costAt(t *testing.T, b *BreakEven, x float64, id string, anchors *starts) float64 {
	t.Helper()
	one := func(r routes.Route) bool { return r.ID() == id }
	if b.Key == Receiver { // the receivers change places, over one route
		cost, err := q.withReceiver(q.cheapestTrap(), b.Below, b.Above)(x, id)
		if err != nil {
			t.Fatal(err)
		}
		return cost
	}
	var f search.Field
	if b.Key == StartWater {
		f = anchors.field(x, one)
		f.Warm, f.Learns = nil, false
	} else {
		f = q.field(q.at(t, b, x), one)
	}
	won, _, err := f.Cheapest(nil, math.Inf(1))
	if err != nil {
		t.Fatal(err)
	}
	return won.Cost
}

func (q *question) checkFlip(t *testing.T, what string, b *BreakEven, anchors *starts) {
	t.Helper()
	if below, above := q.costAt(t, b, b.At, b.Below, anchors), q.costAt(t, b, b.At, b.Above, anchors); !b.Step && !(math.Abs(below-above) <= 1e-4*above) {
		t.Errorf("%s at %.8g: %s costs %.8g, %s %.8g", what, b.At, b.Below, below, b.Above, above)
	}
	for _, side := range []float64{0.99, 1.01} {
		below, above := q.costAt(t, b, b.At*side, b.Below, anchors), q.costAt(t, b, b.At*side, b.Above, anchors)
		if (below < above) != (side < 1) {
			t.Errorf("%s at %.8g: %s costs %.8g, %s %.8g: the order does not flip", what, b.At*side, b.Below, below, b.Above, above)
		}
	}
}

func (q *question) checkNever(t *testing.T, what string, b *BreakEven) {
	t.Helper()
	const steps = 4
	for i := range steps + 1 {
		x := b.From * math.Pow(b.To/b.From, float64(i)/steps)
		won, _, err := q.field(q.at(t, b, x), nil).Cheapest(nil, math.Inf(1))
		if err != nil {
			t.Fatal(err)
		}
		if cost := q.costAt(t, b, x, b.Below, nil); cost > won.Cost*(1+1e-4) {
			t.Errorf("%s at %.5g: %s costs %.6g, %s %.6g", what, x, b.Below, cost, won.ID(), won.Cost)
		}
	}
}

// What the worked jobs are there to show: pre-drying pays for the wet ester whose
// sieve is used once, and not for acetonitrile.
func TestWorkedJobs(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	for name, preDried := range map[string]bool{"reclaimed-ethyl-acetate": true, "acetonitrile": false} {
		r, _ := worked(t, name)
		best := r.Lots[0].Best()
		if best == nil || strings.Contains(best.ID, "+") != preDried {
			t.Errorf("%s: best is %+v, pre-dried %t wanted", name, best, preDried)
		}
	}
	r, _ := worked(t, "saturated-toluene")
	if best := r.Lots[0].Best(); best == nil || !strings.HasPrefix(best.ID, "settle+soak:") {
		t.Errorf("free water is not drawn off first: %+v", best)
	}
}

// The same job gives the same answer on one core and on several.
func TestSameAnswerOnAnyNumberOfCores(t *testing.T) {
	before := runtime.GOMAXPROCS(1)
	defer runtime.GOMAXPROCS(before)
	answer := func(cores int) string {
		runtime.GOMAXPROCS(cores)
		r, _ := workedWith(t, "reclaimed-ethyl-acetate", Options{Draws: 200, Seed: 1})
		l := r.Lots[0]
		for i := range l.BreakEvens {
			if b := &l.BreakEvens[i]; math.IsNaN(b.At) {
				b.At = -1
			}
		}
		for _, row := range l.WhatIf.Cells {
			for i := range row {
				if math.IsNaN(row[i].CostPerLitre) {
					row[i].CostPerLitre = -1
				}
			}
		}
		var settings []any
		for _, route := range l.Routes {
			settings = append(settings, route.ID, route.Rank, route.Bill.PerBatch, route.Run.Settings, route.Range, route.Recommended)
		}
		text, err := json.Marshal([]any{settings, l.BreakEvens, l.WhatIf, l.Front})
		if err != nil {
			t.Fatal(err)
		}
		return string(text)
	}
	one := answer(1)
	for _, cores := range []int{2, 8} {
		if several := answer(cores); one != several {
			t.Errorf("on one core\n%s\non %d\n%s", one, cores, several)
		}
	}
}
