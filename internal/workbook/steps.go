package workbook

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/internal/steps"
)

// Columns of Steps that more than one block uses.
const (
	stepWaterIn  = 7
	stepWaterOut = 8
	stepWhy      = 16
	stepState    = 17
	stepPlace    = 18 // of the step among the live blocks, off the printed page
)

// stepLot is the most that the column of lots is wide: the reasons beside it take two lines.
const stepLot = 20.0

// stepModel is one step with its place.
type stepModel struct {
	route *routeModel
	no    int
	steps.Outcome
}

func (l *layout) allSteps() (out []stepModel) {
	for _, r := range l.routes {
		for i, o := range r.Run.Outcomes {
			out = append(out, stepModel{r, i + 1, o})
		}
	}
	return out
}

func (l *layout) steps() *grid {
	lot, route := l.keyWidths(0)
	widths := []float64{min(lot, stepLot), route, 7, 6.5, 9.5, 11, 10, 10.5, 10.5, 9.5, 10, 9.5, 10, 9.5, 9.5, 36, 14, 10}
	g := newGrid(sheetSteps, "What each step does. The blocks of lots and steps follow the inputs by the closed forms and curves of the program; the column State says where only a new run can.",
		tabWork, checkCell(), widths...)
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 3 // the blocks share only these columns
	all := l.allSteps()
	l.liveRows(g)
	l.resultBlock(g)
	l.stepBlock(g, all)
	l.balanceBlock(g, all)
	l.figureBlock(g, all)
	widest := 0
	for _, b := range append(l.blocks, l.lotRows) {
		widest = max(widest, b.column(b.columns[len(b.columns)-1].key))
	}
	g.widths = append(g.widths, slices.Repeat([]float64{12}, max(0, widest-stepPlace))...)
	g.printColumns = stepState
	for _, r := range []rows{l.resultRows, l.flowRows} {
		if !r.empty() {
			g.flags = append(g.flags, flag{at(stepState, r.first) + ":" + at(stepState, r.last), fmt.Sprintf("$%s=\"%s\"", at(stepState, r.first), runAgain), warn})
		}
	}
	return g
}

// stepBlock sums up the steps in the order of the routes.
func (l *layout) stepBlock(g *grid, all []stepModel) {
	first := g.table(g.next(), "Steps of the routes", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"}, {name: "Kind"},
		{name: "Agent"}, {"Water in", "mg/kg"}, {"Water out", "mg/kg"}, {"Floor", "mg/kg"}, {"Hours total", "h"}, {"Hours attended", "h"},
		{"Energy", "kWh"}, {"Cooling water", "L"}, {"Agent charged", "kg"}, {"Solvent lost", "L"}, {name: "Why it stopped in the run"}, {name: "State"}, {"Place", "1"}})
	l.flowRows = rows{first, first + len(all) - 1}
	water := func(get func(stepModel) float64) string { return formatFor(each(all, get)...) }
	in := water(func(s stepModel) float64 { return s.In.Water() * mgPerKg })
	out := water(func(s stepModel) float64 { return s.Out.Water() * mgPerKg })
	for i, s := range all {
		row := first + i
		live := s.route.stages[s.no-1]
		g.putRow(row, l.stepKey(s)...)
		from := func(unit, format string, keys ...string) cell {
			f := ""
			for _, key := range keys {
				f += fmt.Sprintf("+INDEX(%s,$%s%d)", l.liveArea(key), columnName(stepPlace), row)
			}
			if unit == "L" && keys[0] == "cooling" {
				f += "*1000"
			}
			return cell{look: formula, formula: f[1:], unit: unit, format: format}
		}
		for c, x := range []cell{
			text(plain, string(s.Kind)), text(words, s.Agent+s.Carrier),
			from("mg/kg", in, "win"), from("mg/kg", out, "wout"), seen(s.Floor*mgPerKg, "mg/kg", decimals(2)),
			from("h", decimals(2), "hours"), from("h", decimals(2), "attended", "besides"), from("kWh", decimals(2), "energy", "ovenkwh"),
			from("L", decimals(1), "cooling"), from("kg", decimals(3), "agent"), from("L", decimals(3), "loss1", "loss2", "loss3"),
			text(words, why(s.Outcome)),
			{look: formula, formula: fmt.Sprintf("INDEX(%s,$C%d)", area(stepState, l.resultRows.first, l.resultRows.last), row)},
			count(live.row - l.lotRows.rows.first + 1),
		} {
			g.put(5+c, row, x)
		}
	}
	l.noRoutes(g, first, len(all))
}

