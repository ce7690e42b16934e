package study

import (
	"context"
	"fmt"
	"math"
	"slices"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/memo"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/spread"
)

// searchDraws are those by which settings are made sure. Their number is fixed, so
// that settings do not depend on how many draws the ranges take.
const searchDraws = 1000

// searchMargin is how far above the assurance the search goes with so few.
const searchMargin = 0.02

// doubts are the draws of a lot; nil where none are asked for.
type doubts struct {
	search, all *doubt.Lot
	limits      doubt.Limits // Most is NaN where the target cannot be shown
	assurance   float64
	sures       memo.Map[string, answer[bool]] // by plan
	chances     memo.Map[string, answer[float64]]
}

type answer[T any] struct {
	value T
	err   error
}

func newDoubts(ctx context.Context, k *routes.Case, book costs.Book, site *costs.Arrangement, o Options) (*doubts, error) {
	if o.Draws == 0 {
		return nil, nil
	}
	d, err := searchDoubts(ctx, k, book, site, o.Seed)
	if err != nil {
		return nil, err
	}
	if d.all, err = doubt.New(k, book, site, o.Draws, o.Seed); err != nil {
		return nil, err
	}
	d.all.Like(d.search)
	d.all.Stop = ctx.Err
	return d, nil
}

// searchDoubts are the draws of a search alone.
func searchDoubts(ctx context.Context, k *routes.Case, book costs.Book, site *costs.Arrangement, seed uint64) (*doubts, error) {
	d := &doubts{limits: doubt.Limits{Least: k.AcceptFrom(), Most: k.Limit.AcceptAt}, assurance: k.Job.Assurance}
	var err error
	if d.search, err = doubt.New(k, book, site, searchDraws, seed); err != nil {
		return nil, err
	}
	d.search.Stop = ctx.Err
	return d, nil
}

// price sets the prices of the draws.
func (d *doubts) price(book costs.Book) {
	if d != nil {
		d.search.Book, d.all.Book = book, book
	}
}

// applies reports whether there are draws and a limit that can be shown.
func (d *doubts) applies() bool { return d != nil && !math.IsNaN(d.limits.Most) }

// sure tightens a run until it is sure enough, where that can be for less than most
// (0: for any value of the objective).
func (d *doubts) sure(t *search.Tuner, r routes.Route, run routes.Run, most float64) (routes.Run, error) {
	if !run.Meets || !d.applies() {
		return run, nil
	}
	a := search.Assurance{Sure: d.sureEnough, Most: most}
	if t.Case.Lot.FailedBatch != nil && t.Mix == nil && t.Objective == search.Cost {
		a.Miss = func(run *routes.Run) (float64, error) { return d.miss(run, t.Case.Lot.FailedBatch) }
	}
	return t.Assured(r, run, a)
}

// miss is what missing the target is expected to cost a litre, by the draws of a search.
func (d *doubts) miss(run *routes.Run, failed *job.FailedBatch) (float64, error) {
	chance, err := d.search.Chance(run, d.limits)
	return (1 - chance) * failed.Amount.InexactFloat64() / run.LitresDelivered, err
}

// sureEnough reports whether a plan is, by the draws of a search. Its chance does not
// go with prices.
func (d *doubts) sureEnough(run *routes.Run) (bool, error) {
	a := d.sures.Of(doubt.Plan(run), func() (a answer[bool]) {
		a.value, a.err = d.search.Sure(run, d.limits, math.Min(d.assurance+searchMargin, (1+d.assurance)/2))
		return a
	})
	return a.value, a.err
}

// chance of a plan in all draws. The draws of the search go first, as in a search:
// given settings then read the same surfaces.
func (d *doubts) chance(run *routes.Run) (float64, error) {
	a := d.chances.Of(doubt.Plan(run), func() (a answer[float64]) {
		if _, a.err = d.sureEnough(run); a.err == nil {
			a.value, a.err = d.all.Chance(run, d.limits)
		}
		return a
	})
	return a.value, a.err
}

// judge finds the chances of the routes, and what a miss is expected to cost.
func (d *doubts) judge(ctx context.Context, all []Route, failed *job.FailedBatch) error {
	if d == nil || math.IsNaN(d.limits.Most) {
		return nil
	}
	return atOnce(ctx, len(all), func(i int) error {
		r := &all[i]
		chance, err := d.chance(&r.Run)
		if err != nil {
			return fmt.Errorf("%s: %w", r.ID, err)
		}
		told := spread.ToldChance(chance, d.assurance, d.all.Draws())
		r.Range = &Range{Chance: &told}
		r.Recommended = r.Run.Meets && chance >= d.assurance
		if r.Run.Meets && !r.Recommended {
			r.WhyNot = fmt.Sprintf("its chance of the target, %s, is under the assurance of %s", quantity.FormatShare(told), quantity.FormatShare(d.assurance))
		}
		if failed != nil {
			perBatch := failed.Amount.Mul(decimal.NewFromFloat(1 - told)).Round(2)
			r.Miss = &Miss{PerBatch: perBatch, PerLitre: perBatch.DivRound(decimal.NewFromFloat(r.Run.LitresDelivered), 6)}
		}
		return nil
	})
}

