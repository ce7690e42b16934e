package workbook

import (
	"errors"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

func TestEverySheetPrintsAndProtects(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { everySheetPrintsAndProtects(t, k.book) })
	}
}

func everySheetPrintsAndProtects(t *testing.T, b *book) {
	for _, sheet := range b.sheets {
		part := string(b.parts[b.part[sheet]])
		tall, way := "0", "landscape"
		if sheet == sheetDecision {
			tall, way = "1", "portrait"
		}
		fit := []string{`fitToWidth="1"`, `fitToHeight="` + tall + `"`, `fitToPage="true"`}
		if sheet == sheetBenchCard {
			way, fit = "portrait", []string{` scale="`}
		}
		for _, want := range append(fit, `orientation="`+way+`"`, `<sheetProtection`, `state="frozen"`, `<tabColor`, `showGridLines="false"`) {
			if !strings.Contains(part, want) {
				t.Errorf("%s: no %s", sheet, want)
			}
		}
		if strings.Contains(part, ` password=`) || strings.Contains(part, "hashValue") {
			t.Errorf("%s is protected by a password", sheet)
		}
	}
	workbook := string(b.parts["xl/workbook.xml"])
	withoutTitles := 2 // Decision and Bench card print on a page each
	for name, n := range map[string]int{"_xlnm.Print_Titles": len(b.sheets) - withoutTitles, "_xlnm.Print_Area": len(b.sheets)} {
		if got := strings.Count(workbook, name); got != n {
			t.Errorf("%s stands %d times, want %d", name, got, n)
		}
	}
	if strings.Contains(workbook, `state="hidden"`) || strings.Contains(workbook, "externalReference") {
		t.Error("hidden sheets or links to other files")
	}
	if !strings.Contains(workbook, "fullCalcOnLoad") {
		t.Error("the file does not ask to be recalculated")
	}
}

// Exactly the inputs are unlocked, and each has a limit with a message.
func TestInputsAreUnlockedAndLimited(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { inputsAreUnlockedAndLimited(t, k.layout) })
	}
}

func inputsAreUnlockedAndLimited(t *testing.T, l *layout) {
	for _, g := range l.grids {
		limited := map[string]bool{}
		for _, l := range g.limits {
			if l.prompt == "" || l.refuse == "" || len(l.prompt) > 255 || len(l.refuse) > 225 {
				t.Errorf("%s!%s: message %q, %q", g.name, l.place, l.prompt, l.refuse)
			}
			from, to, ok := strings.Cut(l.place, ":")
			if !ok {
				to = from
			}
			for _, p := range cellsOf(t, from, to) {
				limited[p] = true
			}
		}
		inputs := 0
		for r, row := range g.rows {
			for c, x := range row {
				if unlocked := paints[x.look].unlocked; unlocked != limited[at(c+1, r+1)] {
					t.Errorf("%s!%s: unlocked %v, limited %v", g.name, at(c+1, r+1), unlocked, !unlocked)
				} else if unlocked {
					inputs++
				}
			}
		}
		if (g.name == sheetInputs || g.name == sheetPrices && len(l.prices) > 0) && inputs < 5 {
			t.Errorf("%s has %d inputs", g.name, inputs)
		}
	}
}

func cellsOf(t *testing.T, from, to string) (out []string) {
	t.Helper()
	firstColumn, firstRow, err1 := excelize.CellNameToCoordinates(from)
	lastColumn, lastRow, err2 := excelize.CellNameToCoordinates(to)
	if err := errors.Join(err1, err2); err != nil {
		t.Fatal(err)
	}
	for r := firstRow; r <= lastRow; r++ {
		for c := firstColumn; c <= lastColumn; c++ {
			out = append(out, at(c, r))
		}
	}
	return out
}

// Properties come from the report, not from a clock.
func TestPropertiesHaveNoClock(t *testing.T) {
	r := demo(t)
	b := readBook(t, written(t, r))
	core := string(b.parts["docProps/core.xml"])
	for _, want := range []string{"<dc:creator>parch</dc:creator>", r.CatalogDate + "T00:00:00Z"} {
		if !strings.Contains(core, want) {
			t.Errorf("no %s in %s", want, core)
		}
	}
	if app := string(b.parts["docProps/app.xml"]); !strings.Contains(app, "<Application>parch</Application>") {
		t.Errorf("properties: %s", app)
	}
}

// Numbers never stand in a merged cell: merges are for running text only, which on a
// card follows the chosen route and on Decision the route that leads.
func TestMergesHoldText(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { mergesHoldText(t, k.layout) })
	}
}

func mergesHoldText(t *testing.T, l *layout) {
	for _, g := range l.grids {
		for _, m := range g.merged {
			if m.first <= g.printColumns && m.last > g.printColumns {
				t.Errorf("%s!%s runs over the edge of the printed page", g.name, at(m.first, m.row))
			}
			for c := m.first; c <= m.last; c++ {
				x := g.rows[m.row-1][c-1]
				_, sentence := x.value.(string)
				if x.isNumber() || x.formula != "" && !(sentence && (g.name == sheetBenchCard || g.name == sheetDecision) && x.look == words) {
					t.Errorf("%s!%s is merged and holds %v", g.name, at(c, m.row), x.value)
				}
			}
		}
	}
}

// sheetOrder is the order of the parts of a worksheet that the schema of the file
// format prescribes (ISO/IEC 29500-1, CT_Worksheet; from memory), as far as used.
var sheetOrder = []string{"sheetPr", "dimension", "sheetViews", "sheetFormatPr", "cols", "sheetData", "sheetProtection", "mergeCells",
	"conditionalFormatting", "dataValidations", "hyperlinks", "pageMargins", "pageSetup", "headerFooter", "rowBreaks", "colBreaks", "drawing"}

func TestSheetsFollowTheSchema(t *testing.T) {
	for _, k := range everyKind(t) {
		t.Run(k.name, func(t *testing.T) { sheetsFollowTheSchema(t, k.book) })
	}
}

func sheetsFollowTheSchema(t *testing.T, b *book) {
	for _, sheet := range b.sheets {
		var e element
		b.decode(t, b.part[sheet], &e)
		last := 0
		for _, c := range e.Children {
			i := slices.Index(sheetOrder, c.XMLName.Local)
			if i < last {
				t.Errorf("%s: %s does not belong where it stands", sheet, c.XMLName.Local)
			}
			last = max(last, i)
		}
		if part := string(b.parts[b.part[sheet]]); !regexp.MustCompile(`<dimension ref="A1:[A-Z]+\d+">`).MatchString(part) {
			t.Errorf("%s does not say how large it is", sheet)
		}
	}
}

// Read me leads to every other sheet, in their order.
func TestReadMeNamesEverySheet(t *testing.T) {
	b := readBook(t, written(t, demo(t)))
	if len(b.sheets) != len(sheetPurposes)+1 {
		t.Fatalf("%d sheets, %d of them named", len(b.sheets), len(sheetPurposes))
	}
	for i, s := range sheetPurposes {
		if b.sheets[i+1] != s[0] {
			t.Errorf("sheet %d is %s, Read me names %s", i+2, b.sheets[i+1], s[0])
		}
	}
}
