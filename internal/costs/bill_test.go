package costs_test

import (
	"math"
	"strings"
	"testing"

	"github.com/shopspring/decimal"
	"pgregory.net/rapid"

	"parch/internal/costs"
	"parch/internal/routes"
	"parch/internal/steps"
)

func price(item, unit, perUnit string) costs.Price {
	return costs.Price{Item: item, Label: item, Unit: unit, PerUnit: decimal.RequireFromString(perUnit)}
}

func exampleBook() costs.Book {
	book := costs.Book{}
	for _, p := range []costs.Price{
		price("technician", "hour", "48"),
		price("electricity", "kwh", "0.24"),
		price("cooling-water", "m3", "4.20"),
		price("sieve-3a", "kg", "29.60"),
		price("toluene", "litre", "6.15"),
		price("waste-flammable-liquid", "kg", "1.35"),
		price("still-20l", "each", "1200"),
		price("karl-fischer", "test", "3.10"),
	} {
		book[p.Item] = p
	}
	return book
}

func exampleUses() []routes.StageUse {
	use := func(stage int, head steps.Head, item, unit string, quantity float64) routes.StageUse {
		return routes.StageUse{Stage: stage, Use: steps.Use{Head: head, Item: item, Unit: unit, Quantity: quantity, Basis: "example"}}
	}
	still := use(1, steps.Equipment, "still-20l", "each", 0.2)
	still.PerYear = true
	return []routes.StageUse{
		use(1, steps.Labour, "technician", "hour", 1.85),
		use(1, steps.Energy, "electricity", "kwh", 3.125),
		use(1, steps.CoolingWater, "cooling-water", "m3", 0.2),
		use(2, steps.Agent, "sieve-3a", "kg", 1.5),
		use(2, steps.SolventLost, "toluene", "litre", 0.4),
		use(2, steps.Waste, "waste-flammable-liquid", "kg", 2.2),
		still,
		use(0, steps.Testing, "karl-fischer", "test", 2),
		use(0, steps.Testing, "technician", "hour", 0.4),
	}
}

// Worked by hand, EUR for one of 40 batches a year, 17.6 L delivered:
//
//	labour        1.85 h     x 48     =  88.80
//	energy        3.125 kWh  x 0.24   =   0.75
//	cooling water 0.2 m3     x 4.20   =   0.84
//	agent         1.5 kg     x 29.60  =  44.40
//	solvent lost  0.4 L      x 6.15   =   2.46
//	waste         2.2 kg     x 1.35   =   2.97
//	equipment     0.2 /yr/40 x 1200   =   6.00
//	testing       2 x 3.10 + 0.4 x 48 =  25.40
//	                                    ------
//	a batch                             171.62
//	a litre       171.62 / 17.6       =   9.751136
//	a year        171.62 x 40         = 6864.80
func TestBillByHand(t *testing.T) {
	bill, err := exampleBook().Bill(exampleUses(), 17.6, 40, "EUR")
	if err != nil {
		t.Fatal(err)
	}
	wantHeads := map[steps.Head]string{
		steps.Labour: "88.80", steps.Energy: "0.75", steps.CoolingWater: "0.84", steps.Agent: "44.40",
		steps.SolventLost: "2.46", steps.Waste: "2.97", steps.Equipment: "6.00", steps.Testing: "25.40", steps.Purchase: "0.00",
	}
	for _, head := range steps.Heads {
		amount, ok := bill.ByHead[head]
		if !ok || !amount.Equal(decimal.RequireFromString(wantHeads[head])) {
			t.Errorf("%s = %s, want %s", head, amount, wantHeads[head])
		}
	}
	for _, c := range []struct {
		what string
		got  decimal.Decimal
		want string
	}{
		{"a batch", bill.PerBatch, "171.62"},
		{"a litre", bill.PerLitre, "9.751136"},
		{"a year", bill.PerYear, "6864.80"},
		{"equipment of a batch", bill.Lines[6].Quantity, "0.005"},
		{"equipment of a year", bill.Lines[6].YearShare, "0.2"},
		{"labour of a year is not shared", bill.Lines[0].YearShare, "0"},
	} {
		if !c.got.Equal(decimal.RequireFromString(c.want)) {
			t.Errorf("%s = %s, want %s", c.what, c.got, c.want)
		}
	}
}

func TestBillReportsEveryProblem(t *testing.T) {
	book := exampleBook()
	uses := exampleUses()
	uses[0].Unit = "each"
	uses[2].Quantity = math.NaN()
	uses[3].Quantity = -1
	uses[4].Head = "sundries"
	bill, err := book.Bill(uses, 17.6, 40, "EUR")
	if err == nil {
		t.Fatal("no error")
	}
	for _, want := range []string{
		"technician is used per each but priced per hour",
		"cooling-water: NaN is not a quantity",
		"sieve-3a: -1 is not a quantity",
		`toluene: "sundries" is not a head of cost`,
	} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("missing %q in:\n%v", want, err)
		}
	}
	if len(bill.Lines) != 0 || !bill.PerBatch.IsZero() {
		t.Error("a bill was made although prices are missing")
	}
}