// spread fills in the ranges of the routes.
func (d *doubts) spread(ctx context.Context, l *Lot) error {
	if d == nil {
		return nil
	}
	outcomes := make([]*doubt.Outcome, len(l.Routes))
	err := atOnce(ctx, len(l.Routes), func(i int) error {
		r := &l.Routes[i]
		o, err := d.all.Through(&r.Run)
		if err != nil {
			return fmt.Errorf("%s: %w", r.ID, err)
		}
		outcomes[i] = o
		if r.Range == nil {
			r.Range = &Range{}
		}
		r.Range.Water, r.Range.Hours = spread.Told(capped(o.Water, l.Job.Water)), spread.Told(o.Hours)
		if o.CostPerLitre != nil {
			band := spread.Told(o.CostPerLitre)
			r.Range.CostPerLitre = &band
		}
		return nil
	})
	if err != nil {
		return err
	}
	d.cheapest(l, outcomes)
	return d.movers(ctx, l, outcomes)
}

// capped shows a draw in which a route fails as a lot that is as wet as it came.
func capped(water []float64, start float64) []float64 {
	out := slices.Clone(water)
	for i, w := range out {
		if math.IsInf(w, 1) {
			out[i] = start
		}
	}
	return out
}

// cheapest counts for each route the draws in which it costs least among those that
// reach the limit.
func (d *doubts) cheapest(l *Lot, outcomes []*doubt.Outcome) {
	if math.IsNaN(d.limits.Most) {
		return
	}
	wins := make([]int, len(outcomes))
	for i := range d.all.Draws() {
		best := -1
		for k, o := range outcomes {
			if o.CostPerLitre == nil || !d.limits.Met(o.Water[i]) {
				continue
			}
			if best < 0 || o.CostPerLitre[i] < outcomes[best].CostPerLitre[i] {
				best = k
			}
		}
		if best >= 0 {
			wins[best]++
		}
	}
	for k, n := range wins {
		l.Routes[k].Range.CheapestShare = spread.ToldShare(float64(n)/float64(d.all.Draws()), d.all.Draws())
	}
}

// Movers shown of each result, and the weakest correlation that is told.
const (
	mostMovers  = 3
	leastMoving = 0.2 // as it is told
)

// movers ranks what moves the results of each route, and for the lot what moves
// those of the best.
func (d *doubts) movers(ctx context.Context, l *Lot, outcomes []*doubt.Outcome) error {
	inputs := d.all.Inputs()
	ranks := make([]spread.Ranks, len(inputs))
	for k := range inputs {
		ranks[k] = spread.RanksOf(d.all.Column(inputs[k].Name))
	}
	err := atOnce(ctx, len(outcomes), func(i int) error {
		r, o := &l.Routes[i], outcomes[i]
		for _, result := range []struct {
			of     string
			values []float64
		}{{MovesWater, o.Water}, {MovesCost, o.CostPerLitre}, {MovesHours, o.Hours}} {
			if result.values == nil {
				continue
			}
			var all []Mover
			mine := spread.RanksOf(result.values)
			for k, in := range inputs {
				if c := spread.ToldCorrelation(ranks[k].Correlation(mine), len(mine)); math.Abs(c) >= leastMoving {
					all = append(all, Mover{Of: result.of, Input: in.Name, Why: in.Why, Correlation: c})
				}
			}
			strongestFirst(all)
			r.Range.Movers = append(r.Range.Movers, all[:min(len(all), mostMovers)]...)
		}
		return nil
	})
	if best := l.Best(); best != nil && best.Range != nil {
		l.Doubts = largest(best.Range.Movers)
	}
	return err
}

func strongestFirst(all []Mover) {
	slices.SortStableFunc(all, func(a, b Mover) int {
		switch x, y := math.Abs(a.Correlation), math.Abs(b.Correlation); {
		case x > y:
			return -1
		case x < y:
			return 1
		}
		return 0
	})
}

// largest are the three inputs that move water or cost most.
func largest(movers []Mover) (three []Mover) {
	all := slices.DeleteFunc(slices.Clone(movers), func(m Mover) bool { return m.Of == MovesHours })
	strongestFirst(all)
	for _, m := range all {
		if len(three) < 3 && !slices.ContainsFunc(three, func(t Mover) bool { return t.Input == m.Input }) {
			three = append(three, m)
		}
	}
	return three
}

// unsure warns where no route that reaches the limit is sure enough.
func (l *Lot) unsure(d *doubts) {
	if d == nil || math.IsNaN(d.limits.Most) || len(l.Routes) == 0 || !l.Routes[0].Meets() {
		return
	}
	if l.anySure() {
		return
	}
	l.Warnings = append(l.Warnings, fmt.Sprintf("no route is sure enough: none reaches the target with a chance of %s; the first of the ranking stands for want of a better one", quantity.FormatShare(d.assurance)))
}
