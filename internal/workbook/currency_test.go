package workbook

import (
	"strings"
	"testing"
)

func kindOf(t *testing.T, name string) kind {
	t.Helper()
	if testing.Short() {
		t.Skip("runs a job")
	}
	for _, k := range everyKind(t) {
		if k.name == name {
			return k
		}
	}
	t.Fatalf("no kind %q", name)
	return kind{}
}

// A price in another currency stands in the currency of the job, at the dated rate: a
// pack of 25 kg at 250 USD and 0.92 EUR for 1 USD is 9.20 EUR/kg, by hand. The bills
// follow it, the checks hold, and the office program computes the same.
func TestTwoCurrencies(t *testing.T) {
	k := kindOf(t, "two currencies")
	for name, want := range map[string]float64{"price_sieve_3a_kg": 9.2, "price_toluene_litre": 5.9} {
		if _, _, c := k.book.named(t, name); !nearly(c, want) {
			t.Errorf("%s is %s, want %g", name, c.raw, want)
		}
	}
	if _, _, c := k.book.named(t, "check_total"); c.raw != "0" {
		t.Errorf("check_total is %s", c.raw)
	}
	billed := 0
	for row := k.layout.lineRows.first; row <= k.layout.lineRows.last; row++ {
		if k.book.cells[sheetCosts][at(billItem, row)].text != "sieve-3a" {
			continue
		}
		billed++
		if c := k.book.cells[sheetCosts][at(billPrice, row)]; !nearly(c, 9.2) || c.formula != "price_sieve_3a_kg" {
			t.Errorf("row %d of Costs: %+v", row, c)
		}
	}
	if billed == 0 {
		t.Error("no bill has the item in the other currency")
	}
	r := k.report
	sameValues(t, k.book, converted(t, true, written(t, r))[0])
}

func nearly(c stored, want float64) bool {
	v, ok := c.number()
	return ok && abs(v-want) < 1e-9
}

// The water on a sieve whose history was added up says what is assumed of it, on Inputs
// as on the terminal, and the card names the history as it was told.
func TestAddedHistoryIsSaid(t *testing.T) {
	k := kindOf(t, "two currencies")
	_, place, _ := k.book.named(t, "lot1_residual_loading")
	said := k.book.cells[sheetInputs]["E"+place[1:]].text
	for _, want := range []string{"300 °C, left open 1 h", "is assumed", "in all"} {
		if !strings.Contains(said, want) {
			t.Errorf("Inputs says %q, not %q", said, want)
		}
	}
	for _, c := range k.book.cells[sheetBenchCard] {
		if strings.Contains(c.text, "beads: 300 °C, left open 1 h") {
			return
		}
	}
	t.Error("no card names the history")
}
