package study

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"sort"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/search"
)

// Version of the program.
const Version = "0.1.0"

// Options of a comparison.
type Options struct {
	// Settings of an earlier run, by lot name and route id, used instead of tuning.
	Settings map[string]map[string]routes.Settings
	// RankingOnly leaves out the break-evens, the trade-off and the grid of other lots.
	RankingOnly bool
	Draws       int    // of what is not known exactly; 0: none
	Seed        uint64 // of the draws

	// Progress is told the parts that are done and all there are; it may be called
	// from several goroutines, one at a time. May be nil.
	Progress func(done, total int)

	meter *meter
}

// Compare runs every sensible route of every lot and ranks them.
func Compare(ctx context.Context, j *job.Job, c *catalog.Catalog, o Options) (*Report, error) {
	book, err := costs.NewBook(c, j)
	if err != nil {
		return nil, err
	}
	if o.Draws == 0 {
		o.Seed = 0
	}
	r := &Report{Draws: o.Draws, Seed: int64(o.Seed), Version: Version, CatalogDate: c.Date, PriceDate: costs.ReferenceDate(c, j), Job: j, Book: book, Warnings: j.Warnings, catalog: c}
	o.meter = newMeter(o.Progress, parts*len(j.Lots))
	if err := r.compareLots(ctx, c, o); err != nil {
		return nil, err
	}
	if err := r.buy(c); err != nil {
		return nil, err
	}
	if err := r.book(c); err != nil {
		return nil, err
	}
	if !o.RankingOnly {
		if err := r.decide(ctx, c, o.meter); err != nil {
			return nil, err
		}
	}
	r.prices = r.Book
	r.Book = usedPrices(r)
	r.Sources, r.Weak = provenance(r, c)
	r.Weak = append(r.Weak, r.recalled()...)
	return r, nil
}

func compareLot(ctx context.Context, j *job.Job, lot job.Lot, c *catalog.Catalog, book costs.Book, o Options) (Lot, *doubts, error) {
	given := o.Settings[lot.Name]
	k, err := routes.NewCase(j, lot, c)
	if err != nil {
		return Lot{}, nil, err
	}
	l := Lot{
		Job: lot, Solvent: k.Solvent,
		AcceptAt: k.Limit.AcceptAt, CannotShow: k.Limit.CannotShow, Uncertainty: k.Limit.Uncertainty, Detection: k.Assay.DetectionLimit, Injections: k.Assay.Injections,
		Warnings: lotWarnings(k),
	}
	if k.Dry() {
		l.NothingToDo = fmt.Sprintf("nothing to do: the reading of %s is at or below the %s at which a target of %s is accepted; it rests on that Karl Fischer reading of a clear sample%s",
			quantity.FormatWater(lot.Water), quantity.FormatWater(k.Limit.AcceptAt), quantity.FormatWater(lot.Target), belowDetection(k))
		return l, nil, nil
	}
	offered, excluded := k.Candidates()
	l.Excluded = excluded
	site := costs.NewArrangement(c, j)
	tuner := &search.Tuner{Case: k, Book: book, Objective: search.Objective(j.Objective), Site: site}
	if err := weigh(tuner, j, offered); err != nil {
		return Lot{}, nil, err
	}
	drawn, err := newDoubts(k, book, site, o)
	if err != nil {
		return Lot{}, nil, err
	}
	if given != nil {
		offered = withSettings(offered, given)
	} else {
		var dropped []routes.Excluded
		offered, dropped = tuner.Prune(offered)
		l.Excluded = append(l.Excluded, dropped...)
	}
	for _, r := range offered {
		if err := ctx.Err(); err != nil {
			return Lot{}, nil, err
		}
		run, err := carryOut(tuner, r, given, drawn)
		if reason, ok := refusal(err); ok {
			l.Excluded = append(l.Excluded, routes.Excluded{ID: r.ID(), Reason: reason})
			continue
		}
		if err != nil {
			return Lot{}, nil, err
		}
		route := Route{ID: r.ID(), Label: k.Label(r, run.Settings), Run: run, Cautions: cautions(k, r), Warnings: append(runWarnings(k, run), ovenWarning(k, run)...)}
		if err := route.account(k, site, book); err != nil {
			return Lot{}, nil, fmt.Errorf("%s: %w", r.ID(), err)
		}
		l.Routes = append(l.Routes, route)
	}
	if err := drawn.judge(l.Routes, lot.FailedBatch); err != nil {
		return Lot{}, nil, err
	}
	if l.Routes, err = ranked(l.Routes, tuner); err != nil {
		return Lot{}, nil, err
	}
	l.unsure(drawn)
	if given == nil {
		l.dropDominated()
	}
	if best := l.Best(); best != nil {
		best.Warnings = append(best.Warnings, afterwards(k, best)...)
	}
	if len(l.Routes) == 0 || l.Routes[0].Rank == 0 {
		if l.NearMisses, err = nearMisses(ctx, k, tuner); err != nil {
			return Lot{}, nil, err
		}
	}
	l.invest(site)
	l.follow(k)
	sort.SliceStable(l.Excluded, func(a, b int) bool { return l.Excluded[a].ID < l.Excluded[b].ID })
	return l, drawn, nil
}

