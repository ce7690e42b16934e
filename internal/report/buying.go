package report

import (
	"fmt"
	"maps"
	"math"
	"slices"
	"strconv"
	"strings"

	"parch/internal/costs"
	"parch/internal/quantity"
	"parch/internal/study"
)

// year prints what the best route costs and pays out over a year, and what a
// batch emits and leaves behind.
func (p *page) year(r *study.Report, best *study.Route) {
	if y := best.Year; y != nil {
		text := fmt.Sprintf("A year: %s cost %s %s; paid out %s in the first year and %s in later ones", count(y.Batches, "batch", "batches"),
			money(y.Cost), r.Job.Currency, money(y.FirstYear), money(y.LaterYears))
		if y.Equipment.IsPositive() {
			text += fmt.Sprintf(", with %s of equipment bought in the first", money(y.Equipment))
		}
		if y.Regenerations > 0 {
			text += "; " + count(y.Regenerations, "charge is regenerated", "charges are regenerated")
		}
		if y.MakeUpLitres > 0 {
			text += fmt.Sprintf("; %s of lost solvent made up", quantity.FormatVolume(y.MakeUpLitres/1e3))
		}
		p.say(3, 0, "%s.%s", text, investment(y, r.Job.Currency))
	}
	if f := best.Footprint; f.WasteKg != nil {
		p.say(3, 0, "A batch emits %s, and leaves %s.", f.Text(), wastes(f.WasteKg))
	}
}

func investment(y *costs.Year, currency string) string {
	v := y.Investment
	if v == nil {
		if y.Equipment.IsPositive() {
			return " Every route that has its prices buys equipment: there is none to reckon the payback against."
		}
		return ""
	}
	text := fmt.Sprintf(" Against %s, which buys none, the equipment never pays back", v.Against)
	if !math.IsNaN(v.PaybackYears) {
		text = fmt.Sprintf(" Against %s, which buys none, the equipment saves %s %s a year and is paid back in %s", v.Against, money(v.YearlySaving), currency, years(v.PaybackYears, 2))
	}
	if v.Interest > 0 {
		text += fmt.Sprintf("; its net present value is %s at %s over %s", money(v.PresentValue), quantity.FormatShare(v.Interest), years(v.Years, 3))
	}
	return text + "."
}

// years to so many digits, in words.
func years(n float64, digits int) string {
	if said := quantity.Significant(n, digits); said != "1" {
		return said + " years"
	}
	return "1 year"
}

func wastes(kg map[string]float64) string {
	var parts []string
	for _, item := range slices.Sorted(maps.Keys(kg)) {
		if kg[item] > 0 {
			parts = append(parts, quantity.FormatMass(kg[item])+" of "+strings.ReplaceAll(strings.TrimPrefix(item, "waste-"), "-", " "))
		}
	}
	if len(parts) == 0 {
		return "no waste"
	}
	return strings.Join(parts, ", ") + " waste"
}

// buying prints the list for the best routes of all lots.
func (p *page) buying(r *study.Report) {
	if len(r.Buying.Purchases) == 0 {
		return
	}
	p.line("")
	first := fmt.Sprintf("the first batch is on day %d, counted from the earliest order", r.Buying.FirstBatchDay)
	if date := r.Buying.DateOf(r.Buying.FirstBatchDay); date != "" {
		first = fmt.Sprintf("the first order is placed on %s, the date of the job, the first batch is on %s", r.Buying.FirstOrder, date)
	}
	p.say(0, 0, "To buy for a year of the best routes, all lots together (%s):", first)
	rows := make([][]string, len(r.Buying.Purchases))
	for i := range r.Buying.Purchases {
		rows[i] = purchaseRow(&r.Buying, &r.Buying.Purchases[i])
	}
	p.table([]column{{"Item", false, 24}, {"Need", true, 0}, {"On hand", true, 0}, {"Packs", false, 26}, {"Order\non" + dayHeading(&r.Buying), true, 0}, {"Total\n" + r.Job.Currency, true, 0}}, rows)
	for i := range r.Buying.Purchases {
		one := &r.Buying.Purchases[i]
		p.say(5, 4, "%s: %s", one.Item, purchaseText(one))
	}
	for _, flag := range r.Buying.Flags {
		p.say(5, 4, "over a limit of the site: %s", flag)
	}
}

