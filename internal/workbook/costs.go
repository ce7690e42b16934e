package workbook

import (
	"fmt"
	"math"
	"slices"

	"parch/internal/steps"
)

// Columns of the bill.
const (
	billHead   = 4
	billStep   = 5
	billItem   = 6
	billQty    = 7
	billUnit   = 8
	billPer    = 9
	billBatch  = 10
	billPrice  = 11
	billAmount = 12
	billPlace  = 13 // of the quantity on Steps
	billColumn = 14
	billTimes  = 15
	billFactor = 16
	billCarbon = 17
	billBasis  = 18
)

// Columns of the blocks below the bill.
const (
	headFirst = 4

	litreTotal     = 4
	litreDelivered = 5
	litreCost      = 6 // this and the next three are the objectives, in their order
	litreHours     = 7
	litreWaste     = 8
	litreEnergy    = 9
	litreBatches   = 10
	litreYear      = 11
	litreAttended  = 12
	litreCooling   = 13
	litreLost      = 14
	litreCarbon    = 15
	litreRunTotal  = 16
	litreRunCost   = 17

	rankLot       = 3
	rankWater     = 4
	rankLimit     = 5
	rankReaches   = 6
	rankContest   = 7
	rankObjective = 8
	rankOrder     = 9
	rankAhead     = 10 // three columns
	rankPlace     = 13
	rankSharing   = 14
	rankRun       = 15
)

var headNames = map[steps.Head]string{
	steps.Labour: "Labour", steps.Energy: "Energy", steps.CoolingWater: "Cooling water", steps.Agent: "Agent",
	steps.SolventLost: "Solvent lost", steps.Waste: "Waste", steps.Equipment: "Equipment", steps.Testing: "Testing", steps.Purchase: "Purchase",
}

func (l *layout) costs() *grid {
	lot, route := l.keyWidths(0)
	g := newGrid(sheetCosts, "The bill of each route: quantity × price = amount, for one batch. Below the lines: cost by head, cost per litre, target and rank. Amounts are exact and shown to a hundredth of a cent; the bill is rounded once, where it is written to the cent.",
		tabWork, checkCell(), lot, route, 7, 13, 11.8, 14, 10.5, 10.5, 11.5, 10.8, 13.2, 10.5, 10.5, 10.5, 11, 11, 11, 52)
	g.printColumns = rankRun
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 3 // the blocks share only these columns
	l.billBlock(g)
	l.headBlock(g)
	g.part(g.below())
	l.writtenBlock(g)
	g.part(g.below())
	l.litreBlock(g)
	g.part(g.below())
	l.rankBlock(g)
	g.link(1, frameRows+1, "Cost by head", on(sheetCosts, at(1, l.headRows.first-2)))
	g.link(2, frameRows+1, "Cost per litre and per year", on(sheetCosts, at(1, l.litreRows.first-2)))
	g.link(4, frameRows+1, "Target and rank", on(sheetCosts, at(1, l.rankRows.first-2)))
	return g
}

func (l *layout) billBlock(g *grid) {
	first := g.table(frameRows+2, "Lines of the bill", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {name: "Head"}, {"Step, 0 for the route", "1"},
		{name: "Item"}, {"Quantity", "1"}, {name: "Unit"}, {name: "Counted per"}, {"Quantity per batch", "1"},
		{"Price of a unit", l.currency()}, {"Amount", l.currency()},
		{"Row on Steps", "1"}, {"Column on Steps", "1"}, {"Times", "1"}, {"Emissions of a unit", "kg CO2e"}, {"Emissions", "kg CO2e"}, {name: "Basis"}})
	l.names = append(l.names, definedName{"steps_uses", l.usesArea()})
	row := first
	for _, r := range l.routes {
		for _, line := range r.lines {
			l.billRow(g, row, r, line)
			row++
		}
	}
	l.lineRows = rows{first, row - 1}
	l.noRoutes(g, first, row-first)
}

