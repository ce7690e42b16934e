package spread

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Input is an uncertain quantity.
type Input struct {
	Name   string
	Why    string // what the spread rests on
	Median float64
	dist   interface{ Quantile(p float64) float64 }
}

// Quantile is the value below which the share p of the draws lies.
func (in Input) Quantile(p float64) float64 { return in.dist.Quantile(p) }

func (in Input) check() error {
	lo, hi := in.Quantile(0.05), in.Quantile(0.95)
	if math.IsNaN(lo) || math.IsNaN(hi) || math.IsInf(lo, 0) || math.IsInf(hi, 0) || !(lo < hi) {
		return fmt.Errorf("%s: a distribution from %g to %g has no spread", in.Name, lo, hi)
	}
	return nil
}

const ninetyFive = 1.6448536269514722 // standard normal quantile of 0.95

// Factor is a multiplier around 1 that lies between 1/band and band in nine
// draws of ten: lognormal. A band of 1.2 means 20 % either way.
func Factor(name string, band float64, why string) Input {
	return Input{name, why, 1, distuv.LogNormal{Mu: 0, Sigma: math.Log(band) / ninetyFive}}
}

// Around is a quantity whose typical value and its band are known: the median is
// typical, a twentieth of the draws lies below low and another above high. The
// two sides are lognormal with a spread each, so that the value stays positive.
func Around(name string, low, typical, high float64, why string) Input {
	return Input{name, why, typical, twoSided{typical, math.Log(typical / low), math.Log(high / typical)}}
}

type twoSided struct{ median, down, up float64 }

func (t twoSided) Quantile(p float64) float64 {
	z := distuv.UnitNormal.Quantile(p) / ninetyFive
	if z < 0 {
		return t.median * math.Exp(z*t.down)
	}
	return t.median * math.Exp(z*t.up)
}

// Normal is a reading with its standard deviation.
func Normal(name string, mean, deviation float64, why string) Input {
	return Input{name, why, mean, distuv.Normal{Mu: mean, Sigma: deviation}}
}

// Uniform is anything between low and high alike.
func Uniform(name string, low, high float64, why string) Input {
	return Input{name, why, (low + high) / 2, distuv.Uniform{Min: low, Max: high}}
}
