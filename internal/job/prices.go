package job

import (
	"maps"
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/document"
	"parch/internal/quantity"
)

// priceKeys are the keys of a price and, with "currency", the columns of a price list.
var priceKeys = []string{"item", "pack", "price", "date", "valid until", "minimum order", "lead time", "shelf life", "supplier", "tax", "water"}

// numericColumns of a price list, where a decimal comma may stand.
var numericColumns = []string{"pack", "price", "minimum order", "lead time", "shelf life", "water"}

// prices reads the own prices, from the job or from the price list that it names.
func (r *reader) prices(n *document.Node) {
	given := offers{}
	for _, own := range r.job.Prices { // the site's rates
		given[own.Item] = []Price{own}
	}
	var rows []*document.Node
	switch {
	case n == nil:
	case n.IsList() || n.IsMap() || n.IsEmpty():
		rows = n.Items()
	default:
		rows = r.priceList(n)
	}
	for _, entry := range rows {
		own, ok := r.price(entry)
		if !ok || given.clash(entry, own) {
			continue
		}
		given[own.Item] = append(given[own.Item], own)
		r.job.Prices = append(r.job.Prices, own)
	}
	r.oneTaxBasis(n)
}

// oneTaxBasis notes prices that say they stand on different tax bases.
func (r *reader) oneTaxBasis(n *document.Node) {
	bases := map[string]bool{}
	for _, p := range r.job.Prices {
		if p.Tax != "" {
			bases[p.Tax] = true
		}
	}
	if len(bases) > 1 {
		r.note(n, "prices of different tax bases are added up as they are: %s", strings.Join(slices.Sorted(maps.Keys(bases)), "; "))
	}
}

// priceList reads a table of comma or semicolon separated values.
func (r *reader) priceList(n *document.Node) []*document.Node {
	name := r.label(n)
	if name == "" {
		return nil
	}
	if r.files == nil {
		n.Fail("the price list %s cannot be read from here", quantity.Quote(name))
		return nil
	}
	data, err := r.files(name)
	if err != nil {
		n.Fail("the price list %s cannot be read: %v", quantity.Quote(name), err)
		return nil
	}
	table, err := document.Table(name, data, append(slices.Clone(priceKeys), "currency"), numericColumns)
	if err != nil {
		r.listed = err
		return nil
	}
	r.list, r.job.PriceFile = table.Problems(), name
	return table.Items()
}

// offers are the prices given so far, by item.
type offers map[string][]Price

// mostPacks of one item: nobody compares more.
const mostPacks = 50

// clash reports a price that contradicts an earlier one of the same item. Packs
// of one item may differ in size, in the smallest order (that is a price break)
// and in the supplier; a price per unit stands alone.
func (o offers) clash(n *document.Node, own Price) bool {
	if len(o[own.Item]) == mostPacks {
		n.Fail("more than %d packs of %q", mostPacks, own.Item)
		return true
	}
	for _, other := range o[own.Item] {
		perUnit := own.PackSize.IsZero() || other.PackSize.IsZero()
		if perUnit || own.PackSize.Equal(other.PackSize) && own.MinimumOrder == other.MinimumOrder && own.Supplier == other.Supplier {
			n.Fail("a price of %q is already given on line %d", own.Item, other.Line)
			return true
		}
		if other.WaterMax != own.WaterMax {
			n.Fail("the packs of %q state different water (line %d); one item has one limit", own.Item, other.Line)
			return true
		}
	}
	return false
}

// price reads one price. ok is false where it cannot be used.
func (r *reader) price(n *document.Node) (own Price, ok bool) {
	f := n.Map(append(slices.Clone(priceKeys), "currency")...)
	itemNode, priceNode := f.Need("item"), f.Need("price")
	own = Price{Line: n.Line(), Terms: r.terms(f)}
	own.Date = r.dated(f.Get("date"))
	if last := own.ValidUntil; last != "" && last < own.Date {
		f.Get("valid until").Fail("%s is before the date of the price, %s", quantity.Quote(last), own.Date)
	}
	switch c := f.Get("currency"); {
	case c == nil:
	case endsInDigit(priceNode.Text()):
		priceNode = priceNode.With(" " + c.Text())
	case !strings.Contains(priceNode.Text(), c.Text()):
		c.Fail("%s contradicts the price, %s; give the currency once", quantity.Quote(c.Text()), quantity.Quote(priceNode.Text()))
		return own, false
	}
	money, converted, okMoney := r.money(priceNode)
	item, unit := r.priced(itemNode)
	own.Item, own.Unit, own.Converted = item, unit, converted
	if unit == "" {
		return own, false
	}
	r.gradeWater(f, item, &own)
	if !okMoney {
		return own, false
	}
	return own, r.size(n, f, priceNode, money, &own)
}

func endsInDigit(text string) bool {
	return text != "" && text[len(text)-1] >= '0' && text[len(text)-1] <= '9'
}

