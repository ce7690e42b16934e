package workbook

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/routes"
	"parch/internal/steps"
)

// liveRows lays out the lots and the steps, each kind in its block, in the order in
// which routes take them: what feeds a step stands above it.
func (l *layout) liveRows(g *grid) {
	l.lotRows = lotsBlock()
	l.lotRows.grid = g
	row := g.table(frameRows+2, l.lotRows.title, l.lotRows.headings())
	l.lotRows.rows = rows{row, row - 1}
	for _, lot := range l.lots {
		if lot.Follow.Lot == nil {
			continue
		}
		l.lotRows.rows.last = row
		lot.row, lot.place = row, row-l.lotRows.rows.first+1
		l.putLive(l.lotRows, row, lot, nil, lotConstants(lot))
		l.name(l.lotName(lot, "solvent_density"), sheetSteps, l.lotRows.column("ds"), row)
		l.name(l.lotName(lot, "to_be_dried"), sheetSteps, commonIndex("follows"), row)
		l.name(l.lotName(lot, "water_density"), sheetSteps, l.lotRows.column("dw"), row)
		row++
	}
	l.blocks = nil
	l.liveBlock(g, valuesBlock(), -1)
	for i, k := range liveBlocks {
		l.liveBlock(g, k.make(), i)
	}
}

// headings of a block, with a gap between what all have and its own.
func (b *liveBlock) headings() (out []column) {
	for i, c := range b.columns {
		if i == len(commonColumns) {
			out = append(out, column{})
		}
		out = append(out, column{c.name, c.unit})
	}
	return out
}

func lotConstants(lot *lotModel) map[string]float64 {
	k := lot.Follow.Lot
	m := map[string]float64{"fourpi": 4 / math.Pi, "third": 1.0 / 3}
	for key, name := range map[string]string{"dw": "water kg/m3", "ds": "solvent kg/m3", "mw": "water kg/mol", "ms": "solvent kg/mol", "sat": "saturated kg/kg",
		"vesselm3": "vessel m3", "vesselfrom": "vessel from m3", "vesselto": "vessel to m3", "stillm3": "still m3", "stillfrom": "still from m3", "stillto": "still to m3", "stillw": "still W"} {
		m[key] = k[name]
	}
	return m
}

// liveBlock puts the steps of one kind; place is that of the kind, -1 for values.
func (l *layout) liveBlock(g *grid, b *liveBlock, place int) {
	var all []*stageModel
	for _, r := range l.routes {
		for _, s := range r.stages {
			if s.place() == place {
				all = append(all, s)
			}
		}
	}
	if len(all) == 0 {
		return
	}
	b.grid = g
	first := g.table(g.next(), b.title, b.headings())
	b.rows = rows{first, first + len(all) - 1}
	l.blocks = append(l.blocks, b)
	for i, s := range all {
		s.row = first + i
		constants := valuesOf(s)
		if place >= 0 {
			constants = l.constantsOf(s)
		}
		l.putLive(b, s.row, s.route.lot, s, constants)
	}
}

// putLive fills a row: what the step is, its constants and its formulas.
func (l *layout) putLive(b *liveBlock, row int, lot *lotModel, s *stageModel, constants map[string]float64) {
	g := b.grid
	if s == nil {
		g.putRow(row, text(words, lot.Job.Name), blank(plain), blank(plain), blank(plain), count(lot.place))
	} else {
		fed := lot.row
		if s.no > 1 {
			fed = s.route.stages[s.no-2].row
		}
		g.putRow(row, text(words, lot.Job.Name), text(words, s.route.ID), count(s.route.no), count(s.no), count(lot.place), count(max(0, fed-l.lotRows.rows.first+1)))
	}
	for _, c := range b.columns {
		if c.unit == "" || isKey(c.key) {
			continue
		}
		column := b.column(c.key)
		f := c.formula
		if f == "" && (c.key == "S" || c.key == "W") && s.place() >= 0 {
			out := commonIndex(c.key + "out")
			f = fmt.Sprintf("INDEX(%s,{fed})", area(out, l.lotRows.rows.first, b.rows.first-3))
		}
		if f == "" {
			g.put(column, row, number(cutTo(constants[c.key], constantDigits), c.unit).shown("0.00E+00"))
			continue
		}
		expanded, err := b.expand(f, row, l.lotRows, lot.no)
		l.failed = errors.Join(l.failed, err)
		g.put(column, row, cell{look: formula, formula: expanded, unit: c.unit, format: formatOfUnit(c.unit)})
	}
}

