package workbook

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/xuri/excelize/v2"
)

// cell is one cell of a grid. A formula carries the value it must have. A large
// workbook has a million of them: the fields are ordered so that they take little room.
type cell struct {
	value   any    // nil, string or float64
	formula string // without "="
	format  string // number format
	unit    string // unit of a number; "1" for a pure count
	tree    *node  // of the formula, once it is read
	style   int32  // of the file
	look    look
	right   bool // heading of a column of numbers
	running bool // while the formula is computed
}

func (c cell) as(l look) cell            { c.look = l; return c }
func (c cell) shown(format string) cell  { c.format = format; return c }
func text(l look, s string) cell         { return cell{look: l, value: s} }
func number(v float64, unit string) cell { return cell{look: program, value: tidy(v), unit: unit} }
func count(n int) cell                   { return number(float64(n), "1").shown("0") }
func derived(f string, v any) cell {
	return cell{look: formula, formula: f, value: tidyAny(v), unit: "1"}
}
func (c cell) in(unit string) cell        { c.unit = unit; return c }
func blank(l look) cell                   { return cell{look: l} }
func (c cell) isNumber() bool             { _, ok := c.value.(float64); return ok }
func at(column, row int) string           { return columnName(column) + strconv.Itoa(row) }
func fixed(column, row int) string        { return "$" + columnName(column) + "$" + strconv.Itoa(row) }
func area(column, first, last int) string { return fixed(column, first) + ":" + fixed(column, last) }
func on(sheet, place string) string       { return quotedSheet(sheet) + "!" + place }
func columnName(column int) (name string) { name, _ = excelize.ColumnNumberToName(column); return name }

// quotedSheet is the name of a sheet as formulas and links write it.
func quotedSheet(name string) string {
	if strings.Contains(name, " ") {
		return "'" + name + "'"
	}
	return name
}

// significantDigits is what a sheet keeps of a number.
const significantDigits = 15

// tidy rounds to the digits a sheet keeps, so that the writer cannot cut any off.
func tidy(v float64) float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return v // refused when the grid is written
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', significantDigits-1, 64), 64)
	if err != nil || r == 0 {
		return 0
	}
	return r
}

func tidyAny(v any) any {
	if f, ok := v.(float64); ok {
		return tidy(f)
	}
	return v
}

// longestText is the most characters a cell can hold.
const longestText = 32767

// clean makes text safe to store: control characters become spaces, and what a
// cell cannot hold is cut.
func clean(s string) string {
	s = strings.ToValidUTF8(s, "\uFFFD")
	s = strings.Map(func(r rune) rune {
		if (r < ' ' && r != '\n') || r == 0x7F || r == 0xFFFE || r == 0xFFFF {
			return ' '
		}
		return r
	}, s)
	if utf8.RuneCountInString(s) > longestText/2 {
		s = string([]rune(s)[:longestText/2-1]) + "…"
	}
	return s
}

// grid is a sheet in memory.
type grid struct {
	name, purpose string
	tab           string // colour
	rows          [][]cell
	widths        []float64
	heights       map[int]float64
	frozenRows    int
	frozenColumns int
	mixed         bool // blocks with different columns follow each other
	bannerRows    int  // rows below the top that name the run
	printColumns  int
	printed       []rows // what is printed; all rows where there is none
	heads         rows   // of the only block that is printed: its name and its headings
	portrait      bool
	onePage       bool // the whole sheet on one printed page
	percent       int  // scale of printing; 0: as wide as the page
	limits        []limit
	flags         []flag
	charts        []placed
	merged        []merge
	flows         bool  // parts run on over pages as soon as they begin on one
	parts         []int // rows at which parts start that are to stay on one printed page
	listsFrom     int   // from this row on there are lists; 0: none
	breaks        []int // rows that start a printed page
	links         []jump
	boldRows      rows // in which a mark can make the first columns bold
	boldColumns   int
}

// jump is a cell and the place in the workbook that a click on it leads to.
type jump struct{ from, to string }

