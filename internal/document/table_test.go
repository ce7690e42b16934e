package document_test

import (
	"errors"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"parch/internal/document"
)

func table(text string) (*document.Node, error) {
	return document.Table("prices.csv", []byte(text), []string{"item", "price", "supplier"}, []string{"price"})
}

// A decimal comma is taken where it cannot separate thousands: both readings of
// "1,234" are in use (ISO 80000-1:2009, 7.3.2, from memory), so it is refused.
func TestTableNumbers(t *testing.T) {
	for _, c := range []struct{ typed, read, problem string }{
		{"148 EUR", "148 EUR", ""},
		{"148,50 EUR", "148.50 EUR", ""},
		{"0,125 EUR", "0.125 EUR", ""},
		{"1234,567", "1234.567", ""},
		{"-3,5", "-3.5", ""},
		{"1,234 EUR", "", `"1,234 EUR" may be read as 1234 EUR or as 1.234 EUR; write it without the separator, or with another number of decimals (1.2340 EUR)`},
		{"1.234", "", `"1.234" may be read as 1234 or as 1.234; write it without the separator, or with another number of decimals (1.2340)`},
		{"1.234,50", "", `"1.234,50" has a thousands separator; write the number in one piece, such as 1234.50`},
		{"1 234 567", "", `"1 234 567" has a thousands separator; write the number in one piece, such as 1234.50`},
		{"=1+1", "", `"=1+1" begins like a formula of a spreadsheet; write the value itself`},
		{"+5 EUR", "", `"+5 EUR" begins like a formula of a spreadsheet; write the value itself`},
	} {
		n, err := table("item;price;supplier\nx;" + c.typed + ";Nord, Ost")
		if err != nil {
			t.Fatal(err)
		}
		f := n.Items()[0].Map("item", "price", "supplier")
		got, problem := f.Get("price").Text(), ""
		if err := n.Problems().Err(); err != nil {
			problem = strings.TrimPrefix(err.Error(), `prices.csv:2: column "price": `)
		}
		if problem != c.problem || c.problem == "" && got != c.read {
			t.Errorf("%q: read %q, problem %q", c.typed, got, problem)
		}
		if f.Get("supplier").Text() != "Nord, Ost" {
			t.Errorf("a text was changed: %q", f.Get("supplier").Text())
		}
	}
}

func TestTableRows(t *testing.T) {
	n, err := table("\uFEFFItem,Price,Supplier\r\n\r\nsieve,1.5,\"a, b\"\r\n,,\r\n\"two\nlines\",2,\r\n")
	if err != nil || n.Problems().Err() != nil {
		t.Fatal(err, n.Problems().Err())
	}
	var got []string
	for _, row := range n.Items() {
		f := row.Map("item", "price", "supplier")
		got = append(got, f.Get("item").Text()+"|"+f.Get("price").Text()+"|"+f.Get("supplier").Text())
	}
	if diff := cmp.Diff([]string{"sieve|1.5|a, b", "two\nlines|2|"}, got); diff != "" {
		t.Error(diff)
	}
	if line := n.Items()[1].Line(); line != 5 {
		t.Errorf("row after a break is on line %d, want 5", line)
	}
}

func TestTableRefused(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"", "prices.csv: the file is empty"},
		{"PK\x03\x04\x00", "prices.csv:1: this is not a text file: it contains a zero byte"},
		{"item;price;item\n", `prices.csv:1: two columns are headed "item"`},
		{"item;;price\n", "prices.csv:1: column 2 has no heading"},
		{"item;prise\n", `prices.csv:1: unknown column "prise"; did you mean "price"?; allowed: item, price, supplier`},
		{"item;price\na;1;2\n", `prices.csv:2: 3 cells, but the headings name 2; a text that contains ';' stands in quotation marks`},
		{"item;price\na;\"1\n", `prices.csv:2: a quotation mark stands where none may be, or is not closed: extraneous or missing " in quoted-field`},
	} {
		n, err := table(c.text)
		if err == nil {
			err = n.Problems().Err()
		}
		var invalid *document.Invalid
		if !errors.As(err, &invalid) || err.Error() != c.want {
			t.Errorf("%q:\n got %v\nwant %s", c.text, err, c.want)
		}
	}
}

// FuzzTable holds Table to no panic and printable messages, whatever the file.
func FuzzTable(f *testing.F) {
	f.Add([]byte("item;price;supplier\nsieve;1,5 EUR;\"a; b\"\n"))
	f.Add([]byte("\uFEFFitem,price\r\nx,1.234\r\n"))
	f.Add([]byte("item\n=1"))
	f.Fuzz(func(t *testing.T, data []byte) {
		n, err := document.Table("prices.csv", data, []string{"item", "price", "supplier"}, []string{"price"})
		if err == nil {
			for _, row := range n.Items() {
				fields := row.Map("item", "price", "supplier")
				fields.Need("item").Text()
				fields.Get("price").With(" EUR").Money()
			}
			err = n.Problems().Err()
		}
		var invalid *document.Invalid
		if err == nil || !errors.As(err, &invalid) {
			return
		}
		for _, line := range invalid.Lines() {
			if !strings.HasPrefix(line, "prices.csv") || strings.ContainsAny(line, "\n\r\x1b\x00") || len(line) > 3000 {
				t.Errorf("message %q", line)
			}
		}
	})
}
