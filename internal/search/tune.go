package search

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/optimize"

	"parch/internal/costs"
	"parch/internal/routes"
	"parch/internal/steps"
)

// ErrTooSlow means that no setting of a route is done by the time needed.
var ErrTooSlow = errors.New("too slow")

// soakHours are the stands that fit a working week (common practice, no source):
// a shift, overnight, one to seven days and what lies between, and up to four
// weeks where nothing shorter reaches the target.
var soakHours = []float64{8, 16, 24, 36, 48, 64, 72, 96, 120, 168, 240, 336, 504, 672}

// stirredHours are the same for a stirred vessel, which is not left over a weekend.
var stirredHours = []float64{2, 4, 8, 16, 24, 48}

// Tuner finds the best settings of the routes of one case.
type Tuner struct {
	Case      *routes.Case
	Book      costs.Book
	Objective Objective
	Mix       *Mix               // of the objectives, where the job weighs several
	Site      *costs.Arrangement // nil: uses are paid for as they come
	Exact     bool               // hand-overs are not rounded
	Receiver  string             // the only receiver that a trap may have; "": any that fits

	// Kept is what is not tuned of a route; false where all is. nil: all of each.
	Kept func(routes.Route) (Kept, bool)

	standsLonger bool         // than what is kept
	Stop         func() error // why no more runs are to be made; nil: never
}

// Run carries out a route as a plan and arranges its uses as the site pays for them.
func (t *Tuner) Run(r routes.Route, s routes.Settings) (routes.Run, error) {
	return t.carryOut(t.Case, r, s)
}

// outline is Run with soaks in outline.
func (t *Tuner) outline(r routes.Route, s routes.Settings) (routes.Run, error) {
	return t.carryOut(t.Case.Outline(), r, s)
}

// whole is a run in outline as Run gives it.
func (t *Tuner) whole(outline routes.Run) (routes.Run, error) {
	run, err := t.Run(outline.Route, outline.Settings)
	run.Shortened = outline.Shortened
	return run, err
}

func (t *Tuner) carryOut(k *routes.Case, r routes.Route, s routes.Settings) (routes.Run, error) {
	if t.Stop != nil {
		if err := t.Stop(); err != nil {
			return routes.Run{}, err
		}
	}
	run, err := k.Run(r, s)
	if err == nil {
		err = routes.Idle(&run)
	}
	if err == nil && t.Site != nil {
		t.Site.Apply(&run, t.Case.Lot.BatchesPerYear)
	}
	return run, err
}

// Value of the objective, or of the mix of objectives, for a run.
func (t *Tuner) Value(run *routes.Run) (float64, error) {
	if t.Mix != nil {
		return t.Mix.Of(run, t.Book, t.Case.Lot.BatchesPerYear)
	}
	return t.Objective.Of(run, t.Book, t.Case.Lot.BatchesPerYear)
}

// trial is a run and how good it is.
type trial struct {
	run   routes.Run
	spot  spot
	score float64
}

// scoreMissed ranks routes that miss the target behind all that reach it, by
// how far they got.
const scoreMissed = 1e9

func (t *Tuner) score(run *routes.Run) (float64, error) {
	value, err := t.Value(run)
	if err != nil || run.Meets {
		return value, err
	}
	off := math.Max(math.Log(run.WaterOut/t.Case.Goal()), math.Log(t.Case.AcceptFrom()/run.WaterOut))
	return scoreMissed * (1 + math.Max(0, off)), nil
}

// tuning is the search for the best settings of one route.
type tuning struct {
	t      *Tuner
	route  routes.Route
	blank  routes.Settings
	axes   []axis
	places []int
	lo, hi []float64 // of ln(hand-over in mg/kg)
	best   trial
	last   error // why a spot could not be had
	failed error // of the program itself
}

// Tune returns the run with the best settings: values of a few are tried out
// along each axis, the water at the hand-overs is refined by the simplex method of
// Nelder & Mead between bounds (gonum).
func (t *Tuner) Tune(r routes.Route) (routes.Run, error) {
	return t.TuneFrom(r, nil)
}

