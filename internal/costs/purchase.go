package costs

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/steps"
)

// Buying is what has to be bought for a year, all lots together. Its days count
// from the day of the earliest order.
type Buying struct {
	FirstOrder    string // ISO date of day 0, that of the job; "" where it has none
	FirstBatchDay int
	Purchases     []Purchase // by item
	Flags         []string   // storage limits that are passed
}

// Purchase is what is bought of one item. Amounts are in the unit of the price.
type Purchase struct {
	Item, Label, Unit             string
	Specification                 string // by material, form, size and grade
	Transport                     Transport
	Process, Losses, Safety, Have float64
	ToBuy                         float64 // process + losses + safety stock - on hand
	LaterYears                    float64 // used up in a year after the first; less than process and losses where a first charge serves on
	KgPerUnit                     float64 // mass of a unit; 0 where it has none
	Orders                        []Order
	Total                         decimal.Decimal
	Leftover                      float64 // at the end of the year, above the safety stock, that is still good
	Expires                       float64 // opened and too old before it is used
	Priced                        bool
	Flag                          Flag // of the prices it rests on
	Why                           string
	Peak                          float64 // most in store at once, as far as it is bought here
}

// Order is a number of packs of one offer.
type Order struct {
	Pack     Pack
	Count    int // packs; 1 where any amount can be had, of Amount
	Amount   decimal.Decimal
	Cost     decimal.Decimal
	OrderDay int             // of the first
	NeedDay  int             // on which the first must be there
	Every    int             // days between deliveries; 0 where there is one
	Each     int             // packs of a delivery, the last may be smaller
	Usable   decimal.Decimal // of a pack, before it is too old
}

// purchaser makes the list for one site.
type purchaser struct {
	cat  *catalog.Catalog
	job  *job.Job
	book Book
}

// Buy lists what the plans need in their first year and the cheapest packs that
// cover it. pieces is the equipment to buy, by item.
func Buy(cat *catalog.Catalog, j *job.Job, book Book, needs []Need, pieces map[string]int) (Buying, error) {
	p := &purchaser{cat, j, book}
	for item, n := range pieces {
		needs = append(needs, Need{Item: item, Unit: "each", Process: float64(n), AtOnce: float64(n)})
	}
	slices.SortFunc(needs, func(a, b Need) int { return strings.Compare(a.Item, b.Item) })
	list := Buying{FirstOrder: j.Date}
	for _, n := range needs {
		one, err := p.purchase(n)
		if err != nil {
			return Buying{}, fmt.Errorf("buying %s: %w", n.Item, err)
		}
		list.Purchases = append(list.Purchases, one)
	}
	list.fromFirstOrder()
	list.Flags = p.storageFlags(list.Purchases)
	return list, nil
}

func (p *purchaser) purchase(n Need) (Purchase, error) {
	price, priced := p.book[n.Item]
	one := Purchase{
		Item: n.Item, Label: label(p.cat, n.Item), Unit: n.Unit, Specification: p.specification(n.Item), Transport: transportOf(n.Item),
		Process: n.Process, Losses: n.Losses, LaterYears: n.LaterYears, KgPerUnit: p.kgPerUnit(n), Priced: priced,
	}
	if priced {
		one.Label = price.Label
	}
	if one.KgPerUnit > 0 {
		for _, s := range p.job.Stock {
			if s.Item == n.Item {
				one.Have, one.Safety = s.OnHandKg/one.KgPerUnit, s.SafetyKg/one.KgPerUnit
			}
		}
	}
	one.ToBuy = max(0, n.Year()+one.Safety-one.Have)
	one.Peak = one.Have
	const dust = 1e-9 // of the need: rounding noise is not bought
	if one.ToBuy <= dust*n.Year() {
		one.ToBuy, one.Leftover = 0, one.Have-one.Safety-n.Year()
		one.Why = "what is on hand covers the year"
		return one, nil
	}
	if !priced {
		one.Why = "no price: the packs are left open"
		return one, nil
	}
	return one, p.pick(&one, price, n)
}

// pick chooses the packs and sets the days.
func (p *purchaser) pick(one *Purchase, price Price, n Need) error {
	offers, left := p.storable(one, standing(price.Packs))
	if offers[0].AnyAmount() {
		rounded, err := amount(one.Item, one.ToBuy)
		if err != nil {
			return err
		}
		one.Orders = []Order{{Pack: offers[0], Count: 1, Amount: rounded, Cost: rounded.Mul(offers[0].PerUnit), Each: 1, Usable: rounded}}
		one.Total, one.Flag = one.Orders[0].Cost, offers[0].Flag
		one.Why = "priced by the unit: no pack sizes are known" + left
		if one.Unit == "each" {
			one.Why = "bought by the piece; it serves all lots"
		}
	} else if err := p.cover(one, offers, n, left); err != nil {
		return err
	}
	one.schedule(n)
	return nil
}

// cover finds the cheapest packs for the need. Of a pack counts what is used
// before it is too old.
func (p *purchaser) cover(one *Purchase, packs []Pack, n Need, left string) error {
	offers := make([]offer, len(packs))
	for i, pack := range packs {
		o, err := asOffer(pack, n)
		if err != nil {
			return err
		}
		offers[i] = o
	}
	need := int64(math.Ceil(one.ToBuy*millionth - 1e-3))
	counts, proven := cheapest(need, offers)
	good, bought := 0.0, 0.0
	for i, count := range counts {
		if count == 0 {
			continue
		}
		number, usable := decimal.NewFromInt(count), decimal.New(offers[i].content, -6)
		one.Orders = append(one.Orders, Order{Pack: packs[i], Count: int(count), Amount: packs[i].Size.Mul(number), Cost: packs[i].Price.Mul(number), Usable: usable})
		one.Total = one.Total.Add(packs[i].Price.Mul(number))
		one.Flag = graver(one.Flag, packs[i].Flag)
		good += usable.Mul(number).InexactFloat64()
		bought += packs[i].Size.InexactFloat64() * float64(count)
	}
	slices.SortStableFunc(one.Orders, func(a, b Order) int { return b.Pack.Size.Cmp(a.Pack.Size) })
	one.Leftover, one.Expires = max(0, good-one.ToBuy), bought-good
	one.Why = one.reason(packs, proven) + left
	return nil
}