func (l *layout) billRow(g *grid, row int, r *routeModel, line lineModel) {
	per := "batch"
	if line.perYear {
		per = "year"
	}
	quantity := decimals(mostDecimals)
	g.putRow(row, append(l.routeKey(r),
		text(plain, headNames[line.Head]), count(line.Step), text(words, line.Item),
		cell{look: formula, unit: symbol(line.Unit), format: quantity,
			formula: fmt.Sprintf("INDEX(steps_uses,%s,%s)*%s", at(billPlace, row), at(billColumn, row), at(billTimes, row))}, text(plain, symbol(line.Unit)), text(plain, per),
		derived(fmt.Sprintf(`%s/IF(%s="year",%s,1)`, at(billQty, row), at(billPer, row), l.lotName(r.lot, "batches_per_year")), line.perBatch).in(symbol(line.Unit)).shown(quantity),
		derived(priceName(line.Item, line.Unit), line.price).in(l.money(line.Unit)).shown(l.priceFormat()),
		derived(at(billBatch, row)+"*"+at(billPrice, row), line.amount).in(l.currency()).shown(exactMoney))...)
	g.put(billBasis, row, text(words, line.Basis))
	place, column, times, _ := l.useOf(r, line)
	g.put(billPlace, row, count(place-l.lotRows.rows.first+1))
	g.put(billColumn, row, count(column))
	g.put(billTimes, row, number(times, "1").shown("General"))
	if k := l.carbonOf(r, line); k == 0 || math.IsNaN(k) {
		return
	}
	g.put(billFactor, row, finite(l.carbonOf(r, line), "kg CO2e", "0.000"))
	g.put(billCarbon, row, cell{look: formula, formula: at(billBatch, row) + "*" + at(billFactor, row), unit: "kg CO2e", format: "0.000"})
}

// usesArea is the part of Steps that holds all quantities.
func (l *layout) usesArea() string {
	return on(sheetSteps, fixed(1, l.lotRows.rows.first)+":"+fixed(commonIndex("follows"), l.resultRows.last))
}

// carbonOf is what a unit of a line emits, NaN where a factor is missing.
func (l *layout) carbonOf(r *routeModel, line lineModel) float64 {
	k := r.lot.Follow.Lot
	if k == nil {
		return math.NaN()
	}
	kgPerLitre := k["solvent kg/m3"] / 1000
	making, burning := k["kg CO2e making/"+r.lot.Job.Solvent], k["kg CO2e burning/"+r.lot.Job.Solvent]
	switch {
	case line.Item == "electricity":
		return k["kg CO2e electricity"]
	case line.Head == steps.SolventLost:
		return kgPerLitre * (making + burning)
	case line.Head == steps.Purchase:
		return kgPerLitre * making
	case line.Head == steps.Waste && line.Step > 0 && r.stages[line.Step-1].Kind == steps.Buy:
		return burning
	case line.Head == steps.Agent:
		if f, ok := k["kg CO2e making/"+line.Item]; ok {
			return f
		}
		return math.NaN()
	}
	return 0
}

func (l *layout) headBlock(g *grid) {
	columns := []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}}
	for _, h := range steps.Heads {
		columns = append(columns, column{headNames[h], "1"})
	}
	columns = append(columns, column{"Sum of heads", "1"})
	first := g.table(g.next(), "Cost of a batch by head, "+l.currency(), columns)
	l.headRows = rows{first, first + len(l.routes) - 1}
	amounts, routeNos, heads := l.lineRows.column(billAmount), l.lineRows.column(3), l.lineRows.column(billHead)
	sum := headFirst + len(steps.Heads)
	for i, r := range l.routes {
		row := first + i
		g.putRow(row, l.routeKey(r)...)
		for h := range steps.Heads {
			column := headFirst + h
			f := fmt.Sprintf("SUMIFS(%s,%s,$C%d,%s,%s$%d)", amounts, routeNos, row, heads, columnName(column), first-1)
			g.put(column, row, derived(f, r.heads[h]).in(l.currency()).shown(exactMoney))
		}
		f := fmt.Sprintf("SUM(%s:%s)", at(headFirst, row), at(sum-1, row))
		g.put(sum, row, derived(f, r.headSum).in(l.currency()).shown(exactMoney))
	}
	l.noRoutes(g, first, len(l.routes))
}