// constantDigits are the digits kept of the constants of a step.
const constantDigits = 10

// formatOfUnit is how numbers of a unit are shown in the blocks of steps.
func formatOfUnit(unit string) string {
	switch unit {
	case "kg", "L", "h", "kWh", "mg/kg", "m":
		return "#,##0.000"
	case "1":
		return "General"
	}
	return "0.00E+00"
}

// fallBack computes the live steps and gives up those that the sheet gets wrong; it
// reports whether there were any.
func (l *layout) fallBack(e *evaluator) (again bool, err error) {
	g := e.grids[sheetSteps]
	for _, b := range l.blocks {
		for _, r := range l.routes {
			for _, s := range r.stages {
				if s.constants == nil || s.row < b.rows.first || s.row > b.rows.last {
					continue
				}
				get := func(key string) float64 {
					v, ok := e.cell(g, b.column(key), s.row).(float64)
					if !ok {
						return math.NaN()
					}
					return v
				}
				if l.wrong(s, get) {
					s.constants, again = nil, true
				}
			}
		}
	}
	return again, e.failed
}

// useOf is the cell of Steps that a line of a bill counts, and how often; ok is
// false where only the program knows the quantity.
func (l *layout) useOf(r *routeModel, line lineModel) (row, column int, times float64, ok bool) {
	one := func() (int, int, float64, bool) { return l.oneRow, resultOne, line.quantity, true }
	if line.Step == 0 {
		if line.Head == steps.Purchase {
			return l.resultRows.at(r.no - 1), resultDelivered, 1, true
		}
		row, column, times, _ = one()
		return row, column, times, line.Head == steps.Testing
	}
	s := r.stages[line.Step-1]
	if s.constants == nil {
		row, column, times, _ = one()
		return row, column, times, line.Head == steps.Equipment
	}
	key := keyOfUse(s, line)
	switch {
	case key == "pieces":
		return s.row, commonIndex(key), line.quantity / pieces(s), true
	case key != "":
		return s.row, commonIndex(key), 1, true
	}
	row, column, times, _ = one()
	return row, column, times, line.Head == steps.Equipment
}

func pieces(s *stageModel) float64 {
	if n := s.Figure("vessels"); n > 0 {
		return n
	}
	return 1
}

// keyOfUse is the column of a step that a line of its bill counts, "" for none.
func keyOfUse(s *stageModel, line lineModel) string {
	switch line.Head {
	case steps.Labour:
		if line.Basis == fmt.Sprintf("attended hours of the %s", s.Kind) {
			return "attended"
		}
		return "besides"
	case steps.Energy:
		if line.Basis == routes.FlushGasBasis {
			return "gas"
		}
		if s.Kind == steps.Soak || s.Kind == steps.Column {
			if line.Basis != stirrerBasis && line.Basis != "pump power x hours" {
				return "ovenkwh"
			}
		}
		return "energy"
	case steps.CoolingWater:
		if line.Item == "cooling-water" {
			return "cooling"
		}
	case steps.Agent:
		return "used"
	case steps.Purchase:
		return "bought"
	case steps.SolventLost:
		for i, loss := range s.Losses {
			if loss.Cause == line.Basis {
				return fmt.Sprintf("loss%d", i+1)
			}
		}
	case steps.Waste:
		for i, d := range s.Discards {
			if d.What == line.Basis {
				return fmt.Sprintf("waste%d", i+1)
			}
		}
		if line.Basis == routes.FlushedSolvent {
			return "waste2"
		}
		if len(s.Discards) == 0 {
			return "waste1" // beads, or a lot that is given up
		}
	case steps.Equipment:
		if s.Kind == steps.Soak && line.perYear && line.Item != "oven" && s.Figure("vessels") > 1 {
			return "pieces"
		}
	}
	return ""
}