// withSettings keeps the routes of an earlier run: what is repeated is that run.
func withSettings(offered []routes.Route, given map[string]routes.Settings) []routes.Route {
	return slices.DeleteFunc(offered, func(r routes.Route) bool { _, ok := given[r.ID()]; return !ok })
}

func belowDetection(k *routes.Case) string {
	if k.Lot.Water >= k.Assay.DetectionLimit {
		return ""
	}
	return fmt.Sprintf(", which lies below the detection limit of %s", quantity.FormatWater(k.Assay.DetectionLimit))
}

// carryOut runs a route with the settings given for it, or tunes it until it is sure
// enough.
func carryOut(t *search.Tuner, r routes.Route, given map[string]routes.Settings, drawn *doubts) (routes.Run, error) {
	s, ok := given[r.ID()]
	if !ok {
		run, err := t.Tune(r)
		if err != nil {
			return run, err
		}
		return drawn.sure(t, r, run)
	}
	if err := s.Fit(r); err != nil {
		return routes.Run{}, err
	}
	return t.Run(r, s)
}

// refusal tells a route that the physics or the time refuses from a failure of
// the program.
func refusal(err error) (reason string, ok bool) {
	for _, known := range []error{search.ErrTooSlow, routes.ErrRefused} {
		if errors.Is(err, known) {
			return err.Error(), true
		}
	}
	return "", false
}

func ranked(all []Route, t *search.Tuner) ([]Route, error) {
	entries := make([]search.Entry, len(all))
	for i := range all {
		value, err := t.Value(&all[i].Run)
		if err != nil {
			return nil, err
		}
		perLitre := all[i].Bill.PerLitre.InexactFloat64()
		if miss := all[i].Miss; miss != nil && t.Mix == nil && t.Objective == search.Cost {
			value += miss.PerLitre.InexactFloat64()
		}
		all[i].Objective = value
		entries[i] = search.Entry{ID: all[i].ID, Meets: all[i].Run.Meets, NoPrice: !all[i].Bill.Priced(), Value: value, CostPerLitre: perLitre, WaterOut: all[i].Run.WaterOut}
	}
	sorted := make([]Route, 0, len(all))
	for place, i := range search.Order(entries) {
		r := all[i]
		if r.Run.Meets {
			r.Rank = place + 1
		}
		sorted = append(sorted, r)
	}
	return sorted, nil
}

// usedPrices keeps the prices that some bill rests on.
func usedPrices(r *Report) costs.Book {
	used := costs.Book{}
	for _, l := range r.Lots {
		for _, route := range l.Routes {
			for _, line := range route.Bill.Lines {
				used[line.Item] = r.Book[line.Item]
			}
		}
	}
	return used
}

// finite reports whether a number can be shown.
func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
