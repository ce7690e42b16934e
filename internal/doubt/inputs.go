package doubt

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"time"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/spread"
)

// Names of the inputs, as they are shown.
const (
	nameStill   = "rate of a still soak"
	nameStirred = "rate of a stirred soak"
	nameColumn  = "diffusion into the beads of a column"
	nameSalt    = "share that a salt leaves"
	nameLoading = "uptake of "
	namePrice   = "price of "
)

func nameReactive(agent string) string { return "water that " + agent + " leaves" }

// factor is an input of the catalog's doubts.
func (l *Lot) factor(key, name string) spread.Input {
	v := l.Case.Catalog.Doubts[key]
	return spread.Factor(name, v.SI, why(v, fmt.Sprintf("a factor of %s either way", v.Text)))
}

func why(v catalog.Value, text string) string {
	text += " (" + string(v.Confidence)
	if v.Note != "" {
		text += ": " + v.Note
	}
	return text + ")"
}

// pair is the activity of water in the solvent: the scatter of its published
// solubility where it is known, else by the quality of the model.
func (l *Lot) pair() spread.Input {
	s := l.Case.Solvent
	name := "activity of water in " + s.Name
	if band := s.Water.SolubilityBand; band > 1.001 {
		return spread.Factor(name, band, fmt.Sprintf("scatter of the published solubility, a factor of %.3g either way", band))
	}
	in := l.factor(catalog.PairDoubt(s.Water.Quality), name)
	in.Why = fmt.Sprintf("model of quality %s, %s", s.Water.Quality, in.Why)
	return in
}

func (l *Lot) trend() spread.Input {
	return l.factor(catalog.DoubtTrend, "how that activity goes with temperature")
}

// water is the dissolved water of the lot as delivered: the band of the job, or
// the uncertainty of the reading.
func (l *Lot) water() spread.Input {
	lot := l.Case.Lot
	name := "water of " + lot.Name + " as delivered"
	switch b := lot.WaterBand; {
	case b != nil && b.Uniform:
		return spread.Uniform(name, b.Low, b.High, "the job: anything between "+quantity.FormatWater(b.Low)+" and "+quantity.FormatWater(b.High)+" alike")
	case b != nil:
		return spread.Around(name, b.Low, lot.Water, b.High, "the job: nine lots in ten between "+quantity.FormatWater(b.Low)+" and "+quantity.FormatWater(b.High))
	}
	m := l.Case.Assay
	s := m.Deviation()
	relative := l.Case.Catalog.Doubts[catalog.DoubtReading]
	band := math.Exp(ninetyFive * math.Hypot(math.Log(relative.SI)/ninetyFive, s/lot.Water))
	return spread.Around(name, lot.Water/band, lot.Water, lot.Water*band, fmt.Sprintf("the reading: %s from the test's repeatability, and %s from sampling", quantity.FormatWater(s), why(relative, "a factor of "+relative.Text)))
}

const ninetyFive = 1.6448536269514722 // standard normal quantile of 0.95

// residual is the water on the sieve.
func (l *Lot) residual() spread.Input {
	const name = "water left on the sieve"
	lot := l.Case.Lot
	for _, h := range l.Case.Catalog.Histories {
		if h.Key == lot.SieveHistory && h.ResidualKgPerKg.Banded() {
			v := h.ResidualKgPerKg
			scale := lot.ResidualLoading / v.SI
			return spread.Around(name, v.Low*scale, lot.ResidualLoading, v.High*scale, h.Text+": "+fmt.Sprintf("%.2g to %.2g g/100 g", 100*v.Low*scale, 100*v.High*scale))
		}
	}
	if b := lot.ResidualBand; b != nil {
		low, high := b.Low*lot.ResidualLoading, b.High*lot.ResidualLoading
		return spread.Around(name, low, lot.ResidualLoading, high, fmt.Sprintf("%s, with assumed handling and standing: %.2g to %.2g g/100 g", lot.SieveTreatment, 100*low, 100*high))
	}
	v := l.Case.Catalog.Doubts[catalog.DoubtResidual]
	return spread.Around(name, lot.ResidualLoading/v.SI, lot.ResidualLoading, lot.ResidualLoading*v.SI, why(v, "its history, a factor of "+v.Text))
}

// residualOn is the water on a sorbent; on one that is no zeolite it is off by a factor
// of its own.
func (l *Lot) residualOn(agent string) []float64 {
	if l.Case.Lot.ResidualLoading == 0 { // stated to be empty
		return constant(0, l.n)
	}
	on := slices.Clone(l.column(l.residual()))
	share := l.Case.Lot.HistoryShare(agent)
	for i := range on {
		on[i] *= share
	}
	if l.Case.Borrows(agent) {
		for i, factor := range l.practice(routes.OxideHistory) {
			on[i] *= factor
		}
	}
	return on
}

// loading is what a sorbent takes up. A band of 1 means that none is stated.
func (l *Lot) loading(agent string) []float64 {
	a := l.Case.Catalog.Agents[agent]
	if a.LoadingBand < 1.001 {
		return constant(1, l.n)
	}
	return l.column(spread.Factor(nameLoading+a.Name, a.LoadingBand, fmt.Sprintf("isotherm, a factor of %.3g either way", a.LoadingBand)))
}

// wettest are the draws in the order of what a sorbent leaves in them, about: first those
// in which it starts with much water and holds little.
func (l *Lot) wettest(agent string) []int {
	return l.order.Of(agent, func() []int {
		const some = 0.01 // kg/kg taken up
		loading, residual := l.loading(agent), l.residualOn(agent)
		order := make([]int, l.n)
		for i := range order {
			order[i] = i
		}
		slices.SortStableFunc(order, func(a, b int) int {
			return cmp.Compare((residual[b]+some)/loading[b], (residual[a]+some)/loading[a])
		})
		return order
	})
}

