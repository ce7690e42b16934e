package study

import (
	"github.com/shopspring/decimal"

	"parch/internal/spread"
)

// Range is what the draws of the uncertain inputs make of a route whose settings
// and doses stay as planned.
type Range struct {
	Water         spread.Band  // kg/kg in the product
	CostPerLitre  *spread.Band // money per litre delivered; nil where part of it has no price
	Hours         spread.Band  // start to finish
	Chance        *float64     // share of draws at or below the acceptance limit; nil where it cannot be shown
	CheapestShare float64      // share of draws in which it costs least among the routes that reach the limit
	Movers        []Mover      // what moves water, cost and hours most, the strongest first
}

// The results that an input may move.
const (
	MovesWater = "water"
	MovesCost  = "cost"
	MovesHours = "hours"
)

// Mover is an uncertain input and how far a result goes with it.
type Mover struct {
	Of          string  // MovesWater, MovesCost or MovesHours
	Input       string  // in words
	Why         string  // what its spread rests on
	Correlation float64 // of the ranks (Spearman), -1 to 1
}

// Miss is what missing the target is expected to cost: (1 - chance) times what a
// failed batch costs by the job. It is no part of the bill.
type Miss struct {
	PerBatch, PerLitre decimal.Decimal
}

// Best is the route to take: the first that is recommended; where none is, or no
// draws were made, the first that reaches the limit; nil where none does.
func (l *Lot) Best() *Route {
	for i := range l.Routes {
		if l.Routes[i].Recommended {
			return &l.Routes[i]
		}
	}
	if len(l.Routes) > 0 && l.Routes[0].Rank > 0 {
		return &l.Routes[0]
	}
	return nil
}

// Unsure are the routes that stand before the best one and are not recommended.
func (l *Lot) Unsure() []*Route {
	best := l.Best()
	var out []*Route
	for i := range l.Routes {
		r := &l.Routes[i]
		if best == nil || r == best || r.Rank == 0 {
			break
		}
		out = append(out, r)
	}
	return out
}