// dayHeading and dayShown: a date where the job has one, else a day counted from
// the earliest order.
func dayHeading(b *costs.Buying) string {
	if b.FirstOrder == "" {
		return " day"
	}
	return ""
}

func dayShown(b *costs.Buying, day int) string {
	if date := b.DateOf(day); date != "" {
		return date
	}
	return strconv.Itoa(day)
}

func purchaseRow(b *costs.Buying, one *costs.Purchase) []string {
	var packs, days []string
	for _, o := range one.Orders {
		packs = append(packs, orderText(one, o))
		days = append(days, dayShown(b, o.OrderDay))
	}
	total := "no price"
	switch {
	case one.Priced && one.Flag != costs.NoFlag:
		total = money(one.Total) + "*"
	case one.Priced:
		total = money(one.Total) + " "
	}
	if len(packs) == 0 {
		packs, days = []string{"–"}, []string{"–"}
	}
	return []string{one.Item, unitAmount(one.Process+one.Losses+one.Safety, one.Unit), unitAmount(one.Have, one.Unit), strings.Join(packs, "\n"), strings.Join(days, "\n"), total}
}

func orderText(one *costs.Purchase, o costs.Order) string {
	if o.Pack.AnyAmount() {
		return unitAmount(o.Amount.InexactFloat64(), one.Unit)
	}
	return fmt.Sprintf("%d x %s", o.Count, unitAmount(o.Pack.Size.InexactFloat64(), one.Unit))
}

func unitAmount(x float64, unit string) string {
	text := quantity.Significant(x, 3)
	switch unit {
	case "litre":
		return text + " L"
	case "each":
		return text
	case "test":
		return text + " tests"
	}
	return text + " " + unit
}

// purchaseText is the line of why and what has to be written on the order.
func purchaseText(one *costs.Purchase) string {
	parts := []string{one.Why}
	if year := one.Process + one.Losses; one.Unit == "kg" && one.LaterYears > 0 && one.LaterYears < year*(1-1e-9) {
		parts = append(parts, fmt.Sprintf("the need is the first year's, its whole first charge with it; later years use up %s", unitAmount(one.LaterYears, one.Unit)))
	}
	if one.Leftover > 0 && len(one.Orders) > 0 {
		parts = append(parts, unitAmount(one.Leftover, one.Unit)+" left at the end of the year")
	}
	for _, o := range one.Orders {
		if o.Every > 0 {
			parts = append(parts, fmt.Sprintf("delivered %d x %s every %d days", o.Each, unitAmount(o.Pack.Size.InexactFloat64(), one.Unit), o.Every))
		}
	}
	if slices.ContainsFunc(one.Orders, func(o costs.Order) bool { return o.Pack.LeadDays < 0 }) {
		parts = append(parts, "lead time not given, taken as 0 days")
	}
	parts = append(parts, one.Specification)
	if t := one.Transport; t.UN != "" {
		parts = append(parts, fmt.Sprintf("UN %s, class %s, packing group %s (from memory)", t.UN, t.Class, t.Group))
	}
	return strings.Join(slices.DeleteFunc(parts, func(s string) bool { return s == "" }), "; ")
}

// doubtful names the prices that have to be checked before the totals are relied
// upon, and the rule by which one of several packs was taken.
func (p *page) doubtful(r *study.Report) {
	by := map[costs.Flag][]string{}
	for _, item := range slices.Sorted(maps.Keys(r.Book)) {
		price := r.Book[item]
		text := item
		if price.Date != "" {
			text += " (" + price.Date + ")"
		}
		by[price.Flag] = append(by[price.Flag], text)
	}
	delete(by, costs.NoFlag)
	if len(by) > 0 {
		p.line("")
		p.say(0, 0, "Prices to check (*), as of %s:", r.PriceDate)
	}
	for _, flag := range []costs.Flag{costs.Expired, costs.Old, costs.Undated, costs.Indicative} {
		if len(by[flag]) > 0 {
			p.say(2, 2, "%s: %s", flag, strings.Join(by[flag], ", "))
		}
	}
	if r.Book.SeveralPacks() {
		p.line("")
		p.say(0, 2, "Packs: %s.", costs.PackRule)
	}
}
