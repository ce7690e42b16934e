package workbook

import (
	"cmp"
	"errors"
	"fmt"
	"io"
	"maps"
	"slices"
	"strings"

	"parch/internal/study"
)

// Names of the sheets, in order.
const (
	sheetReadMe    = "Read me"
	sheetDecision  = "Decision"
	sheetInputs    = "Inputs"
	sheetPrices    = "Prices"
	sheetCurves    = "Curves"
	sheetSteps     = "Steps"
	sheetCosts     = "Costs"
	sheetCompare   = "Compare"
	sheetRanges    = "Ranges"
	sheetBuying    = "Buying"
	sheetBenchCard = "Bench card"
	sheetChecks    = "Checks"
	sheetSources   = "Sources"
)

// Colours of the tabs, one for each kind of sheet.
const (
	tabText   = "6B6B6B"
	tabInput  = "143D6B"
	tabWork   = "2E4F46"
	tabResult = "7A4B12"
	tabCheck  = "5B2A6B"
)

// Write writes the report as a workbook. Nothing is written if a number cannot
// be stored or a price is missing.
func Write(w io.Writer, r *study.Report) error {
	if r == nil || r.Job == nil {
		return errors.New("workbook: no report")
	}
	m, err := newModel(r)
	if err != nil {
		return fmt.Errorf("workbook: %w", err)
	}
	l, e, err := layLive(m)
	if err != nil {
		return fmt.Errorf("workbook: %w", err)
	}
	if err := e.fillAll(l.grids); err != nil {
		return fmt.Errorf("workbook: %w", err)
	}
	out := &file{title: "Drying routes: " + r.Job.Title, created: r.CatalogDate, grids: l.grids, names: l.names}
	if err := out.write(w); err != nil {
		return fmt.Errorf("workbook: %w", err)
	}
	return nil
}

// layLive lays out the sheets. Steps that the sheet would get wrong are given up and
// shown as values of the program.
func layLive(m *model) (*layout, *evaluator, error) {
	for {
		l := lay(m)
		if err := l.forget(); err != nil {
			return nil, nil, err
		}
		e, err := newEvaluator(l.grids, l.names)
		if err != nil {
			return nil, nil, err
		}
		again, err := l.fallBack(e)
		if err := errors.Join(err, l.failed); err != nil || !again {
			return l, e, err
		}
	}
}

// forget leaves no value with a formula but what the sheets compute for it, and
// refuses other values that a sheet cannot hold.
func (l *layout) forget() error {
	for _, g := range l.grids {
		for r, row := range g.rows {
			for c := range row {
				if row[c].formula != "" {
					row[c].value = nil
				} else if err := row[c].check(); err != nil {
					return fmt.Errorf("sheet %s, cell %s: %w", g.name, at(c+1, r+1), err)
				}
			}
		}
	}
	return nil
}

// fillAll gives every formula the value that the sheets compute for it.
func (e *evaluator) fillAll(grids []*grid) error {
	for _, g := range grids {
		if err := e.fill(g); err != nil {
			return err
		}
	}
	return nil
}

// lay lays out all sheets; the first names the others.
func lay(m *model) *layout {
	l := &layout{model: m}
	l.inOrder()
	add := func(sheets ...func() *grid) {
		for _, sheet := range sheets {
			l.grids = append(l.grids, sheet())
		}
	}
	add(l.inputs, l.priceList, l.curves, l.steps, l.costs, l.compare, l.ranges, l.buying, l.benchCard)
	l.grids = append([]*grid{l.decision()}, l.grids...) // it shows what later sheets hold
	add(l.checks, l.sources)
	l.workPages()
	l.grids = append([]*grid{l.readMe()}, l.grids...)
	for _, g := range l.grids {
		g.paginate()
	}
	return l
}

// layout places the model on sheets. Each sheet notes where others find its rows.
type layout struct {
	*model
	grids []*grid
	names []definedName

	inputRows     rows
	lotInputs     []rows // inputs of each lot
	objectiveRow  int
	objectiveList rows
	siteEdits     rows
	usesRow       map[string]int // of the uses of an agent
	yesNoList     rows
	sieveList     rows
	priceRows     rows
	flowRows      rows              // steps, one by one
	curveRows     map[curveKey]rows // places in the columns of their kind
	curveColumns  []curveColumn
	lotRows       *liveBlock
	blocks        []*liveBlock
	stepRows      rows // balances
	resultRows    rows // results of the routes
	oneRow        int  // holds the number one in the column of results
	failed        error
	lineRows      rows // bill
	headRows      rows // cost by head
	writtenRows   rows // the same, written to the cent
	litreRows     rows // cost per litre
	rankRows      rows // target and rank
	compareRows   rows
	along         map[int]along // by lot
	waterShown    string        // format of the water that the routes leave
	pricesShown   string        // format of prices
	rangeRows     rows          // ranges
}

// rows is a run of rows; it is empty where last < first.
type rows struct{ first, last int }

func (r rows) empty() bool         { return r.last < r.first }
func (r rows) at(i int) int        { return r.first + i }
func (r rows) column(c int) string { return area(c, r.first, r.last) }

func (l *layout) name(name, sheet string, column, row int) {
	l.names = append(l.names, definedName{name, on(sheet, fixed(column, row))})
}

func (l *layout) lotName(lot *lotModel, what string) string {
	return fmt.Sprintf("lot%d_%s", lot.no, what)
}

func priceName(item, unit string) string {
	return "price_" + strings.ReplaceAll(item, "-", "_") + "_" + unit
}

func (l *layout) currency() string { return l.report.Job.Currency }

func (l *layout) money(per string) string {
	if per == "" {
		return l.currency()
	}
	return l.currency() + "/" + symbol(per)
}

// symbol is how the unit of a price is written for the reader.
func symbol(unit string) string {
	switch unit {
	case "hour":
		return "h"
	case "kwh":
		return "kWh"
	case "litre":
		return "L"
	case "m3":
		return "m³"
	case "each":
		return "piece"
	}
	return unit
}

func sortedKeys[K cmp.Ordered, V any](m map[K]V) []K { return slices.Sorted(maps.Keys(m)) }

// checkCell shows the state of all checks at the top of a sheet.
func checkCell() cell { return cell{look: message, formula: "check_message", value: checksHold} }

const (
	checksHold    = "All checks hold"
	runAgain      = "run parch again"
	follows       = "the sheet follows"
	followsWithin = "follows within its curves"
)
