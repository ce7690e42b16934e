package workbook

import (
	"context"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/outside"
	"parch/internal/routes"
	"parch/internal/study"
)

// The oracle is an independent spreadsheet program, run without a window. Where it
// is not installed the tests are skipped, except in continuous integration.

const alwaysRecalculate = `<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry" xmlns:xs="http://www.w3.org/2001/XMLSchema" xmlns:xsi="http://www.w3.org/2001/XMLSchema-instance">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode" oor:op="fuse"><value>0</value></prop></item>
</oor:items>
`

// converted opens the files with the oracle and returns what it saves.
func converted(t *testing.T, recalculate bool, files ...[]byte) []*book {
	t.Helper()
	soffice := outside.Program(t, "soffice")
	dir := t.TempDir()
	profile := filepath.Join(dir, "profile")
	if recalculate {
		if err := os.MkdirAll(filepath.Join(profile, "user"), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(profile, "user", "registrymodifications.xcu"), []byte(alwaysRecalculate), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	out := filepath.Join(dir, "out")
	args := []string{"-env:UserInstallation=file://" + filepath.ToSlash(profile), "--headless", "--convert-to", "xlsx", "--outdir", out}
	for i, data := range files {
		name := filepath.Join(dir, fmt.Sprintf("book%d.xlsx", i))
		if err := os.WriteFile(name, data, 0o644); err != nil {
			t.Fatal(err)
		}
		args = append(args, name)
	}
	if text, err := exec.CommandContext(t.Context(), soffice, args...).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, text)
	}
	books := make([]*book, len(files))
	for i := range files {
		data, err := os.ReadFile(filepath.Join(out, fmt.Sprintf("book%d.xlsx", i)))
		if err != nil {
			t.Fatal(err)
		}
		books[i] = readBook(t, data)
	}
	return books
}

// Differences that should be zero are left at the noise of sums of a few thousand:
// 1e-16 of a few thousand, with a hundredfold margin.
const noise = 1e-10

// sameValues compares every formula cell of a with the same cell of b.
func sameValues(t *testing.T, a, b *book) {
	t.Helper()
	n := 0
	for _, sheet := range a.sheets {
		for place, x := range a.cells[sheet] {
			if x.formula == "" {
				continue
			}
			n++
			y := b.cells[sheet][place]
			if y.formula == "" {
				t.Errorf("%s!%s: the formula is gone", sheet, place)
				continue
			}
			compareCells(t, sheet+"!"+place, x, y)
		}
	}
	if n < 300 {
		t.Errorf("only %d formula cells compared", n)
	}
}

func compareCells(t *testing.T, where string, x, y stored) {
	t.Helper()
	if y.kind == "e" || strings.HasPrefix(y.text, "#") {
		t.Errorf("%s: error %s in %s", where, y.text, x.formula)
		return
	}
	v, isNumber := x.number()
	w, alsoNumber := y.number()
	switch {
	case isNumber != alsoNumber:
		t.Errorf("%s: stored %q (%s), recalculated %q (%s): %s", where, x.raw, x.kind, y.raw, y.kind, x.formula)
	case isNumber && math.Abs(v-w) > max(noise, 1e-9*math.Abs(v)):
		t.Errorf("%s: stored %v, recalculated %v: %s", where, v, w, x.formula)
	case !isNumber && x.text != y.text:
		t.Errorf("%s: stored %q, recalculated %q: %s", where, x.text, y.text, x.formula)
	}
}

func TestStoredValuesEqualRecalculatedOnes(t *testing.T) {
	if testing.Short() {
		t.Skip("starts another program")
	}
	t.Parallel()
	for _, r := range []*study.Report{demo(t), synthetic()} {
		data := written(t, r)
		sameIn := converted(t, true, data)[0]
		if r == demo(t) {
			sameValues(t, readBook(t, data), sameIn)
			continue
		}
		original := readBook(t, data)
		for _, sheet := range original.sheets {
			for place, x := range original.cells[sheet] {
				if x.formula != "" {
					compareCells(t, sheet+"!"+place, x, sameIn.cells[sheet][place])
				}
			}
		}
	}
}

// A reader that trusts the stored values shows the same.
func TestStoredValuesSurviveAPlainConversion(t *testing.T) {
	if testing.Short() {
		t.Skip("starts another program")
	}
	t.Parallel()
	data := written(t, demo(t))
	sameValues(t, readBook(t, data), converted(t, false, data)[0])
}

// settingsOf are the tuned settings of a report, for a run that must not tune again.
func settingsOf(r *study.Report) map[string]map[string]routes.Settings {
	out := map[string]map[string]routes.Settings{}
	for _, lot := range r.Lots {
		out[lot.Job.Name] = map[string]routes.Settings{}
		for _, route := range lot.Routes {
			out[lot.Job.Name][route.ID] = route.Run.Settings
		}
	}
	return out
}

