package costs_test

import (
	"testing"

	"parch/internal/costs"
	"parch/internal/job"
)

func dryToluene(size, price string, shelfDays, leadDays int) *job.Job {
	return &job.Job{Currency: "EUR", Date: "2026-12-01", Prices: []job.Price{
		own("toluene-dry", "litre", size, price, "2026-10-01", job.Terms{ShelfDays: shelfDays, LeadDays: leadDays})}}
}

func batches(litres, perYear float64) costs.Need {
	return costs.Need{Item: "toluene-dry", Unit: "litre", Process: max(litres, litres*perYear), AtOnce: litres, LaterYears: litres * perYear,
		Takings: []costs.Taking{{AtOnce: litres, PerYear: litres * perYear}}}
}

// A pack is opened for a batch, however seldom there is one: counted by hand.
func TestPacksOpenedForABatch(t *testing.T) {
	for _, c := range []struct {
		name      string
		size      string
		shelfDays int
		need      costs.Need
		packs     string
		every     int
		expires   float64
	}{
		// A batch of 18 L every 91.25 days takes one pack of 20 L; 2 L of each grow too old.
		{"seldom", "20", 14, batches(18, 4), "4 x 20", 91, 8},
		// One batch in two years: it is bought whole.
		{"every other year", "20", 14, batches(18, 0.5), "1 x 20", 0, 2},
		// Four of 5 L a batch, the last not emptied.
		{"small packs", "5", 14, batches(18, 4), "16 x 5", 91, 8},
		// Without a limit of age 72 L are 4 packs; after the first 20 L the batch of day 91
		// lacks 16 L, after 40 L that of day 182, after 60 L that of day 273.
		{"keeps", "20", 0, batches(18, 4), "4 x 20", 91, 0},
		// 2 L a day empty a pack in 10 days, before it is too old: 730 L are 37 packs.
		{"often", "20", 14, batches(18, 730.0/18), "37 x 20", 0, 0},
		// Two lots of five batches a year, 18 L and 2 L each, open a pack a batch: 10 packs, of
		// which 100 L of 200 are used.
		{"two lots", "20", 14, costs.Need{Item: "toluene-dry", Unit: "litre", Process: 100, AtOnce: 20, LaterYears: 100,
			Takings: []costs.Taking{{18, 90}, {2, 10}}}, "10 x 20", 0, 100},
	} {
		p := buy(t, dryToluene(c.size, "690", c.shelfDays, 0), c.need).Purchases[0]
		if got := packsOf(p); got != c.packs {
			t.Errorf("%s: %s, want %s", c.name, got, c.packs)
			continue
		}
		if c.every > 0 && p.Orders[0].Every != c.every {
			t.Errorf("%s: every %d days, want %d", c.name, p.Orders[0].Every, c.every)
		}
		if diff := p.Expires - c.expires; diff > 1e-4 || diff < -1e-4 {
			t.Errorf("%s: %.6g L too old, want %g", c.name, p.Expires, c.expires)
		}
	}
}

// No delivery comes after the batch that needs it: 18 kg every 30 days (219 kg a
// year) from packs of 20 kg, 25 kg on hand. The batch of day 0 leaves 7 kg; that of
// day 30 lacks 11 kg, so that the first pack is due then, ordered 10 days before.
// With it there are 9 kg, and day 60 is short again, 30 days later.
func TestDeliveryBeforeTheBatch(t *testing.T) {
	j := &job.Job{Currency: "EUR", Date: "2026-12-01", Stock: []job.Stock{{Item: "sieve-3a", OnHandKg: 25}},
		Prices: []job.Price{own("sieve-3a", "kg", "20", "250", "2026-10-01", job.Terms{LeadDays: 10})}}
	p := buy(t, j, costs.Need{Item: "sieve-3a", Unit: "kg", Process: 219, AtOnce: 18, LaterYears: 219, Takings: []costs.Taking{{AtOnce: 18, PerYear: 219}}}).Purchases[0]
	o := p.Orders[0]
	if packsOf(p) != "10 x 20" || o.NeedDay != 30 || o.OrderDay != 20 || o.Each != 1 || o.Every != 30 {
		t.Errorf("%s, %+v", packsOf(p), o)
	}
	// By day 150 five packs have come and 6 x 18 kg are used: 17 kg are left on day 180, when
	// the sixth comes.
	if d := p.Peak - 37; d > 1e-9 || d < -1e-9 {
		t.Errorf("%g kg in store at most, want 37", p.Peak)
	}
}
