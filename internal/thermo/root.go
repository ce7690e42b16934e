package thermo

import (
	"errors"
	"fmt"
	"math"
)

// ErrNoBracket means that a function has the same sign at both ends of an interval.
var ErrNoBracket = errors.New("no sign change in the interval")

const brentIterations = 200

// Brent finds a root of f between lo and hi, where f has opposite signs, to
// within tolerance in the argument. Brent, Algorithms for Minimization Without
// Derivatives (1973), chapter 4.
func Brent(f func(float64) float64, lo, hi, tolerance float64) (float64, error) {
	a, b := lo, hi
	fa, fb := f(a), f(b)
	if fa == 0 {
		return a, nil
	}
	if fb == 0 {
		return b, nil
	}
	if math.IsNaN(fa) || math.IsNaN(fb) || (fa > 0) == (fb > 0) {
		return math.NaN(), fmt.Errorf("%w %.6g to %.6g", ErrNoBracket, lo, hi)
	}
	c, fc := a, fa
	step := b - a
	previous := step
	for range brentIterations {
		if (fb > 0) == (fc > 0) {
			c, fc = a, fa
			step = b - a
			previous = step
		}
		if math.Abs(fc) < math.Abs(fb) {
			a, b, c = b, c, b
			fa, fb, fc = fb, fc, fb
		}
		accuracy := 2*epsilon*math.Abs(b) + tolerance/2
		half := (c - b) / 2
		if math.Abs(half) <= accuracy || fb == 0 {
			return b, nil
		}
		if math.Abs(previous) >= accuracy && math.Abs(fa) > math.Abs(fb) {
			step, previous = interpolate(a, b, c, fa, fb, fc, half, previous, step, accuracy)
		} else {
			step, previous = half, half
		}
		a, fa = b, fb
		if math.Abs(step) > accuracy {
			b += step
		} else {
			b += math.Copysign(accuracy, half)
		}
		fb = f(b)
	}
	return b, fmt.Errorf("no root after %d iterations between %.6g and %.6g", brentIterations, lo, hi)
}

const epsilon = 2.220446049250313e-16

// interpolate proposes a secant or inverse quadratic step, or a bisection where
// that would leave the bracket or shrink too slowly.
func interpolate(a, b, c, fa, fb, fc, half, previous, step, accuracy float64) (next, before float64) {
	var p, q float64
	s := fb / fa
	if a == c {
		p, q = 2*half*s, 1-s
	} else {
		u, v := fa/fc, fb/fc
		p = s * (2*half*u*(u-v) - (b-a)*(v-1))
		q = (u - 1) * (v - 1) * (s - 1)
	}
	if p > 0 {
		q = -q
	}
	p = math.Abs(p)
	if 2*p < math.Min(3*half*q-math.Abs(accuracy*q), math.Abs(previous*q)) {
		return p / q, step
	}
	return half, half
}
