package workbook

import (
	"fmt"
	"math"
	"strings"

	"parch/internal/costs"
	"parch/internal/quantity"
)

// Columns of Inputs and Prices: the same kind of thing in the same place.
const (
	colName = iota + 1
	colLabel
	colValue
	colUnit
	colSource
	colRun   // value in the run
	colAfter // what happens when it is edited
	colState
)

var inputColumns = []column{{name: "Name"}, {name: "Quantity"}, {name: "Value"}, {name: "Unit"}, {name: "Source or note"},
	{name: "Value in the run"}, {name: "When edited"}, {name: "State"}}

const lowestPlotted = 0.1 // mg/kg: a log axis has no zero

func (l *layout) inputs() *grid {
	g := newGrid(sheetInputs, "What the job asks for. Blue cells may be edited; the column State says what follows the edit and what needs a new run.",
		tabInput, checkCell(), 27, 34, 16, 12, 50, 16, 17, 18)
	first := g.table(frameRows+2, "The run", inputColumns)
	g.frozenRows = first - 1
	l.runInputs(g)
	l.lotInputs = make([]rows, len(l.lots))
	for i, lot := range l.lots {
		l.lotBlock(g, i, lot)
	}
	l.inputRows = rows{first, g.last()}
	l.siteBlock(g)
	l.equipmentBlock(g)
	l.defaultsBlock(g)
	g.flags = append(g.flags, flag{
		fmt.Sprintf("H%d:H%d", l.inputRows.first, l.inputRows.last), fmt.Sprintf(`LEN($H%d)>0`, l.inputRows.first), warn})
	return g
}

// fact is a row of Inputs that cannot be edited.
func fact(g *grid, name, label string, value cell, unit, source string) int {
	row := g.last() + 1
	g.putRow(row, text(plain, name), text(words, label), value, text(plain, unit), text(words, source))
	return row
}

// editable is a row of Inputs that can be edited. It keeps the value of the run
// beside it, so that the sheet can tell.
func editable(g *grid, name, label string, value cell, unit, source, after string) int {
	row := fact(g, name, label, value.as(input), unit, source)
	g.put(colRun, row, value.as(program))
	g.put(colAfter, row, text(plain, after))
	state := fmt.Sprintf(`IF(%s=%s,"",%s)`, at(colValue, row), at(colRun, row), at(colAfter, row))
	g.put(colState, row, cell{look: formula, formula: state, value: ""})
	return row
}

func (l *layout) runInputs(g *grid) {
	j := l.report.Job
	row := editable(g, "job_objective", "Routes are ranked by", text(input, j.Objective), "",
		"job file; the rank follows, but settings are tuned for the objective of the run", runAgain)
	l.name("job_objective", sheetInputs, colValue, row)
	l.objectiveRow = row
	fact(g, "", "Currency", text(program, j.Currency), "", "job file; all money is in this currency, costs positive, credits negative")
	fact(g, "", "Assurance asked for", number(j.Assurance*100, "%").shown("0"), "%", "job file; chance of target that a recommended route needs")
	row = fact(g, "job_tie", "Level within a share of", number(tie, "1").shown("0E+00"), "1", "closer than this there is only rounding; a route at the limit has reached it, and routes count as level: then the cost per litre, then the route id decides")
	l.name("job_tie", sheetInputs, colValue, row)
	row = fact(g, "job_money_decimals", "Decimals of written money", count(costs.Cents), "", "bills are written to the cent; what they are compared by is exact")
	l.name("job_money_decimals", sheetInputs, colValue, row)
	row = fact(g, "job_lowest_plotted", "Lowest water drawn in charts", number(lowestPlotted, "mg/kg"), "mg/kg", "the chart has a logarithmic axis, which has no zero")
	l.name("job_lowest_plotted", sheetInputs, colValue, row)
	notes := map[string]string{"cost": "cost per litre delivered in spec", "time": "hours in total, attended or not",
		"waste": "waste, kg per batch", "energy": "energy, kWh per batch"}
	l.objectiveList.first = g.last() + 1
	for _, word := range objectives {
		l.objectiveList.last = fact(g, "", "Allowed objective", text(program, word), "", notes[word])
	}
	g.limits = append(g.limits, limit{place: at(colValue, l.objectiveRow), words: l.objectiveList.column(colValue),
		prompt: "cost, time, waste or energy. The rank follows; run parch again to tune the routes for it.",
		refuse: "Choose cost, time, waste or energy."})
}

