package job

import (
	"maps"
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/document"
	"parch/internal/quantity"
)

// prices reads the own price list. A file name is understood and not used yet.
func (r *reader) prices(n *document.Node) {
	if n == nil {
		return
	}
	if !n.IsList() && !n.IsMap() && !n.IsEmpty() {
		r.fileName(n)
		return
	}
	lines := map[string]int{}
	for _, own := range r.job.Prices { // the site's rates
		lines[own.Item] = own.Line
	}
	for _, entry := range n.Items() {
		item, unit, own := r.price(entry)
		if item == "" {
			continue
		}
		if line, twice := lines[item]; twice {
			entry.Fail("a price of %q is already given on line %d", item, line)
			continue
		}
		lines[item] = entry.Line()
		if unit != "" {
			r.job.Prices = append(r.job.Prices, own)
		}
	}
}

// price reads {item, pack, price, date, water}. item is "" where it is not known,
// unit is "" where the price cannot be used.
func (r *reader) price(n *document.Node) (item, unit string, own Price) {
	f := n.Map("item", "pack", "price", "date", "water")
	itemNode, priceNode := f.Need("item"), f.Need("price")
	own = Price{Date: f.Get("date").Date(), Line: n.Line()}
	money, okMoney := r.money(priceNode)
	item, unit = r.priced(itemNode)
	if unit == "" {
		return item, "", own
	}
	r.gradeWater(f, item, &own)
	own.Item, own.Unit = item, unit
	if !okMoney {
		return item, "", own
	}
	switch pack := f.Get("pack"); {
	case money.Per != "" && pack != nil:
		priceNode.Fail("%s is a price per unit, and there is a pack as well; give the price of the pack, or no pack", quantity.Quote(priceNode.Text()))
	case money.Per != "" && !slices.Contains(perUnit[unit], money.Per):
		priceNode.Fail("%s is not a price per %s, the unit of %q", quantity.Quote(priceNode.Text()), unit, item)
	case money.Per != "" || pack == nil && unit == "each":
		own.PerUnit = money.Amount
		return item, unit, own
	case pack == nil:
		n.Fail("%q needs a pack, such as \"pack: %s\", or a price per %s", item, packs[unit].example, unit)
	default:
		return r.pack(pack, item, unit, money.Amount, own)
	}
	return item, "", own
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
func (r *reader) pack(n *document.Node, item, unit string, price decimal.Decimal, own Price) (string, string, Price) {
	way := packs[unit]
	reading, ok := n.Quantity(way.dimension)
	if !ok {
		return item, "", own
	}
	text := quantity.Significant(quantity.In(reading.SI, way.dimension, way.symbol), 12) // as typed, without binary dust
	size, err := decimal.NewFromString(text)
	least, most := decimal.New(1, -6), decimal.New(1, 6)
	if err != nil || size.LessThan(least) || size.GreaterThan(most) {
		symbol := strings.TrimSpace(" " + way.symbol)
		n.Fail("%s is not a possible pack; allowed: 0.000001 to 1000000 %s", quantity.Quote(n.Text()), symbol)
		return item, "", own
	}
	own.PackSize = size.InexactFloat64()
	own.PerUnit = price.DivRound(size, 12)
	return item, unit, own
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
	return ""
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
	return slices.Sorted(maps.Keys(items))
}
