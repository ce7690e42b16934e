package search

import (
	"math"
	"slices"

	"parch/internal/routes"
)

// Tie is the share of the objective by which a shorter run may be worse than the best
// and is still taken: eight weeks over sieve that save two thousandths are nobody's
// choice, and no cost is known as well as that (assumption).
const Tie = 3e-3

// tied reports whether a score is as good as the lowest, as Tie has it.
func tied(score, lowest float64) bool { return score <= lowest*(1+Tie) }

// ties reports whether the shorter of two runs is to be looked for: where time is what
// is made small, the best is the shortest.
func (t *Tuner) ties() bool { return !t.Exact && (t.Mix != nil || t.Objective != Time) }

// shorter takes for each soak the shortest stand that is as good as the lowest score,
// with as many lots over its charge, charges and use of its sieve as suit that stand.
func (g *tuning) shorter(lowest float64) {
	if !g.t.ties() || g.best.score >= scoreMissed {
		return
	}
	longest := g.best
	for i, a := range g.axes {
		if a.hours == nil {
			continue
		}
		kept := g.best
		for _, v := range byHours(a.hours) {
			if a.hours[v] >= a.hours[kept.spot.at[i]] {
				break
			}
			g.best = trial{score: math.Inf(1)}
			g.suited(kept.spot, i, v)
			if tied(g.best.score, lowest) && g.best.run.HoursTotal < kept.run.HoursTotal {
				kept = g.best
				break
			}
		}
		g.best = kept
	}
	g.best.run.Shortened = shortened(longest, g.best, lowest)
}

// suited tries a value of the stands on axis i, and with it all values of the axes of
// the same soak in turn: they follow its stands.
func (g *tuning) suited(s spot, i, v int) {
	s = s.clone()
	s.at[i] = v
	lowest := g.try(s)
	for k := i + 1; k < len(g.axes) && g.axes[k].soak == g.axes[i].soak; k++ {
		lowest = g.along(s, k, lowest)
	}
}

// byHours are the places of stands, the shortest first.
func byHours(hours []float64) []int {
	places := make([]int, len(hours))
	for i := range places {
		places[i] = i
	}
	slices.SortStableFunc(places, func(a, b int) int { return compareFloats(hours[a], hours[b]) })
	return places
}

// shortened tells which longer run was passed over; nil where none was.
func shortened(longer, taken trial, lowest float64) *routes.Shortened {
	if taken.run.HoursTotal >= longer.run.HoursTotal {
		return nil
	}
	return &routes.Shortened{HoursTotal: longer.run.HoursTotal, Saves: 1 - lowest/taken.score}
}

// sooner is the shortest sure run that is as good as the best.
func (l *lifting) sooner(starts []trial, best trial) (trial, error) {
	if !l.t.ties() {
		return best, nil
	}
	starts = slices.Clone(starts)
	slices.SortStableFunc(starts, func(a, b trial) int { return compareFloats(a.run.HoursTotal, b.run.HoursTotal) })
	for _, start := range starts { // none comes out better than it went in
		if start.run.HoursTotal >= best.run.HoursTotal {
			break
		}
		if !tied(start.score, best.score) {
			continue
		}
		found, ok, err := l.lifted(start, best.score*(1+Tie))
		if err != nil {
			return best, err
		}
		if ok && found.run.HoursTotal < best.run.HoursTotal && tied(found.score, best.score) {
			found.run.Shortened = shortened(best, found, best.score)
			return found, nil
		}
	}
	return best, nil
}
