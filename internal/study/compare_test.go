package study_test

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
	"parch/internal/study"
)

// compare leaves out what the tests of the ranking do not look at.
func compare(t testing.TB, yaml string, o study.Options) *study.Report {
	t.Helper()
	o.RankingOnly = true
	return decided(t, yaml, o)
}

func decided(t testing.TB, yaml string, o study.Options) *study.Report {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read("job.yaml", []byte(yaml), c)
	if err != nil {
		t.Fatal(err)
	}
	r, err := study.Compare(context.Background(), j, c, o)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func demo(t testing.TB) string {
	t.Helper()
	_, data := job.Demo()
	return string(data)
}

func ids(l study.Lot) (reach, miss []string) {
	for _, r := range l.Routes {
		if r.Rank > 0 {
			reach = append(reach, r.ID)
		} else {
			miss = append(miss, r.ID)
		}
	}
	return reach, miss
}

func reasons(l study.Lot) map[string]string {
	out := map[string]string{}
	for _, e := range l.Excluded {
		out[e.ID] = e.Reason
	}
	return out
}

const oneLot = "lots:\n  - {name: lot, solvent: %s, batch: 10 L, water: %s, target: %s%s}\n"

func TestPeroxideFormerWithoutAReadingIsNotHeated(t *testing.T) {
	l := compare(t, fmt.Sprintf(oneLot, "tetrahydrofuran", "300 mg/kg", "50 mg/kg", ""), study.Options{}).Lots[0]
	for _, r := range l.Routes {
		for _, s := range r.Run.Route {
			if s.Kind == steps.Trap {
				t.Errorf("%s is offered", r.ID)
			}
		}
	}
	for _, id := range []string{"trap"} {
		if !strings.HasPrefix(reasons(l)[id], "test first") {
			t.Errorf("%s: %q, want \"test first\"", id, reasons(l)[id])
		}
	}
}

func TestPeroxideReadingOverTheLimitIsNotHeated(t *testing.T) {
	l := compare(t, fmt.Sprintf(oneLot, "tetrahydrofuran", "300 mg/kg", "50 mg/kg", ", peroxide: {reading: 30 mg/L, date: 2026-11-28}"), study.Options{}).Lots[0]
	if got := reasons(l)["trap"]; !strings.Contains(got, "not under the site's limit") {
		t.Errorf("trap: %q", got)
	}
}

func TestDangerousPairsNeverBecomeRoutes(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	c, _ := catalog.Load()
	for _, solvent := range []string{"toluene", "cyclohexane", "dichloromethane", "ethyl-acetate", "tetrahydrofuran", "acetonitrile"} {
		l := compare(t, fmt.Sprintf(oneLot, solvent, "300 mg/kg", "50 mg/kg", ", peroxide: {reading: 0 mg/L, date: 2026-11-28}")+
			"accept: {unsuitable: [sodium, calcium-hydride, magnesium, potassium-hydroxide, sieve-13x, sieve-5a, sieve-4a]}\n", study.Options{}).Lots[0]
		for _, r := range l.Routes {
			for _, s := range r.Run.Route {
				if s.Agent == "" {
					continue
				}
				if v, ok := c.Verdict(c.Solvents[solvent], s.Agent); !ok || v.Word == "dangerous" {
					t.Errorf("%s: %s is offered (%s)", solvent, r.ID, v.Word)
				}
			}
		}
	}
	// Prudent Practices in the Laboratory (1995) p. 103: halogenated solvents with active metals.
	l := compare(t, fmt.Sprintf(oneLot, "dichloromethane", "300 mg/kg", "50 mg/kg", ""), study.Options{}).Lots[0]
	if got := reasons(l)["reactive:sodium"]; !strings.HasPrefix(got, "dangerous") {
		t.Errorf("sodium in dichloromethane: %q", got)
	}
}

// Acetonitrile enters the pores of 4A (physics of the pore, kinetic diameter 3.4 angstrom).
func TestUnsuitableOnlyWhenAccepted(t *testing.T) {
	yaml := fmt.Sprintf(oneLot, "acetonitrile", "1000 mg/kg", "50 mg/kg", "")
	l := compare(t, yaml, study.Options{}).Lots[0]
	if got := reasons(l)["soak:sieve-4a"]; !strings.HasPrefix(got, "unsuitable") {
		t.Errorf("4A in acetonitrile: %q", got)
	}
	l = compare(t, yaml+"accept: {unsuitable: [sieve-4a]}\n", study.Options{}).Lots[0]
	for _, r := range l.Routes {
		if r.ID != "soak:sieve-4a" {
			continue
		}
		for _, c := range r.Cautions {
			if strings.Contains(c.Text, "unsuitable") {
				return
			}
		}
	}
	t.Error("accepted 4A is not offered with its mark")
}

func TestDryLotHasNothingToDo(t *testing.T) {
	l := compare(t, fmt.Sprintf(oneLot, "toluene", "10 mg/kg", "30 mg/kg", ""), study.Options{}).Lots[0]
	if !strings.Contains(l.NothingToDo, "nothing to do") || len(l.Routes) != 0 {
		t.Errorf("%q, %d routes", l.NothingToDo, len(l.Routes))
	}
}

func TestTargetBelowTheDetectionLimitCannotBeShown(t *testing.T) {
	l := compare(t, fmt.Sprintf(oneLot, "toluene", "400 mg/kg", "5 mg/kg", ""), study.Options{}).Lots[0]
	if reach, _ := ids(l); len(reach) != 0 || l.CannotShow == "" {
		t.Errorf("%v reach a target that cannot be shown (%q)", reach, l.CannotShow)
	}
}

func TestRoutesMeetByTheAcceptanceLimit(t *testing.T) {
	for _, l := range compare(t, demo(t), study.Options{}).Lots {
		for _, r := range l.Routes {
			if (r.Rank > 0) != (r.Run.WaterOut <= l.AcceptAt*(1+1e-9)) {
				t.Errorf("%s: rank %d with %g against %g", r.ID, r.Rank, r.Run.WaterOut, l.AcceptAt)
			}
			for _, o := range r.Run.Outcomes {
				if o.Kind == steps.Trap && o.Out.Water() < 20e-6*(1-1e-9) {
					t.Errorf("%s: a trap claims %g", r.ID, o.Out.Water())
				}
			}
		}
	}
}

func TestGivenSettingsReproduceTheRun(t *testing.T) {
	first := compare(t, demo(t), study.Options{})
	given := map[string]map[string]routes.Settings{}
	for _, l := range first.Lots {
		given[l.Job.Name] = map[string]routes.Settings{}
		for _, r := range l.Routes {
			given[l.Job.Name][r.ID] = r.Run.Settings
		}
	}
	again := compare(t, demo(t), study.Options{Settings: given})
	for i, l := range first.Lots {
		for k, r := range l.Routes {
			other := again.Lots[i].Routes[k]
			if r.ID != other.ID || !r.Bill.PerBatch.Equal(other.Bill.PerBatch) || r.Run.WaterOut != other.Run.WaterOut {
				t.Errorf("%s: %s at %g, then %s: %s at %g", r.ID, r.Bill.PerBatch, r.Run.WaterOut, other.ID, other.Bill.PerBatch, other.Run.WaterOut)
			}
		}
	}
}

func TestSameJobSameReport(t *testing.T) {
	summary := func() (out []string) {
		for _, l := range compare(t, demo(t), study.Options{}).Lots {
			for _, r := range l.Routes {
				out = append(out, fmt.Sprintf("%s %d %s %v", r.ID, r.Rank, r.Bill.PerBatch, r.Run.Settings))
			}
		}
		return out
	}
	if d := cmp.Diff(summary(), summary()); d != "" {
		t.Error(d)
	}
}

// The tuned hand-over is not worse than a fine grid over all hand-overs, stands
// and sieves by more than 0.5 %.
func TestTunedHandOverAgainstAGrid(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for _, solvent := range []string{"toluene", "dichloromethane"} {
		yaml := fmt.Sprintf(oneLot, solvent, "1500 mg/kg", "60 mg/kg", ", batches: 30 /yr")
		j, err := job.Read("job.yaml", []byte(yaml), c)
		if err != nil {
			t.Fatal(err)
		}
		k, err := routes.NewCase(j, j.Lots[0], c)
		if err != nil {
			t.Fatal(err)
		}
		book, err := costs.NewBook(c, j)
		if err != nil {
			t.Fatal(err)
		}
		tuner := &search.Tuner{Case: k, Book: book, Objective: search.Cost}
		r := routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: "sieve-3a"}}
		tuned, err := tuner.Tune(r)
		if err != nil {
			t.Fatal(err)
		}
		got, _ := search.Cost.Of(&tuned, book, 30)
		best := math.Inf(1)
		for i := range 120 {
			w := 20 * math.Pow(1500.0/20, float64(i)/119)
			for _, h := range []float64{8, 16, 24, 36, 48, 64, 72, 96, 120, 168} {
				run, err := k.Run(r, routes.Settings{HandOverMgPerKg: []float64{w}, SoakHours: []float64{h}, Stirred: []bool{false}, Sieve: []string{routes.Regenerate}})
				if err != nil || !run.Meets {
					continue
				}
				v, _ := search.Cost.Of(&run, book, 30)
				best = math.Min(best, v)
			}
		}
		if !(got <= best*1.005) {
			t.Errorf("%s: tuned %g, grid %g", solvent, got, best)
		}
	}
}

// A route of a run whose every bill line is finite adds up in float as in decimal.
func TestBillsAgreeWithTheSearch(t *testing.T) {
	r := compare(t, demo(t), study.Options{})
	for _, l := range r.Lots {
		for _, route := range l.Routes {
			perBatch, err := r.Book.PerBatchFloat(route.Run.Uses, l.Job.BatchesPerYear)
			if err != nil {
				t.Fatal(err)
			}
			if d := math.Abs(perBatch/route.Bill.PerBatch.InexactFloat64() - 1); d > 1e-9 {
				t.Errorf("%s: search and bill differ by %g", route.ID, d)
			}
		}
	}
}

func BenchmarkCompareDemo(b *testing.B) {
	yaml := demo(b)
	for b.Loop() {
		compare(b, yaml, study.Options{})
	}
}
