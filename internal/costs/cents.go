package costs

import (
	"github.com/shopspring/decimal"

	"parch/internal/steps"
)

// Cents are the decimals of a written amount of money.
const Cents = 2

// ToTheCent writes exact amounts to the cent so that they add up to their
// rounded sum: the running total is rounded, half away from zero, and each
// amount is what it rises by. An amount of whole cents stays as it is; no other
// is moved by a cent or more. Nothing is rounded twice, and parts written one
// after the other add up to the parts of a coarser division.
func ToTheCent(amounts []decimal.Decimal) []decimal.Decimal {
	written := make([]decimal.Decimal, len(amounts))
	exact, before := decimal.Zero, decimal.Zero
	for i, a := range amounts {
		exact = exact.Add(a)
		total := exact.Round(Cents)
		written[i], before = total.Sub(before), total
	}
	return written
}

// Written is the bill of a batch to the cent: the heads, in the order of
// steps.Heads, add up to the total.
func (b *Bill) Written() (heads map[steps.Head]decimal.Decimal, total decimal.Decimal) {
	exact := make([]decimal.Decimal, len(steps.Heads))
	for i, head := range steps.Heads {
		exact[i] = b.ByHead[head]
	}
	heads = make(map[steps.Head]decimal.Decimal, len(steps.Heads))
	for i, amount := range ToTheCent(exact) {
		heads[steps.Heads[i]] = amount
	}
	return heads, b.PerBatch.Round(Cents)
}

// WrittenPerLitre is the cost of a litre to the cent, rounded once from the
// exact cost of the batch.
func (b *Bill) WrittenPerLitre() decimal.Decimal {
	if !b.LitresDelivered.IsPositive() {
		return decimal.Zero
	}
	return b.PerBatch.DivRound(b.LitresDelivered, Cents)
}