// largest values that the cells accept; the job file sets the same or tighter limits.
const (
	mostLitres  = 1e5
	mostBatches = 1e5
	mostWater   = 1e6 // mg/kg
)

func (l *layout) lotBlock(g *grid, i int, lot *lotModel) {
	g.put(1, g.next(), text(block, fmt.Sprintf("Lot %d: %s", lot.no, lot.Job.Name)))
	l.lotInputs[i].first = g.last() + 1
	enter := func(name, label string, v float64, unit, source, after string, low, high float64) {
		name = l.lotName(lot, name)
		row := editable(g, name, label, number(v, unit).shown(formatFor(v)), unit, source, after)
		l.name(name, sheetInputs, colValue, row)
		g.limits = append(g.limits, limit{place: at(colValue, row), low: low, high: high,
			prompt: fmt.Sprintf("%s, %s. When edited: %s.", label, unit, after),
			refuse: fmt.Sprintf("A number from %g to %g, in %s.", low, high, unit)})
	}
	fact(g, "", "Solvent", text(program, lot.solventName()), "", "job file")
	enter("batch_litres", "Batch", lot.batchLitres, "L", "job file", runAgain, 0.001, mostLitres)
	enter("batches_per_year", "Batches per year", lot.batches, "1/yr", "job file", follows, 0.001, mostBatches)
	enter("start_water", "Water at the start", lot.start, "mg/kg", "job file; dissolved water as read", runAgain, 0, mostWater)
	enter("target_water", "Target", lot.target, "mg/kg", "job file", runAgain, 0, mostWater)
	l.assayRows(g, lot)
	l.lotFacts(g, lot)
	l.lotInputs[i].last = g.last()
	l.stateRow(g, i, lot)
}

func (lot *lotModel) solventName() string {
	if lot.Solvent == nil {
		return lot.Job.Solvent
	}
	return lot.Solvent.Name
}

func (l *layout) assayRows(g *grid, lot *lotModel) {
	target := g.last()
	method := "Karl Fischer, " + l.report.Job.Site.KarlFischer
	u := fact(g, "", "Uncertainty U of the mean", number(lot.uncertainty, "mg/kg").shown(formatFor(lot.uncertainty)), "mg/kg",
		fmt.Sprintf("%s; mean of %d injections, k = 2, about 95 %%", method, lot.Injections))
	d := fact(g, "", "Detection limit", number(lot.detection, "mg/kg").shown(formatFor(lot.detection)), "mg/kg", method)
	limit := l.lotName(lot, "accept_limit")
	row := fact(g, limit, "Accept at or below", derived(fmt.Sprintf("%s-%s", at(colValue, target), at(colValue, u)), lot.acceptAt).
		shown(formatFor(lot.acceptAt)), "mg/kg", "target less U: the guard band")
	l.name(limit, sheetInputs, colValue, row)
	show := l.lotName(lot, "can_show")
	note := "the acceptance limit must not lie under the detection limit"
	if lot.CannotShow != "" {
		note = lot.CannotShow
	}
	row = fact(g, show, "Target can be shown", derived(fmt.Sprintf(`IF(%s>=%s,"yes","no")`, at(colValue, row), at(colValue, d)), yesNo(lot.shown)), "", note)
	l.name(show, sheetInputs, colValue, row)
}

