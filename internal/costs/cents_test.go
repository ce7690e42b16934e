package costs_test

import (
	"testing"

	"github.com/shopspring/decimal"
	"pgregory.net/rapid"

	"parch/internal/costs"
	"parch/internal/steps"
)

// On paper: running totals 0.333, 0.666, 0.999, 3.499, 3.494 are written 0.33,
// 0.67, 1.00, 3.50, 3.49.
func TestToTheCentByHand(t *testing.T) {
	written := costs.ToTheCent([]decimal.Decimal{d("0.333"), d("0.333"), d("0.333"), d("2.50"), d("-0.005")})
	for i, want := range []string{"0.33", "0.34", "0.33", "2.50", "-0.01"} {
		if !written[i].Equal(d(want)) {
			t.Errorf("amount %d is written %s, want %s", i+1, written[i], want)
		}
	}
}

// Written amounts add up to the sum rounded once; whole cents stay as they are;
// nothing moves by a cent; nothing stays nothing.
func TestToTheCent(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		amounts := make([]decimal.Decimal, rapid.IntRange(0, 30).Draw(t, "amounts"))
		sum := decimal.Zero
		for i := range amounts {
			amounts[i] = decimal.New(rapid.Int64Range(0, 1e12).Draw(t, "amount"), -rapid.Int32Range(0, 14).Draw(t, "decimals"))
			sum = sum.Add(amounts[i])
		}
		total := decimal.Zero
		for i, w := range costs.ToTheCent(amounts) {
			total = total.Add(w)
			moved := w.Sub(amounts[i]).Abs()
			if !w.Equal(w.Round(costs.Cents)) || moved.GreaterThanOrEqual(d("0.01")) || amounts[i].Equal(amounts[i].Round(costs.Cents)) && !moved.IsZero() {
				t.Fatalf("%s is written %s", amounts[i], w)
			}
		}
		if !total.Equal(sum.Round(costs.Cents)) {
			t.Fatalf("written %s, sum %s", total, sum)
		}
	})
}

func TestWrittenHeadsAddUp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		book := exampleBook()
		bill, err := book.Bill(drawUses(t, book, 0), 17.6, rapid.Float64Range(0.1, 400).Draw(t, "batches"), "EUR")
		if err != nil {
			t.Fatal(err)
		}
		heads, total := bill.Written()
		sum := decimal.Zero
		for _, h := range steps.Heads {
			sum = sum.Add(heads[h])
		}
		if len(heads) != len(steps.Heads) || !sum.Equal(total) || !total.Equal(bill.PerBatch.Round(costs.Cents)) {
			t.Fatalf("heads %s, written %s, exact %s", sum, total, bill.PerBatch)
		}
	})
}
