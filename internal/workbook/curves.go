package workbook

import (
	"fmt"
	"strconv"

	"parch/internal/routes"
	"parch/internal/steps"
)

// curveKind is a table that steps look up, for all lots one below the other.
type curveKind struct {
	kind    steps.Kind
	title   string
	what    column
	columns []column // the first is the water
	names   []string
}

var curveKinds = []curveKind{
	{steps.Soak, "Loading of a sorbent against water and its activity, at room temperature", column{name: "Sorbent"},
		[]column{{"Water", "kg/kg"}, {"Activity of water", "1"}, {"Held", "kg/kg"}}, []string{"load_water", "load_activity", "load_held"}},
	{steps.Trap, "Pot under a trap: vapour boiled up and heat for one mole of what stays, from the wettest pot on", column{name: "Receiver"},
		[]column{{"Water in the pot", "kg/kg"}, {"Vapour boiled up", "mol/mol"}, {"Heat", "J/mol"}, {"ln of the volume left", "1"}, {"Water in the vapour", "mol/mol"}, {"Latent heat", "J/mol"}, {"To warm water", "J/mol"}, {"To warm solvent", "J/mol"}},
		[]string{"trap_water", "trap_vapour_boiled", "trap_heat", "trap_left", "trap_vapour", "trap_latent", "trap_warm_w", "trap_warm_s"}},
	{steps.Forerun, "Pot of a forerun: what is left and heat for one mole of the wettest pot", column{name: "Stages"},
		[]column{{"Water in the pot", "kg/kg"}, {"ln of what is left", "1"}, {"Heat", "J/mol"}, {"To warm water", "J/mol"}, {"To warm solvent", "J/mol"}},
		[]string{"draw_water", "draw_left", "draw_heat", "draw_warm_w", "draw_warm_s"}},
}

const curveFirst = 4 // first column of the figures

func (l *layout) curves() *grid {
	g := newGrid(sheetCurves, "The tables that the closed forms of Steps look up, computed by the program, and the course of water in each step. They change only by a new run.",
		tabWork, checkCell(), 26, 30, 9, 13, 13, 13, 13, 13, 13, 13, 13)
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 2
	l.searchSteps(g)
	l.curveRows = map[curveKey]rows{}
	for _, k := range curveKinds {
		l.curveBlock(g, k)
	}
	l.courseBlock(g)
	return g
}

// searchSteps are the strides in which a place in a curve is found.
func (l *layout) searchSteps(g *grid) {
	row := frameRows + 2
	g.put(1, row, text(block, "Strides in which a place in a curve is found"))
	for i, s := range halves {
		g.put(curveFirst+i, row, count(routes.LoadingNodes>>(i+1)))
		l.name("half_"+s, sheetCurves, curveFirst+i, row)
	}
}

func (l *layout) curveBlock(g *grid, k curveKind) {
	count64 := 0
	for _, lot := range l.lots {
		for _, c := range lot.Follow.Curves {
			if c.Kind == k.kind {
				count64 += len(c.Rows)
			}
		}
	}
	if count64 == 0 {
		return
	}
	row := g.table(g.next(), k.title, append([]column{{name: "Lot"}, k.what, {"Nodes", "1"}}, k.columns...))
	first := row
	for _, lot := range l.lots {
		for _, c := range lot.Follow.Curves {
			if c.Kind != k.kind {
				continue
			}
			key := curveKey{lot: lot.no, kind: c.Kind, agent: c.Agent, stages: c.Stages, receiverC: c.ReceiverC}
			l.curveRows[key] = rows{row - first + 1, row - first + len(c.Rows)}
			for i, values := range c.Rows {
				if i == 0 {
					g.putRow(row, text(plain, lot.Job.Name), curveOf(c), count(len(c.Rows)))
				}
				for j, v := range values {
					g.put(curveFirst+j, row, number(cutTo(v, curveDigits), k.columns[j].unit).shown("0.0000E+00"))
				}
				row++
			}
		}
	}
	for j, name := range k.names {
		l.names = append(l.names, definedName{name, on(sheetCurves, area(curveFirst+j, first, row-1))})
		l.curveColumns = append(l.curveColumns, curveColumn{name, rows{first, row - 1}, curveFirst + j})
	}
}

// curveColumn is a column of figures whose sum is checked.
type curveColumn struct {
	name   string
	rows   rows
	column int
}

func curveOf(c routes.Curve) cell {
	switch c.Kind {
	case steps.Soak:
		return text(plain, c.Agent)
	case steps.Forerun:
		return text(plain, fmt.Sprintf("%d stages", c.Stages))
	}
	return text(plain, fmt.Sprintf("receiver at %g °C", c.ReceiverC))
}

// courseBlock shows how water falls in the steps of the first routes of a lot.
func (l *layout) courseBlock(g *grid) {
	row := g.table(g.next(), fmt.Sprintf("Course of the steps as the program ran them, for the first %d routes of a lot", coursesShown), []column{{name: "Lot"}, {name: "Route id"}, {"Step", "1"},
		{"Hours", "h"}, {"Water", "mg/kg"}, {"Vapour boiled up", "kg"}, {"Drawn off", "L"}, {"Pot", "°C"}, {"Head", "°C"}, {"Aqueous layer", "mL"}, {"Solvent lost", "%"}})
	first := row
	for _, r := range l.routes {
		if r.Rank < 1 || r.Rank > coursesShown {
			continue
		}
		for _, s := range r.stages {
			for _, p := range thinned(s.Course) {
				g.putRow(row, text(plain, r.lot.Job.Name), text(plain, r.ID), count(s.no), number(cutTo(p.Hours, 5), "h").shown(decimals(2)), number(cutTo(p.Water*mgPerKg, 5), "mg/kg").shown("#,##0.00"),
					number(cutTo(p.BoiledKg, 5), "kg").shown(decimals(3)), number(cutTo(p.DrawnM3*1000, 5), "L").shown(decimals(3)))
				if p.PotK > 0 {
					g.put(8, row, number(cutTo(p.PotK-273.15, 5), "°C").shown("0.0"))
					g.put(9, row, number(cutTo(p.HeadK-273.15, 5), "°C").shown("0.0"))
					g.put(10, row, number(cutTo(p.AqueousM3*1e6, 5), "mL").shown("0.0"))
					g.put(11, row, number(cutTo(p.LostShare*100, 5), "%").shown("0.00"))
				}
				row++
			}
		}
	}
	if row == first {
		g.put(1, row, text(plain, "No route is offered."))
		return
	}
	l.curveColumns = append(l.curveColumns, curveColumn{"", rows{first, row - 1}, 4}, curveColumn{"", rows{first, row - 1}, 5})
}

const coursesShown = 2

// thinned keeps the ends of a course and enough between them to draw it.
func thinned(all []steps.Point) []steps.Point {
	if len(all) <= coursePoints {
		return all
	}
	out := make([]steps.Point, coursePoints)
	for i := range out {
		out[i] = all[i*(len(all)-1)/(coursePoints-1)]
	}
	return out
}

const coursePoints = 13

// curveDigits are the digits kept of a curve: more than its model is good for, few
// enough to keep the file small.
const curveDigits = 7

// shownDigits are the digits kept of what is only looked at.
const shownDigits = 6

func cutTo(v float64, digits int) float64 {
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', digits-1, 64), 64)
	if err != nil {
		return v
	}
	return r
}
