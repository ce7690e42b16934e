package workbook

import (
	"fmt"
	"strconv"
)

// sheetPurposes names the sheets and what each is for.
var sheetPurposes = [][2]string{
	{sheetDecision, "one page to sign: the recommended route of each lot, why, and what would change the choice"},
	{sheetInputs, "lots, targets and acceptance limits; what may be edited and what follows"},
	{sheetPrices, "every price with its date, source and mark; edit to see the costs follow"},
	{sheetSteps, "what each step does: water, time, energy, amounts, why it stops; balances"},
	{sheetCosts, "the bill line by line, cost by head, cost per litre, ranking"},
	{sheetCompare, "one row per route, charts, routes not offered and why, cautions"},
	{sheetRanges, "how sure the figures are: ranges, chances, what moves them, break-evens"},
	{sheetBuying, "what to order for a year of the recommended routes"},
	{sheetBenchCard, "one printed side for each lot, for the route chosen on it"},
	{sheetChecks, "what the workbook checks about itself"},
	{sheetSources, "weak numbers and references"},
}

var cautionWords = []string{
	"This workbook compares; it does not decide and is no procedure. Site rules, safety data sheets, local codes and licensed practice decide.",
	"Test peroxide formers before heating. Never distil to dryness.",
	"A computed water content is a forecast: measure each lot before use.",
}

var useWords = []string{
	"Blue cells on Inputs and Prices may be edited. Prices and batches per year are live: bills, costs per litre and ranks follow at once.",
	"Amounts, water contents, hours and energy are values from the program. When an input that only the program can follow is edited, the sheet shows “run parch again” there and at the top of every sheet.",
	"The state of all checks stands at the top of every sheet, in words.",
	"Costs are positive, credits negative; water removed is positive. Money is computed exactly and rounded once: the heads of a bill, written to the cent by its running total, add up to the written total.",
	"Water contents are mg of water per kg of solution. Litres are at the temperature of the lot.",
	"The sheets are protected against slips, without a password.",
}

// lookWords explains the appearance of cells.
var lookWords = []struct {
	look       look
	name, says string
}{
	{input, "input", "may be edited"},
	{formula, "formula", "computed by the sheet"},
	{program, "value from the program", "changes only by a new run"},
	{pass, "holds", "a check holds, a target is reached, a first rank"},
	{warn, "mind", "edited, indicative or weak"},
	{fail, "fails", "a check fails, a target is missed"},
}

func (l *layout) readMe() *grid {
	g := newGrid(sheetReadMe, "Ways to dry a bulk solvent, compared: "+oneLine(l.report.Job.Title), tabText, checkCell(), 26, 120)
	g.put(1, 3, text(plain, "Checks"))
	g.mixed, g.frozenRows = true, frameRows
	l.thisRun(g)
	g.section("How to use it")
	g.numbered(useWords)
	g.section("Sheets")
	for _, s := range sheetPurposes {
		g.say(text(link, s[0]).linkTo(on(s[0], "A1")), s[1])
	}
	g.section("Meaning of the cells")
	for _, w := range lookWords {
		g.say(text(w.look, w.name), w.says)
	}
	g.section("Cautions")
	g.numbered(cautionWords)
	return g
}

func (g *grid) section(name string) { g.put(1, g.next(), text(block, name)) }

func (g *grid) say(a cell, b string) { g.putRow(g.last()+1, a, text(words, oneLine(b))) }

func (g *grid) numbered(list []string) {
	for i, s := range list {
		g.say(text(plain, strconv.Itoa(i+1)), s)
	}
}

func (l *layout) thisRun(g *grid) {
	r, j := l.report, l.report.Job
	g.section("This run")
	g.say(text(plain, "Program"), "parch "+r.Version)
	g.say(text(plain, "Job file"), j.File)
	g.say(text(plain, "Catalog of"), r.CatalogDate)
	draws := "none: figures are single values; sheet Sources says which of them are weak"
	if r.Draws > 0 {
		draws = fmt.Sprintf("%d, seed %d", r.Draws, r.Seed)
	}
	g.say(text(plain, "Draws"), draws)
	g.say(text(plain, "Currency"), j.Currency)
	g.say(text(plain, "Ranked by"), j.Objective)
	if j.Invented {
		g.say(text(warn, "Demonstration"), "The site, the lots and the prices of this job are invented. They are no market prices.")
	}
	for _, lot := range l.lots {
		state := fmt.Sprintf("routes compared: %d, not offered: %d", len(lot.routes), len(lot.Excluded))
		if lot.NothingToDo != "" {
			state = "nothing to do: " + lot.NothingToDo
		}
		g.say(text(plain, fmt.Sprintf("Lot %d", lot.no)), lot.Job.Name+": "+lot.solventName()+"; "+state)
	}
}
