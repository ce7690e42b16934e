package costs

import (
	"cmp"
	"math"
	"slices"
)

// offer is a pack as the choice of packs sees it: whole numbers of a millionth of
// the unit and of the currency, so that nothing is rounded.
type offer struct {
	content int64 // that can be used before it is too old
	price   int64
	minimum int64 // packs to order at least, 1 or more
}

// mostNodes bounds the search. Need and packs of a hall take a few hundred.
const mostNodes = 2_000_000

// cheapest returns how many of each pack cover a need at the least price. It is
// exact (branch and bound) unless proven is false, when the search was cut short
// and the best found is returned.
func cheapest(need int64, offers []offer) (counts []int64, proven bool) {
	counts = make([]int64, len(offers))
	if need <= 0 || len(offers) == 0 {
		return counts, true
	}
	s := &choice{best: math.MaxInt64}
	s.prepare(offers)
	s.branch(0, need, 0)
	for i, place := range s.place {
		counts[place] = s.bestCounts[i]
	}
	return counts, s.nodes < mostNodes
}

type choice struct {
	offers     []offer // cheapest content first
	place      []int   // of each in the list given
	perUnit    []float64
	step       int64 // every sum of prices is a multiple of it
	counts     []int64
	best       int64
	bestCounts []int64
	nodes      int
}

// prepare sorts the offers by the price of their content and leaves out those
// that another one beats in everything.
func (s *choice) prepare(offers []offer) {
	for i, o := range offers {
		if !slices.ContainsFunc(offers, func(other offer) bool { return other.beats(o) }) && slices.Index(offers, o) == i {
			s.place = append(s.place, i)
		}
	}
	slices.SortStableFunc(s.place, func(a, b int) int {
		x, y := offers[a], offers[b]
		if c := cmp.Compare(float64(x.price)/float64(x.content), float64(y.price)/float64(y.content)); c != 0 {
			return c
		}
		return cmp.Compare(y.content, x.content)
	})
	for _, i := range s.place {
		o := offers[i]
		s.offers = append(s.offers, o)
		s.perUnit = append(s.perUnit, float64(o.price)/float64(o.content))
		s.step = divisor(s.step, o.price)
	}
	s.counts, s.bestCounts = make([]int64, len(s.offers)), make([]int64, len(s.offers))
}

func (o offer) beats(other offer) bool {
	return o != other && o.content >= other.content && o.price <= other.price && o.minimum <= other.minimum
}

// branch settles the number of packs of one offer after another, the most that
// can be of use first. As later offers cost more a unit, the bound only rises as
// the number falls, so that the first number that cannot win ends the row.
func (s *choice) branch(at int, rest, cost int64) {
	s.nodes++
	if rest <= 0 {
		if cost < s.best {
			s.best = cost
			copy(s.bestCounts, s.counts)
			clear(s.bestCounts[at:])
		}
		return
	}
	if at == len(s.offers) || s.nodes >= mostNodes || s.bound(at, rest, cost) >= s.best {
		return
	}
	o := s.offers[at]
	most := max((rest+o.content-1)/o.content, o.minimum)
	for n := most; n >= 0; n-- {
		if n > 0 && n < o.minimum {
			n = 0
		}
		left, paid := rest-n*o.content, cost+n*o.price
		if left > 0 && at+1 < len(s.offers) && s.bound(at+1, left, paid) >= s.best {
			break
		}
		s.counts[at] = n
		s.branch(at+1, left, paid)
	}
	s.counts[at] = 0
}

// bound is the least that covering the rest can cost: at the best price a unit,
// rounded up to what a sum of prices can be.
func (s *choice) bound(at int, rest, cost int64) int64 {
	const rounding = 1e-12
	least := cost + int64(float64(rest)*s.perUnit[at]*(1-rounding))
	if s.step > 1 && least%s.step > 0 {
		least += s.step - least%s.step
	}
	return least
}

// divisor is the greatest common divisor.
func divisor(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}