// liveArea is a common column over all live blocks.
func (l *layout) liveArea(key string) string {
	return area(commonIndex(key), l.lotRows.rows.first, l.liveLast())
}

// liveLast is the last row of the live blocks.
func (l *layout) liveLast() int {
	last := max(l.lotRows.rows.last, l.lotRows.rows.first)
	for _, b := range l.blocks {
		last = max(last, b.rows.last)
	}
	return last
}

// noRoutes says so where a block has no rows.
func (l *layout) noRoutes(g *grid, row, n int) {
	if n == 0 {
		g.put(1, row, text(plain, "No route is offered."))
	}
}

func decimals(n int) string {
	if n == 0 {
		return "#,##0"
	}
	return "#,##0." + strings.Repeat("0", n)
}

// stepKey names lot, route and step; routeKey does so without the step.
func (l *layout) stepKey(s stepModel) []cell { return append(l.routeKey(s.route), count(s.no)) }

func (l *layout) routeKey(r *routeModel) []cell {
	return []cell{text(words, r.lot.Job.Name), text(words, r.ID), count(r.no)}
}

// routeState is empty while the figures of a route belong to the inputs.
func (l *layout) routeState(r *routeModel) cell {
	return cell{look: formula, formula: on(sheetSteps, at(stepState, l.resultRows.at(r.no-1)))}
}

func why(o steps.Outcome) string {
	if o.WhyText == "" {
		return string(o.Why)
	}
	if o.Why == "" || strings.HasPrefix(o.WhyText, string(o.Why)) {
		return o.WhyText
	}
	return string(o.Why) + ": " + o.WhyText
}

// balanceDigits show a gram in a thousand tonnes.
const balanceDigits = 9

// balanceBlock shows that nothing is lost on the way: in = out + removed. Acetone makes
// water over beads, which counts with what went in.
func (l *layout) balanceBlock(g *grid, all []stepModel) {
	first := g.table(g.next(), "Balances of the steps", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"},
		{"Water in and made", "kg"}, {"Water out", "kg"}, {"Water removed", "kg"}, {"Water open", "kg"},
		{"Solvent in", "kg"}, {"Solvent out", "kg"}, {"Solvent removed", "kg"}, {"Solvent open", "kg"}})
	for i, s := range all {
		row, b := first+i, s.Balance
		g.putRow(row, l.stepKey(s)...)
		open := func(column int, in, out, removed float64) {
			in, out, removed = cutTo(in, balanceDigits), cutTo(out, balanceDigits), cutTo(removed, balanceDigits)
			g.put(column, row, number(in, "kg").shown(decimals(4)))
			g.put(column+1, row, number(out, "kg").shown(decimals(4)))
			g.put(column+2, row, number(removed, "kg").shown(decimals(4)))
			g.put(column+3, row, derived(fmt.Sprintf("%s-%s-%s", at(column, row), at(column+1, row), at(column+2, row)),
				in-out-removed).in("kg").shown("0.0E+00"))
		}
		open(5, b.WaterInKg+b.WaterMadeKg, b.WaterOutKg, b.WaterRemovedKg)
		open(9, b.SolventInKg, b.SolventOutKg, b.SolventRemovedKg)
	}
	l.stepRows = rows{first, first + len(all) - 1}
	l.noRoutes(g, first, len(all))
}

// Columns of the results of the routes.
const (
	resultLast = 4 + iota
	resultSolvent
	resultWaterKg
	resultWater
	resultTests
	resultHours
	resultDelivered
	resultAgent
	resultUnfollowed
	resultOutside
	resultOne
)

