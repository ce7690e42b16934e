package costs_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/thermo"
)

func buy(t *testing.T, j *job.Job, needs ...costs.Need) costs.Buying {
	t.Helper()
	cat := exampleCatalog()
	cat.Agents["sieve-3a"] = &catalog.Agent{Key: "sieve-3a", Name: "molecular sieve 3A", Kind: "sieve", BeadDiameter: &catalog.Value{Text: "2 mm"}}
	cat.Agents["calcium-hydride"] = &catalog.Agent{Key: "calcium-hydride", Name: "calcium hydride", Kind: "reactive"}
	cat.Solvents = map[string]*catalog.Solvent{"toluene": {Key: "toluene", Name: "toluene", Pure: thermo.Pure{DensityKgPerM3: flat(870)}}}
	book, err := costs.NewBook(cat, j)
	if err != nil {
		t.Fatal(err)
	}
	list, err := costs.Buy(cat, j, book, needs, nil)
	if err != nil {
		t.Fatal(err)
	}
	return list
}

func packsOf(p costs.Purchase) string {
	var parts []string
	for _, o := range p.Orders {
		parts = append(parts, fmt.Sprintf("%d x %s", o.Count, o.Pack.Size))
	}
	return strings.Join(parts, " + ")
}

func sieveNeed(kg float64) costs.Need {
	return costs.Need{Item: "sieve-3a", Unit: "kg", Process: kg, AtOnce: 1, LaterYears: kg}
}

// Need = process + losses + safety stock - on hand, and the cheapest packs for it:
// worked out by hand from 90 EUR for 1 kg, 225 for 5 kg, 4 x 150 for 20 kg, 250 for
// 25 kg.
func TestPacksForANeed(t *testing.T) {
	for _, c := range []struct {
		need, have, safety float64
		packs, total       string
		leftover           float64
	}{
		{2, 0, 0, "2 x 1", "180", 0},
		{2.2, 0, 0, "1 x 5", "225", 0}, // three of 1 kg cost 270; the 5 kg keep a year once opened
		{5.5, 0, 0, "1 x 25", "250", 19.5},
		{26, 0, 0, "1 x 25 + 1 x 1", "340", 0},
		{30, 0, 0, "1 x 25 + 1 x 5", "475", 0},
		{30, 4, 0, "1 x 25 + 1 x 1", "340", 0},
		{30, 4, 2, "1 x 25 + 1 x 5", "475", 2},
		{30, 40, 2, "", "0", 8},
	} {
		j := sievePacks()
		j.Stock = []job.Stock{{Item: "sieve-3a", OnHandKg: c.have, SafetyKg: c.safety}}
		p := buy(t, j, sieveNeed(c.need)).Purchases[0]
		if packsOf(p) != c.packs || !p.Total.Equal(d(c.total)) || math.Abs(p.Leftover-c.leftover) > 1e-6 {
			t.Errorf("%g kg, %g on hand, %g safe: %s for %s, %.4g left; want %s for %s, %g", c.need, c.have, c.safety, packsOf(p), p.Total, p.Leftover, c.packs, c.total, c.leftover)
		}
		if want := max(0, c.need+c.safety-c.have); math.Abs(p.ToBuy-want) > 1e-9 {
			t.Errorf("to buy %g, want %g", p.ToBuy, want)
		}
	}
}

// Half of a large pack grows too old: it counts for half, and the rest is named.
func TestPackThatGrowsTooOld(t *testing.T) {
	j := &job.Job{Currency: "EUR", Date: "2026-12-01", Prices: []job.Price{
		own("sieve-3a", "kg", "20", "200", "2026-10-01", job.Terms{ShelfDays: 73}), // a fifth of a year: 2 kg of 10
		own("sieve-3a", "kg", "2", "60", "2026-10-01", job.Terms{}),
	}}
	p := buy(t, j, sieveNeed(10)).Purchases[0]
	// Five packs of 2 kg cost 300; the 20 kg pack gives 2 kg for 200.
	if packsOf(p) != "5 x 2" || p.Expires != 0 {
		t.Errorf("%s, %g too old", packsOf(p), p.Expires)
	}
	j.Prices[0].PackPrice = d("50")
	p = buy(t, j, sieveNeed(10)).Purchases[0]
	if packsOf(p) != "5 x 20" || math.Abs(p.Expires-90) > 1e-6 || !strings.Contains(p.Why, "90 kg of it will be too old") {
		t.Errorf("%s, %g too old, %q", packsOf(p), p.Expires, p.Why)
	}
}

