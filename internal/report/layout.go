package report

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/jedib0t/go-pretty/v6/table"
	"github.com/jedib0t/go-pretty/v6/text"
)

// width is the number of columns that the text keeps to.
const width = 100

// The library takes signs such as "°" to be two columns wide in some languages of
// the system; a report has the same lines everywhere.
func init() { text.OverrideRuneWidthEastAsianWidth(false) }

// page collects lines and remembers the first error of the writer.
type page struct {
	w   io.Writer
	err error
	all bool // every route, also those that nobody would take

	fahrenheit bool // every temperature in both units
}

func (p *page) line(s string) {
	if p.err == nil {
		_, p.err = io.WriteString(p.w, strings.TrimRight(s, " ")+"\n")
	}
}

// say prints a paragraph, indented, with the lines that follow the first set
// further in by hang columns.
func (p *page) say(indent, hang int, format string, args ...any) {
	for i, s := range wrapped(fmt.Sprintf(format, args...), width-indent-hang) {
		if i == 0 {
			p.line(strings.Repeat(" ", indent) + s)
			continue
		}
		p.line(strings.Repeat(" ", indent+hang) + s)
	}
}

func wrapped(s string, columns int) []string {
	return strings.Split(text.WrapSoft(s, columns), "\n")
}

// heading prints a line that opens a part of the text.
func (p *page) heading(s string) {
	p.line("")
	p.say(3, 0, "%s", s)
}

// column is a column of a table: a heading, whether it holds numbers, and the
// number of columns after which its text is wrapped (0: never).
type column struct {
	heading string
	number  bool
	widest  int
}

// table prints rows under their headings without any ruling.
func (p *page) table(columns []column, rows [][]string) {
	t := table.NewWriter()
	style := table.StyleDefault
	style.Options = table.OptionsNoBordersAndSeparators
	style.Box.PaddingLeft, style.Box.PaddingRight = "", "  "
	style.Format.Header = text.FormatDefault
	t.SetStyle(style)
	heads := make(table.Row, len(columns))
	configs := make([]table.ColumnConfig, len(columns))
	for i, c := range columns {
		heads[i] = c.heading
		configs[i] = table.ColumnConfig{Number: i + 1, WidthMax: c.widest, WidthMaxEnforcer: text.WrapSoft, VAlignHeader: text.VAlignBottom}
		if c.number {
			configs[i].Align, configs[i].AlignHeader = text.AlignRight, text.AlignRight
		}
	}
	t.SetColumnConfigs(configs)
	t.AppendHeader(heads)
	for _, row := range rows {
		cells := make(table.Row, len(row))
		for i, cell := range row {
			cells[i] = cell
		}
		t.AppendRow(cells)
	}
	for _, s := range strings.Split(t.Render(), "\n") {
		p.line("     " + s)
	}
}

// brokenAtPlus breaks a route id that is wider than a column after a "+".
func brokenAtPlus(id string, columns int) string {
	var b strings.Builder
	used := 0
	for _, part := range strings.SplitAfter(id, "+") {
		if used > 0 && used+len(part) > columns {
			b.WriteByte('\n')
			used = 0
		}
		b.WriteString(part)
		used += len(part)
	}
	return b.String()
}

// errShort says that the text could not be written out in full.
var errShort = errors.New("the report could not be written in full")

func (p *page) close() error {
	if p.err != nil {
		return fmt.Errorf("%w: %w", errShort, p.err)
	}
	return nil
}
