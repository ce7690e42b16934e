package costs_test

import (
	"reflect"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
)

func d(text string) decimal.Decimal { return decimal.RequireFromString(text) }

// own is a pack as a job gives it.
func own(item, unit, size, price, date string, terms job.Terms) job.Price {
	p := job.Price{Item: item, Unit: unit, PackSize: d(size), PackPrice: d(price), Date: date, Terms: terms}
	p.PerUnit = p.PackPrice.DivRound(p.PackSize, 12)
	return p
}

func sievePacks() *job.Job {
	return &job.Job{Currency: "EUR", Date: "2026-12-01", Prices: []job.Price{
		own("sieve-3a", "kg", "25", "250", "2026-10-01", job.Terms{LeadDays: 21}),
		own("sieve-3a", "kg", "1", "90", "2026-10-01", job.Terms{LeadDays: 7}),
		own("sieve-3a", "kg", "5", "225", "2026-10-01", job.Terms{LeadDays: 14, ShelfDays: 365}),
		own("sieve-3a", "kg", "5", "150", "2026-10-01", job.Terms{LeadDays: 14, MinimumOrder: 4}),
	}}
}

// The pack follows a year's need: what is not used up in two years, or within its
// shelf life (of the 5 kg pack: one), does not set the price.
func TestPackThatANeedJustifies(t *testing.T) {
	book, err := costs.NewBook(exampleCatalog(), sievePacks())
	if err != nil {
		t.Fatal(err)
	}
	if p := book["sieve-3a"]; len(p.Packs) != 4 || !p.PerUnit.Equal(d("90")) {
		t.Errorf("without a need the smallest order counts: %s", p.PerUnit)
	}
	for _, c := range []struct {
		perYear float64
		want    string
	}{
		{0, "90"}, {0.9, "90"}, {1, "90"}, {4.9, "90"}, {5, "45"}, {9.9, "45"}, {10, "30"}, {12.4, "30"}, {12.5, "10"}, {1000, "10"},
	} {
		priced, changed, err := book.Justified(map[string]float64{"sieve-3a": c.perYear})
		if err != nil {
			t.Fatal(err)
		}
		if got := priced["sieve-3a"].PerUnit; !got.Equal(d(c.want)) || changed != (c.want != "90") {
			t.Errorf("%g kg a year: %s per kg (changed %v), want %s", c.perYear, got, changed, c.want)
		}
		if again, changed, _ := priced.Justified(map[string]float64{"sieve-3a": c.perYear}); changed || !again["sieve-3a"].PerUnit.Equal(d(c.want)) {
			t.Errorf("%g kg a year: the choice does not stand", c.perYear)
		}
	}
	// Half a year of shelf life: 5 kg a year do not use up the 5 kg pack in time.
	j := sievePacks()
	j.Prices[2].ShelfDays = 182
	book, _ = costs.NewBook(exampleCatalog(), j)
	priced, _, _ := book.Justified(map[string]float64{"sieve-3a": 8})
	if got := priced["sieve-3a"].PerUnit; !got.Equal(d("90")) {
		t.Errorf("a pack that grows too old sets the price: %s", got)
	}
}

func TestFlags(t *testing.T) {
	cat := exampleCatalog()
	cat.Date = "2026-12-01"
	for _, c := range []struct {
		date, until, jobDate string
		want                 costs.Flag
	}{
		{"2026-10-01", "", "2026-12-01", costs.NoFlag},
		{"2025-12-01", "", "2026-12-01", costs.NoFlag},
		{"2025-11-30", "", "2026-12-01", costs.Old},
		{"2025-11-30", "", "", costs.Old},
		{"", "", "2026-12-01", costs.Undated},
		{"2026-10-01", "2026-11-30", "2026-12-01", costs.Expired},
		{"2026-10-01", "2026-12-01", "2026-12-01", costs.NoFlag},
	} {
		j := &job.Job{Currency: "EUR", Date: c.jobDate, Prices: []job.Price{own("alumina", "kg", "5", "40", c.date, job.Terms{ValidUntil: c.until})}}
		book, err := costs.NewBook(cat, j)
		if err != nil {
			t.Fatal(err)
		}
		if got := book["alumina"].Flag; got != c.want {
			t.Errorf("%+v: flag %q", c, got)
		}
		if book["technician"].Flag != costs.Indicative {
			t.Error("a default of the catalog is not flagged")
		}
	}
	// Without a date of the job the newest date counts, never the clock.
	j := &job.Job{Currency: "EUR", Prices: []job.Price{own("alumina", "kg", "5", "40", "2026-12-10", job.Terms{}), own("sieve-3a", "kg", "5", "40", "2028-01-01", job.Terms{})}}
	if got := costs.ReferenceDate(cat, j); got != "2028-01-01" {
		t.Errorf("reference %s", got)
	}
	if book, _ := costs.NewBook(cat, j); book["alumina"].Flag != costs.Old {
		t.Errorf("flag %q", book["alumina"].Flag)
	}
}

