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
	Site      *costs.Arrangement // nil: uses are paid for as they come
}

// Run carries out a route and arranges its uses as the site pays for them.
func (t *Tuner) Run(r routes.Route, s routes.Settings) (routes.Run, error) {
	run, err := t.Case.Run(r, s)
	if err == nil && t.Site != nil {
		t.Site.Apply(&run, t.Case.Lot.BatchesPerYear)
	}
	return run, err
}

// trial is a run and how good it is.
type trial struct {
	run   routes.Run
	stand stand
	score float64
}

// scoreMissed ranks routes that miss the target behind all that reach it, by
// how far they got.
const scoreMissed = 1e9

func (t *Tuner) score(run *routes.Run) (float64, error) {
	value, err := t.Objective.Of(run, t.Book, t.Case.Lot.BatchesPerYear)
	if err != nil || run.Meets {
		return value, err
	}
	return scoreMissed * (1 + math.Max(0, math.Log(run.WaterOut/t.Case.Goal()))), nil
}

// Tune returns the run with the best settings.
func (t *Tuner) Tune(r routes.Route) (routes.Run, error) {
	place := handOverPlace(r)
	if place < 0 {
		best, err := t.bestSoak(r, nil, func(soak stand, after string) routes.Settings { return settings(r, -1, 0, soak, after) })
		return best.run, err
	}
	lo, hi, err := t.handOverRange(r, place)
	if err != nil {
		return routes.Run{}, err
	}
	best, err := t.bestHandOver(r, place, math.Log(lo), math.Log(hi))
	return best.run, err
}

// handOverPlace is the last stage whose outlet is free to choose: a trap or a
// forerun that is followed by another step. -1 if there is none. A trap before a
// forerun is run as far as it goes: what it takes is not lost with the forerun.
func handOverPlace(r routes.Route) int {
	for i := len(r) - 2; i >= 0; i-- {
		if r[i].Kind == steps.Trap && r[i+1].Kind != steps.Forerun || r[i].Kind == steps.Forerun {
			return i
		}
	}
	return -1
}

// worthASieve is how far above the goal a trap hands over at least.
const worthASieve = 1.25

// handOverRange is from what the trap can do at best to what it is given.
func (t *Tuner) handOverRange(r routes.Route, place int) (lo, hi float64, err error) {
	head := r[:place+1]
	run, err := t.driest(head)
	if err != nil {
		return 0, 0, err
	}
	trap := run.Outcomes[place]
	lo, hi = trap.Out.Water()*1e6, trap.In.Water()*1e6
	if least := worthASieve * t.Case.Goal() * 1e6; lo < least {
		lo = least // a sieve after a trap that is at the goal already adds nothing
	}
	if lo >= hi {
		return 0, 0, fmt.Errorf("%w: the lot is nearly at the goal: a trap leaves nothing for the sieve", routes.ErrRefused)
	}
	return lo, hi, nil
}

// driest runs a route whose last step is a trap or a forerun as far as it goes,
// with the tallest column that does not waste the lot.
func (t *Tuner) driest(head routes.Route) (run routes.Run, err error) {
	stages := t.Case.ColumnStages()
	for i := len(stages) - 1; i >= 0; i-- {
		if run, err = t.Case.Run(head, settings(head, -1, 0, stand{stages: stages[i]}, "")); err == nil || !has(head, steps.Forerun) {
			return run, err
		}
	}
	return run, err
}

// stand is how a soak is carried out.
type stand struct {
	hours   float64
	stirred bool
	stages  int // of the column, where the route draws a forerun
}

func settings(r routes.Route, place int, handOver float64, soak stand, after string) routes.Settings {
	s := routes.Settings{HandOverMgPerKg: make([]float64, len(r)-1)}
	if place >= 0 {
		s.HandOverMgPerKg[place] = handOver
	}
	for _, stage := range r {
		switch stage.Kind {
		case steps.Soak:
			s.SoakHours, s.Stirred = append(s.SoakHours, soak.hours), append(s.Stirred, soak.stirred)
			s.Sieve = append(s.Sieve, after)
		case steps.Column:
			s.Sieve = append(s.Sieve, after)
		case steps.Forerun:
			s.Stages = append(s.Stages, soak.stages)
		}
	}
	return s
}

const coarsePoints = 9

// bestHandOver scans ln(hand-over) coarsely with every stand and refines around
// the best point, with its stand and the neighbours of it, by Nelder & Mead's
// method in one bounded variable.
func (t *Tuner) bestHandOver(r routes.Route, place int, lo, hi float64) (trial, error) {
	best := trial{score: math.Inf(1)}
	var last error
	try := func(u float64, near *stand) float64 {
		found, err := t.bestSoak(r, near, func(soak stand, after string) routes.Settings {
			return settings(r, place, math.Exp(u), soak, after)
		})
		if err != nil {
			last = err
			return math.Inf(1)
		}
		if found.score < best.score {
			best = found
		}
		return found.score
	}
	bestU := lo
	spacing := (hi - lo) / (coarsePoints - 1)
	lowest := math.Inf(1)
	for i := range coarsePoints {
		u := lo + spacing*float64(i)
		if s := try(u, nil); s < lowest {
			lowest, bestU = s, u
		}
	}
	if math.IsInf(lowest, 1) {
		return best, last
	}
	near := best.stand
	refine(func(u float64) float64 { return try(u, &near) }, math.Max(lo, bestU-spacing), math.Min(hi, bestU+spacing))
	return t.rounded(r, place, best, lo, hi)
}