// 36.5 kg a year are 0.1 kg a day. 4 kg on hand less 1 kg of safety last 30 days; with
// 21 days of lead time the order goes out on day 9.
func TestOrderDays(t *testing.T) {
	j := &job.Job{Currency: "EUR", Date: "2026-12-01", Stock: []job.Stock{{Item: "sieve-3a", OnHandKg: 4, SafetyKg: 1}},
		Prices: []job.Price{own("sieve-3a", "kg", "25", "250", "2026-10-01", job.Terms{LeadDays: 21})}}
	list := buy(t, j, sieveNeed(36.5))
	o := list.Purchases[0].Orders[0]
	if list.FirstBatchDay != 0 || o.OrderDay != 9 || o.NeedDay != 30 || o.Count != 2 || o.Every != 250 {
		t.Errorf("first batch on day %d, %+v", list.FirstBatchDay, o)
	}
	// Nothing on hand: the first batch waits for the lead time.
	j.Stock = nil
	list = buy(t, j, sieveNeed(36.5))
	if o := list.Purchases[0].Orders[0]; list.FirstBatchDay != 21 || o.OrderDay != 0 || o.NeedDay != 21 {
		t.Errorf("first batch on day %d, %+v", list.FirstBatchDay, o)
	}
}

// The site's limit of an item keeps larger packs out; that of a class is flagged.
func TestStorageLimits(t *testing.T) {
	hydride := func(limits ...job.StorageLimit) *job.Job {
		return &job.Job{Currency: "EUR", Date: "2026-12-01", Storage: limits, Prices: []job.Price{
			own("calcium-hydride", "kg", "25", "400", "2026-10-01", job.Terms{}),
			own("calcium-hydride", "kg", "0.5", "200", "2026-10-01", job.Terms{}),
		}}
	}
	need := costs.Need{Item: "calcium-hydride", Unit: "kg", Process: 3, AtOnce: 0.1, LaterYears: 3}
	if got := packsOf(buy(t, hydride(), need).Purchases[0]); got != "1 x 25" {
		t.Errorf("without a limit: %s", got)
	}
	p := buy(t, hydride(job.StorageLimit{Item: "calcium-hydride", Kg: 1}), need).Purchases[0]
	if packsOf(p) != "6 x 0.5" || !strings.Contains(p.Why, "over the site's limit of 1 kg are left out") {
		t.Errorf("limit of 1 kg: %s, %q", packsOf(p), p.Why)
	}
	list := buy(t, hydride(job.StorageLimit{Class: "reactive", Kg: 1}), need)
	if len(list.Flags) != 1 || !strings.HasPrefix(list.Flags[0], "reactive: up to 25 kg in store at once, the limit is 1 kg") {
		t.Errorf("flags %q", list.Flags)
	}
	if tr := p.Transport; tr.UN != "1404" || tr.Class != "4.3" || !strings.Contains(tr.Basis, "from memory") {
		t.Errorf("transport %+v", tr)
	}
}

// A limit by volume counts litres: 10 L keep the drum of 20 L out.
func TestStorageLimitByVolume(t *testing.T) {
	j := dryToluene("20", "400", 0, 0)
	j.Prices = append(j.Prices, own("toluene-dry", "litre", "2.5", "80", "2026-10-01", job.Terms{}))
	need := costs.Need{Item: "toluene-dry", Unit: "litre", Process: 20, AtOnce: 5, LaterYears: 20}
	if got := packsOf(buy(t, j, need).Purchases[0]); got != "1 x 20" {
		t.Errorf("without a limit: %s", got)
	}
	j.Storage = []job.StorageLimit{{Item: "toluene-dry", M3: 0.010}}
	p := buy(t, j, need).Purchases[0]
	if packsOf(p) != "8 x 2.5" || !strings.Contains(p.Why, "over the site's limit of 10 L are left out") {
		t.Errorf("limit of 10 L: %s, %q", packsOf(p), p.Why)
	}
}

