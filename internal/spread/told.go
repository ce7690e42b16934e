package spread

import "math"

// How figures from draws are told: to the digits that the usual number of draws bears.
// More draws make a figure surer and not longer, so that doubling them leaves its
// digits alone but for a figure that happens to lie between two steps.
const (
	UsualDraws   = 2000
	errorsAStep  = 8    // standard errors that a step spans at least
	errorsAShare = 7    // the same for a share of the draws: a twentieth from 0.9 up
	surest       = 0.99 // the highest chance that is told
)

// Told is the band of values, its quantiles rounded to steps of 1, 2 or 5 times a power
// of ten: two digits at most, and no finer than eight standard errors of the first 2000.
func Told(values []float64) Band {
	b, usual := BandOf(values), BandOf(values[:min(len(values), UsualDraws)])
	b.Low, b.Median, b.High = told(b.Low, usual.LowError), told(b.Median, usual.MedianError), told(b.High, usual.HighError)
	b.Median = math.Max(b.Median, b.Low) // where they are told to steps so coarse that they change places
	b.High = math.Max(b.High, b.Median)
	return b
}

func told(x, err float64) float64 {
	if x == 0 || math.IsNaN(x) || math.IsInf(x, 0) {
		return x
	}
	if math.IsNaN(err) || math.IsInf(err, 0) { // next to draws that fail
		err = 0
	}
	for power := math.Floor(math.Log10(math.Abs(x))) - 1; ; power++ {
		for _, s := range []float64{1, 2, 5} {
			if rounded := toStep(x, s, power); s*math.Pow(10, power) >= errorsAStep*err && rounded != 0 {
				return rounded
			}
		}
		if toStep(x, 1, power+1) == 0 { // the draws do not bear a digit: one is told all the same, never nothing
			return toStep(x, 5, power-1)
		}
	}
}

// toStep rounds x to a step of s times a power of ten.
func toStep(x, s, power float64) float64 {
	unit := math.Pow(10, math.Abs(power)) // exact, so that 0.3 comes out as such
	n := math.Round(x/(s*math.Pow(10, power))) * s
	if power < 0 {
		return n / unit
	}
	return n * unit
}

// shareStep is how finely a share p of the draws is told.
func shareStep(p float64, draws int) float64 {
	err := QuantileError(p, min(draws, UsualDraws))
	for _, step := range []float64{0.01, 0.02, 0.05} {
		if step >= errorsAShare*err {
			return step
		}
	}
	return 0.1
}

// ToldChance is a chance that is reached at least, as far as the draws bear it. One
// that reaches level is not told as less.
func ToldChance(p, level float64, draws int) float64 {
	low := surest
	if p < surest {
		step := shareStep(p, draws)
		low = math.Round(100*step*math.Floor(p/step+1e-9)) / 100
	}
	if p >= level {
		low = math.Max(low, level)
	}
	return low
}

// ToldShare is a share of the draws, rounded as far as they bear it.
func ToldShare(p float64, draws int) float64 {
	step := shareStep(p, draws)
	return math.Round(100*step*math.Round(p/step)) / 100
}

// errorsOfNone is how far from nothing a correlation has to be, in standard errors, so
// that none of some hundred inputs of each route is named by chance.
const errorsOfNone = 4

// ToldCorrelation is a correlation of ranks to a tenth, or zero where so many draws
// show as much by chance: without one the standard error is 1/sqrt(n-1) (Spearman),
// 0.02 at the usual number of draws.
func ToldCorrelation(c float64, draws int) float64 {
	if math.Abs(c)*math.Sqrt(float64(draws-1)) < errorsOfNone {
		return 0
	}
	return math.Round(10*c) / 10
}