func (l *layout) resultBlock(g *grid) {
	first := g.table(g.next(), "Results of the routes, per batch", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Place of the last step", "1"},
		{"Solvent out", "kg"}, {"Water out", "kg"}, {"Water out", "mg/kg"}, {"Hours of tests", "h"}, {"Hours total", "h"}, {"Litres delivered", "L"}, {"Agent", "kg"},
		{"Followed only by the program", "1"}, {"Out of range", "1"}, {"One", "1"}})
	for c := resultOne + 1; c < stepWhy; c++ {
		g.put(c, first-1, blank(heading))
	}
	g.put(stepWhy, first-1, text(heading, "In words"))
	g.put(stepState, first-1, text(heading, "State"))
	water := l.waterFormat()
	l.resultRows = rows{first, first + len(l.routes) - 1}
	l.oneRow = first
	for i, r := range l.routes {
		row := first + i
		live := func(f, unit, format string) cell { return cell{look: formula, formula: f, unit: unit, format: format} }
		pick := func(key string) string { return fmt.Sprintf("INDEX(%s,%s)", l.liveArea(key), at(resultLast, row)) }
		sum := func(key string) string {
			return fmt.Sprintf("SUMIFS(%s,%s,$C%d)", l.liveArea(key), l.liveArea("route"), row)
		}
		last := r.stages[len(r.stages)-1]
		tests := r.Run.HoursTotal
		for _, o := range r.Run.Outcomes {
			tests -= o.HoursTotal
		}
		g.putRow(row, append(l.routeKey(r), count(last.row-l.lotRows.rows.first+1),
			live(pick("Sout"), "kg", decimals(3)), live(pick("Wout"), "kg", "0.000E+00"), live(pick("wout"), "mg/kg", water),
			number(tests, "h").shown(decimals(2)), live(sum("hours")+"+"+at(resultTests, row), "h", decimals(2)),
			l.delivered(r, row), live(sum("agent"), "kg", decimals(3)), count(l.unfollowed(r)),
			l.outside(r, row), count(1))...)
		g.put(stepWhy, row, text(words, r.Label))
		g.put(stepState, row, cell{look: formula, formula: fmt.Sprintf(`IF((%s<>"")+%s*%s+%s>0,"%s","")`, l.lotName(r.lot, "run_state"),
			at(resultUnfollowed, row), l.lotName(r.lot, "edited"), at(resultOutside, row), runAgain)})
	}
	l.noRoutes(g, first, len(l.routes))
}

// outside counts what of a route lies beyond the curves and conditions of its
// closed forms; a lot that needs no drying counts too.
func (l *layout) outside(r *routeModel, row int) cell {
	f := fmt.Sprintf("COUNTIFS(%s,$C%d,%s,0)", l.liveArea("route"), row, l.liveArea("follows"))
	if r.lot.Follow.Lot != nil {
		f += "+1-" + l.lotName(r.lot, "to_be_dried")
	}
	return cell{look: formula, formula: f, unit: "1", format: "0"}
}

// delivered is the volume of the product at room temperature, from additive volumes.
func (l *layout) delivered(r *routeModel, row int) cell {
	if r.lot.Follow.Lot == nil {
		return number(r.litres, "L").shown(decimals(3))
	}
	f := fmt.Sprintf("(%s/lot%d_solvent_density+%s/lot%d_water_density)*1000", at(resultSolvent, row), r.lot.no, at(resultWaterKg, row), r.lot.no)
	return cell{look: formula, formula: f, unit: "L", format: decimals(3)}
}

// unfollowed counts the steps of a route, and the lines of its bill, that only the
// program can follow.
func (l *layout) unfollowed(r *routeModel) (n int) {
	for _, s := range r.stages {
		if s.constants == nil {
			n++
		}
	}
	for _, line := range r.lines {
		if _, _, _, ok := l.useOf(r, line); !ok && line.Step == 0 {
			n++
		}
	}
	return n
}

func (l *layout) waterFormat() string {
	if l.waterShown == "" {
		l.waterShown = formatFor(each(l.routes, func(r *routeModel) float64 { return r.waterOut })...)
	}
	return l.waterShown
}

// figuresShown routes of a lot have their figures in the workbook; --explain prints
// those of any route.
const figuresShown = 3

func (l *layout) figureBlock(g *grid, all []stepModel) {
	row := g.table(g.next(), fmt.Sprintf("Figures of the steps, for the first %d routes of a lot", figuresShown), []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"},
		{name: "Figure"}, {}, {}, {}, {"Value", "1"}, {name: "Unit"}})
	for _, s := range all {
		if s.route.Rank < 1 || s.route.Rank > figuresShown {
			continue
		}
		for _, f := range s.Figures {
			unit := f.Unit
			if unit == "" {
				unit = "1"
			}
			g.putRow(row, append(l.stepKey(s), text(plain, f.Name))...)
			g.put(9, row, seen(f.Value, unit, formatFor(tidy(f.Value))))
			g.put(10, row, text(plain, unit))
			if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) {
				g.put(11, row, text(plain, "there is none"))
			}
			row++
		}
	}
}
