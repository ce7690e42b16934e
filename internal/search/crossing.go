package search

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"parch/internal/thermo"
)

// Duel gives the costs of two sides at a figure of the job, each +Inf where that
// side has nothing to offer.
type Duel func(x float64) (one, other float64, err error)

// Crossing is where the cheaper of two sides changes.
type Crossing struct {
	At       float64
	OneBelow bool // the first side is the cheaper one under At
	Step     bool // one of the costs jumps there: the two do not meet
	Never    bool
	OneAhead bool    // where Never: the first side is the cheaper one all along
	Closest  float64 // where Never: the figure asked for at which the two are closest
	Apart    float64 // where Never: by how much there, as a share of their mean
}

// CloseEnough is the share by which two costs may differ at a break-even.
const CloseEnough = 1e-4

// Tolerances of ln(x) at a root: as it is told, and where it is asked for again.
const lnTolerance, lnRoughly = 1e-8, 5e-3

// Cross finds where the order of two sides changes between lo and hi: at points
// spaced evenly in the logarithm, and at others between them, the sign of the difference is
// looked for; the change next to now is solved for by Brent's method.
func Cross(d Duel, lo, hi, now float64, points int, others ...float64) (Crossing, error) {
	return cross(d, lnTolerance, lo, hi, now, points, others...)
}

// CrossRoughly is Cross to half a per cent of the figure. Whether the costs meet there is
// not told.
func CrossRoughly(d Duel, lo, hi, now float64, points int, others ...float64) (Crossing, error) {
	c, err := cross(d, lnRoughly, lo, hi, now, points, others...)
	c.Step = false
	return c, err
}

func cross(d Duel, tolerance, lo, hi, now float64, points int, others ...float64) (Crossing, error) {
	var failed error
	gap := func(lnX float64) float64 {
		one, other, err := d(math.Exp(lnX))
		if err != nil {
			failed = err
		}
		return difference(one, other)
	}
	xs := make([]float64, points)
	for i := range xs {
		xs[i] = math.Log(lo) + math.Log(hi/lo)*float64(i)/float64(points-1)
	}
	for _, x := range others {
		if x > lo && x < hi {
			xs = append(xs, math.Log(x))
		}
	}
	slices.Sort(xs)
	xs = slices.Compact(xs)
	gaps := make([]float64, len(xs))
	for i, x := range xs {
		gaps[i] = gap(x)
	}
	if failed != nil {
		return Crossing{}, failed
	}
	at := -1
	for i := range len(xs) - 1 {
		if gaps[i]*gaps[i+1] < 0 && (at < 0 || away(xs, i, now) < away(xs, at, now)) {
			at = i
		}
	}
	if at < 0 {
		return never(xs, gaps)
	}
	root, err := thermo.Brent(gap, xs[at], xs[at+1], tolerance)
	if err = firstOf(failed, err); err != nil {
		return Crossing{}, err
	}
	c := Crossing{At: math.Exp(root), OneBelow: gaps[at] < 0}
	c.Step = math.Abs(gap(root)) > CloseEnough
	return c, failed
}

// difference is relative and finite: a side without an offer has lost by far.
func difference(one, other float64) float64 {
	const far = 10.0
	switch {
	case math.IsInf(one, 1) && math.IsInf(other, 1):
		return math.NaN()
	case math.IsInf(one, 1):
		return far
	case math.IsInf(other, 1):
		return -far
	}
	return 2 * (one - other) / (one + other)
}

// away is how far an interval lies from the present figure.
func away(xs []float64, i int, now float64) float64 {
	lnNow := math.Log(now)
	return math.Max(0, math.Max(xs[i]-lnNow, lnNow-xs[i+1]))
}

func never(xs, gaps []float64) (Crossing, error) {
	c := Crossing{At: math.NaN(), Never: true}
	least := math.Inf(1)
	for i, g := range gaps {
		if math.Abs(g) < least {
			least, c.OneAhead, c.Closest, c.Apart = math.Abs(g), g < 0, math.Exp(xs[i]), math.Abs(g)
		}
	}
	if math.IsInf(least, 1) {
		return Crossing{}, fmt.Errorf("%w over the whole range", errNoOffer)
	}
	return c, nil
}

var errNoOffer = errors.New("neither side has a route that reaches the limit")

// NoOffer reports whether a crossing was not found because there is nothing to
// compare.
func NoOffer(err error) bool { return errors.Is(err, errNoOffer) }

func firstOf(errs ...error) error {
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}
