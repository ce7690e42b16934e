package workbook

import (
	"fmt"
	"math"
	"strings"

	"parch/internal/steps"
)

// Columns of Steps that more than one block uses.
const (
	stepWaterIn  = 7
	stepWaterOut = 8
	stepWhy      = 17
	stepState    = 18
)

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
	g := newGrid(sheetSteps, "What each step does, computed by the program. These values change only by a new run; the column State says when one is needed.",
		tabWork, checkCell(), 26, 30, 10, 9, 10, 14, 10, 10, 10, 10, 10, 10, 12, 10, 10, 10, 44, 18)
	g.mixed, g.frozenRows, g.frozenColumns = true, frameRows, 3 // the blocks share only these columns
	all := l.allSteps()
	l.stepBlock(g, all)
	l.balanceBlock(g, all)
	l.resultBlock(g)
	l.figureBlock(g, all)
	l.settingBlock(g)
	g.flags = append(g.flags, flag{fmt.Sprintf("R6:R%d", g.last()), "$R6=\"" + runAgain + "\"", warn})
	return g
}

func (l *layout) stepBlock(g *grid, all []stepModel) {
	first := g.table(frameRows+2, "Steps", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"}, {name: "Kind"},
		{name: "Agent"}, {"Water in", "mg/kg"}, {"Water out", "mg/kg"}, {"Floor", "mg/kg"}, {"Hours total", "h"}, {"Hours attended", "h"},
		{"Energy", "kWh"}, {"Cooling water", "L"}, {"Agent charged", "kg"}, {"Solvent lost", "L"}, {"Waste", "kg"}, {name: "Why it stops"}, {name: "State"}})
	l.flowRows = rows{first, first + len(all) - 1}
	water := func(get func(stepModel) float64) string { return formatFor(each(all, get)...) }
	in := water(func(s stepModel) float64 { return s.In.Water() * mgPerKg })
	out := water(func(s stepModel) float64 { return s.Out.Water() * mgPerKg })
	floor, hours := decimals(2), decimals(2)
	for i, s := range all {
		row := first + i
		g.putRow(row, l.stepKey(s)...)
		for c, x := range []cell{
			text(plain, string(s.Kind)), text(words, s.Agent),
			number(s.In.Water()*mgPerKg, "mg/kg").shown(in), number(s.Out.Water()*mgPerKg, "mg/kg").shown(out),
			finite(s.Floor*mgPerKg, "mg/kg", floor),
			number(s.HoursTotal, "h").shown(hours), number(s.HoursAttended, "h").shown(hours),
			number(s.EnergyKWh, "kWh").shown(hours), number(s.CoolingWaterL, "L").shown(decimals(1)),
			number(s.AgentKg, "kg").shown(decimals(3)), number(s.SolventLostL, "L").shown(decimals(3)),
			number(s.WasteKg, "kg").shown(decimals(3)), text(words, why(s.Outcome)), l.stateLink(s.route.lot),
		} {
			g.put(5+c, row, x)
		}
	}
	l.noRoutes(g, first, len(all))
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

func (l *layout) stateLink(lot *lotModel) cell {
	return cell{look: formula, formula: l.lotName(lot, "run_state"), value: ""}
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

// balanceBlock shows that nothing is lost on the way: in = out + removed.
func (l *layout) balanceBlock(g *grid, all []stepModel) {
	first := g.table(g.next(), "Balances of the steps", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"},
		{"Water in", "kg"}, {"Water out", "kg"}, {"Water removed", "kg"}, {"Water open", "kg"},
		{"Solvent in", "kg"}, {"Solvent out", "kg"}, {"Solvent removed", "kg"}, {"Solvent open", "kg"}})
	for i, s := range all {
		row, b := first+i, s.Balance
		g.putRow(row, l.stepKey(s)...)
		open := func(column int, in, out, removed float64) {
			g.put(column, row, number(in, "kg").shown(decimals(4)))
			g.put(column+1, row, number(out, "kg").shown(decimals(4)))
			g.put(column+2, row, number(removed, "kg").shown(decimals(4)))
			g.put(column+3, row, derived(fmt.Sprintf("%s-%s-%s", at(column, row), at(column+1, row), at(column+2, row)),
				tidy(in)-tidy(out)-tidy(removed)).in("kg").shown("0.0E+00"))
		}
		open(5, b.WaterInKg, b.WaterOutKg, b.WaterRemovedKg)
		open(9, b.SolventInKg, b.SolventOutKg, b.SolventRemovedKg)
	}
	l.stepRows = rows{first, first + len(all) - 1}
	l.noRoutes(g, first, len(all))
}

