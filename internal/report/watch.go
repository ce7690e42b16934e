package report

import (
	"math"
	"slices"

	"parch/internal/bench"
	"parch/internal/quantity"
	"parch/internal/steps"
)

const watched = 10 // rows

// watch shows what is seen at a still as it goes on, in each charge.
func (p *page) watch(a *bench.Answer) {
	if a.Kind != steps.Trap && a.Kind != steps.Forerun {
		return
	}
	const headColumn = 2
	where := "In the pot\nmg/kg"
	if a.Overhead {
		where = "In the product\nmg/kg"
	}
	columns := []column{{"Hours", true, 0}, {"Pot\n°C", true, 0}, {"Head\n°C", true, 0}, {"Receiver\nmL", true, 0}, {where, true, 0}}
	if p.fahrenheit {
		columns = slices.Insert(columns, headColumn+1, column{"Head\n°F", true, 0})
	}
	if a.Carrier != "" {
		columns = append(columns, column{"Carrier\n%", true, 0}, column{"Drawn off\nmL", true, 0})
	}
	if a.Overhead { // what is not distilled over yet
		columns = append(columns, column{"Solvent in pot\n%", true, 0})
	} else {
		columns = append(columns, column{"Solvent lost\n%", true, 0})
	}
	p.heading("To watch, in each charge:")
	var rows [][]string
	for _, pt := range a.Watch(watched) {
		collected := pt.AqueousM3
		if a.Kind == steps.Forerun {
			collected = pt.DrawnM3
		}
		row := []string{quantity.Significant(pt.Hours, 3), kelvins(pt.PotK), kelvins(pt.HeadK), drawn(collected), watchedWater(a, pt.Water)}
		if p.fahrenheit {
			row = slices.Insert(row, headColumn+1, inFahrenheit(quantity.In(pt.HeadK, quantity.Temperature, "°C")))
		}
		if a.Carrier != "" {
			row = append(row, quantity.Significant(100*pt.Carrier, 3), drawn(pt.DrawnM3))
		}
		rows = append(rows, append(row, perCent(pt.LostShare)))
	}
	p.table(columns, rows)
}

// drawn is a volume in mL; what is far below a drop is none, a small drop no number.
func drawn(m3 float64) string {
	switch {
	case m3 < 1e-10:
		return "0"
	case m3 < 1e-8:
		return "< 0.01"
	}
	return quantity.Significant(m3*1e6, 3)
}

// watchedWater is the water of a pot or of what has come over, no drier than is claimed in
// the end: of a trap the outlet, of a forerun the least that is claimed of any.
func watchedWater(a *bench.Answer, water float64) string {
	claimed, orLess := claimedOf(a, water)
	if orLess {
		return "< " + mgKg(claimed)
	}
	return traceOf(water)
}

// claimedOf is a water content on the way, or the least that is claimed where it is
// computed to be less.
func claimedOf(a *bench.Answer, water float64) (claimed float64, orLess bool) {
	claimed = a.Out.Water()
	if a.Kind == steps.Forerun {
		claimed = math.Min(claimed, a.Case.Catalog.Practice["trap-outlet-minimum"].SI)
	}
	if water < claimed*(1-1e-6) {
		return claimed, true
	}
	return water, false
}

// traceOf is a water content; where a carrier is stripped it falls to nothing.
func traceOf(water float64) string {
	if water < 1e-8 {
		return "< 0.01"
	}
	return mgKg(water)
}

// kelvins is a temperature in °C to a tenth.
func kelvins(k float64) string { return quantity.Significant(k-273.15, 4) }

// perCent of the solvent; what is less than a thousandth of one is told as that.
func perCent(share float64) string {
	if share > 0 && share < 1e-5 {
		return "< 0.001"
	}
	return quantity.Significant(100*share, 3)
}
