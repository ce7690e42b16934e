package workbook

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"parch/internal/costs"
	"parch/internal/job"
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
		tabInput, checkCell(), 24, 34, 14, 10, 42, 14, 21, 20)
	first := g.table(frameRows+2, "The run", inputColumns)
	g.frozenRows = first - 1
	l.runInputs(g)
	l.siteInputs(g)
	l.lotInputs = make([]rows, len(l.lots))
	for i, lot := range l.lots {
		l.lotBlock(g, i, lot)
	}
	l.inputRows = rows{first, g.last()}
	l.name("input_values", sheetInputs, colValue, 1)
	l.names[len(l.names)-1].place = on(sheetInputs, area(colValue, 1, l.inputRows.last))
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
	l.lotFirst(g, lot)
	l.assayRows(g, lot)
	l.lotFacts(g, lot)
	l.routeSettings(g, lot)
	l.lotInputs[i].last = g.last()
	l.stateRow(g, i, lot)
}

// enter is an input that is a number, with its name, its limits and what follows.
func (l *layout) enter(g *grid, name, label string, v float64, unit, source, after string, low, high float64) int {
	row := editable(g, name, label, number(v, unit).shown(formatFor(tidy(v))), unit, source, after)
	l.name(name, sheetInputs, colValue, row)
	in := unit
	if in == "1" {
		in = "as a plain number"
	} else {
		in = "in " + in
	}
	g.limits = append(g.limits, limit{place: at(colValue, row), low: low, high: high,
		prompt: fmt.Sprintf("%s, %s. When edited: %s.", label, in, after),
		refuse: fmt.Sprintf("A number from %g to %g, %s.", low, high, in)})
	return row
}

// choice is an input that is a word of a list.
func (l *layout) choice(g *grid, name, label, word, source, after string, list rows) int {
	row := editable(g, name, label, text(input, word), "", source, after)
	l.name(name, sheetInputs, colValue, row)
	g.limits = append(g.limits, limit{place: at(colValue, row), words: list.column(colValue),
		prompt: fmt.Sprintf("%s. When edited: %s.", label, after), refuse: "Choose a word of the list."})
	return row
}

// after is what happens when an input of the lot is edited that its closed forms read.
func (lot *lotModel) after() string {
	if lot.Follow.Lot == nil {
		return runAgain
	}
	return followsWithin
}

func (l *layout) lotFirst(g *grid, lot *lotModel) {
	j := lot.Job
	enter := func(name, label string, v float64, unit, source, after string, low, high float64) int {
		return l.enter(g, l.lotName(lot, name), label, v, unit, source, after, low, high)
	}
	fact(g, "", "Solvent", text(program, lot.solventName()), "", "job file")
	enter("batch_litres", "Batch", lot.batchLitres, "L", "job file", lot.after(), 0.001, mostLitres)
	enter("batches_per_year", "Batches per year", lot.batches, "1/yr", "job file", follows, 0.001, mostBatches)
	enter("start_water", "Water at the start", lot.start, "mg/kg", "job file; dissolved water as read", lot.after(), 0, mostWater)
	enter("free_water", "Free water", tidy(j.FreeWaterM3*1e6), "mL", "job file; stands below the batch", lot.after(), 0, mostLitres)
	enter("vessel_height", "Liquid height in the vessel", j.VesselHeightM, "m", "job file; 0: a vessel as deep as it is wide", lot.after(), 0, 20)
	enter("heater", "Heater", j.HeaterW, "W", "job file; 0: the heater of the still", lot.after(), 0, 1e6)
	enter("residual_loading", "Water on the sieve before use", j.ResidualLoading*100, "g/100 g", historyWords(j), lot.after(), 0, 20)
	enter("target_water", "Target", lot.target, "mg/kg", "job file", lot.after(), 0, mostWater)
}

// historyWords say where the water on a sieve comes from, and what of it is assumed.
func historyWords(j job.Lot) string {
	switch {
	case j.ResidualStated:
		return "stated in the job file; not checked"
	case j.SieveTreatment != "" && j.ResidualBand != nil:
		return fmt.Sprintf("added up from %q: what handling and standing add is assumed, %s to %s in all; another sorbent by its own isotherm", oneLine(j.SieveTreatment),
			significant(100*j.ResidualLoading*j.ResidualBand.Low), significant(100*j.ResidualLoading*j.ResidualBand.High))
	case j.SieveHistory != "":
		return "from the sieve's history: " + j.SieveHistory
	case j.SieveHistoryK > 0:
		return "activated at " + quantity.FormatTemperature(j.SieveHistoryK) + ": between histories of the catalog"
	}
	return "no history is given"
}

