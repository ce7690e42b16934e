package proof_test

import (
	"math"
	"slices"
	"sync"
	"testing"
	"time"

	"parch/catalog"
	"parch/internal/proof"
)

func load(t testing.TB) (*catalog.Catalog, *catalog.Checks) {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	all, err := catalog.LoadChecks()
	if err != nil {
		t.Fatal(err)
	}
	return cat, all
}

// whole is the proof of the built-in catalog, run once for all tests.
var whole struct {
	sync.Once
	*proof.Result
	took time.Duration
}

func run(t testing.TB) *proof.Result {
	t.Helper()
	cat, all := load(t)
	whole.Do(func() {
		started := time.Now()
		r, err := proof.Run(cat, all)
		if err != nil {
			t.Fatal(err)
		}
		whole.Result, whole.took = r, time.Since(started)
	})
	return whole.Result
}

// The rows of "parch proof": published figures, each with its source in the
// catalog's tables of checks. The project holds itself to 900 rows and at most 6 %
// of them excused.
func TestPublishedRowsHold(t *testing.T) {
	r := run(t)
	if whole.took > 5*time.Second {
		t.Errorf("took %v; 5 s are allowed", whole.took)
	}
	for _, f := range r.Failures() {
		t.Errorf("%s of %s %s (%s) at %.2f K, %.4g Pa: %.5g, published %.5g %s; off by %.3g, limit %.3g %s %s [%s] %s",
			f.Quantity, f.Subject, f.Partner, f.Condition, f.TempK, f.PressurePa, f.Computed, f.Published, f.Unit, f.Deviation, f.Limit, f.LimitUnit, f.Trouble, f.Source, f.Place)
	}
	share, ofPublished := r.ExcusedShare()
	if len(r.Rows) < 900 || share > proof.ExcusedAim {
		t.Errorf("%d rows, %.1f %% excused; at least 900 and at most 6 %% are wanted", len(r.Rows), 100*share)
	}
	t.Logf("%d rows, excused %.2f %% of all, %.2f %% of the published", len(r.Rows), 100*share, 100*ofPublished)
	for _, k := range r.Kinds {
		t.Logf("%s: %d rows, %d within their limit, %d excused, %d not computed", k.Kind, k.Rows, k.Within, k.Excused, k.NotComputed)
	}
}

// Every quantity that the catalog's models give is proved by some row, and those
// that rest on print by some row that is not from memory.
func TestEveryQuantityIsProved(t *testing.T) {
	published, recalled := map[string]bool{}, map[string]bool{}
	for _, row := range run(t).Rows {
		if row.Kind == catalog.Recalled {
			recalled[row.Quantity] = true
		} else {
			published[row.Quantity] = true
		}
	}
	for _, q := range []string{
		"boiling-point", "vapour-pressure", "density", "heat-of-vaporization", "heat-capacity", "viscosity", "water-solubility", "solvent-solubility",
		"azeotrope-temperature", "azeotrope-water", "azeotrope-absent", "gamma-water", "hydrate-activity", "loading", "drying", "organic-layer-water",
	} {
		if !published[q] {
			t.Errorf("no published row proves %s", q)
		}
	}
	for _, q := range []string{"ternary-azeotrope-temperature", "ternary-azeotrope-water", "ternary-azeotrope-solvent"} {
		if !recalled[q] {
			t.Errorf("no row compares %s", q)
		}
	}
}

// A reason for a row that holds, or for none, is out of date. In the rows of water
// in azeotropes it may excuse the activity instead.
func TestNoReasonIsStale(t *testing.T) {
	r := run(t)
	for _, s := range r.Stale {
		t.Errorf("no row needs the reason for %s", s)
	}
	for _, row := range r.Rows {
		if row.Reason != "" && row.Verdict == proof.Holds && row.Quantity != "azeotrope-water" {
			t.Errorf("%s of %s %s, %.5g %s [%s]: holds (%.5g), its reason is stale", row.Quantity, row.Subject, row.Partner, row.Published, row.Unit, row.Source, row.Computed)
		}
	}
}

// An excuse holds as far as the deviation that it names, and no further.
func TestAnExcuseHasALimit(t *testing.T) {
	cat, all := load(t)
	tighter := *all
	tighter.Rows = slices.Clone(all.Rows)
	bounded := 0
	for i := range tighter.Rows {
		if c := &tighter.Rows[i]; c.ExcusedTo > 0 {
			c.ExcusedTo = c.Limit + 1e-6*c.Limit
			bounded++
		}
	}
	r, err := proof.Run(cat, &tighter)
	if err != nil {
		t.Fatal(err)
	}
	if bounded < 50 || len(r.Failures()) != bounded {
		t.Errorf("%d of %d excused rows fail when their excuses are worth nothing", len(r.Failures()), bounded)
	}
}

// Rows from memory are printed and decide nothing, whatever they give.
func TestRowsFromMemoryDecideNothing(t *testing.T) {
	outside := 0
	for _, row := range run(t).Rows {
		fromMemory := row.Kind == catalog.Recalled || row.Confidence == catalog.Memory
		if fromMemory != (row.Verdict == proof.Recalled) {
			t.Errorf("%s of %s [%s]: %s is %s", row.Quantity, row.Subject, row.Source, row.Kind, row.Verdict)
		}
		if fromMemory && !row.Within {
			outside++
		}
	}
	if outside == 0 {
		t.Error("all recalled figures are met: that cannot be")
	}
}

// A wrong number in the catalog is a failure: the check is not blind.
func TestAWrongNumberFails(t *testing.T) {
	cat, all := load(t)
	wrong, toluene := *cat, *cat.Solvents["toluene"]
	toluene.Pure.VapourPressurePa.C[0] += math.Log(2)
	wrong.Solvents = map[string]*catalog.Solvent{}
	for key, s := range cat.Solvents {
		wrong.Solvents[key] = s
	}
	wrong.Solvents["toluene"] = &toluene
	r, err := proof.Run(&wrong, all)
	if err != nil {
		t.Fatal(err)
	}
	for _, q := range []string{"boiling-point", "vapour-pressure", "azeotrope-temperature"} {
		if !slices.ContainsFunc(r.Failures(), func(row proof.Row) bool { return row.Quantity == q && row.Subject == "toluene" }) {
			t.Errorf("toluene with twice its vapour pressure passes every row of %s", q)
		}
	}
}

func BenchmarkProof(b *testing.B) {
	cat, all := load(b)
	for b.Loop() {
		if _, err := proof.Run(cat, all); err != nil {
			b.Fatal(err)
		}
	}
}
