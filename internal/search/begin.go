package search

import "parch/internal/routes"

// mostBegun bounds the rounds in which the hand-overs and the last step follow each other.
const mostBegun = 3

// begun tunes the hand-overs of a sure run for what makes it sure, and then its last step
// anew. As it is tuned a run hands over what suits an end at the limit; one that ends below
// needs more of the last step, and it may pay to hand over drier. No sure run is better
// than the run was as tuned: where the two are as good nothing is looked for.
func (l *lifting) begun(best trial, asTuned float64) (trial, error) {
	if len(places(l.route)) == 0 {
		return best, nil
	}
	for range mostBegun {
		if tied(best.score, asTuned) {
			break
		}
		other, err := l.handedOverAnew(best)
		if err != nil || other.run.Route == nil {
			return best, err
		}
		l.vain = nil
		found, ok, err := l.lifted(other, best.score)
		if err != nil || !ok || tied(best.score, found.score) {
			return best, err
		}
		best = found
		if found, err = l.ended(other.run); err != nil {
			return best, err
		}
		if found.run.Route != nil && found.score < best.score {
			best = found
		}
	}
	return best, nil
}

// handedOverAnew is a run with the hand-overs that are best where the last step stays as
// it is, sized for the limit; without a route where none is better.
func (l *lifting) handedOverAnew(best trial) (trial, error) {
	t, kept := *l.t, KeptOf(&best.run, l.t.Case.Goal())
	kept.beds = nil
	t.Kept = func(routes.Route) (Kept, bool) { return kept, true }
	g, err := t.prepare(l.route)
	if err != nil {
		return trial{}, err
	}
	g.try(g.nearest(best.run.Settings))
	before := g.best.score
	if !g.found() {
		return trial{}, g.failed
	}
	g.acrossGrid(g.grid())
	g.refine(1.0 / (coarsePoints - 1))
	if tied(before, g.best.score) {
		return trial{}, g.failed
	}
	if !t.Exact {
		g.round()
	}
	if g.failed != nil {
		return trial{}, g.failed
	}
	s := cloned(g.best.run.Settings)
	s.AimMgPerKg = 0
	run, err := l.t.outline(l.route, s)
	if err != nil || !run.Meets {
		return trial{}, nil
	}
	score, err := l.t.score(&run)
	return trial{run: run, score: score}, err
}
