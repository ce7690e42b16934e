package workbook

import (
	"errors"
	"fmt"
	"io"
	"regexp"
	"time"

	"github.com/xuri/excelize/v2"
)

// definedName is a name for one cell.
type definedName struct{ name, place string }

// validName is a name that no reader takes for a cell: lower case words joined by
// underscores.
var validName = regexp.MustCompile(`^[a-z][a-z0-9]*(_[a-z0-9]+)+$`)

// file is a workbook ready to be written.
type file struct {
	title, created string // created is an ISO date
	grids          []*grid
	names          []definedName
	drawn          map[string][]cell // what the charts refer to
	emitter        *emitter
	texts          *texts
	room           []byte // of a sheet, what is not yet passed on
}

// write checks everything, then writes the package.
func (w *file) write(out io.Writer) (err error) {
	if err := w.check(); err != nil {
		return err
	}
	f := excelize.NewFile()
	defer func() { err = errors.Join(err, f.Close()) }()
	f.SetZipWriter(func(out io.Writer) excelize.ZipWriter {
		return &parts{out: out, make: w.makePart, done: map[string]packed{}}
	})
	if err := w.prepare(f); err != nil {
		return err
	}
	if err := f.SetCellStr(w.grids[0].name, "A1", ""); err != nil { // makes the part that holds the texts
		return err
	}
	w.emitter = &emitter{file: f, styles: map[styled]int32{}, overlays: map[look]int{}}
	w.texts = gather(w.grids)
	if err := w.emitter.setStyles(w.grids); err != nil {
		return err
	}
	if err := w.lookUpDrawn(); err != nil {
		return err
	}
	for _, g := range w.grids {
		if err := w.emitter.sheet(g); err != nil {
			return fmt.Errorf("sheet %s: %w", g.name, err)
		}
	}
	return f.Write(out)
}

func (w *file) check() error {
	if _, err := time.Parse(time.DateOnly, w.created); err != nil {
		return fmt.Errorf("date of the catalog: %q is not a date like 2026-12-01", w.created)
	}
	seen := map[string]bool{}
	var problems []error
	for _, n := range w.names {
		if !validName.MatchString(n.name) {
			problems = append(problems, fmt.Errorf("%q cannot be the name of a cell", n.name))
		}
		if seen[n.name] {
			problems = append(problems, fmt.Errorf("two cells would have the name %s", n.name))
		}
		seen[n.name] = true
	}
	for _, g := range w.grids {
		problems = append(problems, g.check())
	}
	return errors.Join(problems...)
}

func (w *file) prepare(f *excelize.File) error {
	if err := f.SetDefaultFont(typeface); err != nil {
		return err
	}
	for i, g := range w.grids {
		if i == 0 {
			if err := f.SetSheetName("Sheet1", g.name); err != nil {
				return err
			}
			continue
		}
		if _, err := f.NewSheet(g.name); err != nil {
			return err
		}
	}
	for _, n := range w.names {
		if err := f.SetDefinedName(&excelize.DefinedName{Name: n.name, RefersTo: n.place}); err != nil {
			return fmt.Errorf("name %s: %w", n.name, err)
		}
	}
	stamp := w.created + "T00:00:00Z"
	if err := f.SetDocProps(&excelize.DocProperties{Creator: "parch", LastModifiedBy: "parch", Title: clean(w.title),
		Created: stamp, Modified: stamp}); err != nil {
		return err
	}
	if err := f.SetAppProps(&excelize.AppProperties{Application: "parch"}); err != nil {
		return err
	}
	full := true
	return f.SetCalcProps(&excelize.CalcPropsOptions{FullCalcOnLoad: &full})
}

// emitter writes grids and keeps the styles that they share.
type emitter struct {
	file     *excelize.File
	styles   map[styled]int32
	overlays map[look]int
}

func (e *emitter) sheet(g *grid) error {
	if err := e.view(g); err != nil {
		return err
	}
	sw, err := e.file.NewStreamWriter(g.name)
	if err != nil {
		return err
	}
	if err := widths(sw, g.widths); err != nil {
		return err
	}
	if g.frozenRows > 0 {
		if err := sw.SetPanes(panes(g)); err != nil {
			return err
		}
	}
	for _, row := range g.breaks {
		if err := sw.InsertPageBreak(at(1, row)); err != nil {
			return err
		}
	}
	for _, m := range g.merged {
		if err := sw.MergeCell(at(m.first, m.row), at(m.last, m.row)); err != nil {
			return err
		}
	}
	for _, step := range []func(*grid) error{e.links, e.conditions, e.validations, e.drawings, e.page, e.protect} {
		if err := step(g); err != nil {
			return err
		}
	}
	return sw.Flush()
}

// widths sets those of columns that follow each other and are alike at once. The
// writer puts the last one first.
func widths(sw *excelize.StreamWriter, list []float64) error {
	for last := len(list); last > 0; {
		first := last
		for first > 1 && list[first-2] == list[last-1] {
			first--
		}
		if err := sw.SetColWidth(first, last, list[last-1]); err != nil {
			return err
		}
		last = first - 1
	}
	return nil
}

func panes(g *grid) *excelize.Panes {
	corner := at(g.frozenColumns+1, g.frozenRows+1)
	p := &excelize.Panes{Freeze: true, XSplit: g.frozenColumns, YSplit: g.frozenRows, TopLeftCell: corner, ActivePane: "bottomLeft"}
	if g.frozenColumns > 0 {
		p.ActivePane = "bottomRight"
	}
	p.Selection = []excelize.Selection{{SQRef: corner, ActiveCell: corner, Pane: p.ActivePane}}
	return p
}

// setStyles gives all cells their styles, in the order of the sheets.
func (e *emitter) setStyles(grids []*grid) error {
	for _, g := range grids {
		for _, row := range g.rows {
			for c := range row {
				x := &row[c]
				if x.nothing() {
					continue
				}
				var err error
				if x.style, err = e.style(styled{x.look, x.format, x.isNumber() || x.right}); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

func (e *emitter) style(s styled) (int32, error) {
	if id, ok := e.styles[s]; ok {
		return id, nil
	}
	id, err := e.file.NewStyle(s.style())
	e.styles[s] = int32(id)
	return int32(id), err
}

func (e *emitter) links(g *grid) error {
	for _, l := range g.links {
		if err := e.file.SetCellHyperLink(g.name, l.from, l.to, "Location"); err != nil {
			return err
		}
	}
	return nil
}

func (e *emitter) conditions(g *grid) error {
	for _, f := range g.flags {
		id, ok := e.overlays[f.look]
		if !ok {
			var err error
			if id, err = e.file.NewConditionalStyle(f.look.overlay()); err != nil {
				return err
			}
			e.overlays[f.look] = id
		}
		format := id
		options := []excelize.ConditionalFormatOptions{{Type: "formula", Criteria: f.condition, Format: &format}}
		if err := e.file.SetConditionalFormat(g.name, f.place, options); err != nil {
			return err
		}
	}
	return nil
}

func (e *emitter) validations(g *grid) error {
	for _, l := range g.limits {
		v := excelize.NewDataValidation(false)
		v.SetSqref(l.place)
		if l.words != "" {
			v.SetSqrefDropList(l.words)
		} else if err := v.SetRange(l.low, l.high, excelize.DataValidationTypeDecimal, excelize.DataValidationOperatorBetween); err != nil {
			return err
		}
		v.SetInput("Input", l.prompt)
		v.SetError(excelize.DataValidationErrorStyleStop, "Not allowed", l.refuse)
		if err := e.file.AddDataValidation(g.name, v); err != nil {
			return err
		}
	}
	return nil
}
