package job

import (
	"fmt"

	"github.com/shopspring/decimal"
	"golang.org/x/text/currency"

	"parch/internal/document"
	"parch/internal/quantity"
)

// currency reads the currency of the job: any code of ISO 4217.
func (r *reader) currency(n *document.Node) string {
	code := n.Text()
	if code == "" || r.isCurrency(n, code) {
		return code
	}
	return ""
}

func (r *reader) isCurrency(n *document.Node, code string) bool {
	unit, err := currency.ParseISO(code)
	if err == nil && unit.String() == code {
		return true
	}
	n.Fail("%s is not a currency; write its ISO 4217 code in capitals, such as EUR", quantity.Quote(code))
	return false
}

// rates reads the dated rates of exchange into the currency of the job. There is
// no other way to bring a second currency in.
func (r *reader) rates(n *document.Node) {
	lines := map[string]int{}
	for _, entry := range listOf(n) {
		f := entry.Map("from", "rate", "date")
		from := f.Need("from")
		rate := Rate{From: from.Text(), Date: r.pastDate(f.Need("date"))}
		rate.PerUnit = r.exchange(f.Need("rate"))
		switch {
		case rate.From == "" || !r.isCurrency(from, rate.From) || r.twice(entry, rate.From, lines):
		case rate.From == r.job.Currency:
			from.Fail("%s is the currency of the job itself", quantity.Quote(rate.From))
		case rate.Date != "" && rate.PerUnit.IsPositive():
			r.job.Rates = append(r.job.Rates, rate)
		}
	}
}

// exchange reads a plain decimal number. It stays decimal.
func (r *reader) exchange(n *document.Node) decimal.Decimal {
	if _, ok := n.Quantity(quantity.Number); !ok {
		return decimal.Zero
	}
	rate, err := decimal.NewFromString(n.Text())
	if err != nil || rate.LessThan(decimal.New(1, -6)) || rate.GreaterThan(decimal.New(1, 6)) || rate.Exponent() < -8 {
		n.Fail("%s is not a possible rate; allowed: 0.000001 to 1000000, up to 8 decimals", quantity.Quote(n.Text()))
		return decimal.Zero
	}
	return rate
}

// money reads an amount in the currency of the job, or in one that the job gives
// a rate for. Negative amounts are refused.
func (r *reader) money(n *document.Node) (money quantity.Money, converted string, ok bool) {
	money, ok = n.Money()
	switch {
	case !ok:
		return money, "", false
	case money.Amount.IsNegative():
		n.Fail("%s is negative; a price is zero or more", quantity.Quote(n.Text()))
		return money, "", false
	case r.job.Currency == "" || money.Currency == r.job.Currency:
		return money, "", true
	}
	for _, rate := range r.job.Rates {
		if rate.From == money.Currency {
			converted = fmt.Sprintf("%s at %s %s of %s", n.Text(), rate.PerUnit, r.job.Currency, rate.Date)
			money.Amount, money.Currency = money.Amount.Mul(rate.PerUnit), r.job.Currency
			r.note(n, "%s is %s %s", converted, money.Amount, r.job.Currency)
			return money, converted, true
		}
	}
	n.Fail("%s is in %s, but the currency of the job is %s%s; use one currency, or give a dated rate under \"rates\"",
		quantity.Quote(n.Text()), money.Currency, r.job.Currency, r.byDefault)
	return money, "", false
}

// pastDate reads a date that is not after the date of the job.
func (r *reader) pastDate(n *document.Node) string {
	date := n.Date()
	if date != "" && r.job.Date != "" && date > r.job.Date {
		n.Fail("%s is after the date of the job, %s", quantity.Quote(date), r.job.Date)
		return ""
	}
	return date
}
