package study_test

import (
	"strings"
	"testing"

	"parch/internal/routes"
	"parch/internal/study"
)

const packsJob = `
date: 2026-12-01
site: {lots over a charge: 1}
exclude: {steps: [trap, settle, column, salt, reactive, forerun], agents: [alumina, silica-gel]}
prices:
  - {item: sieve-3a, pack: 1 kg, price: 90 EUR, date: 2026-10-01}
  - {item: sieve-3a, pack: 5 kg, price: 225 EUR, date: 2026-10-01}
  - {item: sieve-3a, pack: 25 kg, price: 250 EUR, date: 2026-10-01}
  - {item: toluene, pack: 20 L, price: 118 EUR, date: 2026-10-01, lead time: 10 d}
stock: [{item: toluene, on hand: 20 kg}]
lots:
  - {name: a, solvent: toluene, batch: 18 L, batches: 60 /yr, water: 480 mg/kg, target: 15 mg/kg, vessel height: 0.25 m}
`

// A year's need takes the 5 kg pack (some kilograms a year), and the settings of the
// run lead to the same packs and bills again.
func TestPacksSettle(t *testing.T) {
	first := compare(t, packsJob, study.Options{})
	if got := first.Book["sieve-3a"].PerUnit.String(); got != "45" {
		t.Errorf("sieve at %s EUR/kg, want 45: %s", got, first.Book["sieve-3a"].Note)
	}
	given := map[string]map[string]routes.Settings{"a": {}}
	for _, r := range first.Lots[0].Routes {
		given["a"][r.ID] = r.Run.Settings
	}
	again := compare(t, packsJob, study.Options{Settings: given})
	for i, r := range first.Lots[0].Routes {
		if other := again.Lots[0].Routes[i]; other.ID != r.ID || !other.Bill.PerBatch.Equal(r.Bill.PerBatch) {
			t.Errorf("%s for %s, then %s for %s", r.ID, r.Bill.PerBatch, other.ID, other.Bill.PerBatch)
		}
	}
}

// Settings name the packs that set the prices, so that a run with other numbers of
// batches pays what the workbook pays whose batches were edited. A pack that is no
// longer on offer is said to be gone.
func TestPacksAreKeptWithTheSettings(t *testing.T) {
	first := compare(t, packsJob, study.Options{})
	given := map[string]map[string]routes.Settings{"a": {}}
	for _, r := range first.Lots[0].Routes {
		given["a"][r.ID] = r.Run.Settings
	}
	if got := given["a"]["soak:sieve-3a"].Packs["sieve-3a"]; got != "5 kg" {
		t.Errorf("pack %q, want 5 kg", got)
	}
	fewer := strings.Replace(packsJob, "batches: 60 /yr", "batches: 2 /yr", 1)
	if kept := compare(t, fewer, study.Options{Settings: given}).Book["sieve-3a"]; kept.PerUnit.String() != "45" || kept.Pack != "5 kg" {
		t.Errorf("2 batches a year with the settings of 60: %s from %q", kept.PerUnit, kept.Pack)
	}
	if chosen := compare(t, fewer, study.Options{}).Book["sieve-3a"]; chosen.PerUnit.String() != "90" {
		t.Errorf("2 batches a year: %s", chosen.PerUnit)
	}
	gone := compare(t, strings.Replace(packsJob, "pack: 5 kg", "pack: 6 kg", 1), study.Options{Settings: given})
	if !strings.Contains(strings.Join(gone.Warnings, "\n"), "no such pack is on offer any more, another one sets the price: sieve-3a") {
		t.Errorf("warnings %q", gone.Warnings)
	}
}

// The list covers the best route's year: the sieve, the tests, the drum and the oven
// that are not owned, and the solvent with what is lost of it, less what is on hand.
// 20 kg on hand are 23 L, enough for the first batch of 18 L; the next of 60 a year,
// 6.08 days later, lacks: with ten days of lead time the first waits until day 4.
func TestBuyingCoversTheYear(t *testing.T) {
	r := compare(t, packsJob, study.Options{})
	best := r.Lots[0].Routes[0]
	lost := 0.0
	for _, use := range best.Run.Uses {
		if use.Head == "solvent_lost" {
			lost += 60 * use.Quantity
		}
	}
	for _, p := range r.Buying.Purchases {
		bought := 0.0
		for _, o := range p.Orders {
			bought += o.Amount.InexactFloat64()
		}
		if bought < p.ToBuy-1e-6 || p.ToBuy < p.Process+p.Losses-p.Have-1e-9 {
			t.Errorf("%s: %g bought, %g to buy, %g + %g needed, %g on hand", p.Item, bought, p.ToBuy, p.Process, p.Losses, p.Have)
		}
		if p.Item == "toluene" && (p.Losses != lost || lost == 0 || p.Have < 22 || p.Have > 24 || r.Buying.FirstBatchDay != 4 || p.Orders[0].NeedDay != 10) {
			t.Errorf("toluene: %+v, lost %g, first batch on day %d", p, lost, r.Buying.FirstBatchDay)
		}
	}
	if b := r.Buying; b.DateOf(0) != "2026-12-01" || b.DateOf(b.FirstBatchDay) != "2026-12-05" {
		t.Errorf("first order %s, first batch %s; want the date of the job and four days later", b.DateOf(0), b.DateOf(b.FirstBatchDay))
	}
	if len(r.Buying.Purchases) != 5 {
		t.Errorf("%d items", len(r.Buying.Purchases))
	}
}

// Routes without a price stand after the others that reach the target, and a reader
// that needs every total does not see them.
func TestNoPriceIsNotFree(t *testing.T) {
	yaml := strings.Replace(packsJob, "date: 2026-12-01\n", "date: 2026-12-01\ncurrency: SEK\n", 1)
	yaml = strings.ReplaceAll(yaml, " EUR,", " SEK,")
	yaml = strings.Replace(yaml, "site: {", "site: {technician: 500 SEK/h, electricity: 1.5 SEK/kWh, ", 1)
	yaml = strings.Replace(yaml, "prices:\n", "prices:\n  - {item: karl-fischer, price: 15 SEK/test}\n  - {item: waste-wet-solid, price: 15 SEK/kg}\n"+
		"  - {item: oven-50l, price: 9000 SEK}\n  - {item: drum-25l, price: 900 SEK}\n  - {item: flush-nitrogen, price: 45 SEK/m3}\n  - {item: waste-flammable-liquid, price: 20 SEK/kg}\n", 1)
	r := compare(t, yaml, study.Options{})
	routes := r.Lots[0].Routes
	if routes[0].ID != "soak:sieve-3a" || !routes[0].Bill.Priced() || routes[0].Rank != 1 {
		t.Errorf("best is %s, no price for %v", routes[0].ID, routes[0].Bill.NoPrice)
	}
	unpriced := 0
	for i, route := range routes {
		if !route.Bill.Priced() {
			unpriced++
			if route.Year != nil || i == 0 {
				t.Errorf("%s: year %v", route.ID, route.Year)
			}
		} else if unpriced > 0 && route.Meets() {
			t.Errorf("%s has its prices and stands after one that has not", route.ID)
		}
	}
	if unpriced == 0 {
		t.Error("all have their prices")
	}
	if left := r.Priced().Lots[0]; len(left.Routes) != len(routes)-unpriced || len(left.Excluded) != len(r.Lots[0].Excluded)+unpriced {
		t.Errorf("%d routes and %d excluded are left", len(left.Routes), len(left.Excluded))
	}
}