func constant(value float64, n int) []float64 {
	all := make([]float64, n)
	for i := range all {
		all[i] = value
	}
	return all
}

func (l *Lot) stillRate() []float64 {
	return l.column(l.factor(catalog.DoubtSoak, nameStill))
}
func (l *Lot) stirredRate() []float64 {
	return l.column(l.factor(catalog.DoubtStirred, nameStirred))
}
func (l *Lot) saltLeft() []float64 {
	return l.column(l.factor(catalog.DoubtSalt, nameSalt))
}

// columnRate is the diffusion into beads: down to 1/factor, hardly ever faster.
func (l *Lot) columnRate() []float64 {
	v := l.Case.Catalog.Doubts[catalog.DoubtColumn]
	return l.column(spread.Around(nameColumn, 1/v.SI, 1, columnFaster, why(v, "down to 1/"+v.Text)))
}

const columnFaster = 1.1

// reactiveLeft is what a reactive agent leaves: the band of its measured residual,
// or of its class.
func (l *Lot) reactiveLeft(agent string) []float64 {
	a, key := l.Case.Catalog.Agents[agent], l.Case.Solvent.Key
	name := nameReactive(a.Name)
	for _, r := range a.Residuals {
		switch {
		case r.Solvent != key:
		case r.Water.Banded():
			return l.column(spread.Around(name, r.Water.Low/r.Water.SI, 1, r.Water.High/r.Water.SI, "band of the measured residual"))
		default:
			return l.column(l.factor(catalog.DoubtReactive, name))
		}
	}
	band := a.Reaction.Activity.High / a.Reaction.Activity.SI
	return l.column(spread.Factor(name, band, fmt.Sprintf("nothing measured: agents of its kind, a factor of %.3g either way", band)))
}

// practice is an operating fact, as a column of SI values; without a band it stays
// as it is.
func (l *Lot) practice(key string) []float64 {
	v := l.Case.Catalog.Practice[key]
	if !v.Banded() || !(v.Low < v.SI || v.SI < v.High) {
		return constant(v.SI, l.n)
	}
	const least = 1e-6 // of the value, for a side without a band
	low, high := math.Min(v.Low, v.SI*(1-least)), math.Max(v.High, v.SI*(1+least))
	return l.column(spread.Around(practiceWords[key], low, v.SI, high, practised(v)))
}

// Practised are the operating facts with a band that a draw may change.
var Practised = []string{
	"heat-share", "trap-efficiency", "trap-setup", "trap-attended-share", "trap-shutdown", "vapour-loss-per-day", "soak-attended",
	"oven-attended", "salt-attended", "reactive-attended", "reactive-spent", "forerun-attended", "karl-fischer-time", "buy-attended",
	routes.OxideHistory,
}

func practised(v catalog.Value) string {
	return why(v, fmt.Sprintf("practice: %s, %.3g to %.3g times that", v.Text, v.Low/v.SI, v.High/v.SI))
}

var practiceWords = map[string]string{
	"heat-share": "share of the heat that reaches the liquid", "trap-efficiency": "efficiency of a trap at low water",
	"trap-setup": "time to set up a trap", "trap-attended-share": "share of the boiling that is attended", "trap-shutdown": "time to shut a still down",
	"vapour-loss-per-day": "vapour past the condenser", "soak-attended": "attended time of a soak", "oven-attended": "attended time of an oven run",
	"salt-attended": "attended time of a salt", "reactive-attended": "attended time of a reactive agent", "reactive-spent": "time to hand over spent agent",
	"forerun-attended": "time to set up a forerun", "karl-fischer-time": "time of a Karl Fischer test", "buy-attended": "time of an order",
	routes.OxideHistory: "water on silica gel or alumina over that on a zeolite",
}

// price is the factor on an item's price; nil for a rate of the site, which is known.
func (l *Lot) price(item string) []float64 {
	p, ok := l.Book[item]
	if !ok {
		return nil
	}
	doubts := l.Case.Catalog.Doubts
	name := namePrice + p.Label
	if listed := l.Case.Catalog.Prices[item]; p.Indicative {
		low, errLow := strconv.ParseFloat(listed.Low, 64)
		high, errHigh := strconv.ParseFloat(listed.High, 64)
		typical, err := strconv.ParseFloat(listed.Amount, 64)
		if errLow == nil && errHigh == nil && err == nil && 0 < low && low < typical && typical < high {
			return l.column(spread.Around(name, low/typical, 1, high/typical, fmt.Sprintf("indicative, %s to %s", listed.Low, listed.High)))
		}
		return l.column(l.factor(catalog.DoubtListed, name))
	}
	if p.Date == "" && p.Flag == costs.NoFlag {
		return nil
	}
	band := doubts[catalog.DoubtQuoted].SI * math.Pow(doubts[catalog.DoubtYear].SI, l.yearsSince(p.Date))
	return l.column(spread.Factor(name, band, fmt.Sprintf("quoted %s: a factor of %.3g either way, and more each year", orUndated(p.Date), band)))
}

func orUndated(date string) string {
	if date == "" {
		return "without a date, taken as two years old"
	}
	return date
}

// undatedYears is the age of a price without a date (assumption).
const undatedYears = 2

func (l *Lot) yearsSince(date string) float64 {
	then, errThen := time.Parse(time.DateOnly, date)
	now, errNow := time.Parse(time.DateOnly, costs.ReferenceDate(l.Case.Catalog, l.Case.Job))
	if errThen != nil || errNow != nil {
		return undatedYears
	}
	return math.Max(0, now.Sub(then).Hours()/24/365.25)
}
