package study

import (
	"context"
	"fmt"
	"maps"
	"math"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// Keys of the break-evens, as in the JSON.
const (
	StartWater = "start_water_mg_per_kg"
	Volume     = "litres_a_month_against_buying"
	Technician = "technician_per_hour"
	SievePrice = "sieve_per_kg"
	SieveUses  = "uses_of_a_sieve"
	Receiver   = "uses_a_year_of_a_receiver"
)

// How far a figure of the job is varied, and at how many points a change of order
// is looked for before it is solved for.
const (
	rateFactor  = 5
	sieveFactor = search.DearBeads
	points      = 6
)

func (q *question) breakEvens(ctx context.Context) error {
	asks := []func() (*BreakEven, error){q.startWater, q.volume, q.technician, q.sievePrice, q.sieveUses, q.receiver}
	found := make([]*BreakEven, len(asks))
	err := atOnce(ctx, len(asks), func(i int) (err error) {
		if found[i], err = asks[i](); search.NoOffer(err) {
			return nil
		}
		return err
	})
	if err != nil {
		return err
	}
	for _, b := range found {
		if b != nil {
			b.Answer = b.answer()
			q.lot.BreakEvens = append(q.lot.BreakEvens, *b)
		}
	}
	return nil
}

// sides are two fields of routes over a figure of the job, and who won them last.
type sides struct {
	one, other func(x float64) search.Field
	floors     func(x float64) *floors
	won, lost  search.Won // by the one and the other
	asked      map[float64]outcome
}

// outcome of a duel.
type outcome struct{ won, lost search.Won }

// floors are what routes cost at a figure already asked for. The cost rises with
// the figure, or falls with it: what was found on the cheap side is a floor.
type floors struct {
	falls bool // the cost falls as the figure rises
	known []known
}

type known struct {
	x    float64
	cost map[string]float64
}

// at joins what is known on the cheap side of x, the nearest figure last.
func (f *floors) at(x float64) map[string]float64 {
	var low map[string]float64
	for _, k := range f.known {
		if f.falls == (k.x >= x) || k.x == x {
			low = highest(low, k.cost)
		}
	}
	return low
}

// learn keeps what was found. A route that cannot be had at one figure may be had
// at another.
func (f *floors) learn(x float64, cost map[string]float64) {
	f.known = append(f.known, known{x, maps.Clone(cost)})
	maps.DeleteFunc(f.known[len(f.known)-1].cost, func(_ string, c float64) bool { return math.IsInf(c, 1) })
}

func (s *sides) duel(x float64) (one, other float64, err error) {
	if o, ok := s.asked[x]; ok {
		s.won, s.lost = o.won, o.lost
		return s.won.AtLeast, s.lost.Cost, nil
	}
	known := s.floors(x)
	low := known.at(x)
	var found map[string]float64
	if s.lost, found, err = s.other(x).Cheapest(low, math.Inf(1)); err != nil {
		return 0, 0, err
	}
	known.learn(x, found)
	if s.won, found, err = s.one(x).Cheapest(low, s.lost.Cost); err != nil {
		return 0, 0, err
	}
	known.learn(x, found)
	if s.asked == nil {
		s.asked = map[float64]outcome{}
	}
	s.asked[x] = outcome{s.won, s.lost}
	return s.won.AtLeast, s.lost.Cost, nil
}

// families asks where the cheapest of one kind of routes changes places with the
// cheapest of another kind. Beside the usual points it looks at others.
func (b BreakEven) families(s *sides, others ...float64) (*BreakEven, search.Crossing, error) {
	c, err := search.Cross(s.duel, b.From, b.To, b.Now, points, others...)
	if err != nil {
		return nil, c, err
	}
	b.At, b.Never, b.Step = c.At, c.Never, c.Step
	below, above := c.At*(1-beside), c.At*(1+beside)
	if c.Never {
		below = math.Min(math.Max(b.Now, b.From), b.To)
		above = below
	}
	if b.Below, err = s.winner(below); err != nil {
		return nil, c, err
	}
	b.Above, err = s.winner(above)
	return &b, c, err
}

// beside a break-even, as a share of it, one looks who is ahead.
const beside = 1e-6

// winner is the cheaper side's route.
func (s *sides) winner(x float64) (string, error) {
	if one, other, err := s.duel(x); err != nil || one < other {
		return s.won.ID(), err
	}
	return s.lost.ID(), nil
}

// settle enters the crossing of two sides.
func (b *BreakEven) settle(c search.Crossing, one, other string) {
	b.At, b.Never, b.Step = c.At, c.Never, c.Step
	switch {
	case c.Never && c.OneAhead:
		b.Below, b.Above = one, one
	case c.Never:
		b.Below, b.Above = other, other
	case c.OneBelow:
		b.Below, b.Above = one, other
	default:
		b.Below, b.Above = other, one
	}
}

const litresPerM3, monthsPerYear = 1e3, 12

func (q *question) volume() (*BreakEven, error) {
	litres := q.lot.Job.BatchM3 * litresPerM3
	b := BreakEven{Key: Volume, Unit: "L/month", Now: litres * q.lot.Job.BatchesPerYear / monthsPerYear, What: "litres a month at which drying here beats buying dry"}
	b.From, b.To = litres*1/monthsPerYear, litres*1000/monthsPerYear
	known, warm := &floors{falls: true}, maps.Clone(q.warm)
	side := func(pass func(routes.Route) bool) func(float64) search.Field {
		return func(x float64) search.Field {
			f := q.field(q.withLot(func(l *job.Lot) { l.BatchesPerYear = x * monthsPerYear / litres }), pass)
			f.Warm, f.Learns = warm, true
			return f
		}
	}
	found, _, err := b.families(&sides{one: side(isDrying), other: side(isBuy), floors: func(float64) *floors { return known }})
	return found, err
}

func (q *question) technician() (*BreakEven, error) {
	price, ok := q.book["technician"]
	if !ok || !price.PerUnit.IsPositive() {
		return nil, nil
	}
	now := price.PerUnit.InexactFloat64()
	b := BreakEven{Key: Technician, Unit: q.job.Currency + "/h", Now: now, From: now / rateFactor, To: now * rateFactor, What: "technician rate at which the best route changes"}
	return q.winner(b, q.rising(b), func(x float64) *search.Tuner { return q.priced(x/now, "technician") })
}

// sieves of the catalog in the routes on offer.
func (q *question) sieves() (keys []string) {
	seen := map[string]bool{}
	for _, r := range q.offered {
		for _, s := range r {
			if a := q.k.Catalog.Agents[s.Agent]; a != nil && a.Kind == "sieve" && !seen[s.Agent] {
				seen[s.Agent] = true
				keys = append(keys, s.Agent)
			}
		}
	}
	return keys
}

// ownSieve is the sieve of the cheapest route that has one.
func (q *question) ownSieve() string {
	for i := range q.lot.Routes {
		for _, s := range q.lot.Routes[i].Run.Route {
			if a := q.k.Catalog.Agents[s.Agent]; a != nil && a.Kind == "sieve" {
				return s.Agent
			}
		}
	}
	return ""
}

func (q *question) sievePrice() (*BreakEven, error) {
	key := q.ownSieve()
	price, ok := q.book[key]
	if !ok || !price.PerUnit.IsPositive() {
		return nil, nil
	}
	now := price.PerUnit.InexactFloat64()
	b := BreakEven{Key: SievePrice, Unit: q.job.Currency + "/kg", Now: now, From: now / sieveFactor, To: now * sieveFactor,
		What: "price of " + q.k.Catalog.Agents[key].Name + ", the other sieves rising and falling with it, at which the best route changes"}
	sieves := q.sieves()
	return q.winner(b, q.rising(b), func(x float64) *search.Tuner { return q.priced(x/now, sieves...) })
}

// priced is the tuner with the prices of some items multiplied.
func (q *question) priced(factor float64, items ...string) *search.Tuner {
	book := maps.Clone(q.book)
	for _, item := range items {
		if p, ok := book[item]; ok {
			p.PerUnit = p.PerUnit.Mul(decimal.NewFromFloat(factor))
			book[item] = p
		}
	}
	return q.tuner(q.k.With(q.k.Lot), book)
}

func (q *question) sieveUses() (*BreakEven, error) {
	key := q.ownSieve()
	if key == "" || q.k.Catalog.Agents[key].Lives == nil || !q.k.MayRegenerate() {
		return nil, nil
	}
	b := BreakEven{Key: SieveUses, Unit: "uses", Now: q.k.Catalog.Agents[key].Lives.SI, From: 1, To: 50, What: "uses of a charge of sieve, dried in the oven between them, at which the best route changes"}
	sieves := q.sieves()
	return q.winner(b, q.unsieved(), func(x float64) *search.Tuner {
		cat := *q.k.Catalog
		cat.Agents = maps.Clone(cat.Agents)
		for _, key := range sieves {
			a := *cat.Agents[key]
			a.Lives = &catalog.Value{SI: x}
			cat.Agents[key] = &a
		}
		k := q.k.With(q.k.Lot)
		k.Catalog = &cat
		return q.tuner(k, q.book)
	})
}

// rising are the floors of a price: above the present one a route costs no less
// than now; below it, the cost being concave in a price, no less than that share.
func (q *question) rising(b BreakEven) func(x float64) map[string]float64 {
	return func(x float64) map[string]float64 {
		return q.scaled(math.Min(1, x/b.Now), nil)
	}
}

// unsieved are the floors of routes whose sieve costs nothing.
func (q *question) unsieved() func(x float64) map[string]float64 {
	low := q.scaled(1, func(r *Route) float64 {
		if !anySieve(r.Run.Route) {
			return 1
		}
		left := decimal.Zero
		for _, head := range []steps.Head{steps.Labour, steps.Testing, steps.Equipment, steps.Purchase} {
			left = left.Add(r.Bill.ByHead[head])
		}
		return left.Div(r.Bill.PerBatch).InexactFloat64()
	})
	return func(float64) map[string]float64 { return low }
}

// scaled are the present costs of the routes, less a margin for how well they are
// tuned, times a factor.
func (q *question) scaled(factor float64, share func(*Route) float64) map[string]float64 {
	const tuned = 0.99
	low := map[string]float64{}
	for id, cost := range q.now {
		low[id] = tuned * factor * cost
	}
	for i := range q.lot.Routes {
		if r := &q.lot.Routes[i]; share != nil && r.Bill.Priced() && r.Bill.PerBatch.IsPositive() {
			low[r.ID] *= share(r)
		}
	}
	return low
}

// winner asks at which figure the cheapest route of all changes. The order of two
// routes is solved for; where a third is cheaper there, it takes the place of the
// second, until none is.
func (q *question) winner(b BreakEven, low func(x float64) map[string]float64, at func(float64) *search.Tuner) (*BreakEven, error) {
	cheapest := func(x float64) (search.Won, error) {
		won, _, err := q.field(at(x), nil).Cheapest(low(x), math.Inf(1))
		return won, err
	}
	now, err := cheapest(b.Now)
	if err != nil || now.Route == nil {
		return nil, err
	}
	rival, near, err := rivalOf(b, cheapest, now.ID())
	if err != nil {
		return nil, err
	}
	for range len(q.offered) {
		if rival.Route == nil {
			b.settle(search.Crossing{Never: true, OneAhead: true, At: math.NaN()}, now.ID(), "")
			return &b, nil
		}
		lo, hi := math.Min(b.Now, near), math.Max(b.Now, near)
		c, err := search.Cross(q.pair(at, now.Route, rival.Route), lo, hi, b.Now, 2)
		if err != nil {
			return nil, err
		}
		third, err := cheapest(c.At)
		if err != nil {
			return nil, err
		}
		cost, err := q.field(at(c.At), nil).Cost(now.Route)
		if err != nil {
			return nil, err
		}
		if third.ID() == now.ID() || third.ID() == rival.ID() || third.Cost >= cost*(1-search.CloseEnough/10) {
			b.settle(c, now.ID(), rival.ID())
			return &b, nil
		}
		rival, near = third, c.At
	}
	return nil, fmt.Errorf("%s: no order of the routes was found", b.Key)
}

func (q *question) pair(at func(float64) *search.Tuner, one, other routes.Route) search.Duel {
	return func(x float64) (float64, float64, error) {
		f := q.field(at(x), nil)
		a, err := f.Cost(one)
		if err != nil {
			return 0, 0, err
		}
		b, err := f.Cost(other)
		return a, b, err
	}
}

// rivalOf is the nearest other winner on either side of the present figure.
func rivalOf(b BreakEven, cheapest func(x float64) (search.Won, error), now string) (search.Won, float64, error) {
	const each = 3 // points on either side
	for i := 1; i <= each; i++ {
		for _, end := range []float64{b.To, b.From} {
			x := b.Now * math.Pow(end/b.Now, float64(i)/each)
			if x == b.Now {
				continue
			}
			won, err := cheapest(x)
			if err != nil {
				return won, 0, err
			}
			if won.Route != nil && won.ID() != now {
				return won, x, nil
			}
		}
	}
	return search.Won{}, 0, nil
}
