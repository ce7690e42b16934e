package workbook

import (
	"fmt"
	"math"
	"strings"
)

var checkColumns = []column{{"No", "1"}, {name: "Check"}, {"Found", "1"}, {"Expected", "1"}, {"Difference", "1"}, {"Tolerance", "1"},
	{name: "Unit"}, {"Flag", "1"}, {name: "Result"}}

const (
	moneyTolerance   = 0.005
	balanceTolerance = 1e-6
)

// ownTolerance stands in a formula for the tolerance cell of its own row.
const ownTolerance = "{tolerance}"

// test is one check: found and expected must agree within the tolerance.
type test struct {
	what            string
	found, expected cell
	tolerance       float64
	unit            string
}

func (l *layout) checks() *grid {
	g := newGrid(sheetChecks, "Found and expected must agree within the tolerance. The sum of the flags is 0 when all checks hold.",
		tabCheck, cell{look: message, formula: "check_message", value: checksHold}, 10, 74, 15, 15, 15, 12, 12, 8, 15)
	next := frameRows + 6
	g.frozenRows = next + 1 // the headings, which both blocks have
	unedited := rows{1, 0}
	if tests := l.programTests(); len(tests) > 0 { // the short block first: only the last runs on
		first := g.table(next, "Checked against the program while no input and no price is edited", checkColumns)
		unedited = l.testRows(g, first, tests, "IFERROR((inputs_changed=0)*(ABS(E%[1]d)>F%[1]d),1)",
			fmt.Sprintf(`IF(H%%[1]d>0,"fails",%s)`, fixed(3, frameRows+3)))
		next = g.next()
	}
	always := l.testRows(g, g.table(next, "Always checked", checkColumns), l.alwaysTests(), "IFERROR((ABS(E%[1]d)>F%[1]d)*1,1)", `IF(H%[1]d>0,"fails","holds")`)
	l.masterRows(g, always, unedited)
	for _, r := range []rows{unedited, always} {
		if r.empty() {
			continue
		}
		place := fmt.Sprintf("I%d:I%d", r.first, r.last)
		g.flags = append(g.flags, flag{place, fmt.Sprintf(`$I%d="fails"`, r.first), fail}, flag{place, fmt.Sprintf(`$I%d="holds"`, r.first), pass},
			flag{place, fmt.Sprintf(`$I%d="not compared"`, r.first), warn})
	}
	return g
}

func (l *layout) masterRows(g *grid, always, unedited rows) {
	total, edited, compared, say := frameRows+1, frameRows+2, frameRows+3, frameRows+4
	row := func(r int, what string, c cell) {
		g.put(2, r, text(words, what))
		g.put(3, r, c)
	}
	sum := "0"
	for _, r := range []rows{always, unedited} {
		if !r.empty() {
			sum += fmt.Sprintf("+SUM(H%d:H%d)", r.first, r.last)
		}
	}
	row(total, "Sum of all flags: 0 when all checks hold", whole(sum, 0))
	row(edited, "Inputs and prices that differ from the run", whole(changedName, 0))
	row(compared, "Comparison with the program", derived(fmt.Sprintf(`IF(%s=0,"holds","not compared")`, fixed(3, edited)), "holds"))
	row(say, "Shown at the top of every sheet", derived(fmt.Sprintf(`IF(%s=0,"%s","See Checks")&IF(%s,". Run parch again","")`, fixed(3, total), checksHold, l.rerun()), checksHold))
	l.name("check_total", sheetChecks, 3, total)
	l.name("check_message", sheetChecks, 3, say)
}

// rerun holds while an input is edited that only the program can follow.
func (l *layout) rerun() string {
	f := fmt.Sprintf(`COUNTIF(%s,"%s")>0`, on(sheetInputs, l.inputRows.column(colState)), runAgain)
	if len(l.routes) > 0 {
		f = fmt.Sprintf(`COUNTIF(%s,"%s")>0`, on(sheetSteps, l.resultRows.column(stepState)), runAgain)
	}
	return f
}

func (l *layout) testRows(g *grid, first int, tests []test, flagFormula, wordFormula string) rows {
	for i, t := range tests {
		row := first + i
		found, _ := t.found.value.(float64)
		expected, _ := t.expected.value.(float64)
		difference := found - expected
		if math.Abs(difference) <= t.tolerance {
			difference = 0 // what is within the tolerance is no difference: rounding residues differ between programs
		}
		t.found.formula = strings.ReplaceAll(t.found.formula, ownTolerance, fmt.Sprintf("F%d", row))
		g.putRow(row, count(i+1), text(words, t.what), t.found.in(t.unit), t.expected.in(t.unit),
			derived(fmt.Sprintf("(ABS(C%[1]d-D%[1]d)>F%[1]d)*(C%[1]d-D%[1]d)", row), difference).in(t.unit).shown(smallOrNone),
			number(t.tolerance, t.unit).shown(smallOrNone), text(plain, t.unit),
			whole(fmt.Sprintf(flagFormula, row), 0), derived(fmt.Sprintf(wordFormula, row), "holds"))
	}
	return rows{first, first + len(tests) - 1}
}

