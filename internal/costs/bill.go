package costs

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

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
// shared equally by the batches of the year. Items without a price are named in
// the bill, which then has no total. Every quantity that is no number is reported;
// there is no bill then.
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
		line, priced, err := b.line(use, batches)
		switch {
		case err != nil:
			problems = append(problems, err)
		case !priced:
			bill.NoPrice = append(bill.NoPrice, use.Item)
		default:
			bill.Lines = append(bill.Lines, line)
		}
	}
	if len(problems) > 0 {
		return Bill{}, errors.Join(problems...)
	}
	slices.Sort(bill.NoPrice)
	bill.NoPrice = slices.Compact(bill.NoPrice)
	bill.topUp(batches)
	bill.add()
	bill.Doubts = b.doubts(&bill)
	bill.PerLitre = bill.PerBatch.DivRound(litres, perLitreDecimals)
	bill.PerYear = bill.PerBatch.Mul(batches)
	return bill, nil
}

// add sums the lines up.
func (b *Bill) add() {
	for _, line := range b.Lines {
		b.ByHead[line.Head] = b.ByHead[line.Head].Add(line.Amount)
		b.PerBatch = b.PerBatch.Add(line.Amount)
	}
}

func (b Book) line(use routes.StageUse, batches decimal.Decimal) (line Line, priced bool, err error) {
	price, priced, err := b.priceOf(use.Use)
	if err != nil {
		return Line{}, false, err
	}
	quantity, err := amount(use.Item, use.Quantity)
	if err != nil || !priced {
		return Line{}, false, err
	}
	line = Line{
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
	return line, true, nil
}

// topUp cuts the least charge of the collections to what the other lines of waste
// leave of it.
func (b *Bill) topUp(batches decimal.Decimal) {
	at := slices.IndexFunc(b.Lines, func(l Line) bool { return l.Item == leastCharge })
	if at < 0 || b.Lines[at].UnitPrice.IsZero() {
		return
	}
	waste := decimal.Zero
	for i, line := range b.Lines {
		if line.Head == steps.Waste && i != at {
			waste = waste.Add(line.Amount)
		}
	}
	line := &b.Lines[at]
	paid := waste.Mul(batches).DivRound(line.UnitPrice, quantityDecimals)
	line.YearShare = decimal.Max(decimal.Zero, line.YearShare.Sub(paid))
	line.Quantity = line.YearShare.DivRound(batches, quantityDecimals)
	line.Amount = line.Quantity.Mul(line.UnitPrice)
	if line.YearShare.IsZero() {
		b.Lines = slices.Delete(b.Lines, at, at+1)
	}
}

// PerBatchFloat is the cost of a batch in float64, for searches that price a
// route many times. It agrees with Bill to 1e-9 of the total. Items without a
// price count nothing, as in the lines of the bill.
func (b Book) PerBatchFloat(uses []routes.StageUse, batchesPerYear float64) (float64, error) {
	if !(batchesPerYear > 0) {
		return 0, fmt.Errorf("%g batches a year", batchesPerYear)
	}
	total, waste, least := 0.0, 0.0, 0.0
	for _, use := range uses {
		price, priced, err := b.priceOf(use.Use)
		if err != nil {
			return 0, err
		}
		if !priced {
			continue
		}
		quantity := use.Quantity
		if use.PerYear {
			quantity /= batchesPerYear
		}
		cost := quantity * price.PerUnit.InexactFloat64()
		switch {
		case use.Item == leastCharge:
			least = cost
			continue
		case use.Head == steps.Waste:
			waste += cost
		}
		total += cost
	}
	return total + max(0, least-waste), nil
}

// Missing names the items among the uses that have no price, as often as they are used.
func (b Book) Missing(uses []routes.StageUse) (items []string) {
	for _, use := range uses {
		if _, priced := b[use.Item]; !priced {
			items = append(items, use.Item)
		}
	}
	return items
}

func (b Book) priceOf(use steps.Use) (price Price, priced bool, err error) {
	if !slices.Contains(steps.Heads, use.Head) {
		return Price{}, false, fmt.Errorf("%s: %q is not a head of cost", use.Item, use.Head)
	}
	price, priced = b[use.Item]
	if priced && price.Unit != use.Unit {
		return Price{}, false, fmt.Errorf("%s is used per %s but priced per %s", use.Item, use.Unit, price.Unit)
	}
	return price, priced, nil
}

// doubts says how much of a total rests on prices that have to be checked.
func (b Book) doubts(bill *Bill) []string {
	var out []string
	for _, flag := range []Flag{Expired, Old, Undated, Indicative} {
		sum := decimal.Zero
		var items []string
		for _, line := range bill.Lines {
			if b[line.Item].Flag == flag {
				sum = sum.Add(line.Amount)
				items = append(items, line.Item)
			}
		}
		slices.Sort(items)
		if items = slices.Compact(items); len(items) > 0 {
			out = append(out, fmt.Sprintf("%s of the %s %s a batch rest on prices that are %s: %s", sum.StringFixed(2), bill.PerBatch.StringFixed(2), bill.Currency, flag, strings.Join(items, ", ")))
		}
	}
	return out
}

// amount turns a quantity into decimal, rounded to 12 decimals of its unit.
func amount(what string, quantity float64) (decimal.Decimal, error) {
	if math.IsNaN(quantity) || math.IsInf(quantity, 0) || quantity < 0 {
		return decimal.Decimal{}, fmt.Errorf("%s: %g is not a quantity", what, quantity)
	}
	return decimal.NewFromFloat(quantity).Round(quantityDecimals), nil
}
