package workbook

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"parch/internal/study"
)

// The rules of this file are the project's own conventions for its workbook; they
// follow common modelling practice (separate inputs, no constants in formulas, one
// formula per column, short formulas, flow in one direction, checks).

var wantSheets = []string{"Read me", "Decision", "Inputs", "Prices", "Curves", "Steps", "Costs", "Compare", "Ranges", "Buying", "Bench card", "Checks", "Sources"}

var (
	quoted     = regexp.MustCompile(`"[^"]*"`)
	reference  = regexp.MustCompile(`(?:([A-Za-z]+|'[^']+')!)?\$?([A-Z]{1,3})\$?([0-9]+)(?::\$?([A-Z]{1,3})\$?([0-9]+))?`)
	parts1     = regexp.MustCompile(`(\$?)([A-Z]{1,3})(\$?)([0-9]+)`)
	function   = regexp.MustCompile(`([A-Z][A-Z.]*)\(`)
	nameInText = regexp.MustCompile(`\b[a-z][a-z0-9]*(?:_[a-z0-9]+)+\b`)
	literal    = regexp.MustCompile(`[0-9]+(?:\.[0-9]+)?(?:[eE][-+]?[0-9]+)?`)
)

var allowedFunctions = []string{"ABS", "AND", "COUNT", "COUNTIF", "COUNTIFS", "EXP", "IF", "IFERROR", "INDEX", "INT", "ISERROR", "ISNA", "ISNUMBER", "LEN", "LN", "MATCH", "MAX", "MIN", "NOT", "OR", "ROUND", "ROWS", "SMALL", "SUM", "SUMIFS", "SUMPRODUCT"}

// eachFormula calls f for every formula of a workbook of every kind.
func eachFormula(t *testing.T, f func(k kind, sheet, place, formula string)) {
	t.Helper()
	for i, k := range everyKind(t) {
		n := 0
		for _, sheet := range k.book.sheets {
			for place, c := range k.book.cells[sheet] {
				if c.formula != "" {
					f(k, sheet, place, c.formula)
					n++
				}
			}
		}
		if i == 0 && n < 300 {
			t.Errorf("only %d formulas: the demonstration should have hundreds", n)
		}
	}
}

func TestSheetsInOrder(t *testing.T) {
	b := readBook(t, written(t, demo(t)))
	if !slices.Equal(b.sheets, wantSheets) {
		t.Errorf("sheets %q, want %q", b.sheets, wantSheets)
	}
}

func TestNoConstantsInFormulas(t *testing.T) {
	eachFormula(t, func(k kind, sheet, place, formula string) {
		s := quoted.ReplaceAllString(formula, "")
		s = nameInText.ReplaceAllString(s, "")
		s = reference.ReplaceAllString(s, "")
		for _, n := range literal.FindAllString(s, -1) {
			if !slices.Contains([]string{"0", "1", "60", "100", "1000"}, n) {
				t.Errorf("%s: %s!%s: constant %s in %s", k.name, sheet, place, n, formula)
			}
		}
	})
}

func TestFormulasAreShortAndPlain(t *testing.T) {
	eachFormula(t, func(k kind, sheet, place, formula string) {
		if len(formula) > 120 {
			t.Errorf("%s: %s!%s: %d characters: %s", k.name, sheet, place, len(formula), formula)
		}
		for _, f := range function.FindAllStringSubmatch(quoted.ReplaceAllString(formula, ""), -1) {
			if !slices.Contains(allowedFunctions, f[1]) {
				t.Errorf("%s: %s!%s: function %s is not on the list", k.name, sheet, place, f[1])
			}
		}
		if strings.Contains(formula, "ROUND(") && !strings.Contains(formula, "job_money_decimals)") { // money is rounded once, nothing else is
			t.Errorf("%s: %s!%s: rounded: %s", k.name, sheet, place, formula)
		}
		if d := ifDepth(formula); d > 1 {
			t.Errorf("%s: %s!%s: IF within IF: %s", k.name, sheet, place, formula)
		}
	})
}

// ifDepth is the depth to which IF is nested.
func ifDepth(formula string) (deepest int) {
	s := quoted.ReplaceAllString(formula, "")
	var open []bool
	depth := 0
	for i, r := range s {
		switch r {
		case '(':
			isIf := strings.HasSuffix(s[:i], "IF") && !strings.HasSuffix(s[:i], "COUNTIF")
			open = append(open, isIf)
			if isIf {
				depth++
				deepest = max(deepest, depth)
			}
		case ')':
			if open[len(open)-1] {
				depth--
			}
			open = open[:len(open)-1]
		}
	}
	return deepest
}

