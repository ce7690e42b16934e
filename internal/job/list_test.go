package job

import (
	"errors"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func readList(t *testing.T, head, list string) (*Job, error) {
	t.Helper()
	return ReadWith("job.yaml", []byte(head+"prices: prices.csv\n"+small), shelf(), func(name string) ([]byte, error) {
		if name != "prices.csv" {
			t.Errorf("asked for %q", name)
		}
		return []byte(list), nil
	})
}

// A list as it comes out of a spreadsheet of a country with a decimal comma.
func TestPriceList(t *testing.T) {
	j, err := readList(t, "date: 2026-12-01\nrates: [{from: USD, rate: 0.92, date: 2026-11-01}]\n",
		"Item;Pack;Price;Currency;Date;Valid until;Minimum order;Lead time;Shelf life;Supplier;Tax\n"+
			"sieve-3a;2,5 kg;84,50;EUR;2026-10-01;2027-03-31;;14 d;365 d;Nord, Ost;net\n"+
			"sieve-3a;25 kg;250;USD;2026-10-01;;2;21 d;;;\n"+
			"toluene;;6,15 EUR/L;;;;;;;;\n")
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, p := range j.Prices {
		got = append(got, strings.Join([]string{p.Item, p.PackSize.String(), p.PackPrice.String(), p.PerUnit.String(), p.ValidUntil, p.Supplier, p.Tax, p.Converted}, "|"))
	}
	want := []string{
		"sieve-3a|2.5|84.5|33.8|2027-03-31|Nord, Ost|net|",
		"sieve-3a|25|230|9.2||||250 USD at 0.92 EUR of 2026-11-01",
		"toluene|0|0|6.15||||",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	if a, b := j.Prices[0], j.Prices[1]; a.LeadDays != 14 || a.ShelfDays != 365 || b.MinimumOrder != 2 || b.LeadDays != 21 || j.Prices[2].LeadDays != unknownDays || j.PriceFile != "prices.csv" {
		t.Errorf("terms %+v, %+v", a.Terms, b.Terms)
	}
}

// Every broken cell is named by its line and column, with the problems of the job.
func TestBrokenPriceList(t *testing.T) {
	_, err := readList(t, "date: 2026-12-01\ntitl: a\n",
		"item,pack,price,date\n"+
			"sieve-3a,0 kg,148 EUR,2026-10-01\n"+
			"sieve-3b,5 kg,148 EUR,2026-10-01\n"+
			"sieve-3a,5 kg,1.480 EUR,2026-10-01\n"+
			"sieve-3a,5 kg,148 USD,2026-10-01\n"+
			"sieve-3a,5 kg,-148 EUR,2027-01-01\n"+
			"sieve-3a,5 kg\n"+
			"sieve-4a,5 kg,=A1,01.10.2026\n")
	if err == nil {
		t.Fatal("no error")
	}
	want := []string{
		`job.yaml:2: unknown key "titl"; did you mean "title"?`,
		`prices.csv:2: column "pack": "0 kg" is not a possible pack; allowed: 0.000001 to 1000000 kg`,
		`prices.csv:3: column "item": "sieve-3b" is not an item that is priced here; did you mean "sieve-3a" or "sieve-4a"?`,
		`prices.csv:4: column "price": "1.480 EUR" may be read as 1480 EUR or as 1.480 EUR; write it without the separator, or with another number of decimals (1.4800 EUR)`,
		`prices.csv:5: column "price": "148 USD" is in USD, but the currency of the job is EUR (by default; "currency" is not given); use one currency, or give a dated rate under "rates"`,
		`prices.csv:6: column "date": "2027-01-01" is after the date of the job, 2026-12-01`,
		`prices.csv:6: column "price": "-148 EUR" is negative; a price is zero or more`,
		`prices.csv:7: 2 cells, but the headings name 4; a text that contains ',' stands in quotation marks`,
		`prices.csv:8: column "price": "=A1" begins like a formula of a spreadsheet; write the value itself`,
		`prices.csv:8: column "date": "01.10.2026" is not a date; write it like "2026-10-01"`,
	}
	if diff := cmp.Diff(want, strings.Split(err.Error(), "\n")); diff != "" {
		t.Error(diff)
	}
}

func TestPriceListThatCannotBeRead(t *testing.T) {
	_, err := ReadWith("job.yaml", []byte("prices: prices.csv\n"+small), shelf(), func(string) ([]byte, error) { return nil, errors.New("no such file") })
	if want := `job.yaml:1: prices: the price list "prices.csv" cannot be read: no such file`; err == nil || err.Error() != want {
		t.Errorf("got %v\nwant %s", err, want)
	}
}

// A currency in the cell of the price and another in its column: neither is taken.
func TestTwoCurrenciesInARow(t *testing.T) {
	_, err := readList(t, "date: 2026-12-01\nrates: [{from: USD, rate: 0.92, date: 2026-11-01}]\n", "item;pack;price;currency\nsieve-3a;5 kg;148 EUR;USD\n")
	const want = `prices.csv:2: column "currency": "USD" contradicts the price, "148 EUR"; give the currency once`
	if err == nil || !strings.Contains(err.Error(), want) {
		t.Errorf("%v, want %s", err, want)
	}
	if _, err := readList(t, "date: 2026-12-01\n", "item;pack;price;currency\nsieve-3a;5 kg;148 EUR;EUR\n"); err != nil {
		t.Errorf("the same currency twice: %v", err)
	}
}
