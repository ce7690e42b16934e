package workbook

import "fmt"

// Columns of Compare.
const (
	compareReaches  = 3
	compareWater    = 4
	compareAttended = 5
	compareBatch    = 6
	compareLitre    = 7
	compareRank     = 8
	compareLimit    = 15
	compareTarget   = 16
	compareState    = 17
	comparePlotted  = 18 // off the printed page
)

func (l *layout) compare() *grid {
	lot, route := l.keyWidths(42) // the chart of costs ends left of the chart of water
	g := newGrid(sheetCompare, "One row per route. Water, hours, amounts, costs and ranks follow the inputs and the prices; State says where the program has to be run again. Money in "+l.currency()+".",
		tabResult, checkCell(), lot, route, 9.5, 11, 10.5, 10.5, 9.5, 6.5, 8.5, 8.5, 7.5, 10.5, 10, 11, 9.5, 9, 14, 12)
	g.printColumns = compareState
	l.compareBlock(g)
	l.compareCharts(g)
	g.part(g.below())
	g.listsFrom = g.below()
	l.excludedBlock(g)
	l.cautionBlock(g)
	l.noteBlock(g)
	g.paginate() // lists grow by the headings that are repeated, and Checks looks at every row
	return g
}

func (l *layout) compareBlock(g *grid) {
	units := frameRows + 2
	first := g.table(units, "", []column{{name: "Lot"}, {name: "Route id"}, {name: "Reaches target"}, {"Water out", "mg/kg"},
		{"Hours attended", "h"}, {"Cost per batch", "1"}, {"Cost per litre", "1"}, {"Rank", "1"}, {"Hours total", "h"}, {"Energy", "kWh"}, {"Waste", "kg"},
		{"Litres delivered", "L"}, {"Cost per year", l.currency()}, {"Emissions", "kg CO2e"}, {"Accept at", "mg/kg"}, {"Target", "mg/kg"},
		{name: "State"}, {"Water left, as drawn", "mg/kg"}})
	g.put(1, units, text(block, "Routes"))
	for column, unit := range map[int]string{compareBatch: l.currency(), compareLitre: l.money("L")} {
		over := text(plain, unit).shown(numberOrWords("0")) // at the right, as the numbers are
		over.right = true
		g.put(column, units, over)
	}
	g.mixed, g.frozenRows, g.frozenColumns = true, first-1, 2
	l.compareRows = rows{first, first + len(l.routes) - 1}
	for i := range l.routes {
		l.compareRow(g, i)
	}
	l.noRoutes(g, first, len(l.routes))
	if len(l.routes) == 0 {
		return
	}
	place := func(column int) string { return at(column, first) + ":" + at(column, l.compareRows.last) }
	g.flags = append(g.flags,
		flag{place(compareReaches), fmt.Sprintf(`$C%d="yes"`, first), pass},
		flag{place(compareReaches), fmt.Sprintf(`$C%d="no"`, first), fail},
		flag{place(compareState), fmt.Sprintf(`LEN($%s)>0`, at(compareState, first)), warn},
		flag{fmt.Sprintf("A%d:B%d", first, l.compareRows.last), fmt.Sprintf(`$H%d=1`, first), best},
		flag{place(compareRank), fmt.Sprintf(`$H%d=1`, first), pass})
}

func (l *layout) compareRow(g *grid, i int) {
	r, row := l.routes[i], l.compareRows.at(i)
	rank, litre := l.rankRows.at(i), l.litreRows.at(i)
	money, water := l.currency(), l.waterFormat()
	costs := func(column, sourceRow int, v any) cell { return derived(on(sheetCosts, at(column, sourceRow)), v) }
	var place any = ""
	if r.rank > 0 {
		place = float64(r.rank)
	}
	carbon := blank(formula) // missing is no zero
	if l.carbonKnown(r) {
		carbon = costs(litreCarbon, litre, r.Run.CO2eKg).in("kg CO2e").shown(decimals(2))
	}
	rankAt := on(sheetCosts, at(rankPlace, rank))
	g.putRow(row, text(words, r.lot.Job.Name), text(words, r.ID),
		costs(rankReaches, rank, yesNo(r.reaches)),
		costs(rankWater, rank, r.waterOut).in("mg/kg").shown(water),
		costs(litreAttended, litre, r.Run.HoursAttended).in("h").shown(decimals(2)),
		costs(litreTotal, litre, r.total).in(money).shown(moneyFormat),
		costs(litreCost, litre, r.perLitre).in(l.money("L")).shown(moneyFormat),
		derived(fmt.Sprintf(`IF(%s>0,%s,"")`, rankAt, rankAt), place).shown("0"),
		costs(litreHours, litre, r.values[1]).in("h").shown(decimals(2)),
		costs(litreEnergy, litre, r.values[3]).in("kWh").shown(decimals(2)),
		costs(litreWaste, litre, r.values[2]).in("kg").shown(decimals(2)),
		costs(litreDelivered, litre, r.litres).in("L").shown(decimals(2)),
		costs(litreYear, litre, r.perYear).in(money).shown(decimals(0)),
		carbon,
		costs(rankLimit, rank, r.lot.acceptAt).in("mg/kg").shown(water),
		derived(l.lotName(r.lot, "target_water"), r.lot.target).in("mg/kg").shown(water),
		l.routeState(r),
		derived(fmt.Sprintf("MAX(D%d,job_lowest_plotted)", row), max(r.waterOut, lowestPlotted)).in("mg/kg").shown(water))
}