// routeSettings are the free choices of the routes, which the closed forms read by
// their rows.
func (l *layout) routeSettings(g *grid, lot *lotModel) {
	for _, r := range lot.routes {
		for _, s := range r.stages {
			label := func(what string) string { return fmt.Sprintf("%s, step %d: %s", r.ID, s.no, what) }
			name := func(what string) string { return fmt.Sprintf("lot%d_route%d_%s%d", lot.no, r.no, what, s.no) }
			if s.handOver > 0 {
				s.setRow = l.enter(g, name("handover_"), label("water handed over"), s.handOver, "mg/kg", "tuned by the program", lot.after(), 0, mostWater)
			}
			if s.aim > 0 {
				s.setRow = l.enter(g, name("aim_"), label("sized for"), s.aim, "mg/kg", "set by the program so that the route is sure enough", lot.after(), 0, mostWater)
			}
			if s.hours > 0 {
				s.hoursRow = l.enter(g, name("hours_"), label("stands"), s.hours, "h", "tuned by the program", lot.after(), 0.01, 8784)
				s.stirRow = l.choice(g, name("stirred_"), label("stirred"), yesNo(s.stirred), "tuned by the program", lot.after(), l.yesNoList)
			}
			if s.sieve != "" {
				s.sieveRow = l.choice(g, name("sieve_"), label("sieve after use"), s.sieve, "tuned by the program", lot.after(), l.sieveList)
			}
		}
	}
}

// siteInputs are read by the closed forms of all lots.
func (l *layout) siteInputs(g *grid) {
	g.put(1, g.next(), text(block, "All lots"))
	l.siteEdits.first = g.last() + 1
	f := l.sharedFollow()
	after := followsWithin
	if f == nil {
		after = runAgain
	}
	l.enter(g, "site_heat_share", "Share of the heat that reaches the liquid", f["heat share"], "1", "catalog, practice: heat-share", after, 0.05, 1)
	l.enter(g, "site_least_dose", "Least dose of a sieve", f["least dose kg/m3"], "g/L", "catalog, practice: dose-minimum", after, 0, 1000)
	l.usesRow = map[string]int{}
	for _, agent := range l.followedSieves() {
		name := "uses_" + strings.ReplaceAll(agent, "-", "_")
		l.usesRow[agent] = l.enter(g, name, "Uses of a charge of "+agent, l.sieveUses(agent), "1", "catalog: where it is regenerated", after, 1, 1000)
	}
	l.siteEdits.last = g.last()
	list := func(words ...string) (r rows) {
		r.first = g.last() + 1
		for _, w := range words {
			r.last = fact(g, "", "Allowed word", text(program, w), "", "")
		}
		return r
	}
	edits := fmt.Sprintf("SUMPRODUCT((%s<>%s)*1)", l.siteEdits.column(colValue), l.siteEdits.column(colRun))
	row := fact(g, "site_edited", "Edited of these", whole(edits, 0), "", "")
	l.name("site_edited", sheetInputs, colValue, row)
	l.yesNoList, l.sieveList = list("yes", "no"), list("regenerate", "discard")
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
	if j.NotBelow > 0 {
		show("Not below", j.NotBelow*mgPerKg, "mg/kg", "job file")
	}
	if j.NeededWithinS > 0 {
		show("Needed within", j.NeededWithinS/3600, "h", "job file")
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
	edited := func(r rows) string {
		return fmt.Sprintf(`SUMPRODUCT((%s<>%s)*(%s="%s"))`, r.column(colValue), r.column(colRun), r.column(colAfter), followsWithin)
	}
	name := l.lotName(lot, "edited")
	row := fact(g, name, "Edited inputs that its closed forms read", whole(edited(states)+"+site_edited", 0), "", "of this lot and of all lots")
	l.name(name, sheetInputs, colValue, row)
	name = l.lotName(lot, "run_state")
	row = g.last() + 1
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
		fact(g, "", lotCalled(d.Key), text(program, d.Text), "", note)
	}
}

// finite is for values that may be missing: a blank cell, never a zero.
func finite(v float64, unit, format string) cell {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return blank(program)
	}
	return number(v, unit).shown(format)
}

var lotInKey = regexp.MustCompile(`^lots\[([0-9]+)\]\.`)

// lotCalled is the key of a default with the number of its lot as sheets have it, from 1.
func lotCalled(key string) string {
	m := lotInKey.FindStringSubmatch(key)
	if m == nil {
		return key
	}
	n, err := strconv.Atoi(m[1])
	if err != nil {
		return key
	}
	return fmt.Sprintf("lot %d: %s", n+1, key[len(m[0]):])
}
