package spread

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat"
)

// Band is what nine draws of ten lie in, and the middle one.
type Band struct {
	Low, Median, High                float64 // 5, 50 and 95 %
	LowError, MedianError, HighError float64 // standard errors of the sampling
}

// errorWindow is how many standard errors of a share its quantile is looked at aside.
const errorWindow = 3

// BandOf sums up values. NaN entries (a route that failed in that draw) count as
// above everything. The error of a quantile is a sixth of the way between the values
// that stand three standard errors of its share to either side: so far that it is
// itself known to a tenth or so.
func BandOf(values []float64) Band {
	sorted := slices.Clone(values)
	for i, v := range sorted {
		if math.IsNaN(v) {
			sorted[i] = math.Inf(1)
		}
	}
	slices.Sort(sorted)
	q := func(p float64) float64 { return stat.Quantile(p, stat.LinInterp, sorted, nil) }
	e := func(p float64) float64 {
		aside := errorWindow * QuantileError(p, len(sorted))
		return (q(math.Min(1, p+aside)) - q(math.Max(0, p-aside))) / (2 * errorWindow)
	}
	return Band{q(0.05), q(0.5), q(0.95), e(0.05), e(0.5), e(0.95)}
}

// Share of the values for which ok holds.
func Share(values []float64, ok func(float64) bool) float64 {
	n := 0
	for _, v := range values {
		if ok(v) {
			n++
		}
	}
	return float64(n) / float64(len(values))
}

// QuantileError is the standard error of the share of draws below a quantile p,
// sqrt(p(1-p)/n) (binomial); Latin hypercube draws do no worse in the large.
func QuantileError(p float64, n int) float64 { return math.Sqrt(p * (1 - p) / float64(n)) }

// RankCorrelation is Spearman's: how far y moves with x whatever the shape, -1
// to 1. Zero where one of them does not vary.
func RankCorrelation(x, y []float64) float64 {
	return RanksOf(x).Correlation(RanksOf(y))
}

// ranks with ties sharing their mean.
func ranks(values []float64) []float64 {
	order := make([]int, len(values))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int { return cmp.Compare(values[a], values[b]) })
	out := make([]float64, len(values))
	for i := 0; i < len(order); {
		j := i
		for j < len(order) && values[order[j]] == values[order[i]] {
			j++
		}
		for k := i; k < j; k++ {
			out[order[k]] = float64(i+j-1) / 2
		}
		i = j
	}
	return out
}
