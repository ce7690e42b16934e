package workbook

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"parch/internal/costs"
)

// Columns of Buying.
const (
	buyNeed   = 3 // process, losses, safety stock, on hand, to buy
	buyPack   = 9
	buyPacks  = 10
	buyOrder  = 11
	buyThere  = 12
	buyCost   = 13
	buyFields = 15 // two, left open
)

func (l *layout) buying() *grid {
	g := newGrid(sheetBuying, "What to order for a year of the recommended routes, all lots together. Values of the program: after an edit of an input or a price the list is that of the run, no longer that of the sheet.",
		tabResult, checkCell(), l.itemWidth(), 29, 9, 8.5, 8.5, 8.5, 8.5, 7, 7, 8, 11, 11, 10, 16, 13, 13)
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 1
	l.banner(g, frameRows+1)
	list := l.report.Buying.Purchases
	if len(list) == 0 {
		g.put(1, g.next(), text(plain, "Nothing has to be bought: no lot has a route that reaches its target, or the lots are dry."))
		return g
	}
	buying := &l.report.Buying
	order, there := column{"Order on day", "1"}, column{"There by day", "1"}
	name := fmt.Sprintf("Order list; days count from the earliest order, the first batch is on day %d", buying.FirstBatchDay)
	if date := buying.DateOf(buying.FirstBatchDay); date != "" {
		order, there = column{name: "Order on"}, column{name: "There by"}
		name = fmt.Sprintf("Order list; the first order is placed on %s, the first batch is on %s", buying.FirstOrder, date)
	}
	g.listsFrom = g.next()
	g.part(g.listsFrom)
	first := g.table(g.listsFrom, name,
		[]column{{name: "Item"}, {name: "Specification"}, {"Process", "1"}, {"Losses", "1"}, {"Safety stock", "1"}, {"On hand", "1"}, {"To buy", "1"}, {name: "Unit"},
			{"Pack", "1"}, {"Packs", "1"}, order, there, {"Cost", l.currency()}, {name: "Price is"}, {name: "Ordered by, date"}, {name: "Received by, date"}})
	row := first
	total := 0.0
	for i := range list {
		row = l.purchaseRows(g, row, &list[i], &total)
	}
	g.put(2, row, text(block, l.ordersTotalName()))
	l.orderNotes(g, list)
	g.paginate() // the list grows by the headings that are repeated
	for row = first; row < g.last() && !isTotal(g.rows[row-1]); row++ {
	}
	l.ordersTotal(g, rows{first, row - 1}, total)
	return g
}

// Widths of the column of items, in digits: long keys take more lines at their hyphens.
const (
	leastItem = 16.0
	mostItem  = 24.0
)

// itemWidth has room for the longest key of an item on one line, within limits: readers
// break a key at a hyphen or do not, and one that they cut in two is no longer a key.
func (l *layout) itemWidth() float64 {
	width := leastItem
	for _, p := range l.report.Buying.Purchases {
		width = max(width, unitsFor(p.Item))
	}
	return min(width, mostItem)
}

// isTotal reports whether a row has the name of the total.
func isTotal(row []cell) bool { return len(row) > 1 && row[1].look == block }

func (l *layout) ordersTotalName() string {
	for _, p := range l.report.Buying.Purchases {
		if !p.Priced && p.ToBuy > 0 {
			return "All orders that have a price"
		}
	}
	return "All orders"
}

// ordersTotal adds up what the orders cost, as far as they have a price.
func (l *layout) ordersTotal(g *grid, ordered rows, total float64) {
	row, orders := ordered.last+1, 0
	for _, p := range l.report.Buying.Purchases {
		orders += len(p.Orders)
	}
	if orders == 0 {
		g.put(buyCost, row, text(program, "none"))
		return
	}
	costs := at(buyCost, ordered.first) + ":" + at(buyCost, ordered.last)
	g.put(buyCost, row, derived("SUM("+costs+")", total).in(l.currency()).shown(moneyFormat))
}

// purchaseRows writes a row for each order of an item, or one where there is none.
func (l *layout) purchaseRows(g *grid, row int, p *costs.Purchase, total *float64) int {
	unit := symbol(p.Unit)
	amounts := []float64{p.Process, p.Losses, p.Safety, p.Have, p.ToBuy}
	for i := range max(len(p.Orders), 1) {
		if i == 0 {
			g.putRow(row, text(words, p.Item), text(words, orWords(p.Specification, p.Label)))
			for k, v := range amounts {
				g.put(buyNeed+k, row, number(v, unit).shown(amountFormat(each(amounts, tidy)...)))
			}
		}
		g.put(buyNeed+5, row, text(plain, unit))
		for c := buyFields; c <= buyFields+1; c++ {
			g.put(c, row, blank(field))
		}
		if i < len(p.Orders) {
			l.orderCells(g, row, p, p.Orders[i], unit)
			*total += float(p.Orders[i].Cost)
		} else {
			g.put(buyCost+1, row, text(words, p.Why))
		}
		row++
	}
	return row
}