// Columns of the results of the routes.
const (
	resultWater = 4 + iota
	resultHours
	resultAttended
	resultEnergy
	resultCooling
	resultLost
	resultDelivered
	resultAgent
	resultWaste
	resultCarbon
)

func (l *layout) resultBlock(g *grid) {
	first := g.table(g.next(), "Results of the routes, per batch", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"},
		{"Water out", "mg/kg"}, {"Hours total", "h"}, {"Hours attended", "h"}, {"Energy", "kWh"}, {"Cooling water", "L"}, {"Solvent lost", "L"},
		{"Litres delivered", "L"}, {"Agent", "kg"}, {"Waste", "kg"}, {"Emissions", "kg CO2e"}})
	for _, c := range []int{14, 15, 16} {
		g.put(c, first-1, blank(heading))
	}
	g.put(stepWhy, first-1, text(heading, "In words"))
	g.put(stepState, first-1, text(heading, "State"))
	water := l.waterFormat()
	for i, r := range l.routes {
		row, run := first+i, r.Run
		agent := 0.0
		for _, key := range sortedKeys(run.AgentKg) {
			agent += run.AgentKg[key]
		}
		g.putRow(row, append(l.routeKey(r),
			number(r.waterOut, "mg/kg").shown(water), number(run.HoursTotal, "h").shown(decimals(2)),
			number(run.HoursAttended, "h").shown(decimals(2)), number(run.EnergyKWh, "kWh").shown(decimals(2)),
			number(run.CoolingWaterL, "L").shown(decimals(1)), number(run.SolventLostL, "L").shown(decimals(3)),
			number(run.LitresDelivered, "L").shown(decimals(3)), number(agent, "kg").shown(decimals(3)),
			number(run.WasteKg, "kg").shown(decimals(3)), finite(run.CO2eKg, "kg CO2e", decimals(2)))...)
		g.put(stepWhy, row, text(words, r.Label))
		g.put(stepState, row, l.stateLink(r.lot))
	}
	l.resultRows = rows{first, first + len(l.routes) - 1}
	l.noRoutes(g, first, len(l.routes))
}

func (l *layout) waterFormat() string {
	return formatFor(each(l.routes, func(r *routeModel) float64 { return r.waterOut })...)
}

func (l *layout) figureBlock(g *grid, all []stepModel) {
	row := g.table(g.next(), fmt.Sprintf("Figures of the steps, for the first %d routes of a lot and for single steps", mostDrawn), []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {"Step", "1"},
		{name: "Figure"}, {}, {}, {}, {"Value", "1"}, {name: "Unit"}})
	for _, s := range all {
		if first := s.route.Rank > 0 && s.route.Rank <= mostDrawn; !first && len(s.route.Run.Outcomes) > 1 {
			continue
		}
		for _, f := range s.Figures {
			unit := f.Unit
			if unit == "" {
				unit = "1"
			}
			g.putRow(row, append(l.stepKey(s), text(plain, f.Name))...)
			g.put(9, row, finite(f.Value, unit, formatFor(tidy(f.Value))))
			g.put(10, row, text(plain, unit))
			if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) {
				g.put(11, row, text(plain, "there is none"))
			}
			row++
		}
	}
}

// settingBlock lists what was tuned; doses follow from it.
func (l *layout) settingBlock(g *grid) {
	row := g.table(g.next(), "Settings of the routes", []column{{name: "Lot"}, {name: "Route id"}, {"Route no", "1"}, {},
		{name: "Setting"}, {}, {}, {}, {"Value", "1"}, {name: "Unit"}})
	for _, r := range l.routes {
		put := func(name string, value cell, unit string) {
			g.putRow(row, append(l.routeKey(r), blank(plain), text(plain, name))...)
			g.put(9, row, value)
			g.put(10, row, text(plain, unit))
			row++
		}
		s := r.Run.Settings
		for i, w := range s.HandOverMgPerKg {
			put(fmt.Sprintf("water handed over by step %d", i+1), number(w, "mg/kg").shown(formatFor(tidy(w))), "mg/kg")
		}
		for i, h := range s.SoakHours {
			put(fmt.Sprintf("time of soak %d", i+1), number(h, "h").shown(formatFor(tidy(h))), "h")
		}
		for i, word := range s.Sieve {
			put(fmt.Sprintf("sieve of soak %d", i+1), text(program, word), "")
		}
	}
}
