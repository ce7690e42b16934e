package study

import (
	"maps"
	"math"

	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

// leastStart is how far above the target the range of start waters begins.
const leastStart = 1.5

// mostStart is the wettest start asked for where the solvent takes up any water, or
// muchWetter times the lot's own where that is more.
const mostStart, muchWetter = 0.05, 3

// mostAnchors bounds the start waters for which routes are made sure anew.
const mostAnchors = 10

// What was made sure for a start water holds within a share atAnchor of it; where a route
// ceases to be sure, or one kind of route is ahead throughout, within nearAnchor. Where the
// other kind is farApart behind, as a share of the mean of both, it need not be made sure.
const atAnchor, nearAnchor, farApart = 0.02, 0.1, 0.5

// startWater asks for the start water at which pre-drying pays. What makes a route sure
// goes with the start water: a sieve that serves twelve lots serves fewer wetter ones. So
// the routes are made sure anew where the answer comes to lie, until it lies there.
func (q *question) startWater() (*BreakEven, error) {
	b := q.startWaters()
	if b.From >= b.To {
		return nil, nil
	}
	return b.settled(q.asIs())
}

// startWaters is the question and its range.
func (q *question) startWaters() BreakEven {
	b := BreakEven{Key: StartWater, Unit: "mg/kg", Now: q.lot.Job.Water * 1e6, What: "start water at which pre-drying pays"}
	b.From, b.To = leastStart*q.lot.Job.Target*1e6, math.Min(math.Min(math.Max(mostStart, muchWetter*q.lot.Job.Water), 0.5), q.k.Saturation())*1e6
	return b
}

// settled asks again and again, with routes made sure where the last answer lay: roughly
// as long as it lies far from where they were.
func (b BreakEven) settled(s *starts) (*BreakEven, error) {
	for {
		sides := &sides{
			one:    func(x float64) search.Field { return s.field(x, isPreDried) },
			other:  func(x float64) search.Field { return s.field(x, isDirect) },
			floors: func(x float64) *floors { return s.nearest(x).floors },
		}
		if s.q.surely != nil && len(s.all) <= mostAnchors {
			c, err := search.CrossRoughly(sides.duel, b.From, b.To, b.Now, points, s.figures()...)
			if err != nil {
				return nil, err
			}
			if !c.Never && !s.known(c.At, nearAnchor) {
				if err := s.add(c.At); err != nil {
					return nil, err
				}
				continue
			}
		}
		found, c, err := b.families(sides, s.figures()...)
		if err != nil || s.q.surely == nil {
			return found, err
		}
		next, settled := s.next(c, b.To)
		if settled {
			return found, nil
		}
		if err := s.add(next); err != nil {
			return nil, err
		}
	}
}

// starts are the start waters for which routes were made sure.
type starts struct {
	q   *question
	all []anchor
}

// asIs has the lot's own start water alone.
func (q *question) asIs() *starts {
	warm := map[string]routes.Settings{}
	maps.Copy(warm, q.warm)
	return &starts{q: q, all: []anchor{{x: q.lot.Job.Water * 1e6, surely: q.surely, floors: &floors{}, warm: warm}}}
}

// anchor is a start water, and how the routes are made sure there.
type anchor struct {
	x      float64 // mg/kg
	surely *surely
	floors *floors
	warm   map[string]routes.Settings
}

func away(x, y float64) float64 { return math.Abs(math.Log(x / y)) }

func (s *starts) nearest(x float64) *anchor {
	at := 0
	for i := range s.all {
		if away(s.all[i].x, x) < away(s.all[at].x, x) {
			at = i
		}
	}
	return &s.all[at]
}

// known reports whether routes were made sure that near a start water.
func (s *starts) known(x, within float64) bool { return away(s.nearest(x).x, x) < within }

func (s *starts) figures() (all []float64) {
	for _, a := range s.all {
		all = append(all, a.x)
	}
	return all
}

// next is the start water for which routes have to be made sure before a crossing can be
// told: where it lies or, where one kind is ahead throughout, where the other is closest,
// and the wettest start. settled where they are, or have been often enough.
func (s *starts) next(c search.Crossing, wettest float64) (x float64, settled bool) {
	switch {
	case len(s.all) > mostAnchors:
		return 0, true
	case c.Never && c.Apart <= farApart && !s.known(c.Closest, nearAnchor):
		return c.Closest, false
	case c.Never && c.Apart > farApart:
		return 0, true
	case c.Never:
		return wettest, s.known(wettest, nearAnchor)
	case c.Step:
		return c.At, s.known(c.At, nearAnchor)
	}
	return c.At, s.known(c.At, atAnchor)
}

// field of the routes that pass and are sure enough at a start water (mg/kg), each with
// what makes it so at the nearest anchor.
func (s *starts) field(x float64, pass func(routes.Route) bool) search.Field {
	a := s.nearest(x)
	t := s.q.tuner(s.q.k.With(s.q.wetted(x)), s.q.book)
	t.Kept = a.surely.kept
	f := search.Field{Tuner: t, Warm: a.warm, Learns: true}
	for _, r := range s.q.all {
		if pass(r) && !a.surely.way(r).out {
			f.Routes = append(f.Routes, r)
		}
	}
	return f
}

// wetted is the lot with another start water, known as well as its own.
func (q *question) wetted(x float64) job.Lot {
	lot := q.k.Lot
	if b := lot.WaterBand; b != nil {
		share := x * 1e-6 / lot.Water
		lot.WaterBand = &job.WaterBand{Low: b.Low * share, High: b.High * share, Uniform: b.Uniform}
	}
	lot.Water, lot.Saturated = x*1e-6, false
	return lot
}
