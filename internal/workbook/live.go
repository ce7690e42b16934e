package workbook

import (
	"fmt"
	"regexp"
	"strings"
)

// liveColumn is a column of a block of live steps. Its formula is written with
// braces for the cells that it reads:
//
//	{key}      the cell of that column in the same row
//	{lot.key}  the cell of that column in the row of the lot
//	{own.key}  the input of that name of the lot, lot1_key
//	{set}      the settings of the routes on Inputs
//
// A column without a formula holds a constant of the program.
type liveColumn struct{ key, name, unit, formula string }

// liveBlock is one kind of step: one formula per column.
type liveBlock struct {
	kind, title string
	columns     []liveColumn // the common ones filled in, then the block's own
	rows        rows
	grid        *grid
}

// Columns that all blocks of Steps share, so that a step finds the one that feeds it.
var commonColumns = []liveColumn{
	{key: "lot", name: "Lot"}, {key: "id", name: "Route id"}, {key: "route", name: "Route no", unit: "1"}, {key: "step", name: "Step", unit: "1"},
	{key: "lotno", name: "Lot no", unit: "1"}, {key: "fed", name: "Fed by row", unit: "1"},
	{key: "S", name: "Solvent in", unit: "kg"}, {key: "W", name: "Water in", unit: "kg"}, {key: "win", name: "Water in", unit: "mg/kg"},
	{key: "goal", name: "Asked for", unit: "kg/kg"},
	{key: "Sout", name: "Solvent out", unit: "kg"}, {key: "Wout", name: "Water out", unit: "kg"}, {key: "wout", name: "Water out", unit: "mg/kg"},
	{key: "hours", name: "Hours total", unit: "h"}, {key: "attended", name: "Hours attended", unit: "h"}, {key: "energy", name: "Energy", unit: "kWh"},
	{key: "cooling", name: "Cooling water", unit: "m3"}, {key: "agent", name: "Agent charged", unit: "kg"},
	{key: "loss1", name: "Solvent lost, first cause", unit: "L"}, {key: "loss2", name: "Solvent lost, second cause", unit: "L"}, {key: "loss3", name: "Solvent lost, third cause", unit: "L"},
	{key: "waste1", name: "Waste, first kind", unit: "kg"}, {key: "waste2", name: "Waste, second kind", unit: "kg"},
	{key: "used", name: "Agent used up", unit: "kg"}, {key: "ovenkwh", name: "Oven", unit: "kWh"}, {key: "besides", name: "Work besides", unit: "h"}, {key: "gas", name: "Gas to flush sieve", unit: "m3"},
	{key: "pieces", name: "Vessels", unit: "1"}, {key: "bought", name: "Bought", unit: "L"}, {key: "open", name: "Solvent open", unit: "kg"},
	{key: "follows", name: "In range", unit: "1"},
}

func commonIndex(key string) int {
	for i, c := range commonColumns {
		if c.key == key {
			return i + 1
		}
	}
	return 0
}

// ownFirst is the first column of what only one kind of step has.
func ownFirst() int { return len(commonColumns) + 2 }

// column is where a key stands in a block.
func (b *liveBlock) column(key string) int {
	for i, c := range b.columns {
		if c.key == key {
			if i < len(commonColumns) {
				return i + 1
			}
			return i - len(commonColumns) + ownFirst()
		}
	}
	return 0
}

// newLiveBlock joins the common columns, with the block's formulas for them, and
// the block's own.
func newLiveBlock(kind, title string, common map[string]string, own []liveColumn) *liveBlock {
	b := &liveBlock{kind: kind, title: title}
	for _, c := range commonColumns {
		c.formula = common[c.key]
		b.columns = append(b.columns, c)
	}
	b.columns = append(b.columns, own...)
	seen := map[string]bool{}
	for _, c := range b.columns {
		if seen[c.key] {
			panic("two columns of the block " + kind + " are called " + c.key)
		}
		seen[c.key] = true
	}
	return b
}

// isKey reports whether a common column says which step a row is.
func isKey(key string) bool {
	i := commonIndex(key)
	return i > 0 && i <= commonIndex("fed")
}

var braces = regexp.MustCompile(`\{[a-z]*\.?[A-Za-z0-9 _/-]+\}`)

// expand writes the formula of a column for a row.
func (b *liveBlock) expand(formula string, row int, lots *liveBlock, lotNo int) (string, error) {
	var failed error
	out := braces.ReplaceAllStringFunc(formula, func(s string) string {
		key := s[1 : len(s)-1]
		switch {
		case strings.HasPrefix(key, "own."):
			return fmt.Sprintf("lot%d_%s", lotNo, key[4:])
		case strings.HasPrefix(key, "lot."):
			if c := lots.column(key[4:]); c > 0 {
				name := columnName(c)
				return fmt.Sprintf("INDEX(%s$%d:%s$%d,$%s%d)", name, lots.rows.first, name, lots.rows.last, columnName(commonIndex("lotno")), row)
			}
		default:
			if c := b.column(key); c > 0 {
				return at(c, row)
			}
		}
		failed = fmt.Errorf("block %s: no column %s in %q", b.kind, key, formula)
		return s
	})
	return out, failed
}

// lookup is the value of a curve between two of its nodes, place and share known.
func lookup(curve, place, share string) string {
	return fmt.Sprintf("INDEX(%[1]s,{%[2]s})+{%[3]s}*(INDEX(%[1]s,{%[2]s}+1)-INDEX(%[1]s,{%[2]s}))", curve, place, share)
}

// placeIn is the node of a curve below a value: a row of all curves of its kind. A
// value is at a node but for the noise of the arithmetic.
func placeIn(curve, value string) string {
	return fmt.Sprintf("IFERROR(MIN(MATCH({%[2]s}*(1+job_tie),INDEX(%[1]s,{from}):INDEX(%[1]s,{to}),1)+{from}-1,{to}-1),{from})", curve, value)
}

// shareIn is how far a water content lies between two nodes, in its logarithm.
func shareIn(curve, place, value string) string {
	return fmt.Sprintf("LN({%[3]s}/INDEX(%[1]s,{%[2]s}))/LN(INDEX(%[1]s,{%[2]s}+1)/INDEX(%[1]s,{%[2]s}))", curve, place, value)
}
