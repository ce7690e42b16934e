package catalog

import (
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/document"
	"parch/internal/quantity"
)

// PackSize is a size in which an item is commonly sold, and what a unit of it
// then costs.
type PackSize struct {
	Size              string // decimal text, in the unit of the price
	Amount, Low, High string // decimal text per unit, in the currency of the price; the band may be empty
}

// packDimensions are how the size of a pack is read, by the unit of the price.
var packDimensions = map[string]struct {
	dimension quantity.Dimension
	symbol    string
}{"kg": {quantity.Mass, "kg"}, "litre": {quantity.Volume, "L"}}

// family is the sizes in which the items of a kind are sold, with prices as
// shares of the item's own.
type family struct {
	packs  []*document.Node
	origin Origin
}

// The families of a price file.
const (
	reagentPacks = "reagent grade"
	dryPacks     = "dry grade"
)

func (s *shelf) families(n *document.Node) map[string]family {
	all := map[string]family{}
	if n == nil {
		return all
	}
	f := n.Map(reagentPacks, dryPacks)
	for _, name := range []string{reagentPacks, dryPacks} {
		one := f.Need(name).Map(with("packs")...)
		all[name] = family{one.Need("packs").Items(), s.origin(one)}
	}
	return all
}

// packs reads the sizes of an item: its own, or those of its family.
func (s *shelf) packs(n *document.Node, p *Price, families map[string]family) {
	if n != nil {
		for _, entry := range n.Items() {
			s.pack(entry, p, "size", "price", "band")
		}
		s.checkPacks(n, p)
		return
	}
	solvent, dry := strings.CutSuffix(p.Item, "-dry")
	name := reagentPacks
	if dry {
		name = dryPacks
	}
	one, ok := families[name]
	if s.cat.Solvents[solvent] == nil || !ok {
		return
	}
	for _, entry := range one.packs {
		s.pack(entry, p, "size", "share")
	}
	p.Note = join(p.Note, one.origin.Note)
}

// pack reads one size. Without a price or a share it is the pack of the item's
// price.
func (s *shelf) pack(n *document.Node, p *Price, keys ...string) {
	f := n.Map(keys...)
	way, ok := packDimensions[p.Unit]
	if !ok {
		n.Fail("%q is priced per %s and has no packs", p.Item, p.Unit)
		return
	}
	size, ok := f.Need("size").Quantity(way.dimension)
	if !ok {
		return
	}
	one := PackSize{Size: quantity.Significant(quantity.In(size.SI, way.dimension, way.symbol), 12), Amount: p.Amount, Low: p.Low, High: p.High}
	if node := f.Get("share"); node != nil {
		share, _ := node.Quantity(quantity.Share)
		factor := decimal.NewFromFloat(share.SI).Round(6)
		one.Amount, one.Low, one.High = times(p.Amount, factor), times(p.Low, factor), times(p.High, factor)
	}
	if node := f.Get("price"); node != nil {
		money, ok := node.Money()
		if !ok {
			return
		}
		if money.Per != p.Unit || money.Currency != p.Currency {
			node.Fail(`%q is not in %s per %s, like the price`, node.Text(), p.Currency, p.Unit)
		}
		one.Amount, one.Low, one.High = money.Amount.String(), "", ""
		if band := f.Get("band"); band != nil {
			one.Low, one.High = moneySpan(band, money)
		}
	}
	p.Packs = append(p.Packs, one)
}

// times multiplies a price; "" stays "".
func times(amount string, factor decimal.Decimal) string {
	d, err := decimal.NewFromString(amount)
	if err != nil {
		return ""
	}
	return d.Mul(factor).String()
}

// checkPacks: sizes rise and the price of a unit falls; one of them carries the
// price of the item.
func (s *shelf) checkPacks(n *document.Node, p *Price) {
	number := func(text string) decimal.Decimal {
		d, err := decimal.NewFromString(text)
		if err != nil {
			return decimal.Zero
		}
		return d
	}
	for i := 1; i < len(p.Packs); i++ {
		small, large := p.Packs[i-1], p.Packs[i]
		if !number(small.Size).LessThan(number(large.Size)) || !number(large.Amount).LessThan(number(small.Amount)) {
			n.Fail("%q: a pack of %s at %s and one of %s at %s; larger packs come later and cost less per %s", p.Item, small.Size, small.Amount, large.Size, large.Amount, p.Unit)
		}
	}
	if !slices.ContainsFunc(p.Packs, func(one PackSize) bool { return one.Amount == p.Amount }) {
		n.Fail("%q: no pack has the price of the item, %s", p.Item, p.Amount)
	}
}
