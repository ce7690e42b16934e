package study

import (
	"context"
	"os"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/spread"
)

// Twice the draws tell the same of every route that is recommended first, in the worked
// jobs and in the demonstration.
func TestDoublingTheDrawsChangesNoFigure(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	name, data := job.Demo()
	files := map[string][]byte{name: data}
	for _, name := range workedJobs {
		if files[name], err = os.ReadFile("../../testdata/jobs/" + name + ".yaml"); err != nil {
			t.Fatal(err)
		}
	}
	for name, data := range files {
		j, err := job.Read(name, data, c)
		if err != nil {
			t.Fatal(err)
		}
		o := Options{Draws: spread.UsualDraws, Seed: 1, RankingOnly: true}
		r, err := Compare(context.Background(), j, c, o)
		if err != nil {
			t.Fatal(err)
		}
		o.Draws *= 2
		for i := range r.Lots {
			if best := r.Lots[i].Best(); best != nil {
				twice := drawnAnew(t, r, &r.Lots[i], c, o)
				same(t, name+", "+r.Lots[i].Job.Name, best.Range, twice)
			}
		}
	}
}

// drawnAnew is what other draws tell of the best route of a lot.
func drawnAnew(t *testing.T, r *Report, l *Lot, c *catalog.Catalog, o Options) *Range {
	t.Helper()
	k, err := routes.NewCase(r.Job, l.Job, c)
	if err != nil {
		t.Fatal(err)
	}
	d, err := newDoubts(context.Background(), k, r.prices, costs.NewArrangement(c, r.Job), o)
	if err != nil {
		t.Fatal(err)
	}
	again := Lot{Job: l.Job, Routes: []Route{*l.Best()}}
	if err := d.judge(context.Background(), again.Routes, nil); err != nil {
		t.Fatal(err)
	}
	if err := d.spread(context.Background(), &again); err != nil {
		t.Fatal(err)
	}
	return again.Routes[0].Range
}

func same(t *testing.T, what string, one, two *Range) {
	t.Helper()
	bands := func(r *Range) [3]spread.Band { return [3]spread.Band{r.Water, *r.CostPerLitre, r.Hours} }
	for k, b := range bands(one) {
		if w := bands(two)[k]; b.Low != w.Low || b.Median != w.Median || b.High != w.High {
			t.Errorf("%s, %s: %g, %g, %g; of twice the draws %g, %g, %g", what, [3]string{"water", "cost", "hours"}[k], b.Low, b.Median, b.High, w.Low, w.Median, w.High)
		}
	}
	if *one.Chance != *two.Chance {
		t.Errorf("%s: a chance of %g; of twice the draws %g", what, *one.Chance, *two.Chance)
	}
}
