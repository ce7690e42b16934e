// Package spread draws uncertain inputs from their distributions, seeded and
// evenly (Latin hypercube), and sums the results up in quantiles, shares and
// rank correlations.
package spread

import (
	"fmt"
	"hash/fnv"
	"math"
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
// its own (McKay, Beckman & Conover, Technometrics 21 (1979) 239); the first half of
// them are the draws of half as many. The same seed
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
	for i, at := range evenly(n, source) {
		within := math.Min(1-atAnEnd, math.Max(atAnEnd, at.within))
		values[i] = in.Quantile((float64(at.part) + within) / float64(n))
	}
	return values
}

// atAnEnd keeps draws off the ends of their part: there a quantile may be without bound.
const atAnEnd = 1e-9

// place is one of n equal parts of the range of probability, and where in it.
type place struct {
	part   int
	within float64
}

// evenly hits each of n parts once. The first half of an even number of draws are the
// draws of half as many, in parts half as wide; the others take the parts left free.
// So doubling the draws adds to those that there are.
func evenly(n int, source *rand.Rand) []place {
	all := make([]place, 0, n)
	if n%2 == 1 {
		for _, part := range source.Perm(n) {
			all = append(all, place{part, source.Float64()})
		}
		return all
	}
	taken := make([]bool, n)
	for _, p := range evenly(n/2, source) {
		p.part, p.within = 2*p.part, 2*p.within
		if p.within >= 1 {
			p.part, p.within = p.part+1, p.within-1
		}
		all, taken[p.part] = append(all, p), true
	}
	for part := range n {
		if !taken[part] {
			all = append(all, place{part, source.Float64()})
		}
	}
	added := all[n/2:]
	source.Shuffle(len(added), func(i, j int) { added[i], added[j] = added[j], added[i] })
	return all
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
