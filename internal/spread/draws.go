// Package spread draws uncertain inputs from their distributions, seeded and
// evenly (Latin hypercube), and sums the results up in quantiles, shares and
// rank correlations.
package spread

import (
	"fmt"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/stat/distmv"
	"gonum.org/v1/gonum/stat/samplemv"
)

// MaxDraws bounds a request; memory grows with draws x inputs.
const MaxDraws = 200_000

// Draws holds one row of inputs for each draw. The same rows serve every route,
// so that routes are compared pair by pair.
type Draws struct {
	Inputs []Input
	rows   *mat.Dense
}

// Draw fills n rows by Latin hypercube sampling: each input's range of
// probability is cut into n equal parts and each part is hit once (McKay,
// Beckman & Conover, Technometrics 21 (1979) 239). The same seed gives the same
// rows.
func Draw(inputs []Input, n int, seed uint64) (*Draws, error) {
	if n < 1 || n > MaxDraws {
		return nil, fmt.Errorf("%d draws: 1 to %d are allowed", n, MaxDraws)
	}
	if len(inputs) == 0 {
		return nil, fmt.Errorf("nothing is uncertain: no inputs to draw")
	}
	for _, in := range inputs {
		if err := in.check(); err != nil {
			return nil, err
		}
	}
	source := rand.NewPCG(seed, uint64(len(inputs)))
	rows := mat.NewDense(n, len(inputs), nil)
	samplemv.LatinHypercube{Q: distmv.NewUnitUniform(len(inputs), source), Src: source}.Sample(rows)
	for i := range n {
		row := rows.RawRowView(i)
		for k, in := range inputs {
			row[k] = in.Quantile(row[k])
		}
	}
	return &Draws{inputs, rows}, nil
}

// Len is the number of draws.
func (d *Draws) Len() int { n, _ := d.rows.Dims(); return n }

// Row is draw i, one value for each input. It must not be changed.
func (d *Draws) Row(i int) []float64 { return d.rows.RawRowView(i) }

// Column is all values of input k.
func (d *Draws) Column(k int) []float64 { return mat.Col(nil, k, d.rows) }
