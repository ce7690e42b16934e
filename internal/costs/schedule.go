package costs

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"time"

	"parch/catalog"
)

// mostDeliveries a year of one pack: more often nobody orders.
const mostDeliveries = 12

// schedule sets the days on which the packs must be there and, by the lead time,
// be ordered. Large packs come first; each delivery is due on the day when the
// next taking would draw on the safety stock, the first batch on day 0. A delivery
// is enough for the first batch of every lot. Days before the first batch are
// negative until the list is counted from its earliest order.
func (one *Purchase) schedule(n Need) {
	covered := one.Have - one.Safety // what use may take before the next delivery
	atOnce := min(n.AtOnce, n.Year())
	one.Peak = one.Have
	for i := range one.Orders {
		o := &one.Orders[i]
		size, usable := o.Amount.InexactFloat64()/float64(o.Count), o.Usable.InexactFloat64()
		o.Each = max(o.Pack.Minimum, (o.Count+mostDeliveries-1)/mostDeliveries, int(math.Ceil(atOnce/usable-1e-9)), 1)
		if o.Each = min(o.Each, o.Count); one.Unit == "each" {
			o.Each = o.Count
		}
		for left := o.Count; left > 0; left -= o.Each {
			packs := float64(min(o.Each, left))
			day := n.dayShort(covered)
			stock := one.Safety + max(0, covered-n.takenThrough(day-1)) // when they arrive
			one.Peak = max(one.Peak, stock+packs*size)
			covered += packs * usable
			o.space(day, left == o.Count, (o.Count-left)/o.Each)
		}
		o.OrderDay = o.NeedDay - max(o.Pack.LeadDays, 0)
	}
}

// space notes the day on which a delivery is due; deliveries are evenly spaced, so
// that none is late.
func (o *Order) space(day int, first bool, number int) {
	if first {
		o.NeedDay = day
		return
	}
	apart := max(1, (day-o.NeedDay)/number)
	if o.Every == 0 || apart < o.Every {
		o.Every = apart
	}
}

// dayShort is the day on which more is taken than is there.
func (n Need) dayShort(there float64) int {
	enough := max(0, there) * (1 + 1e-9)
	return sort.Search(10*daysPerYear, func(day int) bool { return n.takenThrough(day) > enough })
}

// DateOf is the date of a day of the list where the earliest order is placed on the
// date of the job; "" where the job has none.
func (b *Buying) DateOf(day int) string {
	first, err := time.Parse(time.DateOnly, b.FirstOrder)
	if err != nil {
		return ""
	}
	return first.AddDate(0, 0, day).Format(time.DateOnly)
}

// fromFirstOrder counts the days from the earliest order.
func (b *Buying) fromFirstOrder() {
	earliest := 0
	for _, p := range b.Purchases {
		for _, o := range p.Orders {
			earliest = min(earliest, o.OrderDay)
		}
	}
	b.FirstBatchDay = -earliest
	for _, p := range b.Purchases {
		for i := range p.Orders {
			p.Orders[i].OrderDay -= earliest
			p.Orders[i].NeedDay -= earliest
		}
	}
}

// storable leaves out packs whose smallest order alone passes the limit of the
// site for the item, unless there is no other.
func (p *purchaser) storable(one *Purchase, packs []Pack) (fit []Pack, left string) {
	limit, ok := p.itemLimit(one)
	if !ok {
		return packs, ""
	}
	fit = slices.DeleteFunc(slices.Clone(packs), func(pack Pack) bool {
		return pack.smallestOrder().InexactFloat64() > limit*(1+1e-9)
	})
	switch {
	case len(fit) == 0:
		return packs, ""
	case len(fit) < len(packs):
		return fit, fmt.Sprintf("; packs over the site's limit of %.4g %s are left out", limit, unitSymbol(one.Unit))
	}
	return packs, ""
}

// itemLimit is the site's limit for an item, in the unit of its price.
func (p *purchaser) itemLimit(one *Purchase) (limit float64, ok bool) {
	for _, s := range p.job.Storage {
		if s.Item != one.Item || one.KgPerUnit == 0 {
			continue
		}
		if s.M3 > 0 && one.Unit == "litre" {
			return s.M3 * 1e3, true
		}
		if s.Kg > 0 {
			return s.Kg / one.KgPerUnit, true
		}
	}
	return 0, false
}

// stored is what is in store of the items under one limit.
type stored struct {
	peak, onHand float64 // in kg or L
	ordered      bool
}

// storageFlags compares what is in store at most, if all items are at their most
// together, with the limits of the site.
func (p *purchaser) storageFlags(all []Purchase) []string {
	var flags []string
	for _, limit := range p.job.Storage {
		var kg, litres stored
		volume := true
		for i := range all {
			one := &all[i]
			if one.Item != limit.Item && !p.inClass(one.Item, limit.Class) || one.KgPerUnit == 0 {
				continue
			}
			kg.add(one, one.KgPerUnit)
			litres.add(one, 1)
			volume = volume && one.Unit == "litre"
		}
		what := limit.Item + limit.Class
		switch {
		case limit.M3 > 0 && !volume:
			flags = append(flags, fmt.Sprintf("%s: the limit is a volume, but some of it is weighed; give the limit in kg", what))
		case limit.M3 > 0:
			flags = litres.flag(flags, what, "L", limit.M3*1e3)
		case limit.Kg > 0:
			flags = kg.flag(flags, what, "kg", limit.Kg)
		}
	}
	return flags
}

func (s *stored) add(one *Purchase, perUnit float64) {
	s.peak += one.Peak * perUnit
	s.onHand += one.Have * perUnit
	s.ordered = s.ordered || one.ToBuy > 0
}

// flag says where what is in store passes a limit, and what would help.
func (s *stored) flag(flags []string, what, unit string, limit float64) []string {
	const rounding = 1 + 1e-9
	if s.peak <= limit*rounding {
		return flags
	}
	advice := "order less at a time"
	switch {
	case !s.ordered:
		advice = "all of it is on hand and none is ordered, so keep less here"
	case s.onHand > limit*rounding:
		advice = fmt.Sprintf("%.4g %s of it are on hand, over the limit before anything is ordered, so keep less here", s.onHand, unit)
	}
	return append(flags, fmt.Sprintf("%s: up to %.4g %s in store at once, the limit is %.4g %s: %s; lots that wait and waste come on top; the site's limit and the local fire code decide",
		what, s.peak, unit, limit, unit, advice))
}

// inClass tells whether an item counts towards a class of the site's limits.
func (p *purchaser) inClass(item, class string) bool {
	var s *catalog.Solvent
	if s = p.cat.Solvents[solventOf(item)]; s != nil {
		return class == "flammable" && s.FlashPoint != nil || class == "halogenated" && s.Hazards.Halogenated
	}
	a := p.cat.Agents[item]
	return a != nil && class == "reactive" && a.Kind == "reactive"
}