// smallOrNone shows a small number by its power of ten, and none as 0.
const smallOrNone = "0.0E+00;-0.0E+00;0"

// none is the expected value of a check that counts faults.
func none() cell { return count(0) }

func (l *layout) alwaysTests() []test {
	tests := l.inputTests()
	tests = append(tests, l.errorTests()...)
	if len(l.routes) == 0 {
		return tests
	}
	tests = append(tests, l.followTests()...)
	tests = append(tests, l.curveTests()...)
	tests = append(tests, l.billTests()...)
	tests = append(tests, l.balanceTests()...)
	return append(tests, l.rankTests()...)
}

func (l *layout) inputTests() []test {
	values, runs := on(sheetInputs, l.inputRows.column(colValue)), on(sheetInputs, l.inputRows.column(colRun))
	after := on(sheetInputs, l.inputRows.column(colAfter))
	tests := []test{
		{"Edited inputs that only the program can follow", whole(fmt.Sprintf(`SUMPRODUCT((%s<>%s)*(%s="%s"))`, values, runs, after, runAgain), 0), none(), 0, "cells"},
		{"Inputs that should be numbers and are not", derived(fmt.Sprintf("SUMPRODUCT(ISNUMBER(%s)*NOT(ISNUMBER(%s)))", runs, values), 0.0).shown("0"), none(), 0, "cells"},
	}
	if l.priceRows.empty() {
		return tests
	}
	prices := on(sheetPrices, l.priceRows.column(colValue))
	tests = append(tests,
		test{"Prices that are not numbers", whole(fmt.Sprintf("ROWS(%s)-COUNT(%s)", prices, prices), 0), none(), 0, "cells"},
		test{"Prices below zero", derived(fmt.Sprintf("SUMPRODUCT((%s<0)*1)", prices), 0.0).shown("0"), none(), 0, "cells"})
	if !l.lineRows.empty() {
		items := on(sheetCosts, l.lineRows.column(billItem))
		known := on(sheetPrices, l.priceRows.column(colName))
		tests = append(tests, test{"Items of the bill without a price",
			derived(fmt.Sprintf("SUMPRODUCT(ISNA(MATCH(%s,%s,0))*1)", items, known), 0.0).shown("0"), none(), 0, "lines"})
	}
	return tests
}

// curveTests hold the columns of the curves to the sums that the program gave them.
func (l *layout) curveTests() (tests []test) {
	g := l.gridOf(sheetCurves)
	for _, c := range l.curveColumns {
		sum := 0.0
		for row := c.rows.first; row <= c.rows.last; row++ {
			v, _ := g.rows[row-1][c.column-1].value.(float64)
			sum += v
		}
		place := on(sheetCurves, area(c.column, c.rows.first, c.rows.last))
		tests = append(tests, test{"Sum of the curve in " + place, derived("SUM("+place+")", sum).shown("0.000E+00"), number(sum, "1").shown("0.000E+00"),
			max(curveTolerance*abs(sum), 1e-12), "sum"})
	}
	return tests
}

// curveTolerance is the share of a sum within which only the order of adding up
// makes a difference.
const curveTolerance = 1e-12

func (l *layout) gridOf(sheet string) *grid {
	for _, g := range l.grids {
		if g.name == sheet {
			return g
		}
	}
	return nil
}

// followTests count what only a new run can follow.
func (l *layout) followTests() []test {
	states := on(sheetSteps, l.resultRows.column(stepState))
	return []test{{"Routes for which parch has to be run again", whole(fmt.Sprintf(`COUNTIF(%s,"%s")`, states, runAgain), 0), none(), 0, "routes"}}
}

func (l *layout) errorTests() (tests []test) {
	for _, g := range l.grids {
		place := on(g.name, fixed(1, frameRows+1)+":"+fixed(len(g.widths), g.last()))
		tests = append(tests, test{"Error cells on " + g.name, derived(fmt.Sprintf("SUMPRODUCT(ISERROR(%s)*1)", place), 0.0).shown("0"), none(), 0, "cells"})
	}
	return tests
}

