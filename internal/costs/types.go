// Package costs turns usage and prices into a bill in decimal money.
//
// One rounding rule: the quantity of a line is rounded to 12 decimals of its
// unit when it becomes decimal. Amounts are exact products, heads and totals
// exact sums; nothing else is rounded. Money is shown to the cent.
package costs

import (
	"github.com/shopspring/decimal"

	"parch/internal/steps"
)

// Price is a price in the currency of the report.
type Price struct {
	Item, Label string
	Unit        string // hour, kwh, m3, kg, litre, each, test
	PerUnit     decimal.Decimal
	Own         bool   // from the job
	Date        string // ISO date
	Source      string // id of a catalog source, or "job"
	SourceText  string
	Confidence  string
	Indicative  bool // a default of the catalog: check before use
	Note        string
}

// Book holds the prices by item.
type Book map[string]Price

// Line is quantity x unit price = amount, for one batch.
type Line struct {
	Head      steps.Head
	Step      int // 1-based place of the step in the route, 0 for the whole route
	Item      string
	Label     string
	Basis     string
	Quantity  decimal.Decimal // per batch
	YearShare decimal.Decimal // quantity per year, where the line is shared by a year's batches; else zero
	Unit      string
	UnitPrice decimal.Decimal
	Amount    decimal.Decimal
}

// Bill is the cost of one route for one batch.
type Bill struct {
	Currency        string
	Lines           []Line
	ByHead          map[steps.Head]decimal.Decimal
	PerBatch        decimal.Decimal
	LitresDelivered decimal.Decimal
	PerLitre        decimal.Decimal // PerBatch / LitresDelivered, rounded to 6 decimals
	PerYear         decimal.Decimal
}
