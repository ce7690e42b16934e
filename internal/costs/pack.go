package costs

import (
	"fmt"
	"maps"
	"slices"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
)

// PackRule says which of several packs a bill is priced by.
const PackRule = "where an item has several packs, bills use the lowest price per unit among those whose smallest order is used up within two years, " +
	"and whose content within its shelf life, by the route that uses most of it; else the smallest order"

const (
	daysPerYear  = 365
	horizonYears = 2 // of PackRule: nobody keeps a drum for ten years to save on its price (assumption)
)

// smallestOrder is the least that can be bought of a pack.
func (p Pack) smallestOrder() decimal.Decimal {
	return p.Size.Mul(decimal.NewFromInt(int64(max(p.Minimum, 1))))
}

// AnyAmount reports whether the price is for a unit, in any amount.
func (p Pack) AnyAmount() bool { return p.Size.IsZero() }

// justified reports whether a year's need uses up the smallest order in time, and
// a pack before it is too old.
func (p Pack) justified(perYear decimal.Decimal) bool {
	if p.smallestOrder().GreaterThan(perYear.Mul(decimal.NewFromInt(horizonYears))) {
		return false
	}
	return p.ShelfDays == 0 || p.Size.LessThanOrEqual(perYear.Mul(decimal.NewFromInt(int64(p.ShelfDays))).Div(decimal.NewFromInt(daysPerYear)))
}

func ownPack(p job.Price, reference string) Pack {
	pack := Pack{
		Size: p.PackSize, Price: p.PackPrice, PerUnit: p.PerUnit, Date: p.Date, ValidUntil: p.ValidUntil, Minimum: max(p.MinimumOrder, 1),
		LeadDays: p.LeadDays, ShelfDays: p.ShelfDays, Supplier: p.Supplier, Tax: p.Tax, Flag: age(p.Date, p.ValidUntil, reference), Note: p.Converted,
	}
	if pack.AnyAmount() {
		pack.Price = p.PerUnit
	}
	return pack
}

// bySmallestOrder puts the smallest order first, of two alike the cheaper.
func bySmallestOrder(a, b Pack) int {
	if c := a.smallestOrder().Cmp(b.smallestOrder()); c != 0 {
		return c
	}
	return a.PerUnit.Cmp(b.PerUnit)
}

// standing returns the packs whose offer still stands, or all where none does.
func standing(packs []Pack) []Pack {
	valid := slices.DeleteFunc(slices.Clone(packs), func(p Pack) bool { return p.Flag == Expired })
	if len(valid) == 0 {
		return packs
	}
	return valid
}

// chosenPack follows PackRule.
func chosenPack(packs []Pack, perYear decimal.Decimal) Pack {
	offers := standing(packs)
	best := offers[0]
	found := false
	for _, p := range offers {
		if p.justified(perYear) && (!found || p.PerUnit.LessThan(best.PerUnit)) {
			best, found = p, true
		}
	}
	return best
}

// SeveralPacks reports whether some item is offered in more than one pack.
func (b Book) SeveralPacks() bool {
	for _, p := range b {
		if len(p.Packs) > 1 {
			return true
		}
	}
	return false
}

// Justified returns the book with the prices that a year's need of each item, in
// the unit of its price, justifies by PackRule. Items that the map does not name
// keep their price. changed reports a difference.
func (b Book) Justified(perYear map[string]float64) (book Book, changed bool, err error) {
	book = maps.Clone(b)
	for item, p := range b {
		year, needed := perYear[item]
		if len(p.Packs) < 2 || !needed {
			continue
		}
		need, err := amount("a year's need of "+item, year)
		if err != nil {
			return nil, false, err
		}
		chosen := chosenPack(p.Packs, need)
		changed = changed || !chosen.PerUnit.Equal(p.PerUnit)
		book[item] = p.from(chosen)
	}
	return book, changed, nil
}

// PacksOf names the packs that set the prices of some items, where there is a
// choice.
func (b Book) PacksOf(items []string) map[string]string {
	var packs map[string]string
	for _, item := range items {
		if pack := b[item].Pack; pack != "" {
			if packs == nil {
				packs = map[string]string{}
			}
			packs[item] = pack
		}
	}
	return packs
}

// Pinned returns the book with the prices of the packs named, by item, and the
// items for which there is no such pack any more.
func (b Book) Pinned(packs map[string]string) (book Book, gone []string) {
	book = maps.Clone(b)
	for item, name := range packs {
		price := b[item]
		at := slices.IndexFunc(price.Packs, func(p Pack) bool { return p.name(price.Unit) == name })
		if at < 0 {
			gone = append(gone, item)
			continue
		}
		book[item] = price.from(price.Packs[at])
	}
	slices.Sort(gone)
	return book, gone
}

// name tells a pack from the others of its item.
func (p Pack) name(unit string) string {
	name := measured(p.Size, unit)
	if p.Minimum > 1 {
		name += fmt.Sprintf(", %d at least", p.Minimum)
	}
	if p.Supplier != "" {
		name += ", " + p.Supplier
	}
	return name
}

// from takes price, date and flag from a pack.
func (p Price) from(pack Pack) Price {
	p.PerUnit, p.Low, p.High = pack.PerUnit, pack.Low, pack.High
	p.Date, p.Flag, p.Note, p.Pack = pack.Date, pack.Flag, "", ""
	if len(p.Packs) > 1 {
		p.Pack = pack.name(p.Unit)
	}
	if !pack.AnyAmount() {
		p.Note = fmt.Sprintf("from a pack of %s", measured(pack.Size, p.Unit))
		if pack.Minimum > 1 {
			p.Note += fmt.Sprintf(", %d at least", pack.Minimum)
		}
		if n := len(p.Packs); n > 1 {
			p.Note += fmt.Sprintf(", one of %d on offer", n)
		}
	}
	for _, more := range []string{pack.Note, pack.Supplier, pack.Tax} {
		if more != "" {
			p.Note = join(p.Note, more)
		}
	}
	if pack.Flag == Old || pack.Flag == Expired {
		p.Note = join(p.Note, string(pack.Flag))
	}
	if p.Confidence == string(catalog.Invented) {
		p.Note = join(p.Note, "invented for demonstration")
	}
	return p
}

// measured prints an amount with its unit as it is read.
func measured(amount decimal.Decimal, unit string) string {
	switch unit {
	case "litre":
		return amount.String() + " L"
	case "each":
		return amount.String()
	case "test":
		return amount.String() + " tests"
	case "kwh":
		return amount.String() + " kWh"
	}
	return amount.String() + " " + unit
}