// TuneFrom is Tune that starts from the settings found for a lot much like this
// one, and looks around them only. Where they lead nowhere it looks everywhere.
func (t *Tuner) TuneFrom(r routes.Route, warm *routes.Settings) (routes.Run, error) {
	g, err := t.prepare(r)
	if err != nil {
		return routes.Run{}, err
	}
	warm = g.worthIt(warm)
	switch {
	case warm != nil && r.CarrierOf() != "": // keeps its dose and its column: each run takes its time
		g.try(g.nearest(*warm))
	case warm != nil:
		g.around(g.nearest(*warm))
	}
	if warm == nil || g.best.score >= scoreMissed {
		g.everywhere()
	}
	switch {
	case g.failed != nil:
		return routes.Run{}, g.failed
	case math.IsInf(g.best.score, 1):
		return routes.Run{}, g.last
	}
	if !t.Exact {
		lowest := g.best.score
		g.round()
		g.shorter(lowest)
	}
	if g.failed != nil {
		return routes.Run{}, g.failed
	}
	return t.whole(g.best.run)
}

// worthIt drops a start where everything is tried out anyway.
func (g *tuning) worthIt(warm *routes.Settings) *routes.Settings {
	if g.t.Kept == nil && g.route.CarrierOf() == "" && len(g.places) == 0 && g.combinations() <= mostProduct && !g.hasLate() {
		return nil
	}
	return warm
}

func (t *Tuner) prepare(r routes.Route) (*tuning, error) {
	g := &tuning{t: t, route: r, blank: t.blank(r), places: places(r), best: trial{score: math.Inf(1)}}
	for _, place := range g.places {
		lo, hi, err := t.handOverRange(r, place)
		if err != nil {
			return nil, err
		}
		if k, ok := t.kept(r); ok && k.beds[place] > 0 {
			if !(k.beds[place] >= lo && k.beds[place] <= hi) {
				return nil, fmt.Errorf("%w: a %s does not hand over the %.3g mg/kg kept", routes.ErrRefused, r[place].Kind, k.beds[place])
			}
			lo, hi = k.beds[place], k.beds[place]
		}
		g.lo, g.hi = append(g.lo, math.Log(lo)), append(g.hi, math.Log(hi))
	}
	stands, err := g.standsOnOffer()
	if err != nil {
		return nil, err
	}
	g.axes = t.axes(r, stands)
	return g, nil
}

// worthASieve is how far above the goal a step hands over at least.
const worthASieve = 1.25

// handOverRange (mg/kg) is from what the step can do at best to what it is given.
func (t *Tuner) handOverRange(r routes.Route, place int) (lo, hi float64, err error) {
	lo, hi = worthASieve*t.Case.Goal()*1e6, t.Case.Feed.Water()*1e6 // a step after one that is at the goal already adds nothing
	if kind := r[place].Kind; kind == steps.Trap || kind == steps.Forerun {
		run, err := t.driest(r[:place+1])
		if err != nil {
			return 0, 0, err
		}
		o := run.Outcomes[place]
		lo, hi = math.Max(lo, o.Out.Water()*1e6), o.In.Water()*1e6
	}
	if next := r[place+1].Kind; next == steps.Soak || next == steps.Column {
		hi = math.Min(hi, t.Case.MostForBeads()*1e6)
	}
	if lo >= hi {
		return 0, 0, fmt.Errorf("%w: the lot is nearly at the goal: a %s leaves nothing for what follows", routes.ErrRefused, r[place].Kind)
	}
	return lo, hi, nil
}

// driest runs a route whose last step is a trap or a forerun as far as it goes,
// with the tallest column that does not waste the lot. Beds before it hand over at
// the middle of what they can.
func (t *Tuner) driest(head routes.Route) (run routes.Run, err error) {
	stages := t.Case.ColumnStages()
	for i := len(stages) - 1; i >= 0; i-- {
		s := t.blank(head)
		for k := range s.Stages {
			s.Stages[k] = stages[i]
		}
		if run, err = t.Case.Run(head, s); err == nil || !has(head, steps.Forerun) {
			return run, err
		}
	}
	return run, err
}