const millionth = 1e6

// mostMoney bounds what the choice of packs can add up.
var mostMoney = decimal.New(1, 9)

func asOffer(p Pack, n Need) (offer, error) {
	size := p.Size.InexactFloat64()
	content := n.usable(size, float64(p.ShelfDays))
	if p.Price.GreaterThan(mostMoney) || size > mostMoney.InexactFloat64() {
		return offer{}, fmt.Errorf("a pack of %s for %s is too large to be compared", p.Size, p.Price)
	}
	return offer{content: max(1, int64(content*millionth)), price: p.Price.Shift(6).Round(0).IntPart(), minimum: int64(max(1, p.Minimum))}, nil
}

func graver(a, b Flag) Flag {
	order := []Flag{NoFlag, Indicative, Undated, Old, Expired}
	if slices.Index(order, b) > slices.Index(order, a) {
		return b
	}
	return a
}

// reason is the line of why.
func (one *Purchase) reason(packs []Pack, proven bool) string {
	text := "the cheapest of the packs on offer"
	switch {
	case len(packs) == 1:
		text = "the only pack on offer"
	case !proven:
		text = "the best found; not proved to be the cheapest"
	default:
		if single, ok := cheapestAlone(packs, one.ToBuy); ok && single.GreaterThan(one.Total) {
			text += fmt.Sprintf(": %s less than packs of one size", single.Sub(one.Total).StringFixed(2))
		}
	}
	if one.Expires > 0.005*one.ToBuy {
		text += fmt.Sprintf("; %.3g %s of it will be too old before it is used", one.Expires, unitSymbol(one.Unit))
	}
	return text
}

// cheapestAlone is the least that the need costs in packs of one size.
func cheapestAlone(packs []Pack, need float64) (least decimal.Decimal, ok bool) {
	for _, p := range packs {
		n := max(int64(math.Ceil(need/p.Size.InexactFloat64()-1e-9)), int64(p.Minimum))
		if cost := p.Price.Mul(decimal.NewFromInt(n)); !ok || cost.LessThan(least) {
			least, ok = cost, true
		}
	}
	return least, ok
}

// kgPerUnit is the mass of a litre of solvent at room temperature, 1 for what is
// weighed, 0 for the rest.
func (p *purchaser) kgPerUnit(n Need) float64 {
	if n.Unit == "kg" {
		return 1
	}
	if s := p.cat.Solvents[solventOf(n.Item)]; s != nil && n.Unit == "litre" {
		return s.Pure.DensityKgPerM3.At(p.job.Site.RoomK) / 1e3
	}
	return 0
}

// specification names material, form, size and grade, never a maker.
func (p *purchaser) specification(item string) string {
	var parts []string
	if a := p.cat.Agents[item]; a != nil {
		parts = append(parts, strings.TrimSuffix(a.Name, ", beads"))
		if a.BeadDiameter != nil {
			parts = append(parts, "beads of "+a.BeadDiameter.Text)
		}
		switch a.Kind {
		case "sieve", "oxide":
			parts = append(parts, "without indicator") // a dye bleeds into some solvents (common practice)
		case "reactive":
			parts = append(parts, "reagent grade")
		}
	}
	if s := p.cat.Solvents[solventOf(item)]; s != nil {
		parts = append(parts, s.Name)
		if s.CAS != "" {
			parts = append(parts, "CAS "+s.CAS)
		}
		parts = append(parts, p.grade(item))
	}
	if a := p.cat.Apparatus[item]; a != nil {
		parts = append(parts, a.Name)
	}
	if item == "karl-fischer" {
		parts = append(parts, "Karl Fischer reagent, "+p.job.Site.KarlFischer+"; counted in injections")
	}
	return strings.Join(parts, ", ")
}

func (p *purchaser) grade(item string) string {
	if !strings.HasSuffix(item, "-dry") {
		return "reagent grade"
	}
	for _, own := range p.job.Prices {
		if own.Item == item && own.WaterMax > 0 {
			return fmt.Sprintf("dry grade, water at most %.3g mg/kg", own.WaterMax*1e6)
		}
	}
	if price, ok := p.cat.Prices[item]; ok && price.WaterMax != nil {
		return "dry grade, water at most " + price.WaterMax.Text
	}
	return "dry grade"
}

func unitSymbol(unit string) string {
	switch unit {
	case "litre":
		return "L"
	case "test":
		return "tests"
	case "each":
		return ""
	}
	return unit
}

// ToBuyEquipment counts the pieces of equipment of a route that are not owned.
func (a *Arrangement) ToBuyEquipment(plan Plan) map[string]int {
	count := map[string]int{}
	for _, use := range plan.Run.Uses {
		p, known := a.pieces[use.Item]
		if use.Head != steps.Equipment || !known || p.owned || p.linear == 0 {
			continue
		}
		n := int(math.Round(use.Quantity / (p.breakage + p.writeOff)))
		count[use.Item] = max(count[use.Item], n)
	}
	return count
}