// merge is a run of cells in a row that holds one text. Numbers are never merged.
type merge struct{ row, first, last int }

// limit is a data validation of one or more input cells.
type limit struct {
	place          string
	low, high      float64
	words          string // range of allowed words; low and high are ignored then
	prompt, refuse string
}

// flag colours a place while a condition holds.
type flag struct {
	place, condition string
	look             look
}

func (g *grid) put(column, row int, c cell) {
	for len(g.rows) < row {
		g.rows = append(g.rows, nil)
	}
	cells := g.rows[row-1]
	if column > cap(cells) {
		room := column
		if row > 1 { // most rows are as long as the one above
			room = max(room, len(g.rows[row-2]))
		}
		cells = append(make([]cell, 0, room), cells...)
	}
	if column > len(cells) {
		cells = cells[:column]
		g.rows[row-1] = cells
	}
	cells[column-1] = c
}

// link writes a text that leads to a place in the workbook.
func (g *grid) link(column, row int, s, to string) {
	g.put(column, row, text(link, s))
	g.links = append(g.links, jump{at(column, row), to})
}

func (g *grid) putRow(row int, cells ...cell) {
	for i, c := range cells {
		g.put(i+1, row, c)
	}
}

// across writes running text over several columns.
func (g *grid) across(first, last, row int, l look, s string) {
	for column := first; column <= last; column++ {
		g.put(column, row, blank(l))
	}
	g.put(first, row, text(l, oneLine(s)))
	g.merged = append(g.merged, merge{row, first, last})
}

func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }

func (g *grid) last() int { return len(g.rows) }

// next is the first row of a new block: one row is left blank above it.
func (g *grid) next() int { return len(g.rows) + 2 }

// frameRows are the rows above the first block of every sheet.
const frameRows = 3

// newGrid lays out what every sheet has at its top: its name, what it is for, the
// way back and the state of the checks.
func newGrid(name, purposeText, tab string, check cell, widths ...float64) *grid {
	g := &grid{name: name, purpose: purposeText, tab: tab, widths: widths, heights: map[int]float64{}, printColumns: len(widths)}
	g.put(1, 1, text(title, name))
	g.put(1, 2, text(purpose, purposeText))
	g.link(1, 3, "Read me", on(sheetReadMe, "A1"))
	g.put(2, 3, check)
	g.flags = append(g.flags,
		flag{"B3", "check_total=0", pass},
		flag{"B3", "check_total<>0", fail})
	return g
}

// column is a column of a table.
type column struct{ name, unit string }

// heading joins name and unit: "Water out / (mg/kg)". A pure count has none.
func (c column) heading() string {
	switch {
	case c.unit == "" || c.unit == "1":
		return c.name
	case strings.ContainsAny(c.unit, "/ "):
		return fmt.Sprintf("%s / (%s)", c.name, c.unit)
	}
	return c.name + " / " + c.unit
}

// table starts a block: its heading in one row, its columns in the next. It
// returns the row of the first entry.
func (g *grid) table(row int, name string, columns []column) int {
	g.put(1, row, text(block, name))
	for i, c := range columns {
		h := text(heading, c.heading())
		h.right = c.unit != ""
		g.put(i+1, row+1, h)
	}
	return row + 2
}

// check refuses what must not reach a file.
func (g *grid) check() error {
	for r, row := range g.rows {
		for c, x := range row {
			if err := x.check(); err != nil {
				return fmt.Errorf("sheet %s, cell %s: %w", g.name, at(c+1, r+1), err)
			}
		}
	}
	return nil
}

func (c cell) check() error {
	switch v := c.value.(type) {
	case nil:
		if c.formula != "" {
			return fmt.Errorf("formula %q without a value", c.formula)
		}
	case string:
	case float64:
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("%g is not a number that a sheet can hold", v)
		}
		if c.unit == "" {
			return fmt.Errorf("%g has no unit", v)
		}
	default:
		return fmt.Errorf("%T cannot be stored", v)
	}
	return nil
}
