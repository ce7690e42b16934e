package spread

import "gonum.org/v1/gonum/stat"

// Ranks are the ranks of values, kept to be correlated many times.
type Ranks []float64

// RanksOf returns them, ties sharing their mean.
func RanksOf(values []float64) Ranks { return ranks(values) }

// Correlation is Spearman's, -1 to 1; zero where one of the two does not vary.
func (r Ranks) Correlation(other Ranks) float64 {
	c := stat.Correlation(r, other, nil)
	if c != c {
		return 0
	}
	return c
}
