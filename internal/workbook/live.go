package workbook

import (
	"fmt"
	"strconv"
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
	columns     []liveColumn   // the common ones filled in, then the block's own
	places      map[string]int // of the keys
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
func (b *liveBlock) column(key string) int { return b.places[key] }

// newLiveBlock joins the common columns, with the block's formulas for them, and
// the block's own.
func newLiveBlock(kind, title string, common map[string]string, own []liveColumn) *liveBlock {
	b := &liveBlock{kind: kind, title: title, places: map[string]int{}}
	for _, c := range commonColumns {
		c.formula = common[c.key]
		b.columns = append(b.columns, c)
	}
	b.columns = append(b.columns, own...)
	for i, c := range b.columns {
		if b.places[c.key] > 0 {
			panic("two columns of the block " + kind + " are called " + c.key)
		}
		b.places[c.key] = i + 1
		if i >= len(commonColumns) {
			b.places[c.key] = i - len(commonColumns) + ownFirst()
		}
	}
	return b
}

// isKey reports whether a common column says which step a row is.
func isKey(key string) bool {
	i := commonIndex(key)
	return i > 0 && i <= commonIndex("fed")
}

// expand writes the formula of a column for a row.
func (b *liveBlock) expand(formula string, row int, lots *liveBlock, lotNo int) (string, error) {
	var out strings.Builder
	for rest := formula; ; {
		before, after, found := strings.Cut(rest, "{")
		out.WriteString(before)
		if !found {
			return out.String(), nil
		}
		key, left, _ := strings.Cut(after, "}")
		place := b.placeOf(key, row, lots, lotNo)
		if place == "" {
			return formula, fmt.Errorf("block %s: no column %s in %q", b.kind, key, formula)
		}
		out.WriteString(place)
		rest = left
	}
}

// placeOf is what stands for a key in a formula, "" for an unknown one.
func (b *liveBlock) placeOf(key string, row int, lots *liveBlock, lotNo int) string {
	if own, ok := strings.CutPrefix(key, "own."); ok {
		return "lot" + strconv.Itoa(lotNo) + "_" + own
	}
	if ofLot, ok := strings.CutPrefix(key, "lot."); ok {
		c := lots.column(ofLot)
		if c == 0 {
			return ""
		}
		name := columnName(c)
		return fmt.Sprintf("INDEX(%s$%d:%s$%d,$%s%d)", name, lots.rows.first, name, lots.rows.last, columnName(commonIndex("lotno")), row)
	}
	if c := b.column(key); c > 0 {
		return at(c, row)
	}
	return ""
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