// In a currency in which the catalog's prices do not stand at par, an item has a
// price only where the job gives one, or a rate.
func TestCurrencies(t *testing.T) {
	book, err := costs.NewBook(exampleCatalog(), &job.Job{Currency: "JPY"})
	if err != nil || len(book) != 0 {
		t.Errorf("%d prices, %v", len(book), err)
	}
	rate := job.Rate{From: "USD", PerUnit: d("150.5"), Date: "2026-11-01"}
	book, err = costs.NewBook(exampleCatalog(), &job.Job{Currency: "JPY", Rates: []job.Rate{rate}})
	if err != nil {
		t.Fatal(err)
	}
	p, ok := book["sieve-3a"]
	if !ok || len(book) != 1 || !p.PerUnit.Equal(d("4891.25")) || !strings.Contains(p.Note, "published in USD, at 150.5 JPY of 2026-11-01") {
		t.Errorf("%d prices, %+v", len(book), p)
	}
	bill, err := book.Bill(exampleUses(), 17.6, 40, "JPY")
	if err != nil {
		t.Fatal(err)
	}
	if bill.Priced() || len(bill.NoPrice) != 7 || len(bill.Lines) != 1 {
		t.Errorf("no price for %v, %d lines", bill.NoPrice, len(bill.Lines))
	}
}

// A bill says how much of it rests on prices to check.
func TestDoubts(t *testing.T) {
	book := exampleBook()
	for item, flag := range map[string]costs.Flag{"toluene": costs.Old, "waste-flammable-liquid": costs.Indicative, "still-20l": costs.Indicative} {
		p := book[item]
		p.Flag = flag
		book[item] = p
	}
	bill, err := book.Bill(exampleUses(), 17.6, 40, "EUR")
	if err != nil {
		t.Fatal(err)
	}
	want := []string{
		"2.46 of the 171.62 EUR a batch rest on prices that are older than a year: toluene",
		"8.97 of the 171.62 EUR a batch rest on prices that are indicative: still-20l, waste-flammable-liquid",
	}
	if !reflect.DeepEqual(bill.Doubts, want) {
		t.Errorf("got %q", bill.Doubts)
	}
}

// Nothing that a printed bill is made of is a binary number.
func TestMoneyIsNeverBinary(t *testing.T) {
	seen := map[reflect.Type]bool{}
	var look func(path string, typ reflect.Type)
	look = func(path string, typ reflect.Type) {
		if seen[typ] || typ == reflect.TypeFor[decimal.Decimal]() {
			return
		}
		seen[typ] = true
		switch typ.Kind() {
		case reflect.Float32, reflect.Float64, reflect.Complex128:
			t.Errorf("%s is a %s", path, typ)
		case reflect.Slice, reflect.Pointer:
			look(path+"[]", typ.Elem())
		case reflect.Map:
			look(path+"{}", typ.Key())
			look(path+"{}", typ.Elem())
		case reflect.Struct:
			for i := range typ.NumField() {
				look(path+"."+typ.Field(i).Name, typ.Field(i).Type)
			}
		}
	}
	look("Bill", reflect.TypeFor[costs.Bill]())
	look("Book", reflect.TypeFor[costs.Book]())
	for path, typ := range map[string]reflect.Type{"Order": reflect.TypeFor[costs.Order]()} {
		look(path, typ)
	}
	for _, name := range []string{"PackSize", "PackPrice", "PerUnit"} {
		if f, ok := reflect.TypeFor[job.Price]().FieldByName(name); !ok || f.Type != reflect.TypeFor[decimal.Decimal]() {
			t.Errorf("job.Price.%s is not decimal", name)
		}
	}
	if reflect.TypeFor[catalog.Price]().Kind() == reflect.Struct {
		if f, _ := reflect.TypeFor[catalog.Price]().FieldByName("Amount"); f.Type.Kind() != reflect.String {
			t.Error("a price of the catalog is not kept as it was written")
		}
	}
}

// The catalog's sizes are offers like those of a job: indicative, with the band of
// the size that a need justifies, in the currency of the job.
func TestPacksOfTheCatalog(t *testing.T) {
	cat := exampleCatalog()
	sieve := cat.Prices["sieve-3a"]
	sieve.Packs = []catalog.PackSize{{Size: "5", Amount: "32.50", Low: "20", High: "60"}, {Size: "25", Amount: "10", Low: "6", High: "18"}}
	cat.Prices["sieve-3a"] = sieve
	book, err := costs.NewBook(cat, &job.Job{Currency: "EUR", Rates: []job.Rate{{From: "USD", PerUnit: d("0.9"), Date: "2026-11-01"}}})
	if err != nil {
		t.Fatal(err)
	}
	if p := book["sieve-3a"]; !p.PerUnit.Equal(d("29.25")) || !p.Indicative || p.Flag != costs.Indicative || !p.Packs[1].Price.Equal(d("225")) ||
		p.Note != "from a pack of 5 kg, one of 2 on offer; figure of 2024; published in USD, at 0.9 EUR of 2026-11-01" {
		t.Errorf("%+v", p)
	}
	priced, _, err := book.Justified(map[string]float64{"sieve-3a": 12.5})
	if p := priced["sieve-3a"]; err != nil || !p.PerUnit.Equal(d("9")) || !p.Low.Equal(d("5.4")) || !p.High.Equal(d("16.2")) {
		t.Errorf("%+v, %v", p, err)
	}
	if again, changed, _ := priced.Justified(map[string]float64{"toluene": 1}); changed || !again["sieve-3a"].PerUnit.Equal(d("9")) {
		t.Error("an item that is not needed changes its price")
	}
}