func TestIfDepth(t *testing.T) {
	for formula, want := range map[string]int{"IF(A1>0,1,0)": 1, "IF(A1>0,IF(B1>0,1,0),0)": 2, "IF(A1,1,0)+IF(B1,1,0)": 1, `COUNTIF(A1:A9,"IF(IF(")`: 0} {
		if got := ifDepth(formula); got != want {
			t.Errorf("%s: depth %d, want %d", formula, got, want)
		}
	}
}

// Every sheet may look back, none forward; Decision, which sums up, and the state
// of the checks at the top of each sheet are the exceptions.
func TestReferencesPointBack(t *testing.T) {
	order := func(sheet string) int { return slices.Index(wantSheets, strings.Trim(sheet, "'")) }
	eachFormula(t, func(k kind, sheet, place, formula string) {
		b := k.book
		if sheet == sheetDecision {
			return
		}
		s := quoted.ReplaceAllString(formula, "")
		for _, r := range reference.FindAllStringSubmatch(nameInText.ReplaceAllString(s, ""), -1) {
			if r[1] != "" && order(r[1]) > order(sheet) {
				t.Errorf("%s: %s!%s looks forward: %s", k.name, sheet, place, formula)
			}
		}
		for _, n := range nameInText.FindAllString(s, -1) {
			to, _, ok := strings.Cut(b.names[n], "!")
			if !ok {
				t.Errorf("%s: %s!%s: no cell is named %s", k.name, sheet, place, n)
			} else if order(to) > order(sheet) && (place != "B3" || n != "check_message") {
				t.Errorf("%s: %s!%s looks forward by name: %s", k.name, sheet, place, formula)
			}
		}
	})
}

func TestReferencesLandOnContent(t *testing.T) {
	eachFormula(t, func(k kind, sheet, place, formula string) {
		b := k.book
		s := nameInText.ReplaceAllString(quoted.ReplaceAllString(formula, ""), "")
		for _, r := range reference.FindAllStringSubmatch(s, -1) {
			to := sheet
			if r[1] != "" {
				to = strings.Trim(r[1], "'")
			}
			if r[4] == "" && !filled(b.cells[to][r[2]+r[3]]) {
				t.Errorf("%s: %s!%s: nothing in %s!%s%s", k.name, sheet, place, to, r[2], r[3])
			}
			if r[4] != "" && !anyFilled(t, b.cells[to], r[2]+r[3], r[4]+r[5]) {
				t.Errorf("%s: %s!%s: nothing in %s", k.name, sheet, place, r[0])
			}
		}
	})
}

func filled(c stored) bool { return c.formula != "" || c.raw != "" || c.text != "" }

func anyFilled(t *testing.T, cells map[string]stored, from, to string) bool {
	c1, r1, err1 := excelize.CellNameToCoordinates(from)
	c2, r2, err2 := excelize.CellNameToCoordinates(to)
	if err1 != nil || err2 != nil || r2 < r1 || c2 < c1 {
		t.Errorf("range %s:%s", from, to)
		return false
	}
	for r := r1; r <= r2; r++ {
		for c := c1; c <= c2; c++ {
			if filled(cells[at(c, r)]) {
				return true
			}
		}
	}
	return false
}

// A column of a table holds one formula. Names of lots and prices differ by row
// and count as one; Inputs and the first columns of Checks are lists, not tables.
func TestOneFormulaPerColumn(t *testing.T) {
	compared := 0
	for _, k := range everyKind(t) {
		compared += oneFormulaPerColumn(t, k)
	}
	if compared < 200 {
		t.Errorf("only %d pairs of formulas compared", compared)
	}
}

func oneFormulaPerColumn(t *testing.T, k kind) (compared int) {
	t.Helper()
	b, lists := k.book, map[string]bool{"Inputs C": true, "Checks C": true, "Checks D": true}
	for _, sheet := range b.sheets {
		for place, c := range b.cells[sheet] {
			column, row, err := excelize.CellNameToCoordinates(place)
			if err != nil {
				t.Fatal(err)
			}
			above := b.cells[sheet][at(column, max(row-1, 1))]
			if c.formula == "" || above.formula == "" || row == 1 || lists[sheet+" "+columnName(column)] {
				continue
			}
			compared++
			if x, y := relative(t, above.formula, column, row-1), relative(t, c.formula, column, row); x != y {
				t.Errorf("%s: %s!%s differs from the cell above: %s, %s", k.name, sheet, place, above.formula, c.formula)
			}
		}
	}
	return compared
}

var (
	lotName  = regexp.MustCompile(`\blot[0-9]+_`)
	itemName = regexp.MustCompile(`\bprice_[a-z0-9_]+`)
)

