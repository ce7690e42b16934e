// Package spread draws uncertain inputs from their distributions, seeded and
// evenly (Latin hypercube), and sums the results up in quantiles, shares and
// rank correlations.
package spread

import (
	"fmt"
	"hash/fnv"
	"math/rand/v2"
)

// MaxDraws bounds a request; memory grows with draws x inputs.
const MaxDraws = 200_000

// Draws holds the values of each input, one for each draw. The same draws serve
// every route, so that routes are compared pair by pair.
type Draws struct {
	Inputs  []Input
	columns [][]float64
}

// Draw fills n draws by Latin hypercube sampling: each input's range of
// probability is cut into n equal parts and each part is hit once, in an order of
// its own (McKay, Beckman & Conover, Technometrics 21 (1979) 239). The same seed
// gives the same draws, and an input's draws depend on its name alone and not on
// what is drawn beside it.
func Draw(inputs []Input, n int, seed uint64) (*Draws, error) {
	if n < 1 || n > MaxDraws {
		return nil, fmt.Errorf("%d draws: 1 to %d are allowed", n, MaxDraws)
	}
	if len(inputs) == 0 {
		return nil, fmt.Errorf("nothing is uncertain: no inputs to draw")
	}
	d := &Draws{Inputs: inputs, columns: make([][]float64, len(inputs))}
	named := map[string]bool{}
	for k, in := range inputs {
		if err := in.check(); err != nil {
			return nil, err
		}
		if named[in.Name] {
			return nil, fmt.Errorf("%s is drawn twice", in.Name)
		}
		named[in.Name] = true
		d.columns[k] = column(in, n, seed)
	}
	return d, nil
}

func column(in Input, n int, seed uint64) []float64 {
	name := fnv.New64a()
	name.Write([]byte(in.Name))
	source := rand.New(rand.NewPCG(seed, name.Sum64()))
	values := make([]float64, n)
	for i, part := range source.Perm(n) {
		within := 1e-9 + (1-2e-9)*source.Float64() // never at an end: there a quantile may be without bound
		values[i] = in.Quantile((float64(part) + within) / float64(n))
	}
	return values
}

// Len is the number of draws.
func (d *Draws) Len() int { return len(d.columns[0]) }

// Row is draw i, one value for each input.
func (d *Draws) Row(i int) []float64 {
	row := make([]float64, len(d.columns))
	for k := range row {
		row[k] = d.columns[k][i]
	}
	return row
}

// Column is all values of input k. It must not be changed.
func (d *Draws) Column(k int) []float64 { return d.columns[k] }
