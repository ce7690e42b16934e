package search

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"

	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// Bounds are what chains on a lot come to at least.
type Bounds struct {
	tuner    *Tuner
	litres   float64
	whole    toll // of a route as a whole: the test of its product
	perLitre float64
	anywhere map[routes.Stage]toll // what a step takes wherever it stands
}

// toll is what steps take of a batch at least. Equipment, which several steps may
// share, is left out.
type toll struct{ money, attended, wasteKg, energyKWh, hours float64 }

func (a toll) plus(b toll) toll {
	return toll{a.money + b.money, a.attended + b.attended, a.wasteKg + b.wasteKg, a.energyKWh + b.energyKWh, a.hours + b.hours}
}

func (a toll) times(f float64) toll {
	return toll{a.money * f, a.attended * f, a.wasteKg * f, a.energyKWh * f, a.hours * f}
}

func (a toll) least(b toll) toll {
	return toll{math.Min(a.money, b.money), math.Min(a.attended, b.attended), math.Min(a.wasteKg, b.wasteKg), math.Min(a.energyKWh, b.energyKWh), math.Min(a.hours, b.hours)}
}

// Branch is a chain that further steps may follow.
type Branch struct {
	Route routes.Route
	Ends  bool // its last step reaches the goal, if those before it leave as little water as they can

	tolls []toll       // one for each way to treat its sorbents
	lot   *routes.Case // what it leaves at best
}

// NewBounds works out what each step takes at least.
func (t *Tuner) NewBounds(all []routes.Stage) *Bounds {
	b := &Bounds{tuner: t, litres: steps.LotVolume(t.Case.Mixture, t.Case.Feed, t.Case.Job.Site.RoomK) * 1e3, anywhere: map[routes.Stage]toll{}}
	b.ofWhole()
	dry := t.Case.Lot
	dry.FreeWaterM3, dry.Water, dry.Saturated = 0, math.Min(dry.Water, worthASieve*t.Case.Goal()), false
	dried := t.Case.With(dry)
	for _, s := range all {
		first := true
		for _, k := range []*routes.Case{t.Case, dried} {
			tolls, _, _, err := b.step(k, s)
			if err != nil {
				continue
			}
			for _, x := range tolls {
				if first {
					b.anywhere[s] = x
				}
				b.anywhere[s], first = b.anywhere[s].least(x), false
			}
		}
	}
	return b
}

// ofWhole is what is paid once a batch, whatever the route.
func (b *Bounds) ofWhole() {
	k := b.tuner.Case
	idle := routes.Run{Route: routes.Route{{Kind: steps.Settle}}, LitresDelivered: 1}
	for _, u := range k.WholeRoute(&idle) {
		money := b.money([]routes.StageUse{u})
		if u.Head == steps.Purchase {
			b.perLitre += money
			continue
		}
		b.whole.money += money
		if u.Item == "technician" {
			b.whole.attended += u.Quantity
		}
	}
}

func (b *Bounds) money(uses []routes.StageUse) float64 {
	cost, err := b.tuner.Book.PerBatchFloat(uses, b.tuner.Case.Lot.BatchesPerYear)
	if err != nil {
		return 0
	}
	return cost
}

// Root is the chain without a step.
func (b *Bounds) Root() Branch {
	return Branch{tolls: []toll{b.whole}, lot: b.tuner.Case}
}

// Leave drops what was remembered to carry a branch on.
func (f Branch) Leave() {
	if len(f.Route) > 0 {
		f.lot.Forget()
	}
}

// CheapestFirst orders branches by what they cost at least, then by their ids.
func (b *Bounds) CheapestFirst(all []Branch) {
	least := func(f Branch) float64 {
		money := math.Inf(1)
		for _, x := range f.tolls {
			money = math.Min(money, x.money)
		}
		return money
	}
	slices.SortFunc(all, func(x, y Branch) int {
		return cmp.Or(cmp.Compare(least(x), least(y)), cmp.Compare(x.Route.ID(), y.Route.ID()))
	})
}

// Rough bounds the chains that go on from a branch with a step, without a run.
func (b *Bounds) Rough(from Branch, s routes.Stage) []Measures {
	return b.measures(from.joined([]toll{b.ahead(from, s)}))
}