// rounded prefers a hand-over of two digits where it costs next to nothing: it
// is a number that somebody reads off a titrator.
func (t *Tuner) rounded(r routes.Route, place int, best trial, lo, hi float64) (trial, error) {
	const next = 1e-4 // share of the objective
	exact := best.run.Settings.HandOverMgPerKg[place]
	magnitude := math.Pow(10, math.Floor(math.Log10(exact))-1)
	handOver := math.Round(exact/magnitude) * magnitude
	if handOver < math.Exp(lo)*(1-1e-9) || handOver > math.Exp(hi) {
		return best, nil
	}
	found, err := t.bestSoak(r, &best.stand, func(soak stand, after string) routes.Settings {
		return settings(r, place, handOver, soak, after)
	})
	if err != nil || found.score > best.score*(1+next) {
		return best, nil
	}
	return found, nil
}

// refine minimises f between lo and hi; u = lo + (hi - lo)/(1 + exp(-z)) keeps
// the free variable z inside.
func refine(f func(u float64) float64, lo, hi float64) {
	inside := func(z []float64) float64 { return f(lo + (hi-lo)/(1+math.Exp(-z[0]))) }
	limits := &optimize.Settings{FuncEvaluations: 40, Converger: &optimize.FunctionConverge{Relative: 1e-7, Iterations: 12}}
	// The best point seen is kept by f itself; running into the limit is no failure.
	_, _ = optimize.Minimize(optimize.Problem{Func: inside}, []float64{0}, limits, &optimize.NelderMead{SimplexSize: 1})
}

// bestSoak tries the stands, or those near one of them, and what is done with
// the sieve afterwards.
func (t *Tuner) bestSoak(r routes.Route, near *stand, with func(soak stand, after string) routes.Settings) (trial, error) {
	stands := []stand{{}}
	if has(r, steps.Soak) {
		var err error
		if stands, err = t.standsOnOffer(r, with); err != nil {
			return trial{}, err
		}
	}
	if has(r, steps.Forerun) {
		stands = overColumns(stands, t.Case.ColumnStages())
	}
	best := trial{score: math.Inf(1)}
	var last error
	for i, soak := range stands {
		if near != nil && !neighbours(stands, i, *near) {
			continue
		}
		for _, after := range t.afterUse(r) {
			found, err := t.one(r, with(soak, after))
			if errors.Is(err, ErrTooSlow) || errors.Is(err, routes.ErrRefused) {
				last = err
				continue
			}
			if err != nil {
				return trial{}, err
			}
			if found.score < best.score {
				best = found
				best.stand = soak
			}
		}
	}
	if math.IsInf(best.score, 1) {
		return best, last
	}
	return best, nil
}

// overColumns crosses stands with the columns a forerun may be drawn over.
func overColumns(stands []stand, stages []int) []stand {
	var all []stand
	for _, n := range stages {
		for _, s := range stands {
			s.stages = n
			all = append(all, s)
		}
	}
	return all
}

// neighbours reports whether stand i is near or next to it.
func neighbours(stands []stand, i int, near stand) bool {
	for k := max(0, i-1); k <= min(len(stands)-1, i+1); k++ {
		if stands[k] == near {
			return true
		}
	}
	return false
}

// afterUse is what may be done with a sieve. One that is activated in the oven
// before each use is not thrown away after it: using it again costs nothing more.
func (t *Tuner) afterUse(r routes.Route) []string {
	if !has(r, steps.Soak) && !has(r, steps.Column) {
		return []string{""}
	}
	if t.Case.Lot.SieveHistoryK > 0 {
		return []string{routes.Regenerate}
	}
	return []string{routes.Regenerate, routes.Discard}
}

func (t *Tuner) one(r routes.Route, s routes.Settings) (trial, error) {
	run, err := t.Run(r, s)
	if err != nil {
		return trial{}, err
	}
	if limit := t.Case.Lot.NeededWithinS / 3600; limit > 0 && run.HoursTotal > limit*(1+1e-9) {
		return trial{}, fmt.Errorf("%w: takes %.3g h, needed within %.3g h", ErrTooSlow, run.HoursTotal, limit)
	}
	score, err := t.score(&run)
	return trial{run: run, score: score}, err
}

// standsOnOffer are the usual stands, still and stirred, and the longest that is
// done in time.
func (t *Tuner) standsOnOffer(r routes.Route, with func(stand, string) routes.Settings) ([]stand, error) {
	longest := math.Inf(1)
	if limit := t.Case.Lot.NeededWithinS / 3600; limit > 0 {
		const probe = 1.0
		run, err := t.Case.Run(r, with(stand{hours: probe, stages: t.Case.ColumnStages()[len(t.Case.ColumnStages())-1]}, routes.Discard))
		if err != nil {
			return nil, err
		}
		if longest = math.Floor(2*(limit-(run.HoursTotal-probe))) / 2; longest <= 0 {
			return nil, fmt.Errorf("%w: the other steps take %.3g h, needed within %.3g h", ErrTooSlow, run.HoursTotal-probe, limit)
		}
	}
	var stands []stand
	for _, kind := range []struct {
		stirred bool
		hours   []float64
	}{{false, soakHours}, {true, stirredHours}} {
		for _, h := range kind.hours {
			if h < longest {
				stands = append(stands, stand{hours: h, stirred: kind.stirred})
			}
		}
		if longest <= kind.hours[len(kind.hours)-1] {
			stands = append(stands, stand{hours: longest, stirred: kind.stirred})
		}
	}
	return stands, nil
}

func has(r routes.Route, kind steps.Kind) bool {
	return slices.ContainsFunc(r, func(s routes.Stage) bool { return s.Kind == kind })
}
