package study

import (
	"context"
	"errors"
	"fmt"
	"maps"
	"math"
	"slices"
	"sort"
	"sync"

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

	lock sync.Mutex
	done map[string]tuned // by objective and route
}

// tuned is a run and the prices that it was tuned at.
type tuned struct {
	book costs.Book
	run  routes.Run
	err  error
}

// tune gives the best run of a route that is sure enough, or the one that was found
// at prices that differ in agents of other routes only.
func (w *work) tune(t *search.Tuner, r routes.Route) (routes.Run, error) {
	key := string(t.Objective) + " " + r.ID()
	w.lock.Lock()
	before, ok := w.done[key]
	w.lock.Unlock()
	if ok && t.Mix == nil && !w.concerned(r, before.book, t.Book) {
		return before.run, before.err
	}
	run, err := t.Tune(r)
	if err == nil {
		run, err = w.drawn.sure(t, r, run, 0)
	}
	w.lock.Lock()
	defer w.lock.Unlock()
	w.done[key] = tuned{t.Book, run, err}
	return run, err
}

// concerned reports whether prices differ that may belong to a route.
func (w *work) concerned(r routes.Route, one, other costs.Book) bool {
	for item := range other {
		_, agent := w.k.Catalog.Agents[item]
		foreign := agent && !slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Agent == item })
		if !foreign && !one[item].PerUnit.Equal(other[item].PerUnit) {
			return true
		}
	}
	return false
}

func newWork(ctx context.Context, j *job.Job, lot job.Lot, c *catalog.Catalog, book costs.Book, o Options) (*work, error) {
	k, err := routes.NewCase(j, lot, c)
	if err != nil || k.Dry() {
		return &work{k: k}, err
	}
	w := &work{k: k, site: costs.NewArrangement(c, j), done: map[string]tuned{}}
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
	marks, err := l.find(ctx, w, tuner, given)
	if err == nil {
		err = l.dropBeaten(tuner, marks)
	}
	if err == nil {
		err = w.drawn.judge(ctx, l.Routes, k.Lot.FailedBatch)
	}
	if err == nil {
		l.Routes, err = ranked(l.Routes, tuner)
	}
	if err != nil {
		return Lot{}, err
	}
	l.unsure(w.drawn)
	l.surely = surelyOf(&l)
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

// find runs the routes of an earlier run, or searches for all that are not refused
// or beaten.
func (l *Lot) find(ctx context.Context, w *work, t *search.Tuner, given map[string]routes.Settings) (*search.Marks, error) {
	if given == nil {
		return l.search(ctx, w, t)
	}
	usual, excluded := t.Case.Candidates()
	l.Excluded = excluded
	if err := weigh(t, t.Case.Job, usual); err != nil {
		return nil, err
	}
	return nil, l.carryOut(ctx, w, t, t.Case.Chains(usual, slices.Sorted(maps.Keys(given))), given)
}

// carryOut runs the routes, several at a time, and enters what comes of them in the
// order in which they are offered.
func (l *Lot) carryOut(ctx context.Context, w *work, t *search.Tuner, offered []routes.Route, given map[string]routes.Settings) error {
	all, refused := make([]Route, len(offered)), make([]string, len(offered))
	err := atOnce(ctx, len(offered), func(i int) error {
		r := offered[i]
		run, err := w.carryOut(t, r, given)
		var isRefusal bool
		if refused[i], isRefusal = refusal(err); isRefusal {
			return nil
		}
		if err != nil {
			return err
		}
		all[i] = Route{ID: r.ID(), Label: w.k.Label(r, run.Settings), Run: run, Cautions: cautions(w.k, r, run.Settings, run.Outcomes...), Warnings: append(runWarnings(w.k, run), ovenWarning(w.k, run)...)}
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

func belowDetection(k *routes.Case) string {
	if k.Lot.Water >= k.Assay.DetectionLimit {
		return ""
	}
	return fmt.Sprintf(", which lies below the detection limit of %s", quantity.FormatWater(k.Assay.DetectionLimit))
}

// carryOut runs a route with the settings given for it, or tunes it until it is sure
// enough.
func (w *work) carryOut(t *search.Tuner, r routes.Route, given map[string]routes.Settings) (routes.Run, error) {
	s, ok := given[r.ID()]
	if !ok {
		return w.tune(t, r)
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