// Changing one cell of the file must give what a new run with that value and the
// settings of the first run gives.
func TestEditedPriceEqualsANewRun(t *testing.T) {
	if testing.Short() {
		t.Skip("starts another program")
	}
	t.Parallel()
	original := readBook(t, written(t, demo(t)))
	sheet, place, c := original.named(t, "price_technician_hour")
	old, _ := c.number()
	wage := 10 * old // so much that ranks change
	lotSheet, batches, _ := original.named(t, "lot1_batches_per_year")
	books := converted(t, true,
		original.with(t, sheet, place, strconv.FormatFloat(wage, 'g', -1, 64)),
		original.with(t, lotSheet, batches, "4"))
	wages := func(j *job.Job) {
		for i := range j.Prices {
			if j.Prices[i].Item == "technician" {
				j.Prices[i].PerUnit = decimal.NewFromFloat(wage)
			}
		}
	}
	fewer := func(j *job.Job) { j.Lots[0].BatchesPerYear = 4 }
	moved := equalsRun(t, books[0], wages)
	equalsRun(t, books[1], fewer)
	if moved == 0 {
		t.Error("the wage changes no rank: the test shows nothing of the ranking")
	}
}

// equalsRun compares Compare with a new run of the demonstration, route by route,
// and counts the routes whose rank differs from the first run's.
func equalsRun(t *testing.T, b *book, edit func(*job.Job)) (moved int) {
	t.Helper()
	first := demo(t)
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	name, data := job.Demo()
	j, err := job.Read(name, data, c)
	if err != nil {
		t.Fatal(err)
	}
	edit(j)
	again, err := study.Compare(context.Background(), j, c, study.Options{Settings: settingsOf(first)})
	if err != nil {
		t.Fatal(err)
	}
	_, _, total := b.named(t, "check_total")
	if total.raw != "0" {
		t.Errorf("check_total is %s after an edit that the sheet follows", total.raw)
	}
	cells, row := b.cells["Compare"], layoutOf(t).compareRows.first
	for i, lot := range first.Lots {
		for _, route := range lot.Routes {
			want := find(t, again.Lots[i].Routes, route.ID)
			batch, _ := cells[at(compareBatch, row)].number()
			litre, _ := cells[at(compareLitre, row)].number()
			rank, _ := cells[at(compareRank, row)].number()
			// Hours and amounts follow curves that agree with the run within this share; what
			// differs by more stands as a value.
			near := func(sheet, run float64) bool { return math.Abs(sheet-run) <= math.Max(0.005, agreement*run) }
			if !near(batch, want.Bill.PerBatch.InexactFloat64()) || !near(litre, want.Bill.PerLitre.InexactFloat64()) || int(rank) != want.Rank {
				t.Errorf("lot %d, %s: the sheet has %.4f, %.4f, rank %v; the run has %s, %s, rank %d",
					i+1, route.ID, batch, litre, rank, want.Bill.PerBatch, want.Bill.PerLitre, want.Rank)
			}
			if want.Rank != route.Rank {
				moved++
			}
			row++
		}
	}
	return moved
}

func find(t *testing.T, list []study.Route, id string) study.Route {
	t.Helper()
	for _, r := range list {
		if r.ID == id {
			return r
		}
	}
	t.Fatalf("the new run has no route %s", id)
	return study.Route{}
}

// What should be seen is seen: a broken bill, an input that only the program can
// follow, a price that is no number.
func TestFaultsAreFlagged(t *testing.T) {
	if testing.Short() {
		t.Skip("starts another program")
	}
	t.Parallel()
	original := readBook(t, written(t, demo(t)))
	l := layoutOf(t)
	inputs, water, _ := original.named(t, "lot2_start_water")
	_, objective, _ := original.named(t, "job_objective")
	books := converted(t, true,
		original.with(t, "Costs", at(billAmount, l.lineRows.first+2), "999"),
		original.with(t, inputs, water, "250000"), // a quarter water: no curve of the lot goes so far
		original.with(t, inputs, objective, "0"),
		original.with(t, "Costs", at(rankPlace, l.rankRows.first), "2"))
	for i, b := range books {
		_, _, total := b.named(t, "check_total")
		if v, ok := total.number(); !ok || v < 1 {
			t.Errorf("edit %d: check_total is %q", i+1, total.text)
		}
		for _, sheet := range b.sheets {
			if c := b.cells[sheet]["B3"]; !strings.HasPrefix(c.text, "See Checks") {
				t.Errorf("edit %d: %s says %q", i+1, sheet, c.text)
			}
		}
	}
	stale := books[1]
	if c := stale.cells["Steps"]["B3"]; c.text != "See Checks. Run parch again" {
		t.Errorf("the top of Steps says %q", c.text)
	}
	// The sheet follows this input; the routes whose curves end before it say so.
	state := map[string]bool{}
	for place, c := range stale.cells["Compare"] {
		if strings.HasPrefix(place, columnName(compareState)) {
			state[c.text] = true
		}
	}
	if !state[runAgain] || !state[""] {
		t.Errorf("states on Compare: %v", state)
	}
}