func yesNo(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

// lotFacts lists what the program read of the lot and the sheet does not follow.
func (l *layout) lotFacts(g *grid, lot *lotModel) {
	j := lot.Job
	show := func(label string, v float64, unit, source string) {
		fact(g, "", label, number(v, unit).shown(formatFor(tidy(v))), unit, source)
	}
	show("Free water", j.FreeWaterM3*1e6, "mL", "job file")
	if j.NotBelow > 0 {
		show("Not below", j.NotBelow*mgPerKg, "mg/kg", "job file")
	}
	if j.NeededWithinS > 0 {
		show("Needed within", j.NeededWithinS/3600, "h", "job file")
	}
	if j.HeaterW > 0 {
		show("Heater", j.HeaterW, "W", "job file")
	}
	if j.VesselHeightM > 0 {
		show("Liquid height in the vessel", j.VesselHeightM, "m", "job file")
	}
	if j.ResidualLoading > 0 {
		show("Water on the sieve before use", j.ResidualLoading*100, "g/100 g", "from the sieve's history: "+j.SieveHistory)
	}
	if j.Peroxide != nil {
		show("Peroxide reading", j.Peroxide.ReadingKgPerM3*1000, "mg/L", "tested "+j.Peroxide.Date)
	}
	if lot.NothingToDo != "" {
		fact(g, "", "Nothing to do", text(program, "see note"), "", lot.NothingToDo)
	}
}

// stateRow sums up whether the results of the lot still belong to its inputs.
func (l *layout) stateRow(g *grid, i int, lot *lotModel) {
	states := rows{l.lotInputs[i].first, l.lotInputs[i].last}
	f := fmt.Sprintf(`IF(COUNTIF(%s,"%s")+COUNTIF(%s,"%s")>0,"%s","")`,
		states.column(colState), runAgain, fixed(colState, l.objectiveRow), runAgain, runAgain)
	name := l.lotName(lot, "run_state")
	row := g.last() + 1
	g.putRow(row, text(plain, name), text(words, "Results of this lot"))
	g.put(colSource, row, text(words, "empty while the results of the program belong to the inputs above"))
	g.put(colState, row, cell{look: formula, formula: f, value: ""})
	l.name(name, sheetInputs, colState, row)
}

func (l *layout) siteBlock(g *grid) {
	s := l.report.Job.Site
	g.put(1, g.next(), text(block, "Site: followed only by the program"))
	show := func(label string, v float64, unit string) {
		fact(g, "", label, number(v, unit).shown(formatFor(tidy(v))), unit, "job file, or a default listed below")
	}
	show("Room", quantity.In(s.RoomK, quantity.Temperature, "°C"), "°C")
	show("Pressure", s.PressurePa/100, "hPa")
	show("Relative humidity", s.Humidity*100, "%")
	show("Receiver", quantity.In(s.ReceiverK, quantity.Temperature, "°C"), "°C")
	show("Attended time a day", s.AttendedSecondsPerDay/3600, "h")
	show("Peroxide limit", s.PeroxideLimitKgPerM3*1000, "mg/L")
	fact(g, "", "Water determination", text(program, "Karl Fischer, "+s.KarlFischer), "", "job file, or a default listed below")
}

func (l *layout) equipmentBlock(g *grid) {
	j := l.report.Job
	if len(j.Equipment)+len(j.Stock) == 0 {
		return
	}
	g.put(1, g.next(), text(block, "Equipment and stock: followed only by the program"))
	for _, e := range j.Equipment {
		owned := "to be bought"
		if e.Owned {
			owned = "owned"
		}
		fact(g, "", e.Item, text(program, owned), "", "job file")
	}
	for _, s := range j.Stock {
		fact(g, "", s.Item+" on hand", number(s.OnHandKg, "kg").shown(formatFor(s.OnHandKg)), "kg", "job file")
	}
}

func (l *layout) defaultsBlock(g *grid) {
	defaults := l.report.Job.Defaults
	if len(defaults) == 0 {
		return
	}
	g.put(1, g.next(), text(block, "Defaults: what the job left to the catalog"))
	for _, d := range defaults {
		note := d.Source
		if strings.ReplaceAll(d.Confidence, " ", "-") != d.Source {
			note += "; " + d.Confidence
		}
		if d.Date != "" {
			note += "; " + d.Date
		}
		fact(g, "", d.Key, text(program, d.Text), "", note)
	}
}

// finite is for values that may be missing: a blank cell, never a zero.
func finite(v float64, unit, format string) cell {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return blank(program)
	}
	return number(v, unit).shown(format)
}