// 30 kg as 25 + 5 kg cost 475; the least in one size is two of 25 kg for 500 (six of
// 5 kg: 1350, four of 20 kg at least: 600).
func TestWhatMixedPacksSave(t *testing.T) {
	p := buy(t, sievePacks(), sieveNeed(30)).Purchases[0]
	if !strings.Contains(p.Why, ": 25.00 less than packs of one size") {
		t.Errorf("%q", p.Why)
	}
}

// What a dry grade may hold is told from the job's own price, else from the catalog.
func TestGradeOnTheList(t *testing.T) {
	j := dryToluene("20", "400", 0, 0)
	need := costs.Need{Item: "toluene-dry", Unit: "litre", Process: 20, AtOnce: 5, LaterYears: 20}
	j.Prices[0].WaterMax = 30e-6
	if p := buy(t, j, need).Purchases[0]; !strings.Contains(p.Specification, "dry grade, water at most 30 mg/kg") {
		t.Errorf("%q", p.Specification)
	}
}

func TestNoPriceLeavesThePacksOpen(t *testing.T) {
	p := buy(t, &job.Job{Currency: "JPY"}, sieveNeed(3)).Purchases[0]
	if p.Priced || len(p.Orders) != 0 || p.ToBuy != 3 || p.Why != "no price: the packs are left open" {
		t.Errorf("%+v", p)
	}
	if p.Specification != "molecular sieve 3A, beads of 2 mm, without indicator" {
		t.Errorf("specification %q", p.Specification)
	}
}

// A charge that serves ten times is bought whole, however few batches there are;
// what is lost is made up.
func TestNeeds(t *testing.T) {
	run := routes.Run{
		Outcomes: []steps.Outcome{{Kind: steps.Soak, Agent: "sieve-3a", AgentKg: 2}},
		Uses: []routes.StageUse{
			{Stage: 1, Use: steps.Use{Head: steps.Agent, Item: "sieve-3a", Unit: "kg", Quantity: 0.2}},
			{Stage: 1, Use: steps.Use{Head: steps.SolventLost, Item: "toluene", Unit: "litre", Quantity: 0.5}},
			{Use: steps.Use{Head: steps.Purchase, Item: "toluene", Unit: "litre", Quantity: 18}},
			{Use: steps.Use{Head: steps.Testing, Item: "karl-fischer", Unit: "test", Quantity: 2}},
			{Use: steps.Use{Head: steps.Testing, Item: "technician", Unit: "hour", Quantity: 0.2}},
			{Stage: 1, Use: steps.Use{Head: steps.Energy, Item: "electricity", Unit: "kwh", Quantity: 3}},
		},
	}
	for _, c := range []struct{ batches, sieve, later float64 }{{4, 2, 0.8}, {40, 8, 8}} {
		got := map[string]costs.Need{}
		for _, n := range costs.Needs([]costs.Plan{{Run: &run, BatchesPerYear: c.batches}}) {
			got[n.Item] = n
		}
		if len(got) != 3 {
			t.Errorf("items %v", got)
		}
		sieve, toluene := got["sieve-3a"], got["toluene"]
		if sieve.Process != c.sieve || math.Abs(sieve.LaterYears-c.later) > 1e-12 || sieve.AtOnce != 2 {
			t.Errorf("%g batches: sieve %+v", c.batches, sieve)
		}
		if toluene.Process != 18*c.batches || toluene.Losses != 0.5*c.batches || toluene.AtOnce != 18 {
			t.Errorf("%g batches: toluene %+v", c.batches, toluene)
		}
	}
}
