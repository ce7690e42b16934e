package search

import (
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Assurance is what makes a route sure enough.
type Assurance struct {
	Sure func(run *routes.Run) (bool, error) // whether its chance reaches the assurance
}

// Sizes of the search for an aim.
const (
	driestAim = 1.0 / 30 // of the limit, the lowest aim that is tried
	aimTries  = 7        // bisections of ln(aim)
)

// Assured tightens a tuned run until its chance reaches the assurance. A run is
// tuned so that with everything at its typical value it just ends at the limit, so
// half of the draws may miss it. Its last step is therefore sized for an aim of its
// own under the limit, and a last soak may take another stand and serve fewer lots: of all that
// can be assured the best by the objective, or the shortest of those that are as good, the
// hand-overs before it kept. Where nothing helps the run comes back as it was.
func (t *Tuner) Assured(r routes.Route, run routes.Run, a Assurance) (routes.Run, error) {
	sure, err := a.Sure(&run)
	if err != nil || sure {
		return run, err
	}
	starts := []trial{{run: run}}
	if starts[0].score, err = t.score(&run); err != nil {
		return run, err
	}
	if r[len(r)-1].Kind == steps.Soak {
		if starts, err = t.otherStands(r, run); err != nil {
			return run, err
		}
	}
	best := trial{score: math.Inf(1)}
	for _, start := range starts { // best first: none comes out better than it went in
		if start.score >= best.score {
			break
		}
		found, ok, err := t.lifted(r, start, a, best.score)
		if err != nil {
			return run, err
		}
		if ok && found.score < best.score {
			best = found
		}
	}
	if best, err = t.soonerSure(r, starts, best, a); err != nil || best.run.Route == nil {
		return run, err
	}
	return best.run, nil
}

// otherStands are the runs with all stands of the last soak that reach the limit in
// time, the best first.
func (t *Tuner) otherStands(r routes.Route, run routes.Run) ([]trial, error) {
	g, err := t.prepare(r)
	if err != nil {
		return nil, err
	}
	stands, err := g.standsOnOffer()
	if err != nil {
		return nil, err
	}
	var all []trial
	last := len(run.Settings.SoakHours) - 1
	for _, stand := range stands {
		for _, m := range t.meetings() {
			s := cloned(run.Settings)
			s.SoakHours[last], s.Stirred[last] = stand.hours, stand.stirred
			setLotsOverCharge(&s, last, m.lots)
			setCharges(&s, last, m.charges)
			other, err := t.Run(r, s)
			if err == nil {
				err = t.inTime(&other)
			}
			if err != nil || !other.Meets {
				continue
			}
			score, err := t.score(&other)
			if err != nil {
				return nil, err
			}
			all = append(all, trial{run: other, score: score})
		}
	}
	slices.SortStableFunc(all, func(a, b trial) int {
		switch {
		case a.score < b.score:
			return -1
		case a.score > b.score:
			return 1
		}
		return 0
	})
	return all, nil
}

// lifted finds the highest aim at which a run is sure enough. The lower the aim, the
// worse the score: it is left where an aim that is not sure enough scores above most.
func (t *Tuner) lifted(r routes.Route, start trial, a Assurance, most float64) (trial, bool, error) {
	at := func(aim float64) (found trial, sure bool, err error) {
		s := cloned(start.run.Settings)
		s.AimMgPerKg = aim
		run, err := t.Run(r, s)
		if err == nil {
			err = t.inTime(&run)
		}
		if err != nil || !run.Meets {
			return trial{}, false, nil
		}
		if sure, err = a.Sure(&run); err != nil {
			return trial{}, false, err
		}
		score, err := t.score(&run)
		return trial{run: run, score: score}, sure, err
	}
	if sure, err := a.Sure(&start.run); err != nil || sure {
		return start, err == nil, err
	}
	limit := t.Case.Goal() * 1e6
	low, high := significant(limit*driestAim, 2), limit
	best, sure, err := at(low)
	if err != nil || !sure {
		return trial{}, false, err
	}
	for range aimTries {
		aim := significant(math.Sqrt(low*high), 2)
		if aim <= low || aim >= high {
			break
		}
		found, sure, err := at(aim)
		if err != nil {
			return trial{}, false, err
		}
		switch {
		case sure:
			best, low = found, aim
		case found.score > most:
			return trial{}, false, nil
		default:
			high = aim
		}
	}
	return best, true, nil
}
