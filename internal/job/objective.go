package job

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

// Weighted is the objective of a job that weighs several against each other.
const Weighted = "weights"

// Hazards are what a site may exclude: whatever boils the solvent, whatever gives
// off hydrogen, whatever leaves reactive waste, and beads that held solvent in an
// oven.
var Hazards = []string{Boiling, Hydrogen, ReactiveWaste, UsedSieveInOven}

// The hazards by name.
const (
	Boiling         = "boiling"
	Hydrogen        = "hydrogen"
	ReactiveWaste   = "reactive waste"
	UsedSieveInOven = "used sieve in an oven"
)

// objective reads one objective, or the weights of several. Weights are brought to
// a sum of one.
func (r *reader) objective(n *document.Node) string {
	if !n.IsMap() {
		return n.OneOf(Objectives...)
	}
	f := n.Map("cost", "time", "waste", "energy")
	sum := 0.0
	weights := map[string]float64{}
	for _, name := range Objectives {
		w := f.Get(name)
		if w == nil {
			continue
		}
		weights[name] = w.Number()
		if weights[name] < 0 {
			w.Fail("%s is negative; a weight is zero or more", quantity.Quote(w.Text()))
			return ""
		}
		sum += weights[name]
	}
	if sum == 0 {
		n.Fail("all weights are zero: nothing would be made small; give at least one above zero, such as {cost: 0.7, time: 0.3}")
		return ""
	}
	for name := range weights {
		weights[name] /= sum
	}
	r.job.Weights = weights
	return Weighted
}
