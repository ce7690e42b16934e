package catalog

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"slices"
	"strconv"
	"strings"
)

// table is a long list of numbers kept as CSV: a line of headings and a line a
// row. Lines that begin with # are remarks.
type table struct {
	name     string
	headings []string
	rows     []row
	problems []string
	dropped  int // problems beyond those kept
}

type row struct {
	table *table
	line  int
	cells []string
}

const mostTableProblems = 50

// readTable reads a table that must have the given headings, in that order.
func readTable(fsys fs.FS, name string, headings ...string) *table {
	t := &table{name: name, headings: headings}
	data, err := fs.ReadFile(fsys, name)
	if err != nil {
		t.fail(0, "%v", err)
		return t
	}
	r := csv.NewReader(bytes.NewReader(data))
	r.Comment, r.FieldsPerRecord, r.ReuseRecord = '#', len(headings), false
	first, err := r.Read()
	if err == nil && !slices.Equal(first, headings) {
		t.fail(1, "the headings are not %s", strings.Join(headings, ","))
		return t
	}
	for err == nil {
		var cells []string
		if cells, err = r.Read(); err == nil {
			line, _ := r.FieldPos(0)
			t.rows = append(t.rows, row{t, line, cells})
		}
	}
	var parse *csv.ParseError
	switch {
	case errors.As(err, &parse):
		t.fail(parse.Line, "%v", parse.Err)
	case err.Error() != "EOF":
		t.fail(0, "%v", err)
	}
	return t
}

func (t *table) fail(line int, format string, args ...any) {
	if len(t.problems) >= mostTableProblems {
		t.dropped++
		return
	}
	where := t.name
	if line > 0 {
		where = fmt.Sprintf("%s:%d", t.name, line)
	}
	t.problems = append(t.problems, where+": "+fmt.Sprintf(format, args...))
}

func (t *table) err() error {
	if len(t.problems) == 0 {
		return nil
	}
	lines := t.problems
	if t.dropped > 0 {
		lines = append(slices.Clone(lines), fmt.Sprintf("%s: %d more problems are not shown", t.name, t.dropped))
	}
	return errors.New(strings.Join(lines, "\n"))
}

func (r row) fail(heading, format string, args ...any) {
	r.table.fail(r.line, "%s: %s", heading, fmt.Sprintf(format, args...))
}

func (r row) text(heading string) string {
	return strings.TrimSpace(r.cells[slices.Index(r.table.headings, heading)])
}

// number reads a finite number within bounds.
func (r row) number(heading string, low, high float64) float64 {
	text := r.text(heading)
	x, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		r.fail(heading, "%q is not a number", text)
		return 0
	}
	if x < low || x > high {
		r.fail(heading, "%q is outside %g to %g", text, low, high)
	}
	return x
}

// maybe is number for a cell that may be empty; ok is false where it is.
func (r row) maybe(heading string, low, high float64) (x float64, ok bool) {
	if r.text(heading) == "" {
		return 0, false
	}
	return r.number(heading, low, high), true
}

// oneOf reads one of the words.
func (r row) oneOf(heading string, words ...string) string {
	text := r.text(heading)
	if !slices.Contains(words, text) {
		r.fail(heading, "%q is not allowed here; allowed: %s", text, strings.Join(words, ", "))
	}
	return text
}

// keyIn reads the key of an entry that must be known.
func keyIn[V any](r row, heading string, known map[string]V) string {
	key := r.text(heading)
	if _, ok := known[key]; !ok {
		r.fail(heading, "%q is not known in the catalog", key)
	}
	return key
}