// relative rewrites references as offsets from the cell.
func relative(t *testing.T, formula string, column, row int) string {
	formula = itemName.ReplaceAllString(lotName.ReplaceAllString(formula, "lot_"), "price_item")
	return parts1.ReplaceAllStringFunc(formula, func(s string) string {
		m := parts1.FindStringSubmatch(s)
		c, err := excelize.ColumnNameToNumber(m[2])
		if err != nil {
			t.Fatal(err)
		}
		r, err := strconv.Atoi(m[4])
		if err != nil {
			t.Fatal(err)
		}
		out := fmt.Sprintf("R[%d]C[%d]", r-row, c-column)
		if m[3] != "" {
			out = fmt.Sprintf("R%dC[%d]", r, c-column)
		}
		if m[1] != "" {
			out = out[:strings.Index(out, "C")] + fmt.Sprintf("C%d", c)
		}
		return out
	})
}

// Every number has its unit in its heading, above the heading or in its row.
func TestEveryNumberHasAUnit(t *testing.T) {
	for _, k := range everyKind(t) {
		for _, g := range k.layout.grids {
			for r, row := range g.rows {
				for c, x := range row {
					if x.isNumber() && x.unit != "1" && !unitShown(g, r, c, x.unit) {
						t.Errorf("%s: %s!%s: %q stands nowhere near", k.name, g.name, at(c+1, r+1), x.unit)
					}
				}
			}
		}
	}
}

func unitShown(g *grid, r, c int, unit string) bool {
	for _, x := range g.rows[r] {
		if s, ok := x.value.(string); ok && (s == unit || strings.HasSuffix(unit, "/"+s)) {
			return true
		}
	}
	for above := r - 1; above >= 0; above-- {
		if c >= len(g.rows[above]) || g.rows[above][c].look != heading {
			continue
		}
		s := g.rows[above][c].value.(string)
		if strings.Contains(s, unit) || above > 0 && c < len(g.rows[above-1]) && g.rows[above-1][c].value == unit {
			return true
		}
		title, _ := g.rows[above-1][0].value.(string)
		return strings.HasSuffix(title, ", "+unit)
	}
	return false
}

func layoutOf(t *testing.T) *layout {
	t.Helper()
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l := lay(m)
	return l
}

func TestNamesOfWhatMayBeEdited(t *testing.T) {
	r := demo(t)
	b := readBook(t, written(t, r))
	want := []string{"check_total", "price_technician_hour", "price_electricity_kwh"}
	for i := range r.Lots {
		for _, s := range []string{"batch_litres", "batches_per_year", "start_water", "target_water"} {
			want = append(want, fmt.Sprintf("lot%d_%s", i+1, s))
		}
	}
	for _, p := range r.Book {
		want = append(want, priceName(p.Item, p.Unit))
	}
	for _, n := range want {
		if b.names[n] == "" {
			t.Errorf("no cell is named %s", n)
			continue
		}
		if _, _, c := b.named(t, n); c.kind != "" && c.kind != "n" {
			t.Errorf("%s is no number: %+v", n, c)
		}
	}
	for name, place := range b.names {
		if strings.HasPrefix(name, "_xlnm.") {
			continue
		}
		if !validName.MatchString(name) || !strings.Contains(place, "!") {
			t.Errorf("name %s at %s", name, place)
		}
	}
}

func TestPriceNames(t *testing.T) {
	for _, c := range [][3]string{{"sieve-3a", "kg", "price_sieve_3a_kg"}, {"still-20l", "each", "price_still_20l_each"},
		{"cooling-water", "m3", "price_cooling_water_m3"}, {"technician", "hour", "price_technician_hour"}} {
		if got := priceName(c[0], c[1]); got != c[2] {
			t.Errorf("priceName(%s, %s) = %s, want %s", c[0], c[1], got, c[2])
		}
	}
}

func TestAllChecksHold(t *testing.T) {
	for _, k := range everyKind(t) {
		if _, _, c := k.book.named(t, "check_total"); c.raw != "0" {
			t.Errorf("%s: check_total is %q", k.name, c.raw)
		}
		for _, sheet := range k.book.sheets {
			if c := k.book.cells[sheet]["B3"]; c.text != checksHold || c.formula != "check_message" {
				t.Errorf("%s: %s!B3: %+v", k.name, sheet, c)
			}
		}
	}
}

