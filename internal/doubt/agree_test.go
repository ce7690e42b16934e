package doubt_test

import (
	"flag"
	"math"
	"os"
	"path/filepath"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

// jobs are the demonstration and the worked jobs.
func jobs(t testing.TB) (all map[string]*job.Job, cat *catalog.Catalog) {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	name, text := job.Demo()
	texts := map[string][]byte{name: text}
	files, err := filepath.Glob("../../testdata/jobs/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatalf("no worked jobs: %v", err)
	}
	for _, file := range files {
		if texts[file], err = os.ReadFile(file); err != nil {
			t.Fatal(err)
		}
	}
	all = map[string]*job.Job{}
	for name, text := range texts {
		j, err := job.Read(name, text, cat)
		if err != nil {
			t.Fatal(err)
		}
		all[filepath.Base(name)] = j
	}
	return all, cat
}

var everyDraw = flag.Bool("every-draw", false, "rerun every draw in full: many minutes")

// carrierBand is the factor within which a carrier distillation, which the draws do
// not follow, is said to lie; a route of several steps may use it twice.
const carrierBand = 9

type worst struct{ water, hours, cost float64 }

// For random draws over all routes, the quick way agrees with the full model rerun
// at the same inputs with the same doses.
func TestQuickAgreesWithTheFullModel(t *testing.T) {
	const draws = 400
	checked := 2
	if *everyDraw {
		checked = draws
	}
	all, cat := jobs(t)
	worsts := map[string]*worst{}
	for name, j := range all {
		for _, lot := range j.Lots {
			k, err := routes.NewCase(j, lot, cat)
			if err != nil {
				t.Fatal(err)
			}
			book, err := costs.NewBook(cat, j)
			if err != nil {
				t.Fatal(err)
			}
			site := costs.NewArrangement(cat, j)
			l, err := doubt.New(k, book, site, draws, 7)
			if err != nil {
				t.Fatal(err)
			}
			tuner := &search.Tuner{Case: k, Book: book, Objective: search.Cost, Site: site}
			offered, _ := k.Candidates()
			offered, _ = tuner.Prune(offered)
			for _, r := range offered {
				run, err := tuner.Tune(r)
				if err != nil {
					continue
				}
				compareDraws(t, name+", "+lot.Name, k, l, site, &run, checked, worsts)
			}
		}
	}
	for kind, w := range worsts {
		t.Logf("%-24s worst: water %.2f %%, hours %.2f %%, cost %.2f %%", kind, 100*w.water, 100*w.hours, 100*w.cost)
	}
}

func compareDraws(t *testing.T, where string, k *routes.Case, l *doubt.Lot, site *costs.Arrangement, run *routes.Run, checked int, worsts map[string]*worst) {
	t.Helper()
	quick, err := l.Through(run)
	if err != nil {
		t.Errorf("%s, %s: %v", where, run.Route.ID(), err)
		return
	}
	kind, carried := "", false
	for _, s := range run.Route {
		kind += string(s.Kind) + " "
		carried = carried || s.Carrier != ""
	}
	if carried {
		kind += "with a carrier "
	}
	w := worsts[kind]
	if w == nil {
		w = &worst{}
		worsts[kind] = w
	}
	for i := range checked {
		at := i * l.Draws() / checked
		d, book := l.Draw(at)
		under, err := k.Under(d)
		if err != nil {
			t.Fatal(err)
		}
		full, err := under.Rerun(run)
		if err != nil {
			if !math.IsInf(quick.Water[at], 1) && !carried {
				t.Errorf("%s, %s, draw %d: full %v, quick %.4g mg/kg", where, run.Route.ID(), at, err, 1e6*quick.Water[at])
			}
			continue
		}
		site.Apply(&full, k.Lot.BatchesPerYear)
		cost, err := book.PerBatchFloat(full.Uses, k.Lot.BatchesPerYear)
		if err != nil {
			t.Fatal(err)
		}
		off := func(into *float64, what string, quick, full float64) {
			e := math.Abs(quick/full - 1)
			*into = math.Max(*into, e)
			if !(e <= 0.01) && !carried {
				t.Errorf("%s, %s, draw %d: %s %.5g, full %.5g", where, run.Route.ID(), at, what, quick, full)
			}
		}
		if r := quick.Water[at] / full.WaterOut; carried && !(r < carrierBand && r > 1/carrierBand) {
			t.Errorf("%s, %s, draw %d: water %.5g, full %.5g", where, run.Route.ID(), at, quick.Water[at], full.WaterOut)
		}
		off(&w.water, "water", quick.Water[at], full.WaterOut)
		off(&w.hours, "hours", quick.Hours[at], full.HoursTotal)
		if quick.CostPerLitre != nil {
			off(&w.cost, "cost", quick.CostPerLitre[at], cost/full.LitresDelivered)
		}
	}
}
