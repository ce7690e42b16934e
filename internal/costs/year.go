package costs

import (
	"math"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/steps"
)

// Year is what a route costs and pays out over a year, as if it were the only
// one. Stock on hand is left aside; equipment is bought in the first year, and
// what replaces it after its life is not counted.
type Year struct {
	Batches       float64
	Regenerations float64 // charges of agent that are dried for another use
	MakeUpLitres  float64 // solvent bought for what is lost
	PackCost      decimal.Decimal
	Cost          decimal.Decimal // the bill of a batch times the batches
	Equipment     decimal.Decimal // price of the pieces that are not owned
	FirstYear     decimal.Decimal // paid out
	LaterYears    decimal.Decimal // paid out each year after
	Investment    *Investment     // nil where there is nothing to buy or nothing to compare with
}

// Investment compares buying the equipment of a route with the route that pays
// out least each year without buying any.
type Investment struct {
	Against      string // that route
	YearlySaving decimal.Decimal
	PaybackYears float64 // NaN where it never pays back
	Years        float64 // the shortest life among the pieces
	Interest     float64 // 0 where the job gives none: then no present value is stated
	PresentValue decimal.Decimal
}

// Yearly works out the year of a route whose bill has all its prices.
func (a *Arrangement) Yearly(cat *catalog.Catalog, j *job.Job, book Book, plan Plan, bill *Bill) (*Year, error) {
	y := &Year{Batches: plan.BatchesPerYear, Cost: bill.PerYear, Equipment: decimal.Zero}
	writeOff, err := a.written(book, plan, y)
	if err != nil {
		return nil, err
	}
	y.LaterYears = bill.PerYear.Sub(writeOff)
	withoutStock := *j
	withoutStock.Stock = nil
	needs := Needs([]Plan{plan})
	list, err := Buy(cat, &withoutStock, book, needs, nil)
	if err != nil {
		return nil, err
	}
	y.FirstYear = y.LaterYears.Add(y.Equipment)
	for i, p := range list.Purchases {
		used, err := amount(p.Item, needs[i].LaterYears)
		if err != nil {
			return nil, err
		}
		y.PackCost = y.PackCost.Add(p.Total)
		y.FirstYear = y.FirstYear.Add(p.Total).Sub(used.Mul(book[p.Item].PerUnit))
		y.MakeUpLitres += p.Losses
	}
	for _, use := range plan.Run.Uses {
		if use.Head == steps.Agent && use.Quantity > 0 {
			lots := plan.lotsOver(use)
			y.Regenerations += plan.BatchesPerYear / lots * (1 - lots*use.Quantity/max(plan.charge(use), lots*use.Quantity))
		}
	}
	return y, nil
}

// written is a year's write-off in the bill, which is no money paid out; the
// price of the pieces goes into y.
func (a *Arrangement) written(book Book, plan Plan, y *Year) (writeOff decimal.Decimal, err error) {
	for _, use := range plan.Run.Uses {
		p, known := a.pieces[use.Item]
		if use.Head != steps.Equipment || !known || p.linear == 0 {
			continue
		}
		share, err := amount(use.Item, use.Quantity*p.writeOff/(p.breakage+p.writeOff))
		if err != nil {
			return writeOff, err
		}
		writeOff = writeOff.Add(share.Mul(book[use.Item].PerUnit))
	}
	for item, n := range a.ToBuyEquipment(plan) {
		y.Equipment = y.Equipment.Add(book[item].PerUnit.Mul(decimal.NewFromInt(int64(n))))
	}
	return writeOff, nil
}

// Alternative is a route as the comparison of investments sees it.
type Alternative struct {
	ID   string
	Plan Plan
	Year *Year // nil where it has no price
}

// Invest fills in the investments of routes that reach their target.
func (a *Arrangement) Invest(all []Alternative) {
	var base *Alternative
	for i := range all {
		if y := all[i].Year; y != nil && y.Equipment.IsZero() && (base == nil || y.LaterYears.LessThan(base.Year.LaterYears)) {
			base = &all[i]
		}
	}
	if base == nil {
		return
	}
	for i := range all {
		if y := all[i].Year; y != nil && y.Equipment.IsPositive() {
			y.Investment = a.invest(&all[i], base)
		}
	}
}

func (a *Arrangement) invest(one, base *Alternative) *Investment {
	v := &Investment{Against: base.ID, Interest: a.interest, PaybackYears: math.NaN(), Years: math.Inf(1)}
	v.YearlySaving = base.Year.LaterYears.Sub(one.Year.LaterYears)
	for item := range a.ToBuyEquipment(one.Plan) {
		v.Years = min(v.Years, a.pieces[item].years)
	}
	if v.YearlySaving.IsPositive() {
		v.PaybackYears = one.Year.Equipment.Div(v.YearlySaving).InexactFloat64()
	}
	if a.interest > 0 {
		v.PresentValue = PresentValue(one.Year.Equipment, v.YearlySaving, a.interest, v.Years)
	}
	return v
}

// PresentValue is what an outlay now and a saving at the end of each of some
// years are worth today:
//
//	NPV = -outlay + saving (1 - (1 + i)^-n) / i
func PresentValue(outlay, saving decimal.Decimal, interest, years float64) decimal.Decimal {
	worth := decimal.NewFromFloat(1 / AnnuityFactor(interest, years)).Round(quantityDecimals)
	return saving.Mul(worth).Sub(outlay)
}