func TestBillNeedsLitresAndBatches(t *testing.T) {
	for _, c := range [][2]float64{{0, 40}, {17.6, 0}, {math.Inf(1), 40}, {17.6, math.NaN()}, {-1, 40}} {
		if _, err := exampleBook().Bill(exampleUses(), c[0], c[1], "EUR"); err == nil {
			t.Errorf("%g L, %g batches: no error", c[0], c[1])
		}
	}
	if _, err := exampleBook().PerBatchFloat(exampleUses(), 0); err == nil {
		t.Error("PerBatchFloat with no batches: no error")
	}
}

// drawUses makes any mixture of uses that the book can price.
func drawUses(t *rapid.T, book costs.Book, smallest float64) []routes.StageUse {
	items := rapid.SampledFrom([]string{"technician", "electricity", "cooling-water", "sieve-3a", "toluene", "still-20l", "karl-fischer"})
	uses := make([]routes.StageUse, rapid.IntRange(1, 40).Draw(t, "lines"))
	for i := range uses {
		item := items.Draw(t, "item")
		uses[i] = routes.StageUse{Stage: i, Use: steps.Use{
			Head:     rapid.SampledFrom(steps.Heads).Draw(t, "head"),
			Item:     item,
			Unit:     book[item].Unit,
			Quantity: rapid.Float64Range(smallest, 1e4).Draw(t, "quantity"),
			PerYear:  rapid.Bool().Draw(t, "per year"),
		}}
	}
	return uses
}

func TestHeadsAddUpExactly(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		book := exampleBook()
		bill, err := book.Bill(drawUses(t, book, 0), 17.6, rapid.Float64Range(0.1, 400).Draw(t, "batches"), "EUR")
		if err != nil {
			t.Fatal(err)
		}
		heads, lines := decimal.Zero, decimal.Zero
		for _, amount := range bill.ByHead {
			heads = heads.Add(amount)
		}
		for _, line := range bill.Lines {
			if !line.Amount.Equal(line.Quantity.Mul(line.UnitPrice)) {
				t.Fatalf("%s: %s x %s is not %s", line.Item, line.Quantity, line.UnitPrice, line.Amount)
			}
			lines = lines.Add(line.Amount)
		}
		if !heads.Equal(bill.PerBatch) || !lines.Equal(bill.PerBatch) {
			t.Fatalf("heads %s, lines %s, total %s", heads, lines, bill.PerBatch)
		}
	})
}

func TestTotalScalesWithPrices(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		book := exampleBook()
		uses := drawUses(t, book, 0)
		factor := decimal.New(rapid.Int64Range(0, 1e6).Draw(t, "factor"), -3)
		dearer := costs.Book{}
		for item, p := range book {
			p.PerUnit = p.PerUnit.Mul(factor)
			dearer[item] = p
		}
		bill, err := book.Bill(uses, 17.6, 40, "EUR")
		if err != nil {
			t.Fatal(err)
		}
		scaled, err := dearer.Bill(uses, 17.6, 40, "EUR")
		if err != nil {
			t.Fatal(err)
		}
		if !scaled.PerBatch.Equal(bill.PerBatch.Mul(factor)) {
			t.Fatalf("%s x %s gives %s", bill.PerBatch, factor, scaled.PerBatch)
		}
	})
}

// The search prices in float64, the bill in decimal. A quantity is rounded at
// the twelfth decimal, so quantities from 0.01 on must agree to 1e-9.
func TestFloatAgreesWithBill(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		book := exampleBook()
		batches := rapid.Float64Range(0.1, 10).Draw(t, "batches")
		uses := drawUses(t, book, 0.01)
		bill, err := book.Bill(uses, 17.6, batches, "EUR")
		if err != nil {
			t.Fatal(err)
		}
		got, err := book.PerBatchFloat(uses, batches)
		if err != nil {
			t.Fatal(err)
		}
		want := bill.PerBatch.InexactFloat64()
		if math.Abs(got-want) > 1e-9*want {
			t.Fatalf("float %.15g, decimal %.15g", got, want)
		}
	})
}

func BenchmarkPerBatchFloat(b *testing.B) {
	book, uses := exampleBook(), exampleUses()
	for b.Loop() {
		if _, err := book.PerBatchFloat(uses, 40); err != nil {
			b.Fatal(err)
		}
	}
}

// What is counted per batch costs the same however many batches there are; what is
// counted per year is shared by them.
func TestTotalScalesWithBatches(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		book := exampleBook()
		uses := drawUses(t, book, 0)
		batches := rapid.Float64Range(0.5, 200).Draw(t, "batches")
		perBatch, perYear := decimal.Zero, decimal.Zero
		for _, use := range uses {
			cost := decimal.NewFromFloat(use.Quantity).Round(12).Mul(book[use.Item].PerUnit)
			if use.PerYear {
				perYear = perYear.Add(cost)
			} else {
				perBatch = perBatch.Add(cost)
			}
		}
		bill, err := book.Bill(uses, 17.6, batches, "EUR")
		if err != nil {
			t.Fatal(err)
		}
		n := decimal.NewFromFloat(batches).Round(12)
		want := perBatch.Add(perYear.Div(n))
		rounding := decimal.New(1, -6) // up to 40 shares, each rounded at the twelfth decimal, times a price of 1200
		if bill.PerBatch.Sub(want).Abs().GreaterThan(rounding) || !bill.PerYear.Equal(bill.PerBatch.Mul(n)) {
			t.Fatalf("batch %s, want %s; year %s", bill.PerBatch, want, bill.PerYear)
		}
	})
}