// writtenBlock rounds the running total of the heads and shows what each adds.
func (l *layout) writtenBlock(g *grid) {
	columns := []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}}
	for _, h := range steps.Heads {
		columns = append(columns, column{headNames[h], "1"})
	}
	columns = append(columns, column{"Bill", "1"})
	first := g.table(g.next(), "The bill of a batch, written to the cent, "+l.currency(), columns)
	l.writtenRows = rows{first, first + len(l.routes) - 1}
	sum := headFirst + len(steps.Heads)
	for i, r := range l.routes {
		row, exact := first+i, l.headRows.at(i)
		g.putRow(row, l.routeKey(r)...)
		for h := range steps.Heads {
			column := headFirst + h
			f := fmt.Sprintf("ROUND(SUM($D%d:%s),job_money_decimals)", exact, at(column, exact))
			if h > 0 {
				f += fmt.Sprintf("-SUM($D%d:%s)", row, at(column-1, row))
			}
			g.put(column, row, derived(f, r.written[h]).in(l.currency()).shown(moneyFormat))
		}
		g.put(sum, row, derived(fmt.Sprintf("SUM(%s:%s)", at(headFirst, row), at(sum-1, row)), r.wholeBill).in(l.currency()).shown(moneyFormat))
	}
	l.noRoutes(g, first, len(l.routes))
}

func (l *layout) litreBlock(g *grid) {
	first := g.table(g.next(), "Cost per litre and per year, use of a batch", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"},
		{"Cost per batch", l.currency()}, {"Litres delivered", "L"}, {"Cost per litre", l.money("L")}, {"Hours total", "h"}, {"Waste", "kg"},
		{"Energy", "kWh"}, {"Batches per year", "1/yr"}, {"Cost per year", l.currency()}, {"Hours attended", "h"}, {"Cooling water", "m3"}, {"Solvent lost", "L"}, {"Emissions", "kg CO2e"},
		{"Batch, of the program", l.currency()}, {"Litre, of the program", l.money("L")}})
	l.litreRows = rows{first, first + len(l.routes) - 1}
	routeNos, quantities := l.lineRows.column(3), l.lineRows.column(billBatch)
	for i, r := range l.routes {
		row, result := first+i, l.resultRows.at(i)
		live := func(f, unit string, d int) cell {
			return cell{look: formula, formula: f, unit: unit, format: decimals(d)}
		}
		sum := func(of string, criteria ...string) string {
			f := fmt.Sprintf("SUMIFS(%s,%s,$C%d", of, routeNos, row)
			for i := 0; i < len(criteria); i += 2 {
				f += "," + criteria[i] + `,"` + criteria[i+1] + `"`
			}
			return f + ")"
		}
		items, heads, units := l.lineRows.column(billItem), l.lineRows.column(billHead), l.lineRows.column(billUnit)
		g.putRow(row, append(l.routeKey(r),
			live(sum(l.lineRows.column(billAmount)), l.currency(), 2).shown(exactMoney),
			live(on(sheetSteps, at(resultDelivered, result)), "L", 3),
			live(at(litreTotal, row)+"/"+at(litreDelivered, row), l.money("L"), 2).shown(exactMoney),
			live(on(sheetSteps, at(resultHours, result)), "h", 2),
			live(sum(quantities, heads, headNames[steps.Waste], units, "kg"), "kg", 3),
			live(sum(quantities, items, "electricity"), "kWh", 2),
			live(l.lotName(r.lot, "batches_per_year"), "1/yr", 0).shown(formatFor(r.lot.batches)),
			live(at(litreTotal, row)+"*"+at(litreBatches, row), l.currency(), 2).shown(moneyFormat),
			live(sum(quantities, items, "technician"), "h", 3),
			live(sum(quantities, items, "cooling-water"), "m3", 4),
			live(sum(quantities, heads, headNames[steps.SolventLost]), "L", 3),
			l.carbonCell(r, sum(l.lineRows.column(billCarbon))),
			number(float(r.Bill.PerBatch), l.currency()).shown(exactMoney), number(float(r.Bill.PerLitre), l.money("L")).shown(exactMoney))...)
	}
	l.noRoutes(g, first, len(l.routes))
}

// carbonCell is what a batch emits by a formula, or the words that say that a factor
// is missing: what is missing is no zero.
func (l *layout) carbonCell(r *routeModel, sum string) cell {
	if !l.carbonKnown(r) {
		return text(program, "not known")
	}
	return cell{look: formula, formula: sum, unit: "kg CO2e", format: decimals(2)}
}