// size reads what the price is for: a pack or a unit.
func (r *reader) size(n *document.Node, f document.Fields, priceNode *document.Node, money quantity.Money, own *Price) bool {
	switch pack := f.Get("pack"); {
	case money.Per != "" && pack != nil:
		priceNode.Fail("%s is a price per unit, and there is a pack as well; give the price of the pack, or no pack", quantity.Quote(priceNode.Text()))
	case money.Per != "" && !slices.Contains(perUnit[own.Unit], money.Per):
		priceNode.Fail("%s is not a price per %s, the unit of %q", quantity.Quote(priceNode.Text()), own.Unit, own.Item)
	case money.Per != "" || pack == nil && own.Unit == "each":
		own.PerUnit = money.Amount
		if f.Has("minimum order") {
			f.Get("minimum order").Fail("counts packs; give a pack with its price")
			return false
		}
		return true
	case pack == nil:
		n.Fail("%q needs a pack, such as \"pack: %s\", or a price per %s", own.Item, packs[own.Unit].example, own.Unit)
	default:
		return r.pack(pack, money.Amount, own)
	}
	return false
}

// packs says how the size of a pack is read, by the unit of the price.
var packs = map[string]struct {
	dimension       quantity.Dimension
	symbol, example string
}{
	"hour": {quantity.Time, "h", "1 h"}, "kwh": {quantity.Energy, "kWh", "1 kWh"}, "m3": {quantity.Volume, "m3", "1 m3"},
	"kg": {quantity.Mass, "kg", "5 kg"}, "litre": {quantity.Volume, "L", "20 L"},
	"each": {quantity.Number, "", "1"}, "test": {quantity.Number, "", "100"},
}

// pack divides the price by the size of the pack.
func (r *reader) pack(n *document.Node, price decimal.Decimal, own *Price) bool {
	way := packs[own.Unit]
	reading, ok := n.Quantity(way.dimension)
	if !ok {
		return false
	}
	text := quantity.Significant(quantity.In(reading.SI, way.dimension, way.symbol), 12) // as typed, without binary dust
	size, err := decimal.NewFromString(text)
	least, most := decimal.New(1, -6), decimal.New(1, 6)
	if err != nil || size.LessThan(least) || size.GreaterThan(most) {
		n.Fail("%s is not a possible pack; allowed: %s", quantity.Quote(n.Text()), strings.TrimSpace("0.000001 to 1000000 "+way.symbol))
		return false
	}
	own.PackSize, own.PackPrice = size, price
	own.PerUnit = price.DivRound(size, 12)
	return true
}

// gradeWater reads the water limit of a solvent that is bought dry.
func (r *reader) gradeWater(f document.Fields, item string, own *Price) {
	n := f.Get("water")
	dry := strings.HasSuffix(item, "-dry")
	switch {
	case n != nil && !dry:
		n.Fail("only a dry grade (\"%s-dry\") has a water limit", strings.TrimSuffix(item, "-dry"))
	case n != nil:
		own.WaterMax, _ = r.measure(n, quantity.WaterContent, between(1e-8, 0.01, "0.01 mg/kg to 10000 mg/kg"))
	case dry && r.cat.Prices[item].WaterMax == nil:
		f.Need("water")
	}
}

// priced reads the item of a price and finds the unit it is priced in.
func (r *reader) priced(n *document.Node) (item, unit string) {
	item = n.Text()
	if item == "" {
		return "", ""
	}
	if unit = r.unitOf(item); unit == "" {
		n.Fail("%s is not an item that is priced here%s", quantity.Quote(item), n.Offer(item, r.pricedItems()))
		return "", ""
	}
	return item, unit
}

// Extras are items that have a price only where the job gives one: a waste
// container with its collection, the least that a collection is charged, a kWh of
// heat taken by a cooling loop, a chiller.
var Extras = map[string]string{"waste-container": "each", "waste-minimum": "each", "loop-cooling": "kwh", "chiller": "each"}

func (r *reader) unitOf(item string) string {
	if p, ok := r.cat.Prices[item]; ok {
		return p.Unit
	}
	if r.cat.Agents[item] != nil {
		return "kg"
	}
	if r.cat.Apparatus[item] != nil {
		return "each"
	}
	if s := r.cat.Solvents[strings.TrimSuffix(item, "-dry")]; s != nil && s.Key != water {
		return "litre"
	}
	return Extras[item]
}

// pricedItems lists every item that may have a price, sorted.
func (r *reader) pricedItems() []string {
	items := map[string]bool{}
	for key := range r.cat.Prices {
		items[key] = true
	}
	for key := range r.cat.Agents {
		items[key] = true
	}
	for key := range r.cat.Apparatus {
		items[key] = true
	}
	for key := range r.cat.Solvents {
		if key != water {
			items[key], items[key+"-dry"] = true, true
		}
	}
	for key := range Extras {
		items[key] = true
	}
	return slices.Sorted(maps.Keys(items))
}

// dated reads the date of a price or a reading. Without a date of the job the catalog's
// serves to notice a slip of the pen.
func (r *reader) dated(n *document.Node) string {
	date := r.pastDate(n)
	if date != "" && r.job.Date == "" && yearsAfter(r.cat.Date, date) > 1 {
		r.note(n, "%s is more than a year after the catalog (%s); give the job a date to have it checked", quantity.Quote(date), r.cat.Date)
	}
	return date
}