func TestCompareHeadings(t *testing.T) {
	r := demo(t)
	b := readBook(t, written(t, r))
	want := []string{"Lot", "Route id", "Reaches target", "Water out / (mg/kg)", "Hours attended / h", "Cost per batch", "Cost per litre", "Rank"}
	cells := b.cells["Compare"]
	first := 0
	for row := 1; row < 20 && first == 0; row++ {
		if cells[at(1, row)].text == "Lot" {
			first = row + 1
		}
	}
	for i, h := range want {
		if got := cells[at(i+1, first-1)].text; got != h {
			t.Errorf("heading %d is %q, want %q", i+1, got, h)
		}
	}
	row := first
	for _, lot := range r.Lots {
		for _, route := range lot.Routes {
			rank := ""
			if route.Rank > 0 {
				rank = strconv.Itoa(route.Rank)
			}
			perBatch, _ := cells[at(6, row)].number()
			if cells[at(2, row)].text != route.ID || cells[at(3, row)].text != yesNo(route.Meets()) || cells[at(8, row)].raw != rank ||
				math.Abs(perBatch-route.Bill.PerBatch.InexactFloat64()) > 0.005 {
				t.Errorf("row %d does not show %s of %s", row, route.ID, lot.Job.Name)
			}
			row++
		}
	}
}

// Every cost, total, rank and cost per litre is a formula.
func TestCostsAreLive(t *testing.T) {
	l := layoutOf(t)
	b := readBook(t, written(t, demo(t)))
	for _, check := range []struct {
		sheet   string
		rows    rows
		columns []int
	}{
		{"Costs", l.lineRows, []int{billQty, billBatch, billPrice, billAmount}},
		{"Costs", l.headRows, []int{4, 5, 6, 7, 8, 9, 10, 11, 12, 13}},
		{"Costs", l.writtenRows, []int{4, 5, 6, 7, 8, 9, 10, 11, 12, 13}},
		{"Costs", l.litreRows, []int{litreTotal, litreCost, litreYear}},
		{"Costs", l.rankRows, []int{rankReaches, rankObjective, 11, 12, 13, rankPlace}},
		{"Compare", l.compareRows, []int{3, 4, 5, 6, 7, 8, 13}},
	} {
		for row := check.rows.first; row <= check.rows.last; row++ {
			for _, c := range check.columns {
				if b.cells[check.sheet][at(c, row)].formula == "" {
					t.Errorf("%s!%s is no formula", check.sheet, at(c, row))
				}
			}
		}
	}
}

// WCAG 2.2: text at least 4.5:1 (1.4.3), parts of a picture at least 3:1 (1.4.11).
func TestContrast(t *testing.T) {
	for l, p := range paints {
		if c := contrast(t, p.ink, p.paper); c < 4.5 {
			t.Errorf("look %d: contrast %.2f", l, c)
		}
	}
	if c := contrast(t, darkInk, white); c < 4.5 {
		t.Errorf("axis text: contrast %.2f", c)
	}
	for _, colour := range []string{"0072B2", "D55E00", "009E73", darkInk} { // lines, and the outline of bars
		if c := contrast(t, colour, white); c < 3 {
			t.Errorf("%s: contrast %.2f", colour, c)
		}
	}
	// Black on white is 21:1 by definition.
	if c := contrast(t, black, white); math.Abs(c-21) > 1e-9 {
		t.Errorf("black on white: %.3f", c)
	}
}

func contrast(t *testing.T, a, b string) float64 {
	x, y := luminance(t, a), luminance(t, b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

// luminance is the relative luminance of WCAG 2.2.
func luminance(t *testing.T, rgb string) float64 {
	sum := 0.0
	for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
		v, err := strconv.ParseUint(rgb[2*i:2*i+2], 16, 8)
		if err != nil {
			t.Fatal(err)
		}
		c := float64(v) / 255
		if c <= 0.04045 {
			c /= 12.92
		} else {
			c = math.Pow((c+0.055)/1.055, 2.4)
		}
		sum += weight * c
	}
	return sum
}

// A solvent that makes water over beads balances too: with the water that it makes.
func TestWaterThatIsMadeBalances(t *testing.T) {
	r, err := runJob("made.yaml", []byte(`
title: Water that is made
exclude: {steps: [buy, trap, forerun, column, salt, reactive]}
lots:
  - {name: acetone, solvent: acetone, batch: 20 L, batches: 30 /yr, water: 0.5 %, target: 500 mg/kg}
`), nil, study.Options{Draws: 100, Seed: 1})
	if err != nil {
		t.Fatal(err)
	}
	made := 0.0
	for _, route := range r.Lots[0].Routes {
		for _, o := range route.Run.Outcomes {
			made += o.Balance.WaterMadeKg
		}
	}
	if made < 1e-5 {
		t.Fatalf("%g kg of water are made", made)
	}
	if _, _, c := readBook(t, written(t, r)).named(t, "check_total"); c.raw != "0" {
		t.Errorf("check_total is %q", c.raw)
	}
}
