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

// work is a lot with all that is worked out for it and does not go with prices.
type work struct {
	k     *routes.Case
	site  *costs.Arrangement
	drawn *doubts // nil: no draws are made
}

func newWork(ctx context.Context, j *job.Job, lot job.Lot, c *catalog.Catalog, book costs.Book, o Options) (*work, error) {
	k, err := routes.NewCase(j, lot, c)
	if err != nil || k.Dry() {
		return &work{k: k}, err
	}
	w := &work{k: k, site: costs.NewArrangement(c, j)}
	w.drawn, err = newDoubts(ctx, k, book, w.site, o)
	return w, err
}

// compare ranks the routes of a lot at the prices of the book.
func (w *work) compare(ctx context.Context, book costs.Book, o Options) (Lot, error) {
	k, given := w.k, o.Settings[w.k.Lot.Name]
	l := Lot{
		Job: k.Lot, Solvent: k.Solvent,
		AcceptAt: k.Limit.AcceptAt, CannotShow: k.Limit.CannotShow, Uncertainty: k.Limit.Uncertainty, Detection: k.Assay.DetectionLimit, Injections: k.Assay.Injections,
		Warnings: lotWarnings(k),
	}
	if k.Dry() {
		l.NothingToDo = fmt.Sprintf("nothing to do: the reading of %s is at or below the %s at which a target of %s is accepted; it rests on that Karl Fischer reading of a clear sample%s",
			quantity.FormatWater(k.Lot.Water), quantity.FormatWater(k.Limit.AcceptAt), quantity.FormatWater(k.Lot.Target), belowDetection(k))
		return l, nil
	}
	w.drawn.price(book)
	tuner := &search.Tuner{Case: k, Book: book, Objective: search.Objective(k.Job.Objective), Site: w.site, Stop: ctx.Err}
	offered, err := l.offer(tuner, given)
	if err != nil {
		return Lot{}, err
	}
	if err := l.carryOut(ctx, w, tuner, offered, given); err != nil {
		return Lot{}, err
	}
	if err := w.drawn.judge(ctx, l.Routes, k.Lot.FailedBatch); err != nil {
		return Lot{}, err
	}
	if l.Routes, err = ranked(l.Routes, tuner); err != nil {
		return Lot{}, err
	}
	l.unsure(w.drawn)
	if given == nil {
		l.dropDominated()
	}
	if best := l.Best(); best != nil {
		best.Warnings = append(best.Warnings, afterwards(k, best)...)
	}
	if len(l.Routes) == 0 || l.Routes[0].Rank == 0 {
		if l.NearMisses, err = nearMisses(ctx, k, tuner); err != nil {
			return Lot{}, err
		}
	}
	l.invest(w.site)
	l.follow(k)
	sort.SliceStable(l.Excluded, func(a, b int) bool { return l.Excluded[a].ID < l.Excluded[b].ID })
	return l, nil
}

// offer lists the routes to be run: those of an earlier run, or all that are not
// refused or beaten.
func (l *Lot) offer(t *search.Tuner, given map[string]routes.Settings) ([]routes.Route, error) {
	offered, excluded := t.Case.Candidates()
	l.Excluded = excluded
	if err := weigh(t, t.Case.Job, offered); err != nil {
		return nil, err
	}
	if given != nil {
		return withSettings(offered, given), nil
	}
	offered, dropped := t.Prune(offered)
	l.Excluded = append(l.Excluded, dropped...)
	return offered, nil
}

// carryOut runs the routes, several at a time, and enters what comes of them in the
// order in which they are offered.
func (l *Lot) carryOut(ctx context.Context, w *work, t *search.Tuner, offered []routes.Route, given map[string]routes.Settings) error {
	all, refused := make([]Route, len(offered)), make([]string, len(offered))
	err := atOnce(ctx, len(offered), func(i int) error {
		r := offered[i]
		run, err := carryOut(t, r, given, w.drawn)
		var isRefusal bool
		if refused[i], isRefusal = refusal(err); isRefusal {
			return nil
		}
		if err != nil {
			return err
		}
		all[i] = Route{ID: r.ID(), Label: w.k.Label(r, run.Settings), Run: run, Cautions: cautions(w.k, r), Warnings: append(runWarnings(w.k, run), ovenWarning(w.k, run)...)}
		if err := all[i].account(w.k, w.site, t.Book); err != nil {
			return fmt.Errorf("%s: %w", r.ID(), err)
		}
		return nil
	})
	if err != nil {
		return err
	}
	for i, r := range offered {
		if refused[i] != "" {
			l.Excluded = append(l.Excluded, routes.Excluded{ID: r.ID(), Reason: refused[i]})
			continue
		}
		l.Routes = append(l.Routes, all[i])
	}
	return nil
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
