package study

import (
	"context"
	"fmt"
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// chains looks for the chains of a lot, the short ones first. A chain is carried on
// as long as no route found so far beats what it must come to at least.
type chains struct {
	lot    *Lot
	work   *work
	tuner  *search.Tuner
	bounds *search.Bounds
	marks  *search.Marks
	steps  []routes.Stage
	open   []search.Branch
	ran    map[string]bool
}

// search runs all single steps, the carriers and what is asked for in any case, and
// then chains of two, three and four steps.
func (l *Lot) search(ctx context.Context, w *work, t *search.Tuner) (*search.Marks, error) {
	usual, excluded := t.Case.Candidates()
	l.Excluded = excluded
	if err := weigh(t, t.Case.Job, usual); err != nil {
		return nil, err
	}
	usual, dropped := t.Prune(usual)
	l.Excluded = append(l.Excluded, dropped...)
	s := &chains{lot: l, work: w, tuner: t, steps: t.Unbeaten(t.Case.Steps()), marks: search.NewMarks(t), ran: map[string]bool{}}
	s.bounds = t.NewBounds(s.steps)
	single := slices.DeleteFunc(slices.Clone(usual), func(r routes.Route) bool { return len(r) > 1 })
	if err := s.run(ctx, single); err != nil {
		return nil, err
	}
	if err := s.otherSettings(ctx); err != nil {
		return nil, err
	}
	always := slices.DeleteFunc(slices.Clone(usual), func(r routes.Route) bool { return len(r) == 1 || !asked(r) && r.CarrierOf() == "" })
	if err := s.run(ctx, always); err != nil {
		return nil, err
	}
	s.open = []search.Branch{s.bounds.Root()}
	for depth := 1; depth <= routes.MostSteps && len(s.open) > 0; depth++ {
		if err := s.level(ctx); err != nil {
			return nil, err
		}
	}
	if !slices.ContainsFunc(l.Routes, func(r Route) bool { return r.Meets() }) { // how far the usual ones get
		return s.marks, s.run(ctx, usual)
	}
	return s.marks, nil
}

// level carries all open branches on by a step, and runs those that may end there.
func (s *chains) level(ctx context.Context) error {
	found := make([][]search.Branch, len(s.open))
	left := make([][]routes.Excluded, len(s.open))
	err := atOnce(ctx, len(s.open), func(i int) error {
		found[i], left[i] = s.extend(s.open[i])
		s.open[i].Leave()
		return ctx.Err()
	})
	if err != nil {
		return err
	}
	s.open = slices.Concat(found...)
	s.lot.Excluded = append(s.lot.Excluded, slices.Concat(left...)...)
	s.thin()
	var ending []routes.Route
	for _, b := range s.open {
		if b.Ends && s.tuner.Case.MayEnd(b.Route[len(b.Route)-1]) == "" {
			ending = append(ending, b.Route)
		}
	}
	if err := s.run(ctx, ending); err != nil {
		return err
	}
	s.open = slices.DeleteFunc(s.open, func(b search.Branch) bool { return len(b.Route) == routes.MostSteps })
	return nil
}

// mostOpen bounds the work where there is no sure route that could beat the others:
// so many chains of a length are run and carried on, the cheapest by their bounds.
const mostOpen = 60

// thin leaves the chains beyond mostOpen, and says so.
func (s *chains) thin() {
	if len(s.open) <= mostOpen {
		return
	}
	s.bounds.CheapestFirst(s.open)
	for _, b := range s.open[mostOpen:] {
		id, also := b.Route.ID(), " nor any chain that begins with it"
		if s.ran[id] {
			id, also = id+"+…", ""
		}
		s.lot.Excluded = append(s.lot.Excluded, routes.Excluded{ID: id, Reason: fmt.Sprintf("not run%s: there are %d of as many steps whose least cost is lower", also, mostOpen), Beaten: true})
	}
	s.open = s.open[:mostOpen]
}

// extend carries a branch on by each step that makes sense and is not beaten.
func (s *chains) extend(b search.Branch) (all []search.Branch, left []routes.Excluded) {
	tried, beaten := 0, map[string][]routes.Stage{}
	var by []string
	lose := func(next routes.Stage, id string) {
		if beaten[id] == nil {
			by = append(by, id)
		}
		beaten[id] = append(beaten[id], next)
	}
	for _, next := range s.steps {
		if s.tuner.Case.MayFollow(b.Route, next) != "" {
			continue
		}
		tried++
		chain := append(slices.Clone(b.Route), next)
		if len(b.Route) > 0 { // single steps are all run
			if winner := s.marks.Beats(chain, s.bounds.Rough(b, next)); winner != "" {
				lose(next, winner)
				continue
			}
		}
		longer, err := s.bounds.Extend(b, next)
		if err != nil {
			if len(b.Route) > 0 {
				left = append(left, routes.Excluded{ID: chain.ID(), Reason: err.Error(), Beaten: true})
			}
			continue
		}
		if len(b.Route) > 0 {
			if winner := s.marks.Beats(chain, s.bounds.Of(longer)); winner != "" {
				lose(next, winner)
				continue
			}
		}
		all = append(all, longer)
	}
	for _, id := range by {
		left = append(left, s.beaten(b.Route, beaten[id], id, tried))
	}
	return all, left
}

// beaten tells which chains another route beats before they are run.
func (s *chains) beaten(head routes.Route, next []routes.Stage, by string, tried int) routes.Excluded {
	x := routes.Excluded{ID: head.ID() + "+…", Beaten: true}
	named := ""
	if len(next) < tried {
		tails := make(routes.Route, len(next))
		copy(tails, next)
		named = ", with " + commaed(tails) + " next"
	}
	x.Reason = fmt.Sprintf("at best dearer than %s%s, and what it saves in attended hours, energy and waste is worth less than 1 %% of it", by, named)
	return x
}

func commaed(all routes.Route) string {
	text := ""
	for i, s := range all {
		if i > 0 {
			text += ", "
		}
		text += routes.Route{s}.ID()
	}
	return text
}

// run tunes routes and keeps what they come to.
func (s *chains) run(ctx context.Context, all []routes.Route) error {
	all = slices.DeleteFunc(slices.Clone(all), func(r routes.Route) bool { return s.ran[r.ID()] })
	for _, r := range all {
		s.ran[r.ID()] = true
	}
	before := len(s.lot.Routes)
	if err := s.lot.carryOut(ctx, s.work, s.tuner, all, nil); err != nil {
		return err
	}
	for i := range s.lot.Routes[before:] {
		if r := &s.lot.Routes[before+i]; r.Bill.Priced() {
			if err := s.mark(&r.Run); err != nil {
				return err
			}
		}
	}
	return nil
}

// mark keeps what a run comes to if it reaches the limit and is sure enough.
func (s *chains) mark(run *routes.Run) error {
	if !run.Meets {
		return nil
	}
	if s.work.drawn.applies() {
		if sure, err := s.work.drawn.sureEnough(run); err != nil || !sure {
			return err
		}
	}
	m, err := s.tuner.MeasuresOf(run)
	if failed := s.work.k.Lot.FailedBatch; err == nil && failed != nil && s.work.drawn.applies() {
		var miss float64
		miss, err = s.work.drawn.miss(run, failed)
		m.PerLitre += miss
	}
	s.marks.Set(run.Route, m)
	return err
}

// otherSettings marks what the best of the single soaks comes to when it is tuned for
// something else: a chain that one of these beats is no better for being chosen by the
// objective.
func (s *chains) otherSettings(ctx context.Context) error {
	r := s.bestSoak()
	if r == nil {
		return nil
	}
	var others []search.Objective
	for _, by := range search.Objectives {
		if s.tuner.Mix != nil || by != s.tuner.Objective {
			others = append(others, by)
		}
	}
	runs := make([]*routes.Run, len(others))
	err := atOnce(ctx, len(others), func(i int) error {
		other := *s.tuner
		other.Mix, other.Objective = nil, others[i]
		run, err := s.work.tune(&other, r)
		if _, refused := refusal(err); refused {
			return nil
		}
		if err == nil && len(other.Book.Missing(run.Uses)) == 0 {
			runs[i] = &run
		}
		return err
	})
	if err != nil {
		return err
	}
	for _, run := range runs {
		if run != nil {
			if err := s.mark(run); err != nil {
				return err
			}
		}
	}
	return nil
}

// bestSoak is the single soak that is marked with the least cost; nil where none is.
func (s *chains) bestSoak() (best routes.Route) {
	least := math.Inf(1)
	for i := range s.lot.Routes {
		r := &s.lot.Routes[i]
		if cost, ok := s.marks.CostOf(r.ID); ok && cost < least && len(r.Run.Route) == 1 && r.Run.Route[0].Kind == steps.Soak {
			best, least = r.Run.Route, cost
		}
	}
	return best
}
