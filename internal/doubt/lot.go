// Package doubt takes the plans for a lot through draws of all that is not known
// exactly: the lot's water, the models, the sieve, rates, hours of work, prices.
// Settings, doses and charges stay as they are planned.
package doubt

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"sync"

	"parch/internal/costs"
	"parch/internal/memo"
	"parch/internal/routes"
	"parch/internal/spread"
	"parch/internal/steps"
	"parch/internal/thermo"
)

// Lot is a lot with the draws that all its routes share.
type Lot struct {
	Case *routes.Case
	Book costs.Book
	Site *costs.Arrangement // nil: uses are paid for as they come
	Stop func() error       // why no more is to be drawn; nil: never
	n    int
	seed uint64

	asides []steps.Aside                          // shifts only
	holds  memo.Map[float64, *steps.Solubilities] // by temperature
	ahead  memo.Map[string, result[wetness]]
	order  memo.Map[string, []int] // of the draws, by sorbent
	nodes  *memo.Map[float64, result[*nodes]]
	boiled *memo.Map[string, result[*surface]]

	lock    sync.Mutex // guards what follows
	inputs  []spread.Input
	columns map[string][]float64 // by name of the input
	err     error
}

type result[T any] struct {
	value T
	err   error
}

// New prepares n draws for a lot. The same seed gives the same draws. Several
// goroutines may take plans through them.
func New(k *routes.Case, book costs.Book, site *costs.Arrangement, n int, seed uint64) (*Lot, error) {
	if n < 1 || n > spread.MaxDraws {
		return nil, fmt.Errorf("%d draws: 1 to %d are allowed", n, spread.MaxDraws)
	}
	l := &Lot{Case: k, Book: book, Site: site, n: n, seed: seed, columns: map[string][]float64{}, nodes: &memo.Map[float64, result[*nodes]]{}, boiled: &memo.Map[string, result[*surface]]{}}
	pair, trend := l.column(l.pair()), l.column(l.trend())
	l.asides = make([]steps.Aside, n)
	for i := range l.asides {
		l.asides[i].Shift = thermo.Shift{Ln25: math.Log(pair[i]), LnTrend: math.Log(trend[i])}
	}
	return l, l.failure()
}

func (l *Lot) stopped() error {
	if l.Stop == nil {
		return nil
	}
	return l.Stop()
}

// failure is the first error of the draws themselves.
func (l *Lot) failure() error {
	l.lock.Lock()
	defer l.lock.Unlock()
	return l.err
}

// Draws is their number.
func (l *Lot) Draws() int { return l.n }

// Inputs are the uncertain inputs that have been drawn so far, by name.
func (l *Lot) Inputs() []spread.Input {
	l.lock.Lock()
	defer l.lock.Unlock()
	return slices.SortedFunc(slices.Values(l.inputs), func(a, b spread.Input) int { return strings.Compare(a.Name, b.Name) })
}

// column is the draws of an input, made when it is first asked for: they depend on
// its name and the seed alone.
func (l *Lot) column(in spread.Input) []float64 {
	l.lock.Lock()
	defer l.lock.Unlock()
	if known, ok := l.columns[in.Name]; ok {
		return known
	}
	d, err := spread.Draw([]spread.Input{in}, l.n, l.seed)
	if err != nil {
		if l.err == nil {
			l.err = err
		}
		return slices.Repeat([]float64{in.Median}, l.n)
	}
	l.inputs = append(l.inputs, in)
	l.columns[in.Name] = d.Column(0)
	return l.columns[in.Name]
}

// solubilities over the shifts of the draws, worked out once.
func (l *Lot) solubilities(tK float64) *steps.Solubilities {
	return l.holds.Of(tK, func() *steps.Solubilities {
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, a := range l.asides {
			shift := a.Shift.At(tK)
			lo, hi = math.Min(lo, shift), math.Max(hi, shift)
		}
		return steps.NewSolubilities(l.Case.Mixture, tK, lo, hi)
	})
}

// Like takes over what another set of draws of the same lot has worked out.
func (l *Lot) Like(other *Lot) { l.nodes, l.boiled = other.nodes, other.boiled }

// Column is the draws of an input by its name. It must not be changed.
func (l *Lot) Column(name string) []float64 {
	l.lock.Lock()
	defer l.lock.Unlock()
	return l.columns[name]
}
