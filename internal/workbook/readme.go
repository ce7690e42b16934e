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
	{sheetCurves, "the tables that the closed forms look up; water in each step against time"},
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
	"A planning aid: it compares, it does not decide and is no procedure. Site rules, safety data sheets, local codes and licensed practice decide.",
	"Test peroxide formers before heating. Never distil to dryness.",
	"A computed water content is a forecast: measure each lot before use.",
	"Prices marked indicative, invented or old are no offers. Ask for offers before ordering.",
	"What rests on memory, common practice, an assumption or an extrapolation is listed on Sources and marked where it stands.",
}

var useWords = []string{
	"Read Decision first. It names the recommended route of each lot with its reason and is made to be printed and signed.",
	"Blue cells on Inputs and Prices may be edited. The column “When edited” says of each whether the sheet follows by itself or parch has to be run again; costs, costs per litre and ranks always follow the prices.",
	"“Run parch again” stands next to the results concerned, and at the top of every sheet, as long as an edited input asks for it. The original value stands beside the blue cell: type it again to undo.",
	"Ranges, Buying, Bench card and the sentences of Decision belong to the run: after any edit they say so.",
	"On Bench card choose the route in the blue cell, then print: each lot has one side.",
	"Found and expected values of all checks stand on Checks; their state stands at the top of every sheet, in words.",
}

var conventionWords = []string{
	"Costs are positive, credits negative; water removed is positive. Money is computed exactly and rounded once: the heads of a bill, written to the cent by its running total, add up to the written total.",
	"Water contents are mg of water per kg of solution. Litres are at the temperature of the lot.",
	"Route ids join the steps with a plus; an agent follows a colon: trap+soak:sieve-3a.",
	"In charts each route has its own marker and dash as well as its colour; target and limit are lines without markers.",
	"Decision prints on one page, Bench card on one for each lot. Curves prints its beginning only, Steps the steps of the routes, Costs what stands below the lines of the bill; to print all of a sheet, clear its print area. The sheets are protected against slips, without a password.",
}

// lookWords explains the appearance of cells.
var lookWords = []struct {
	look       look
	name, says string
}{
	{likeInput, "input", "blue and outlined: may be edited"},
	{formula, "formula", "black on white: computed by the sheet"},
	{program, "value from the program", "grey: changes only by a new run"},
	{field, "", "outlined and empty: to be filled in by hand on paper"},
	{pass, "holds", "a check holds, a target is reached, a first rank"},
	{warn, "mind", "edited, indicative or weak"},
	{fail, "fails", "a check fails, a target is missed, a card is out of date"},
}

func (l *layout) readMe() *grid {
	g := newGrid(sheetReadMe, "Ways to dry a bulk solvent, compared: "+oneLine(l.report.Job.Title), tabText, checkCell(), 22, 134)
	g.put(1, 3, text(plain, "Checks"))
	g.links = nil // this is where the others lead to
	g.mixed, g.frozenRows = true, frameRows
	g.section("What it is")
	g.say(text(plain, "parch"), "Computes how a bulk solvent can be dried by chains of steps, what each costs and how sure that is, and ranks them: here for the job below.")
	g.section("Cautions")
	g.numbered(cautionWords)
	l.thisRun(g)
	g.section("How to use it")
	g.numbered(useWords)
	g.section("Sheets")
	for _, s := range sheetPurposes {
		g.say(text(link, s[0]), s[1])
		g.links = append(g.links, jump{at(1, g.last()), on(s[0], "A1")})
	}
	g.section("Meaning of the cells")
	for _, w := range lookWords {
		g.say(text(w.look, w.name), w.says)
	}
	g.section("Conventions")
	g.numbered(conventionWords)
	return g
}

// section starts a list that stays on one page.
func (g *grid) section(name string) {
	if row := g.next(); row > frameRows+2 {
		g.part(row)
	}
	g.put(1, g.next(), text(block, name))
}

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
	g.say(text(plain, "Date of the run"), l.runDate()+": of the plan, or else the newest price; the clock of the computer plays no part")
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
