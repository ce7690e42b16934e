package study

import (
	"cmp"
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/search"
)

// A route is made sure anew where it may be the cheapest of its kind: by the settings of the
// nearest anchor it is no more than worthASearch times as dear as the best. Of the kind
// that is behind none is that comes out more than farBehind times as dear as the other's.
const worthASearch, farBehind = 1.6, 1.2

// add makes the routes sure at a start water: of either kind those that may be its
// cheapest.
func (s *starts) add(x float64) error {
	q := s.q
	k := q.k.With(q.wetted(x))
	d, err := searchDoubts(q.ctx, k, q.book, q.site, q.seed)
	if err != nil {
		return err
	}
	j := &judge{d: d, tuner: &search.Tuner{Case: k, Book: q.book, Objective: search.Cost, Site: q.site, Exact: true, Stop: q.ctx.Err}}
	sensible, _ := j.tuner.Prune(q.all)
	ahead, err := s.guess(x, sensible, isDirect)
	if err != nil {
		return err
	}
	behind, err := s.guess(x, sensible, isPreDried)
	if err != nil {
		return err
	}
	if behind.best < ahead.best {
		ahead, behind = behind, ahead
	}
	best, err := j.judge(ahead, math.Inf(1))
	if err == nil {
		_, err = j.judge(behind, farBehind*best)
	}
	if err != nil {
		return err
	}
	found := anchor{x: x, surely: &surely{limit: q.lot.AcceptAt, closed: true, found: j.found}, floors: &floors{}, warm: map[string]routes.Settings{}}
	for _, f := range j.found {
		found.warm[f.run.Route.ID()] = f.run.Settings
	}
	s.all = append(s.all, found)
	return nil
}

// guess is what the routes of a kind cost about.
type guess struct {
	routes []routes.Route // the cheapest first
	cost   map[string]float64
	best   float64
}

// guess takes the settings of the nearest anchor and, for what was not tried there, those
// of the lot as it is. What can be had by neither is tried last.
func (s *starts) guess(x float64, all []routes.Route, kind func(routes.Route) bool) (guess, error) {
	won, cost, err := s.field(x, kind).Cheapest(nil, math.Inf(1))
	if err != nil {
		return guess{}, err
	}
	f := (&starts{q: s.q, all: s.all[:1]}).field(x, kind)
	_, asNow, err := f.Cheapest(nil, math.Inf(1))
	if err != nil {
		return guess{}, err
	}
	g := guess{cost: map[string]float64{}, best: won.Cost}
	for _, r := range all {
		if !kind(r) {
			continue
		}
		about, ok := cost[r.ID()]
		if !ok {
			about, ok = asNow[r.ID()]
		}
		if !ok {
			about = math.Inf(1)
		}
		g.cost[r.ID()] = about
		g.routes = append(g.routes, r)
	}
	slices.SortStableFunc(g.routes, func(a, b routes.Route) int { return cmp.Compare(g.cost[a.ID()], g.cost[b.ID()]) })
	return g, nil
}

// judge makes routes sure as the ranking does.
type judge struct {
	d     *doubts
	tuner *search.Tuner
	found []judged
}

// judge tries the routes of a kind and returns the cost of the best that is sure; most
// where none is that costs less.
func (j *judge) judge(g guess, most float64) (best float64, err error) {
	for _, r := range g.routes {
		about := g.cost[r.ID()]
		if about > worthASearch*most && (len(r) > 1 || !math.IsInf(about, 1)) {
			continue
		}
		if j.tuner.LeastCost(r) >= most {
			continue
		}
		run, cost, err := j.sure(r, most)
		if err != nil {
			return most, err
		}
		if run.Route == nil {
			continue
		}
		sure, err := j.d.sureEnough(&run)
		if err != nil {
			return most, err
		}
		j.found = append(j.found, judged{run, sure})
		if sure {
			most = math.Min(most, cost)
		}
	}
	return most, nil
}

// sure is a run of a route that is made sure if that can be had for less than most; without
// a route where even as tuned it costs more, or cannot be had.
func (j *judge) sure(r routes.Route, most float64) (run routes.Run, cost float64, err error) {
	run, err = j.tuner.Tune(r)
	if _, refused := refusal(err); refused {
		return routes.Run{}, 0, nil
	}
	if err != nil || !run.Meets || len(j.tuner.Book.Missing(run.Uses)) > 0 {
		return routes.Run{}, 0, err
	}
	if cost, err = j.tuner.Value(&run); err != nil || cost >= most {
		return routes.Run{}, 0, err
	}
	limit := most
	if math.IsInf(most, 1) {
		limit = 0
	}
	if run, err = j.d.sure(j.tuner, r, run, limit); err != nil {
		return run, 0, err
	}
	cost, err = j.tuner.Value(&run)
	return run, cost, err
}
