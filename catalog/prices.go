package catalog

import (
	"cmp"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
)

// services are priced items that are neither solvent, agent nor apparatus.
var services = map[string]string{
	"technician": "hour", "electricity": "kwh", "cooling-water": "m3", "karl-fischer": "test",
	"waste-aqueous": "kg", "waste-flammable-liquid": "kg", "waste-halogenated-liquid": "kg", "waste-reactive": "kg", "waste-wet-solid": "kg",
	"nitrogen": "litre", "flush-nitrogen": "m3",
}

func (s *shelf) readPrices() {
	s.cat.Prices = map[string]Price{}
	units := s.priceUnits()
	s.each(pricesFile, func(n *document.Node) {
		f := n.Map("kept under", "common", "dry grades", "pack sizes", "items")
		list := priceList{date: f.Need("kept under").Date(), common: s.common(f.Get("common"))}
		list.families = s.families(f.Get("pack sizes"))
		list.waterMax = s.optional(f.Get("dry grades"), quantity.WaterContent)
		for _, e := range f.Need("items").Entries() {
			unit, ok := units[e.Key]
			if !ok {
				e.Node.Fail("%q is nothing that is priced here%s", e.Key, e.Node.Offer(e.Key, keysOf(units)))
			}
			s.cat.Prices[e.Key] = s.price(e, unit, list)
		}
	})
	for _, item := range keysOf(services) {
		if _, ok := s.cat.Prices[item]; !ok {
			s.root(pricesFile).Fail("%q is missing", item)
		}
	}
}

// priceList is what the prices of one file have in common.
type priceList struct {
	date     string
	common   *Origin
	waterMax *Value // of dry grades
	families map[string]family
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

func (s *shelf) price(e document.Entry, unit string, list priceList) Price {
	f := e.Node.Map(with("label", "price", "band", "water", "packs")...)
	p := Price{Item: e.Key, Unit: unit, Date: list.date, Origin: s.originOr(f, list.common)}
	if _, dry := strings.CutSuffix(e.Key, "-dry"); dry {
		p.WaterMax = list.waterMax
	}
	if water := f.Get("water"); water != nil {
		p.WaterMax = s.optional(water, quantity.WaterContent)
	}
	if p.Label = cmp.Or(s.label(e.Key), s.cat.Prices[e.Key].Label); p.Label == "" || f.Has("label") {
		p.Label = f.Need("label").Text()
	}
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
	s.packs(f.Get("packs"), &p, list.families)
	return p
}

// label names what is known by name in the catalog; "" for services.
func (s *shelf) label(item string) string {
	if v := s.cat.Solvents[item]; v != nil {
		return v.Name + ", reagent grade"
	}
	if v := s.cat.Solvents[strings.TrimSuffix(item, "-dry")]; v != nil {
		return v.Name + ", dry grade"
	}
	if a := s.cat.Agents[item]; a != nil {
		return a.Name
	}
	if a := s.cat.Apparatus[item]; a != nil {
		return a.Name
	}
	return ""
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