func (l *layout) billTests() []test {
	money := l.currency()
	bill := func(c int) string { return on(sheetCosts, l.lineRows.column(c)) }
	heads := on(sheetCosts, fixed(headFirst, l.headRows.first)+":"+fixed(headFirst+8, l.headRows.last))
	headSums := on(sheetCosts, l.headRows.column(headFirst+9))
	totals := on(sheetCosts, l.litreRows.column(litreTotal))
	shown := on(sheetCompare, l.compareRows.column(compareBatch))
	all := 0.0
	for _, r := range l.routes {
		all += r.total
	}
	sum := func(f string) cell { return derived(f, all).shown(moneyFormat) }
	tests := []test{
		{"Amounts: quantity × price", sum("SUM(" + bill(billAmount) + ")"), sum(fmt.Sprintf("SUMPRODUCT(%s,%s)", bill(billBatch), bill(billPrice))), moneyTolerance, money},
		{"All lines of the bills and all heads", sum("SUM(" + heads + ")"), sum("SUM(" + bill(billAmount) + ")"), moneyTolerance, money},
		{"Routes whose heads do not add up to the cost per batch", whole(fmt.Sprintf("SUMPRODUCT((ABS(%s-%s)>%s)*1)", headSums, totals, ownTolerance), 0), none(), moneyTolerance, "routes"},
		{"Routes whose bill to the cent is not its rounded total",
			whole(fmt.Sprintf("SUMPRODUCT((ABS(%s-ROUND(%s,job_money_decimals))>%s)*1)", on(sheetCosts, l.writtenRows.column(headFirst+9)), totals, ownTolerance), 0), none(), moneyTolerance, "routes"},
		{"Cost per batch on Compare and on Costs", sum("SUM(" + shown + ")"), sum("SUM(" + totals + ")"), moneyTolerance, money},
	}
	delivered := on(sheetCosts, l.litreRows.column(litreDelivered))
	return append(tests, test{"Routes that deliver nothing", derived(fmt.Sprintf("SUMPRODUCT((%s<=0)*1)", delivered), 0.0).shown("0"), none(), 0, "routes"})
}

func (l *layout) balanceTests() []test {
	open := func(what string, column int) test {
		place := on(sheetSteps, l.stepRows.column(column))
		return test{what, whole(fmt.Sprintf("SUMPRODUCT((ABS(%s)>%s)*1)", place, ownTolerance), 0), none(), balanceTolerance, "steps"}
	}
	return []test{open("Steps whose water balance is open", 8), open("Steps whose solvent balance is open", 12)}
}

func (l *layout) rankTests() (tests []test) {
	place := func(c int) string { return on(sheetCosts, l.rankRows.column(c)) }
	for _, lot := range l.lots {
		if len(lot.routes) == 0 {
			continue
		}
		no := on(sheetCosts, at(rankLot, l.rankRows.at(lot.routes[0].no-1)))
		ranked := 0.0
		for _, r := range lot.routes {
			if r.rank > 0 {
				ranked++
			}
		}
		ranks, lots, contest, sharing := place(rankPlace), place(rankLot), place(rankContest), place(rankSharing)
		reach := derived(fmt.Sprintf("COUNTIF(%s,%s)", contest, no), ranked).shown("0")
		worst := derived(fmt.Sprintf("SUMPRODUCT(MAX((%s=%s)*%s))", lots, no, ranks), ranked).shown("0")
		shared := whole(fmt.Sprintf("SUMPRODUCT((%s=%s)*(%s>1))", contest, no, sharing), 0)
		name := fmt.Sprintf("Lot %d: ", lot.no)
		tests = append(tests,
			test{name + "last rank and number of routes that reach the target", worst, reach, 0, "routes"},
			test{name + "routes that share a rank", shared, none(), 0, "routes"})
	}
	return tests
}

// programTests compare the sheet with what the program computed by itself, which
// stands beside it.
func (l *layout) programTests() (tests []test) {
	off := func(what string, rr rows, sheet, run int, tolerance float64) test {
		a, b := on(sheetCosts, rr.column(sheet)), on(sheetCosts, rr.column(run))
		return test{"Routes whose " + what + " is not that of the program", whole(fmt.Sprintf("SUMPRODUCT((ABS(%s-%s)>%s)*1)", a, b, ownTolerance), 0), none(), tolerance, "routes"}
	}
	if len(l.routes) == 0 {
		return nil
	}
	return []test{off("cost per batch", l.litreRows, litreTotal, litreRunTotal, moneyTolerance),
		off("cost per litre", l.litreRows, litreCost, litreRunCost, moneyTolerance), off("rank", l.rankRows, rankPlace, rankRun, 0)}
}
