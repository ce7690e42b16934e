package study

import (
	"context"
	"math"
	"slices"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// decide adds to each lot what would change the answer: where routes change
// places, what is given up for what, and the cheapest routes of other lots.
func (r *Report) decide(ctx context.Context, c *catalog.Catalog, progress *meter) error {
	return atOnce(ctx, len(r.Lots), func(i int) error {
		l := &r.Lots[i]
		l.front()
		if l.NothingToDo != "" || len(l.Routes) == 0 {
			return nil
		}
		q, err := newQuestion(ctx, r, l, c)
		if err != nil {
			return err
		}
		return atOnce(ctx, 2, func(part int) error {
			defer progress.step()
			if part == 0 {
				return q.breakEvens(ctx)
			}
			return q.whatIf(ctx)
		})
	})
}

// question is what is asked of a lot beyond its ranking, always by cost: of the routes
// that are sure enough, each sized as far under the limit as makes it sure now. Where
// none is, of what is computed, whatever the chance to reach the limit.
type question struct {
	lot     *Lot
	surely  *surely // how the routes are made sure; nil: they are not
	seed    uint64
	job     *job.Job
	k       *routes.Case
	book    costs.Book
	site    *costs.Arrangement
	all     []routes.Route // but for those that settle first
	offered []routes.Route // those of them that are sure enough
	longer  []routes.Route // those of the ranking beside the usual ones
	warm    map[string]routes.Settings
	now     map[string]float64 // cost a litre of each route as things are; +Inf where it cannot be had
	ctx     context.Context
}

func newQuestion(ctx context.Context, r *Report, l *Lot, c *catalog.Catalog) (*question, error) {
	lot := l.Job
	lot.FreeWaterM3 = 0 // what is asked of the dissolved water
	k, err := routes.NewCase(r.Job, lot, c)
	if err != nil {
		return nil, err
	}
	q := &question{lot: l, surely: l.surely, seed: uint64(r.Seed), job: r.Job, k: k, book: r.Book, site: costs.NewArrangement(c, r.Job), warm: map[string]routes.Settings{}, now: map[string]float64{}, ctx: ctx}
	offered, _ := k.Candidates()
	for _, route := range q.quick(offered) {
		if route[0].Kind != steps.Settle {
			q.all = append(q.all, route)
		}
	}
	for i := range l.Routes {
		r := &l.Routes[i]
		q.warm[r.ID] = r.Run.Settings
		if !slices.ContainsFunc(offered, func(o routes.Route) bool { return o.ID() == r.ID }) {
			q.longer = append(q.longer, r.Run.Route)
		}
	}
	q.all = append(q.all, q.longer...)
	q.offered = q.sure(slices.Clone(q.all))
	_, q.now, err = q.field(q.tuner(k, q.book), nil).Cheapest(nil, math.Inf(1))
	return q, err
}

func (q *question) tuner(k *routes.Case, book costs.Book) *search.Tuner {
	return &search.Tuner{Case: k, Book: book, Objective: search.Cost, Site: q.site, Exact: true, Kept: q.surely.kept, Stop: q.ctx.Err}
}

// field of the routes that pass, tuned for a case and its prices.
func (q *question) field(t *search.Tuner, pass func(routes.Route) bool) search.Field {
	f := search.Field{Tuner: t, Warm: q.warm}
	for _, r := range q.offered {
		if pass == nil || pass(r) {
			f.Routes = append(f.Routes, r)
		}
	}
	return f
}

// sure leaves out the routes that are not sure enough.
func (q *question) sure(all []routes.Route) []routes.Route {
	return slices.DeleteFunc(all, func(r routes.Route) bool { return q.surely.way(r).out })
}

// quick leaves the carriers out but for the one that leads: they take more time here
// than they tell.
func (q *question) quick(all []routes.Route) []routes.Route {
	return slices.DeleteFunc(slices.Clone(all), func(r routes.Route) bool {
		return r.CarrierOf() != "" && (len(q.lot.Routes) == 0 || q.lot.Routes[0].ID != r.ID())
	})
}

func (q *question) withLot(change func(*job.Lot)) *search.Tuner {
	lot := q.k.Lot
	change(&lot)
	return q.tuner(q.k.With(lot), q.book)
}

func isBuy(r routes.Route) bool      { return r[0].Kind == steps.Buy }
func isDrying(r routes.Route) bool   { return !isBuy(r) }
func isDirect(r routes.Route) bool   { return len(r) == 1 && !isBuy(r) }
func isPreDried(r routes.Route) bool { return len(r) > 1 }

func anySieve(r routes.Route) bool {
	return slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Kind == steps.Soak || s.Kind == steps.Column })
}

func isTrapped(r routes.Route) bool {
	return slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Kind == steps.Trap })
}
