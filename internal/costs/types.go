// Package costs turns usage and prices into a bill in decimal money, and into
// what has to be bought, when, and whether equipment pays.
//
// One rounding rule: amounts are exact products, heads and totals exact sums of
// them, and only what is written down is rounded, once, by ToTheCent: half away
// from zero, so that written heads add up to the written total. Routes are
// compared, tuned and drawn by the exact amounts; rounding each line would make
// steps of a cent where a break-even or a tuned setting needs a smooth cost. A
// quantity becomes decimal with 12 decimals of its unit, and so does the price of
// a unit out of a pack.
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
	Low, High   decimal.Decimal // the band of PerUnit; zero where none is given
	Own         bool            // from the job or from the user's own catalog
	Date        string          // ISO date
	Source      string          // id of a catalog source, or "job"
	SourceText  string
	Confidence  string
	Indicative  bool   // a default of the catalog: check before use
	Flag        Flag   // why a total that rests on it is in doubt
	Packs       []Pack // what is on offer, the smallest order first; PerUnit is that of one of them
	Pack        string // which of them, such as "5 kg"; "" where there is no choice
	Note        string
}

// Flag says why a price has to be checked before a total that rests on it is
// relied upon.
type Flag string

// The flags, the gravest last.
const (
	NoFlag     Flag = ""
	Indicative Flag = "indicative"
	Undated    Flag = "undated"
	Old        Flag = "older than a year"
	Expired    Flag = "no longer valid"
)

// Pack is an offer of one size.
type Pack struct {
	Size       decimal.Decimal // in the unit of the price; 0 stands for any amount
	Price      decimal.Decimal // of one pack; of one unit where Size is 0
	PerUnit    decimal.Decimal
	Low, High  decimal.Decimal // the band of PerUnit; zero where none is given
	Date       string          // ISO date, "" where not given
	ValidUntil string          // ISO date, "" where not given
	Minimum    int             // packs to order at least
	LeadDays   int             // from order to delivery; -1 where not given
	ShelfDays  int             // after opening; 0 where it keeps or is not given
	Supplier   string          // the user's own text
	Tax        string          // the tax basis in the user's words
	Flag       Flag
	Note       string // how it came into the currency of the report
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

// Bill is the cost of one route for one batch. Where items have no price it holds
// the lines that have one, and no total stands for the whole.
type Bill struct {
	Currency        string
	Lines           []Line
	ByHead          map[steps.Head]decimal.Decimal
	PerBatch        decimal.Decimal
	LitresDelivered decimal.Decimal
	PerLitre        decimal.Decimal // PerBatch / LitresDelivered, rounded to 6 decimals
	PerYear         decimal.Decimal
	NoPrice         []string // items that are used and have no price, sorted
	Doubts          []string // what the total rests on that has to be checked, in sentences
}

// Priced reports whether every item has a price.
func (b *Bill) Priced() bool { return len(b.NoPrice) == 0 }