// mostAmountDigits is how many digits of an amount its column has room for.
const mostAmountDigits = 6

// amountFormat is the number format of the amounts of an item: as many decimals as the
// smallest needs, as far as the largest has room for them.
func amountFormat(amounts ...float64) string {
	format := formatFor(amounts...)
	whole := len(strconv.Itoa(int(slices.Max(amounts))))
	_, digits, _ := strings.Cut(format, ".")
	if room := max(0, mostAmountDigits-whole); len(digits) > room {
		return strings.TrimSuffix("#,##0."+digits[:room], ".")
	}
	return format
}

func (l *layout) orderCells(g *grid, row int, p *costs.Purchase, o costs.Order, unit string) {
	size := float(o.Pack.Size)
	if o.Pack.AnyAmount() {
		size = float(o.Amount)
	}
	g.put(buyPack, row, number(size, unit).shown(formatFor(size)))
	g.put(buyPacks, row, count(o.Count))
	g.put(buyOrder, row, l.dayCell(o.OrderDay))
	g.put(buyThere, row, l.dayCell(o.NeedDay))
	g.put(buyCost, row, number(float(o.Cost), l.currency()).shown(moneyFormat))
	mark := string(o.Pack.Flag)
	if o.Pack.Date != "" {
		mark = strings.TrimPrefix(mark+", of "+o.Pack.Date, ", ")
	}
	g.put(buyCost+1, row, text(words, orWords(mark, "own")))
}

// dayCell is a day by its date where the job has one.
func (l *layout) dayCell(day int) cell {
	if date := l.report.Buying.DateOf(day); date != "" {
		return text(program, date)
	}
	return count(day)
}

// orderNotes says of each item why these packs, how it is kept and carried.
func (l *layout) orderNotes(g *grid, list []costs.Purchase) {
	row := g.next()
	g.put(1, row, text(block, "Why these packs, how to keep them, how they travel"))
	g.put(1, row+1, text(heading, "Item"))
	headAcross(g, row+1, 2, 16, "Note")
	row += 2
	for i := range list {
		if s := orderNote(&list[i]); s != "" {
			g.put(1, row, text(words, list[i].Item))
			g.across(2, 16, row, words, s)
			row++
		}
	}
	if flags := l.report.Buying.Flags; len(flags) > 0 {
		row = g.next()
		g.put(1, row, text(block, "Over a limit of the site"))
		for i, s := range flags {
			g.across(1, 16, row+1+i, warn, s)
		}
	}
}

func orderNote(p *costs.Purchase) string {
	amount := func(x float64) string {
		unit := symbol(p.Unit)
		if unit == "test" && x != 1 {
			unit = "tests"
		}
		return significant(x) + " " + unit
	}
	parts := []string{p.Why}
	if year := p.Process + p.Losses; p.Unit == "kg" && p.LaterYears > 0 && p.LaterYears < year*(1-1e-9) {
		parts = append(parts, "the need is the first year's, its whole first charge with it; later years use up "+amount(p.LaterYears))
	}
	if p.Leftover > 0 && len(p.Orders) > 0 {
		parts = append(parts, amount(p.Leftover)+" left at the end of the year")
	}
	for _, o := range p.Orders {
		if o.Every > 0 {
			parts = append(parts, fmt.Sprintf("delivered %d × %s every %d days", o.Each, amount(float(o.Pack.Size)), o.Every))
		}
		if o.Pack.ShelfDays > 0 {
			parts = append(parts, fmt.Sprintf("keeps %d days after opening", o.Pack.ShelfDays))
		}
		if o.Pack.Supplier != "" {
			parts = append(parts, "offer of "+o.Pack.Supplier)
		}
	}
	if slices.ContainsFunc(p.Orders, func(o costs.Order) bool { return o.Pack.LeadDays < 0 }) {
		parts = append(parts, "lead time not given, taken as 0 days")
	}
	if p.Peak > 0 {
		parts = append(parts, fmt.Sprintf("at most %s in store at once", amount(p.Peak)))
	}
	if s := keeping(p); s != "" {
		parts = append(parts, s)
	}
	if t := p.Transport; t.UN != "" {
		parts = append(parts, fmt.Sprintf("UN %s, class %s, packing group %s (from memory: the supplier's safety data sheet decides)", t.UN, t.Class, t.Group))
	}
	return sentence(strings.Join(slices.DeleteFunc(parts, func(s string) bool { return s == "" }), "; "))
}

// keeping is how an item is stored (common practice, no source).
func keeping(p *costs.Purchase) string {
	class := p.Transport.Class
	switch {
	case strings.HasPrefix(p.Item, "sieve-") || p.Item == "alumina" || p.Item == "silica-gel":
		return "keep closed and dry: an open tin takes up water from the air"
	case strings.HasPrefix(class, "4.3"):
		return "keep dry, closed and away from water"
	case strings.HasPrefix(class, "3"):
		return "keep in the flammables store, earthed when poured"
	case strings.HasPrefix(class, "8"):
		return "keep closed and dry, with the corrosives"
	}
	return ""
}
