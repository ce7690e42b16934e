package costs_test

import (
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
)

func exampleCatalog() *catalog.Catalog {
	return &catalog.Catalog{
		Sources: map[string]catalog.Source{"list": {ID: "list", Reference: "A price list in full"}},
		Agents:  map[string]*catalog.Agent{"alumina": {Key: "alumina", Name: "activated alumina"}},
		Prices: map[string]catalog.Price{
			"sieve-3a": {Item: "sieve-3a", Label: "molecular sieve 3A", Unit: "kg", Amount: "32.50", Currency: "USD",
				Date: "2026-12-01", Origin: catalog.Origin{Source: "list", Confidence: catalog.Memory, Note: "figure of 2024"}},
			"technician": {Item: "technician", Label: "technician", Unit: "hour", Amount: "50", Currency: "EUR",
				Date: "2026-12-01", Origin: catalog.Origin{Source: "list", Confidence: catalog.Published}},
		},
	}
}

func TestOwnPricesOverlayDefaults(t *testing.T) {
	j := &job.Job{Currency: "EUR", Prices: []job.Price{
		{Item: "technician", Unit: "hour", PerUnit: decimal.NewFromInt(48)},
		{Item: "alumina", Unit: "kg", PerUnit: decimal.RequireFromString("7.9"), PackSize: decimal.RequireFromString("2.5"), PackPrice: decimal.RequireFromString("19.75"), Date: "2026-10-01"},
	}}
	book, err := costs.NewBook(exampleCatalog(), j)
	if err != nil {
		t.Fatal(err)
	}
	sieve := book["sieve-3a"]
	if !sieve.Indicative || sieve.Own || sieve.SourceText != "A price list in full" || sieve.Confidence != "memory" ||
		sieve.Note != "figure of 2024; published in USD, used at par in EUR" || !sieve.PerUnit.Equal(decimal.RequireFromString("32.5")) {
		t.Errorf("default price: %+v", sieve)
	}
	technician := book["technician"]
	if !technician.Own || technician.Indicative || technician.Source != costs.OwnSource || !technician.PerUnit.Equal(decimal.NewFromInt(48)) {
		t.Errorf("own rate: %+v", technician)
	}
	if a := book["alumina"]; a.Label != "activated alumina" || a.Note != "from a pack of 2.5 kg" || a.Date != "2026-10-01" {
		t.Errorf("own price of an agent: %+v", a)
	}
}

func TestInventedPricesSaySo(t *testing.T) {
	j := &job.Job{Currency: "EUR", Invented: true, Prices: []job.Price{{Item: "sieve-3a", Unit: "kg", PerUnit: decimal.NewFromInt(29)}}}
	book, err := costs.NewBook(exampleCatalog(), j)
	if err != nil {
		t.Fatal(err)
	}
	if p := book["sieve-3a"]; p.Confidence != "invented" || !strings.Contains(p.Note, "invented") {
		t.Errorf("invented price: %+v", p)
	}
	if p := book["technician"]; p.Confidence != "published" {
		t.Errorf("a default of the catalog is not invented: %+v", p)
	}
}

func TestNewBookReportsEveryBadPrice(t *testing.T) {
	cat := exampleCatalog()
	cat.Prices["a"] = catalog.Price{Item: "a", Amount: "twelve"}
	cat.Prices["b"] = catalog.Price{Item: "b", Amount: "-3"}
	j := &job.Job{Prices: []job.Price{{Item: "c", PerUnit: decimal.NewFromInt(-1)}}}
	_, err := costs.NewBook(cat, j)
	if err == nil {
		t.Fatal("no error")
	}
	want := "price of a in the catalog is not an amount: \"twelve\"\n" +
		"price of b in the catalog is not an amount: \"-3\"\n" +
		"price of c is negative: -1"
	if err.Error() != want {
		t.Errorf("got\n%v\nwant\n%s", err, want)
	}
}