// ahead is what a step takes at least after a branch. What follows a trap finds the
// still set up and hot.
func (b *Bounds) ahead(from Branch, s routes.Stage) toll {
	if n := len(from.Route); s.Kind == steps.Forerun && n > 0 && from.Route[n-1].Kind == steps.Trap {
		return toll{}
	}
	least := b.anywhere[s].times(math.Min(1, from.lot.Lot.BatchM3/b.tuner.Case.Lot.BatchM3)) // of the lot that is left
	if len(from.Route) == 0 {
		return least
	}
	if s.Kind == steps.Salt { // the less is left to take, the smaller its dose
		least.money, least.wasteKg = 0, 0
	}
	return least.times(laterShare)
}

// Of a branch as it stands.
func (b *Bounds) Of(branch Branch) []Measures { return b.measures(branch.tolls) }

func (b *Bounds) measures(tolls []toll) (all []Measures) {
	for _, x := range tolls {
		all = append(all, Measures{PerLitre: x.money/b.litres + b.perLitre, Attended: x.attended, WasteKg: x.wasteKg, EnergyKWh: x.energyKWh, Time: x.hours})
	}
	return all
}

func (f Branch) joined(tolls []toll) (all []toll) {
	for _, x := range f.tolls {
		for _, y := range tolls {
			all = append(all, x.plus(y))
		}
	}
	return all
}

// Extend carries a branch on with a step. The error says why the step refuses even
// what the branch leaves at best.
func (b *Bounds) Extend(from Branch, s routes.Stage) (Branch, error) {
	tolls, out, ends, err := b.step(from.lot, s)
	if err != nil {
		return Branch{}, err
	}
	after := b.ahead(from, s)
	if after == (toll{}) {
		tolls = []toll{after}
	}
	for i := range tolls {
		if len(from.Route) > 0 {
			tolls[i] = tolls[i].times(laterShare)
		}
		if s.Kind == steps.Column {
			tolls[i] = tolls[i].least(after)
		}
	}
	next := Branch{Route: append(from.Route[:len(from.Route):len(from.Route)], s), Ends: ends, tolls: from.joined(tolls)}
	lot := from.lot.Lot
	lot.FreeWaterM3, lot.Saturated, lot.Water = 0, false, out.Water()
	lot.BatchM3 = steps.LotVolume(from.lot.Mixture, out, from.lot.Job.Site.RoomK)
	next.lot = from.lot.With(lot)
	return next, nil
}

// step is what a step takes of a lot at least, what it leaves at best, and whether
// that reaches the goal.
func (b *Bounds) step(k *routes.Case, s routes.Stage) (tolls []toll, out steps.Lot, ends bool, err error) {
	switch s.Kind {
	case steps.Soak, steps.Column:
		return b.bed(k, s)
	case steps.Trap, steps.Forerun:
		return b.boiled(k, s)
	}
	last, err := k.Run(routes.Route{s}, b.tuner.blank(routes.Route{s}))
	if err != nil {
		return nil, out, false, err
	}
	least, before := b.toll(&last), last
	if s.Kind == steps.Salt { // before another step it is given the usual dose
		alone := routes.Route{s, {Kind: steps.Buy}}
		if before, err = k.Run(alone, b.tuner.blank(alone)); err == nil {
			err = routes.Idle(&before)
		}
		if err != nil {
			return nil, out, false, err
		}
		least = least.least(b.toll(&before))
	}
	return []toll{least.times(roundly)}, before.Outcomes[0].Out, last.Outcomes[0].Out.Water() <= b.goal(), nil
}

func (b *Bounds) goal() float64 { return b.tuner.Case.Goal() * (1 + 1e-9) }

// toll of the first step of a run.
func (b *Bounds) toll(run *routes.Run) toll {
	var x toll
	var uses []routes.StageUse
	for _, u := range ofStage(run.Uses, 1) {
		if u.Head == steps.Equipment {
			continue
		}
		uses = append(uses, u)
		switch {
		case u.Item == "technician":
			x.attended += u.Quantity
		case u.Item == "electricity":
			x.energyKWh += u.Quantity
		case u.Head == steps.Waste:
			x.wasteKg += u.Quantity
		}
	}
	x.money, x.hours = b.money(uses), run.Outcomes[0].HoursTotal
	return x
}

// boilShare is left of what a boiling step takes by itself where another shares its
// still, or the lot boils a little earlier.
const boilShare = 0.7

