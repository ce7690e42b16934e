package search

import (
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Assurance is what makes a route sure enough.
type Assurance struct {
	Sure func(run *routes.Run) (bool, error)    // whether its chance reaches the assurance
	Miss func(run *routes.Run) (float64, error) // what missing the target is expected to cost, in the objective; nil: nothing
	Most float64                                // what comes out no better than this is of no use; 0: all is
}

// aimTries are the bisections of ln(aim) between the driest that a step can do and the
// limit.
const aimTries = 8

// Assured tightens a tuned run until its chance reaches the assurance. A run is
// tuned so that with everything at its typical value it just ends at the limit, so
// half of the draws may miss it. Its last step is therefore sized for an aim of its
// own under the limit, and a last soak may take another stand and serve fewer lots: of all that
// can be assured the best by the objective, or the shortest of those that are as good. The
// hand-overs before it follow. Where a missed target costs, it is sized for as much more as
// pays. Where nothing helps the run comes back as it was.
func (t *Tuner) Assured(r routes.Route, run routes.Run, a Assurance) (routes.Run, error) {
	sure, err := a.Sure(&run)
	if err != nil || sure && a.Miss == nil {
		return run, err
	}
	asTuned, err := t.score(&run)
	if err != nil {
		return run, err
	}
	l := lifting{t: t, route: r, Assurance: a}
	best, err := l.ended(run)
	if err == nil && best.run.Route != nil {
		best, err = l.begun(best, asTuned)
	}
	if err != nil || best.run.Route == nil {
		return run, err
	}
	return t.whole(best.run)
}

// ended is the best sure run with the hand-overs of a run; without a route where none is.
func (l *lifting) ended(run routes.Run) (trial, error) {
	l.vain = nil
	if l.route[len(l.route)-1].Kind == steps.Soak {
		return l.soaked(run)
	}
	score, err := l.t.score(&run)
	if err != nil {
		return trial{}, err
	}
	return l.best([]trial{{run: run, score: score}}, l.none())
}

// none is as good as a run has to become.
func (l *lifting) none() trial {
	if l.Most > 0 {
		return trial{score: l.Most}
	}
	return trial{score: math.Inf(1)}
}

// soaked is the best sure run over the stands of the last soak, each with every number of
// lots over its charge and with several charges; or the shortest that is as good.
func (l *lifting) soaked(run routes.Run) (trial, error) {
	best := l.none()
	g, err := l.t.prepare(l.route)
	if err != nil {
		return best, err
	}
	stands, err := g.standsOnOffer()
	if err != nil {
		return best, err
	}
	if vain, err := l.hopeless(run, stands); err != nil || vain {
		return best, err
	}
	starts, err := l.starts(run, stands, l.t.meetings())
	if err != nil {
		return best, err
	}
	if best, err = l.best(starts, best); err != nil || best.run.Route == nil {
		return best, err
	}
	return l.sooner(starts, best)
}

// best lifts the starts, the best first, as none comes out better than it went in. The
// trial has no route where none becomes sure.
func (l *lifting) best(starts []trial, best trial) (trial, error) {
	for _, start := range starts {
		if start.score >= best.score {
			break
		}
		found, ok, err := l.lifted(start, best.score)
		if err != nil {
			return best, err
		}
		if ok && found.score < best.score {
			best = found
		}
	}
	return best, nil
}

// starts are the runs with stands and meetings of the last soak that reach the limit in
// time, the best first.
func (l *lifting) starts(run routes.Run, stands []stand, meetings []meeting) ([]trial, error) {
	var all []trial
	last := len(run.Settings.SoakHours) - 1
	for _, stand := range stands {
		for _, m := range meetings {
			s := cloned(run.Settings)
			s.SoakHours[last], s.Stirred[last] = stand.hours, stand.stirred
			setLotsOverCharge(&s, last, m.lots)
			setCharges(&s, last, m.charges)
			other, err := l.t.outline(l.route, s)
			if err == nil {
				err = l.t.inTime(&other)
			}
			if err != nil || !other.Meets {
				continue
			}
			score, err := l.t.score(&other)
			if err != nil {
				return nil, err
			}
			all = append(all, trial{run: other, score: score})
		}
	}
	slices.SortStableFunc(all, func(a, b trial) int { return compareFloats(a.score, b.score) })
	return all, nil
}

// lifting makes the runs of a route sure.
type lifting struct {
	Assurance
	t     *Tuner
	route routes.Route
	vain  []*routes.Run // not sure
}

// lifted finds the highest aim at which a run is sure enough and scores no more than
// most. The lower the aim, the surer and the worse: what is not sure at the lowest aim
// that is good enough is left. Where a miss costs, a lower one may pay.
func (l *lifting) lifted(start trial, most float64) (trial, bool, error) {
	found, ok, err := l.sure(start, most)
	if err != nil || !ok || l.Miss == nil {
		return found, ok, err
	}
	found, err = l.insured(start, found)
	return found, true, err
}

func (l *lifting) sure(start trial, most float64) (trial, bool, error) {
	if asIs, err := l.Sure(&start.run); err != nil || asIs {
		return start, asIs, err
	}
	best, err := l.worth(start, most)
	if err != nil || best.run.Route == nil || l.inVain(&best.run) {
		return trial{}, false, err
	}
	if sure, err := l.Sure(&best.run); err != nil || !sure {
		l.vain = append(l.vain, &best.run)
		return trial{}, false, err
	}
	low, high := math.Max(best.run.Settings.AimMgPerKg, best.run.WaterOut*1e6), l.t.Case.Goal()*1e6
	for range aimTries {
		aim := significant(math.Sqrt(low*high), 2)
		if aim <= low || aim >= high {
			break
		}
		found, err := l.aimed(start, aim)
		if err != nil {
			return trial{}, false, err
		}
		sure := false
		if found.run.Route != nil {
			if sure, err = l.Sure(&found.run); err != nil {
				return trial{}, false, err
			}
		}
		if sure {
			best, low = found, aim
		} else {
			high = aim
		}
	}
	return best, true, nil
}

// worth is the run with the lowest aim that scores no more than most, to a few per cent
// of the aim; without a route where none does. The score is nearly straight over ln(aim):
// the next aim is where a line through both ends comes to most, or near an end where that
// hardly narrows them.
func (l *lifting) worth(start trial, most float64) (trial, error) {
	best, err := l.aimed(start, routes.LeastAimMgPerKg)
	if err != nil || best.run.Route == nil || best.score <= most {
		return best, err
	}
	low, high := best.run.WaterOut*1e6, l.t.Case.Goal()*1e6
	lowScore, highScore := best.score, start.score
	best = trial{}
	for range aimTries {
		share := math.Min(0.8, math.Max(0.2, (lowScore-most)/(lowScore-highScore)))
		aim := significant(low*math.Pow(high/low, share), 2)
		if aim <= low || aim >= high || high < low*aimsAlike {
			break
		}
		found, err := l.aimed(start, aim)
		if err != nil {
			return trial{}, err
		}
		switch {
		case found.run.Route == nil:
			low = aim
		case found.score <= most:
			best, high, highScore = found, aim, found.score
		default:
			low, lowScore = aim, found.score
		}
	}
	return best, nil
}

// aimsAlike is the ratio of two aims that are about the same.
const aimsAlike = 1.03

// aimed is a run with its last step sized for an aim (mg/kg); without a route where
// it cannot be had or misses the limit.
func (l *lifting) aimed(start trial, aim float64) (trial, error) {
	s := cloned(start.run.Settings)
	s.AimMgPerKg = aim
	run, err := l.t.outline(l.route, s)
	if err == nil {
		err = l.t.inTime(&run)
	}
	if err != nil || !run.Meets {
		return trial{}, nil
	}
	score, err := l.t.score(&run)
	return trial{run: run, score: score}, err
}

// inVain reports whether a run that was not sure had no less sieve, for as long and
// for no more lots: then this one leaves no less water in any draw. Where a lot may be
// too dry that tells nothing.
func (l *lifting) inVain(run *routes.Run) bool {
	last := len(run.Settings.SoakHours) - 1
	if last < 0 || l.t.Case.AcceptFrom() > 0 {
		return false
	}
	at := len(run.Outcomes) - 1
	return slices.ContainsFunc(l.vain, func(v *routes.Run) bool {
		s, o := run.Settings, v.Settings
		return o.Stirred[last] == s.Stirred[last] && o.SoakHours[last] >= s.SoakHours[last] &&
			countAt(o.LotsOverCharge, last) <= countAt(s.LotsOverCharge, last) && countAt(o.Charges, last) == countAt(s.Charges, last) &&
			v.Outcomes[at].AgentKg >= run.Outcomes[at].AgentKg
	})
}
