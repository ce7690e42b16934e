package catalog

import (
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
)

// services are priced items that are neither solvent, agent nor apparatus.
var services = map[string]string{
	"technician": "hour", "electricity": "kwh", "cooling-water": "m3", "karl-fischer": "test",
	"waste-aqueous": "kg", "waste-flammable-liquid": "kg", "waste-halogenated-liquid": "kg", "waste-wet-solid": "kg",
}

func (s *shelf) readPrices() {
	s.cat.Prices = map[string]Price{}
	f := s.root(pricesFile).Map("kept under", "items")
	date := f.Need("kept under").Date()
	units := s.priceUnits()
	for _, e := range f.Need("items").Entries() {
		unit, ok := units[e.Key]
		if !ok {
			e.Node.Fail("%q is nothing that is priced here%s", e.Key, e.Node.Offer(e.Key, keysOf(units)))
		}
		p := s.price(e.Node, unit)
		p.Item, p.Unit, p.Date = e.Key, unit, date
		s.cat.Prices[e.Key] = p
	}
	for _, item := range keysOf(services) {
		if _, ok := s.cat.Prices[item]; !ok {
			f.Get("items").Fail("%q is missing", item)
		}
	}
}

// priceUnits lists what may be priced and the unit of each.
func (s *shelf) priceUnits() map[string]string {
	units := map[string]string{}
	for item, unit := range services {
		units[item] = unit
	}
	for key := range s.cat.Solvents {
		units[key], units[key+"-dry"] = "litre", "litre"
	}
	for key := range s.cat.Agents {
		units[key] = "kg"
	}
	for key := range s.cat.Apparatus {
		units[key] = "each"
	}
	return units
}

func (s *shelf) price(n *document.Node, unit string) Price {
	f := n.Map(with("label", "price", "band", "water")...)
	p := Price{Label: f.Need("label").Text(), Origin: s.origin(f), WaterMax: s.optional(f.Get("water"), quantity.WaterContent)}
	money, ok := f.Need("price").Money()
	if !ok {
		return p
	}
	if unit != "" && money.Per != unit {
		f.Get("price").Fail(`%q is not per %s; write it like "%s %s/%s"`, f.Get("price").Text(), unit, money.Amount, money.Currency, unit)
	}
	if !money.Amount.IsPositive() {
		f.Get("price").Fail("%q is not above zero", f.Get("price").Text())
	}
	p.Amount, p.Currency = money.Amount.String(), money.Currency
	if band := f.Get("band"); band != nil {
		p.Low, p.High = moneySpan(band, money)
	}
	return p
}

// moneySpan reads "12 to 40 EUR/kg" around a price.
func moneySpan(n *document.Node, price quantity.Money) (low, high string) {
	from, to, ok := strings.Cut(n.Text(), " to ")
	last, err := quantity.ParseMoney(to)
	if !ok || err != nil || last.Currency != price.Currency || last.Per != price.Per {
		n.Fail(`%q is not a range like the price; write it like "1 to 2 %s/%s"`, n.Text(), price.Currency, price.Per)
		return "", ""
	}
	first, err := quantity.ParseMoney(from + " " + last.Currency)
	if err != nil {
		n.Fail("%v", err)
		return "", ""
	}
	if first.Amount.GreaterThan(price.Amount) || last.Amount.LessThan(price.Amount) {
		n.Fail("%q does not hold the price, %s", n.Text(), price.Amount)
	}
	return first.Amount.String(), last.Amount.String()
}