// boiled is a trap or a forerun: the least that it does takes least, the most leaves
// least.
func (b *Bounds) boiled(k *routes.Case, s routes.Stage) (tolls []toll, out steps.Lot, ends bool, err error) {
	alone := routes.Route{s}
	short, err := k.RunTo(alone, b.tuner.blank(alone), k.Feed.Water()*leastEffort)
	if err != nil {
		return nil, out, false, err
	}
	under := *b.tuner
	under.Case = k
	far, err := under.driest(alone)
	if err != nil {
		return nil, out, false, err
	}
	out, ends = far.Outcomes[0].Out, far.WaterOut <= b.goal()    // what it loses at most makes what follows small
	if w := worthASieve * b.tuner.Case.Goal(); out.Water() < w { // it hands over no drier before another step
		out.WaterKg = out.SolventKg * w / (1 - w)
	}
	return []toll{b.toll(&short).times(boilShare)}, out, ends, nil
}

// leastKept is left of a lot on beads of which more are taken than the least,
// roundly takes up what small changes of a lot make of the work on it, and laterShare what
// the steps before it make of both the lot and its water: the dose of a salt and the
// charges of a still do not go one way with them. Neither does the time of a tube: it
// is left out, and of the work on it no more than tubeShare is counted.
const leastKept, roundly, laterShare, tubeShare = 0.9, 0.97, 0.8, 0.8

// bed is a soak or a column: the longest stand, still or stirred, needs the least
// sorbent, and the least water to take up the least of it; the shortest takes the
// least time. Two charges leave the least water.
func (b *Bounds) bed(k *routes.Case, s routes.Stage) (tolls []toll, out steps.Lot, ends bool, err error) {
	ways := b.tuner.afterUse()
	if k.Feed.Water() <= b.goal() { // nothing is left for it, however it is used
		return nil, out, false, fmt.Errorf("what stands before it leaves %s at best, where %s is asked for: nothing is left for beads", quantity.FormatWater(k.Feed.Water()), quantity.FormatWater(k.Goal()))
	}
	driest, last := math.Inf(1), errors.New("")
	lots := []int{1}
	if s.Kind == steps.Soak {
		lots = b.tuner.lotsOverCharge()
	}
	for _, after := range ways {
		least, found := toll{}, false
		count := func(run *routes.Run) {
			x := b.toll(run)
			if s.Kind == steps.Soak {
				x.hours = math.Min(x.hours, stirredHours[0])
			} else {
				x.hours, x.attended = 0, x.attended*tubeShare
			}
			if found {
				x = x.least(least)
			}
			least, found = x, true
		}
		dry := func(v stand, charges int) {
			run, err := b.bedded(k, s, after, v, charges, 1, k.Goal())
			if err != nil {
				last = err
				return
			}
			count(&run)
			if o := run.Outcomes[0]; o.Out.Water() < driest {
				driest, out = o.Out.Water(), o.Out
				ends = driest <= b.goal()
				out.SolventKg, out.WaterKg = out.SolventKg*leastKept, out.WaterKg*leastKept
			}
		}
		for _, v := range b.stands(s.Kind) {
			for _, n := range lots {
				if run, err := b.bedded(k, s, after, v, 1, n, k.Feed.Water()*leastEffort); err == nil {
					count(&run)
				}
			}
			for _, charges := range chargesTried {
				dry(v, charges)
			}
		}
		if s.Kind == steps.Soak && k.MakesWater() { // the longest stand is not the driest
			for i := 0; i < len(stirredHours) && !ends; i++ {
				dry(stand{stirredHours[i], true}, 1)
			}
			for i := 0; i < len(soakHours) && !ends; i++ {
				dry(stand{soakHours[i], false}, 1)
			}
		}
		if found {
			tolls = append(tolls, least.times(roundly))
		}
	}
	if tolls == nil || math.IsInf(driest, 1) {
		return nil, out, false, last
	}
	return tolls, out, ends, nil
}

// bedded runs a soak or a column alone, down to a goal (kg/kg).
func (b *Bounds) bedded(k *routes.Case, s routes.Stage, after string, v stand, charges, lots int, goal float64) (routes.Run, error) {
	alone := routes.Route{s}
	set := b.tuner.blank(alone)
	set.Sieve[0] = after
	if s.Kind == steps.Soak {
		set.SoakHours[0], set.Stirred[0] = v.hours, v.stirred
		setCharges(&set, 0, charges)
		setLotsOverCharge(&set, 0, lots)
	}
	return k.Outline().RunTo(alone, set, goal)
}

// stands that need the least sorbent.
func (b *Bounds) stands(kind steps.Kind) []stand {
	if kind == steps.Column {
		return []stand{{}}
	}
	longest := func(hours []float64) float64 {
		most := hours[len(hours)-1]
		if limit := b.tuner.Case.Lot.NeededWithinS / 3600; limit > 0 {
			most = math.Min(most, limit)
		}
		return most
	}
	return []stand{{longest(soakHours), false}, {longest(stirredHours), true}}
}