// carbonKnown reports whether the lines of a route have their factors and one of them
// emits something.
func (l *layout) carbonKnown(r *routeModel) bool {
	return !math.IsNaN(r.Run.CO2eKg) && slices.ContainsFunc(r.lines, func(line lineModel) bool { return l.carbonOf(r, line) > 0 })
}

func (l *layout) rankBlock(g *grid) {
	first := g.table(g.next(), "Target and rank: routes of a lot that reach the target, by objective, then cost per litre, then route id", []column{
		{name: "Lot"}, {name: "Route id"}, {"Lot no", "1"}, {"Water out", "mg/kg"}, {"Acceptance limit", "mg/kg"}, {name: "Reaches target"},
		{"Ranked in lot no", "1"}, {"Objective value", "1"}, {"Order of the route id", "1"}, {"Ahead by objective", "1"},
		{"Level, ahead by cost", "1"}, {"Level, ahead by id", "1"}, {"Rank, 0 for none", "1"}, {"Routes with this rank", "1"}, {"Rank, of the program", "1"}})
	l.rankRows = rows{first, first + len(l.routes) - 1}
	water := l.waterFormat()
	for i, r := range l.routes {
		row, litre := first+i, l.litreRows.at(i)
		g.putRow(row, text(words, r.lot.Job.Name), text(words, r.ID), count(r.lot.no),
			derived(on(sheetSteps, at(resultWater, l.resultRows.at(i))), r.waterOut).in("mg/kg").shown(water),
			derived(l.lotName(r.lot, "accept_limit"), r.lot.acceptAt).in("mg/kg").shown(water),
			derived(fmt.Sprintf(`IF(AND(D%d<=E%d*(1+job_tie),%s="yes"),"yes","no")`, row, row, l.lotName(r.lot, "can_show")), yesNo(r.reaches)),
			derived(fmt.Sprintf(`IF(F%d="yes",C%d,0)`, row, row), r.contest()).shown("0"),
			derived(fmt.Sprintf("INDEX(F%d:I%d,MATCH(job_objective,%s,0))", litre, litre, on(sheetInputs, l.objectiveList.column(colValue))), r.objective).shown(decimals(4)),
			count(r.order))
		l.placeCells(g, row, litre, r)
	}
	l.noRoutes(g, first, len(l.routes))
}

func (r *routeModel) contest() float64 {
	if r.reaches {
		return float64(r.lot.no)
	}
	return 0
}

// placeCells count the routes of the lot that come before this one: by the
// objective; level in it, by cost per litre; level in both, by the id. Routes are
// level where as many come before both.
func (l *layout) placeCells(g *grid, row, litre int, r *routeModel) {
	in := func(rr rows, column int) string {
		return fmt.Sprintf("%s$%d:%s$%d", columnName(column), rr.first, columnName(column), rr.last)
	}
	ranked := func(column int) string { return in(l.rankRows, column) }
	level := fmt.Sprintf("%s,C%d", ranked(rankContest), row)
	g.put(rankAhead, row, whole(fmt.Sprintf(`COUNTIFS(%s,%s,"<"&H%d*(1-job_tie))`, level, ranked(rankObjective), row), r.ahead[0]))
	level += fmt.Sprintf(",%s,J%d", ranked(rankAhead), row)
	g.put(rankAhead+1, row, whole(fmt.Sprintf(`COUNTIFS(%s,%s,"<"&F%d*(1-job_tie))`, level, in(l.litreRows, litreCost), litre), r.ahead[1]))
	level += fmt.Sprintf(",%s,K%d", ranked(rankAhead+1), row)
	g.put(rankAhead+2, row, whole(fmt.Sprintf(`COUNTIFS(%s,%s,"<"&I%d)`, level, ranked(rankOrder), row), r.ahead[2]))
	g.put(rankPlace, row, whole(fmt.Sprintf(`IF(F%d="yes",1+J%d+K%d+L%d,0)`, row, row, row, row), r.rank))
	g.put(rankSharing, row, whole(fmt.Sprintf("COUNTIFS(%s,G%d,%s,M%d)", ranked(rankContest), row, ranked(rankPlace), row), r.sharing))
	g.put(rankRun, row, count(r.Rank))
}

// whole is a formula that counts.
func whole(f string, n int) cell { return derived(f, float64(n)).shown("0") }