// try runs a spot and keeps it if it is the best so far.
func (g *tuning) try(s spot) float64 {
	run, err := g.t.outline(g.route, g.settingsAt(s))
	if err == nil {
		err = g.t.inTime(&run)
	}
	if err != nil {
		g.remember(err)
		return math.Inf(1)
	}
	score, err := g.t.score(&run)
	if err != nil {
		g.failed = err
		return math.Inf(1)
	}
	if score < g.best.score {
		g.best = trial{run, g.handedOver(s, &run), score}
	}
	return score
}

// handedOver is a spot with the water that is really handed over: what fills the
// receiver of a trap can take more than is asked for, and all hand-overs above that
// are the same.
func (g *tuning) handedOver(s spot, run *routes.Run) spot {
	s = s.clone()
	for i, place := range g.places {
		s.u[i] = math.Min(s.u[i], math.Max(g.lo[i], math.Log(run.Outcomes[place].Out.Water()*1e6)))
	}
	return s
}

func (g *tuning) remember(err error) {
	if errors.Is(err, ErrTooSlow) || errors.Is(err, routes.ErrRefused) {
		g.last = err
		return
	}
	g.failed = err
}

func (t *Tuner) inTime(run *routes.Run) error {
	if limit := t.Case.Lot.NeededWithinS / 3600; limit > 0 && run.HoursTotal > limit*(1+1e-9) {
		return fmt.Errorf("%w: takes %.3g h, needed within %.3g h", ErrTooSlow, run.HoursTotal, limit)
	}
	if full := t.Case.Overbooked(run); full != "" {
		return fmt.Errorf("%w: %s", ErrTooSlow, full)
	}
	return nil
}

// standsOnOffer are the usual stands, still and stirred, and the longest that is
// done in time.
func (g *tuning) standsOnOffer() ([]stand, error) {
	longest := math.Inf(1)
	if limit := g.t.Case.Lot.NeededWithinS / 3600; limit > 0 && has(g.route, steps.Soak) {
		others, err := g.otherHours()
		if err != nil {
			return nil, err
		}
		if longest = math.Floor(2*(limit-others)) / 2; longest <= 0 {
			return nil, fmt.Errorf("%w: the other steps take %.3g h, needed within %.3g h", ErrTooSlow, others, limit)
		}
	}
	var stands []stand
	for _, kind := range []struct {
		stirred bool
		hours   []float64
	}{{false, soakHours}, {true, stirredHours}} {
		for _, h := range kind.hours {
			if h < longest {
				stands = append(stands, stand{h, kind.stirred})
			}
		}
		if longest <= kind.hours[len(kind.hours)-1] {
			stands = append(stands, stand{longest, kind.stirred})
		}
	}
	return stands, nil
}

// otherHours are the hours of a route beside those of one soak, at the wettest
// hand-overs and the shortest other soaks.
func (g *tuning) otherHours() (float64, error) {
	const probe = 1.0
	s := cloned(g.blank)
	for i := range s.SoakHours {
		s.SoakHours[i] = probe
	}
	for i := range s.Sieve {
		s.Sieve[i] = routes.Discard
	}
	stages := g.t.Case.ColumnStages()
	for i := range s.Stages {
		s.Stages[i] = stages[len(stages)-1]
	}
	for i, place := range g.places {
		s.HandOverMgPerKg[place] = math.Exp(g.hi[i]) * (1 - 1e-3*float64(i+1))
	}
	run, err := g.t.Case.Run(g.route, s)
	return run.HoursTotal - probe, err
}

func has(r routes.Route, kind steps.Kind) bool {
	return slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Kind == kind })
}

// refined minimises f between bounds from a start; u = lo + (hi - lo)/(1 + exp(-z))
// keeps the free variables z inside.
func refined(f func(u []float64) float64, lo, hi []float64, most int) {
	u := make([]float64, len(lo))
	inside := func(z []float64) float64 {
		for i := range z {
			u[i] = lo[i] + (hi[i]-lo[i])/(1+math.Exp(-z[i]))
		}
		return f(u)
	}
	limits := &optimize.Settings{FuncEvaluations: most, Converger: &optimize.FunctionConverge{Relative: 1e-5, Iterations: 5}}
	// The best point seen is kept by f itself; running into the limit is no failure.
	_, _ = optimize.Minimize(optimize.Problem{Func: inside}, make([]float64, len(lo)), limits, &optimize.NelderMead{SimplexSize: 1})
}
