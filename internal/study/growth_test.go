package study_test

import (
	"context"
	"flag"
	"fmt"
	"maps"
	"math"
	"os"
	"runtime"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
	"parch/internal/study"
)

var growthTimed = flag.Bool("growth-timed", false, "measure processor time, on larger sizes, in place of the bytes set aside")

// How work grows is measured in bytes set aside, which a busy machine does not
// change, or by processor time with -growth-timed.
func effort(t *testing.T, work func()) float64 {
	t.Helper()
	if *growthTimed {
		least := math.Inf(1)
		for range 3 {
			start := processorTime(t)
			work()
			least = math.Min(least, processorTime(t)-start)
		}
		return least
	}
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	work()
	runtime.ReadMemStats(&after)
	return float64(after.TotalAlloc - before.TotalAlloc)
}

// grows fits effort = c n^e over three sizes, by least squares of the logarithms.
func grows(t *testing.T, what string, sizes []int, work func(n int)) {
	t.Helper()
	var x, y, xx, xy float64
	work(sizes[0]) // what is made once
	for _, n := range sizes {
		e := effort(t, func() { work(n) })
		t.Logf("%d %s: %.4g", n, what, e)
		lnN, lnE := math.Log(float64(n)), math.Log(e)
		x, y, xx, xy = x+lnN, y+lnE, xx+lnN*lnN, xy+lnN*lnE
	}
	k := float64(len(sizes))
	exponent := (k*xy - x*y) / (k*xx - x*x)
	t.Logf("effort goes with %s to the power of %.3f", what, exponent)
	if !(exponent >= 0.9 && exponent <= 1.1) {
		t.Errorf("effort goes with %s to the power of %.3f, want 0.9 to 1.1", what, exponent)
	}
}

// timesMore takes larger sizes where time is measured.
func timesMore(sizes []int, more int) []int {
	if !*growthTimed {
		return sizes
	}
	for i := range sizes {
		sizes[i] *= more
	}
	return sizes
}

// pilotSieves are n sieves like 3A, each a little different, for aromatics only.
func pilotSieves(t *testing.T, n int) *catalog.Catalog {
	t.Helper()
	own, err := os.ReadFile("../../catalog/testdata/own.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := string(own)
	between := func(from, to string) string {
		_, after, ok := strings.Cut(text, from)
		part, _, ok2 := strings.Cut(after, to)
		if !ok || !ok2 {
			t.Fatalf("no %q to %q", from, to)
		}
		return part
	}
	agent, classes := between("agents:\n", "matrix:"), between("  classes:\n", "histories:")
	var agents, matrix, prices strings.Builder
	rows := strings.Split(classes, "\n")
	for i := range n {
		key := fmt.Sprintf("pilot-%d", i)
		one := strings.ReplaceAll(agent, "sieve-3a-pilot", key)
		one = strings.Replace(one, "of the pilot hall", fmt.Sprint("number ", i), 1)
		agents.WriteString(strings.Replace(one, "capacity: 15.3593", fmt.Sprintf("capacity: %.4f", 15+0.01*float64(i)), 1))
		fmt.Fprintf(&prices, "    %s: {price: %.2f EUR/kg}\n", key, 20+0.1*float64(i))
	}
	for _, row := range rows {
		if !strings.Contains(row, "sieve-3a-pilot") {
			matrix.WriteString(row + "\n")
			continue
		}
		for i := range n {
			matrix.WriteString(strings.ReplaceAll(row, "sieve-3a-pilot", fmt.Sprintf("pilot-%d", i)) + "\n")
		}
	}
	file := "sources:\n  pilot-hall: \"invented\"\nagents:\n" + agents.String() +
		"matrix:\n  common: {source: pilot-hall, confidence: invented}\n  classes:\n" + matrix.String() +
		"prices:\n  kept under: 2026-10-01\n  common: {source: pilot-hall, confidence: invented}\n  items:\n" + prices.String()
	c, err := catalog.LoadWith(catalog.File{Name: "pilot.yaml", Data: []byte(file)})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

const noOthers = "exclude: {steps: [trap, buy, settle, salt, column, reactive, forerun], agents: [sieve-3a, sieve-4a, sieve-5a]}\n"

func lotsToDry(n int) string {
	var b strings.Builder
	b.WriteString("lots:\n")
	for i := range n {
		fmt.Fprintf(&b, "  - {name: lot %d, solvent: toluene, batch: 18 L, water: %d mg/kg, target: 15 mg/kg, vessel height: 0.25 m}\n", i, 400+i%50)
	}
	return b.String()
}

func jobFor(t *testing.T, c *catalog.Catalog, text string) *job.Job {
	t.Helper()
	j, err := job.Read("job.yaml", []byte(text), c)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

func rank(t *testing.T, j *job.Job, c *catalog.Catalog, draws int) *study.Report {
	t.Helper()
	r, err := study.Compare(context.Background(), j, c, study.Options{RankingOnly: true, Draws: draws, Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func TestEffortGrowsWithTheLots(t *testing.T) {
	c := pilotSieves(t, 4)
	grows(t, "lots", timesMore([]int{4, 8, 16}, 4), func(n int) {
		if r := rank(t, jobFor(t, c, noOthers+lotsToDry(n)), c, 100); len(r.Lots) != n {
			t.Errorf("%d lots, want %d", len(r.Lots), n)
		}
	})
}

func TestEffortGrowsWithTheRoutes(t *testing.T) {
	shelf := map[int]*catalog.Catalog{}
	sizes := timesMore([]int{16, 32, 64}, 2)
	for _, n := range sizes {
		shelf[n] = pilotSieves(t, n)
	}
	grows(t, "routes", sizes, func(n int) {
		r := rank(t, jobFor(t, shelf[n], noOthers+lotsToDry(1)), shelf[n], 500)
		if got := ranAlone(&r.Lots[0]); got != n {
			t.Errorf("%d routes of one step, want %d", got, n)
		}
	})
}

// ranAlone counts the routes of one step, those left out because others are better
// among them.
func ranAlone(l *study.Lot) int {
	ids := map[string]int{}
	for _, r := range l.Routes {
		ids[r.ID]++
	}
	for _, e := range l.Excluded {
		if e.Beaten {
			ids[e.ID]++
		}
	}
	maps.DeleteFunc(ids, func(id string, _ int) bool { return strings.Contains(id, "+") })
	return len(ids)
}

// soakedLot is what the draws are made for.
func soakedLot(t *testing.T) (*routes.Case, costs.Book, *costs.Arrangement, routes.Run) {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j := jobFor(t, c, lotsToDry(1))
	k, err := routes.NewCase(j, j.Lots[0], c)
	if err != nil {
		t.Fatal(err)
	}
	book, err := costs.NewBook(c, j)
	if err != nil {
		t.Fatal(err)
	}
	site := costs.NewArrangement(c, j)
	run, err := (&search.Tuner{Case: k, Book: book, Objective: search.Cost, Site: site}).Tune(routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}})
	if err != nil {
		t.Fatal(err)
	}
	return k, book, site, run
}

func TestEffortGrowsWithTheDraws(t *testing.T) {
	k, book, site, run := soakedLot(t)
	grows(t, "draws", timesMore([]int{5000, 10_000, 20_000}, 5), func(n int) {
		l, err := doubt.New(k, book, site, n, 1)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := l.Through(&run); err != nil {
			t.Fatal(err)
		}
	})
}
