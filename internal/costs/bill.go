package costs

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"github.com/shopspring/decimal"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Decimals of a quantity, and of the cost of a litre.
const (
	quantityDecimals = 12
	perLitreDecimals = 6
)

// Bill prices the uses of one route for one batch. Uses counted per year are
// shared equally by the batches of the year. Every item without a price, and
// every quantity that is no number, is reported; there is no bill then.
func (b Book) Bill(uses []routes.StageUse, litresDelivered, batchesPerYear float64, currency string) (Bill, error) {
	litres, err := amount("litres delivered", litresDelivered)
	if err != nil {
		return Bill{}, err
	}
	batches, err := amount("batches per year", batchesPerYear)
	if err != nil {
		return Bill{}, err
	}
	if !litres.IsPositive() || !batches.IsPositive() {
		return Bill{}, fmt.Errorf("no cost per litre: %s L delivered, %s batches a year", litres, batches)
	}
	bill := Bill{Currency: currency, LitresDelivered: litres, ByHead: make(map[steps.Head]decimal.Decimal, len(steps.Heads))}
	for _, head := range steps.Heads {
		bill.ByHead[head] = decimal.Zero
	}
	var problems []error
	for _, use := range uses {
		line, err := b.line(use, batches)
		if err != nil {
			problems = append(problems, err)
			continue
		}
		bill.Lines = append(bill.Lines, line)
		bill.ByHead[line.Head] = bill.ByHead[line.Head].Add(line.Amount)
		bill.PerBatch = bill.PerBatch.Add(line.Amount)
	}
	if len(problems) > 0 {
		return Bill{}, errors.Join(problems...)
	}
	bill.PerLitre = bill.PerBatch.DivRound(litres, perLitreDecimals)
	bill.PerYear = bill.PerBatch.Mul(batches)
	return bill, nil
}

func (b Book) line(use routes.StageUse, batches decimal.Decimal) (Line, error) {
	price, err := b.priceOf(use.Use)
	if err != nil {
		return Line{}, err
	}
	quantity, err := amount(use.Item, use.Quantity)
	if err != nil {
		return Line{}, err
	}
	line := Line{
		Head:      use.Head,
		Step:      use.Stage,
		Item:      use.Item,
		Label:     price.Label,
		Basis:     use.Basis,
		Quantity:  quantity,
		Unit:      price.Unit,
		UnitPrice: price.PerUnit,
	}
	if use.PerYear {
		line.YearShare = quantity
		line.Quantity = quantity.DivRound(batches, quantityDecimals)
	}
	line.Amount = line.Quantity.Mul(line.UnitPrice)
	return line, nil
}

// PerBatchFloat is the cost of a batch in float64, for searches that price a
// route many times. It agrees with Bill to 1e-9 of the total.
func (b Book) PerBatchFloat(uses []routes.StageUse, batchesPerYear float64) (float64, error) {
	if !(batchesPerYear > 0) {
		return 0, fmt.Errorf("%g batches a year", batchesPerYear)
	}
	total := 0.0
	for _, use := range uses {
		price, err := b.priceOf(use.Use)
		if err != nil {
			return 0, err
		}
		quantity := use.Quantity
		if use.PerYear {
			quantity /= batchesPerYear
		}
		total += quantity * price.PerUnit.InexactFloat64()
	}
	return total, nil
}

func (b Book) priceOf(use steps.Use) (Price, error) {
	if !slices.Contains(steps.Heads, use.Head) {
		return Price{}, fmt.Errorf("%s: %q is not a head of cost", use.Item, use.Head)
	}
	price, ok := b[use.Item]
	if !ok {
		return Price{}, fmt.Errorf("no price for %s (per %s); add it to the prices of the job", use.Item, use.Unit)
	}
	if price.Unit != use.Unit {
		return Price{}, fmt.Errorf("%s is used per %s but priced per %s", use.Item, use.Unit, price.Unit)
	}
	return price, nil
}

// amount turns a quantity into decimal, rounded to 12 decimals of its unit.
func amount(what string, quantity float64) (decimal.Decimal, error) {
	if math.IsNaN(quantity) || math.IsInf(quantity, 0) || quantity < 0 {
		return decimal.Decimal{}, fmt.Errorf("%s: %g is not a quantity", what, quantity)
	}
	return decimal.NewFromFloat(quantity).Round(quantityDecimals), nil
}
