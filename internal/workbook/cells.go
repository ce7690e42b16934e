package workbook

import (
	"encoding/xml"
	"fmt"
	"io"
	"regexp"
	"slices"
	"strconv"
	"strings"
)

// The cells of a sheet are written here: the spreadsheet library keeps a text as
// often as it stands in a sheet, and a formula in every cell of its column.

// texts are the texts of a workbook, each once.
type texts struct {
	places map[string]int // as it stands in cells
	list   []string       // as it is stored
}

// gather numbers the texts in the order of the sheets.
func gather(grids []*grid) *texts {
	t := &texts{places: map[string]int{}}
	for _, g := range grids {
		for _, row := range g.rows {
			for _, c := range row {
				s, ok := c.value.(string)
				if !ok || c.formula != "" {
					continue
				}
				if _, known := t.places[s]; !known {
					t.places[s] = len(t.list)
					t.list = append(t.list, clean(s))
				}
			}
		}
	}
	return t
}

// part is the part of the package that holds the texts.
func (t *texts) part() []byte {
	out := []byte(xml.Header + `<sst xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main">`)
	for _, s := range t.list {
		out = append(out, "<si><t"...)
		if s != strings.TrimSpace(s) || strings.Contains(s, "\n") {
			out = append(out, ` xml:space="preserve"`...)
		}
		out = append(appendText(append(out, '>'), s), "</t></si>"...)
	}
	return append(out, "</sst>"...)
}

// code is what readers take for the code of a character.
var code = regexp.MustCompile(`_x[0-9A-Fa-f]{4}_`)

// appendText adds a text so that it is read as it stands.
func appendText(out []byte, s string) []byte {
	if strings.Contains(s, "_x") {
		s = code.ReplaceAllString(s, "_x005F$0")
	}
	if strings.ContainsAny(s, "&<>\n\r\t") {
		s = marks.Replace(s)
	}
	return append(out, s...)
}

var marks = strings.NewReplacer("&", "&amp;", "<", "&lt;", ">", "&gt;", "\n", "&#10;", "\r", "&#13;", "\t", "&#9;")

// shares tells which cells of a grid hold the formula of the cell above: by column
// the first and last rows of the runs, in order.
func (g *grid) shares() [][]rows {
	out := make([][]rows, len(g.widest()))
	for r, row := range g.rows {
		for c, x := range row {
			if x.tree == nil || strings.Contains(x.formula, "!") { // readers differ in what they share between sheets
				continue
			}
			runs := out[c]
			if n := len(runs); n > 0 && runs[n-1].last == r && g.rows[r-1][c].tree == x.tree {
				runs[n-1].last = r + 1
				continue
			}
			out[c] = append(runs, rows{r + 1, r + 1})
		}
	}
	for c := range out {
		out[c] = slices.DeleteFunc(out[c], func(r rows) bool { return r.first == r.last })
	}
	return out
}

// nothing is an empty cell that looks like one that is not there.
func (c *cell) nothing() bool {
	if c.value != nil || c.formula != "" {
		return false
	}
	p := paints[c.look]
	return p.paper == white && !p.outlined && !p.unlocked
}

// widest is the row with the most cells.
func (g *grid) widest() (row []cell) {
	for _, r := range g.rows {
		if len(r) > len(row) {
			row = r
		}
	}
	return row
}

// passOn is how much of a sheet is kept before it is passed on to be compressed.
const passOn = 64 << 10

// writeCells writes the rows of a grid as a sheet holds them.
func (w *file) writeCells(to io.Writer, g *grid) error {
	out := w.room
	shared, next, ids := g.shares(), make([]int, len(g.widest())), 0
	id := make([]int, len(next)) // of the formula that a column shares
	names := make([]string, len(next))
	for c := range names {
		names[c] = columnName(c + 1)
	}
	for r := range max(g.last(), g.drawnTo()) { // rows under charts too, so that their height is known
		no := strconv.Itoa(r + 1)
		out = append(append(append(out, `<row r="`...), no...), `" ht="`...)
		out = strconv.AppendFloat(out, g.height(r+1), 'f', -1, 64)
		out = append(out, `" customHeight="1">`...)
		var row []cell
		if r < len(g.rows) {
			row = g.rows[r]
		}
		for c := range row {
			x := &row[c]
			if x.nothing() {
				continue
			}
			out = append(append(append(out, `<c r="`...), names[c]...), no...)
			out = strconv.AppendInt(append(out, `" s="`...), int64(x.style), 10)
			if x.formula == "" {
				out = w.appendValue(out, x)
				continue
			}
			f := sharing{}
			if runs := shared[c]; next[c] < len(runs) && r+1 >= runs[next[c]].first {
				run := runs[next[c]]
				if r+1 == run.first {
					id[c] = ids
					ids++
					f.over = names[c] + no + ":" + names[c] + strconv.Itoa(run.last)
				}
				if f.id, f.shared = id[c], true; r+1 == run.last {
					next[c]++
				}
			}
			var err error
			if out, err = appendFormula(out, x, f); err != nil {
				return err
			}
		}
		out = append(out, "</row>"...)
		if len(out) > passOn {
			if _, err := to.Write(out); err != nil {
				return err
			}
			out = out[:0]
		}
	}
	w.room = out
	return nil
}

// sharedDigits are the digits stored of what a shared formula gives. A reader that
// does not calculate shows no more; one that does has all of them again. Some
// calculate the shared formulas alone: what those read is stored in full.
const sharedDigits = 10

// sharing says that a cell holds the formula that others hold too; the first of
// them names the cells.
type sharing struct {
	shared bool
	id     int
	over   string
}

// appendValue adds what a cell holds that is no formula.
func (w *file) appendValue(out []byte, x *cell) []byte {
	switch v := x.value.(type) {
	case string:
		out = strconv.AppendInt(append(out, `" t="s"><v>`...), int64(w.texts.places[v]), 10)
	case float64:
		out = strconv.AppendFloat(append(out, `"><v>`...), v, 'G', -1, 64)
	default:
		return append(out, `"/>`...)
	}
	return append(out, "</v></c>"...)
}

// appendFormula adds a formula and what it gives.
func appendFormula(out []byte, x *cell, f sharing) ([]byte, error) {
	s, isText := x.value.(string)
	v, isNumber := x.value.(float64)
	switch {
	case isText:
		out = append(out, `" t="str">`...)
	case isNumber:
		out = append(out, `">`...)
	default:
		return nil, fmt.Errorf("formula %q gives %T", x.formula, x.value)
	}
	switch {
	case !f.shared:
		out = append(appendText(append(out, "<f>"...), x.formula), "</f><v>"...)
	case f.over == "":
		out = append(strconv.AppendInt(append(out, `<f t="shared" si="`...), int64(f.id), 10), `"/><v>`...)
	default:
		out = append(append(append(out, `<f t="shared" ref="`...), f.over...), `" si="`...)
		out = append(appendText(append(strconv.AppendInt(out, int64(f.id), 10), `">`...), x.formula), "</f><v>"...)
	}
	if isText {
		out = appendText(out, clean(s))
	} else {
		if f.shared {
			v = cutTo(v, sharedDigits)
		}
		out = strconv.AppendFloat(out, v, 'G', -1, 64)
	}
	return append(out, "</v></c>"...), nil
}
