package workbook

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
)

// evaluator computes the formulas of sheets in the sheets' own arithmetic, so that
// what a cell shows before anybody recalculates is what a recalculation gives.
type evaluator struct {
	grids  map[string]*grid
	names  map[string]ref
	parser *parser
	faults map[*cell]fault          // of cells that cannot be computed
	rowsOf map[string]map[any][]int // of SUMIFS and COUNTIF: rows of a column by what stands in them
	failed error
}

// ref is an area of a sheet.
type ref struct {
	g *grid
	bounds
}

// fault is an error value of a sheet, such as a division by zero.
type fault string

const (
	noNumber  fault = "#NUM!"
	divided   fault = "#DIV/0!"
	noValue   fault = "#VALUE!"
	notFound  fault = "#N/A"
	outOfArea fault = "#REF!"
)

func newEvaluator(grids []*grid, names []definedName) (*evaluator, error) {
	e := &evaluator{grids: map[string]*grid{}, names: map[string]ref{}, parser: newParser(), faults: map[*cell]fault{}, rowsOf: map[string]map[any][]int{}}
	for _, g := range grids {
		e.grids[g.name] = g
	}
	for _, n := range names {
		sheet, at, _ := strings.Cut(n.place, "!")
		from, to, ranged := strings.Cut(strings.ReplaceAll(at, "$", ""), ":")
		if !ranged {
			to = from
		}
		c1, r1, err1 := excelize.CellNameToCoordinates(from)
		c2, r2, err2 := excelize.CellNameToCoordinates(to)
		g := e.grids[strings.Trim(sheet, "'")]
		if err := errors.Join(err1, err2); err != nil {
			return nil, fmt.Errorf("name %s: %w", n.name, err)
		}
		if g != nil { // else of a sheet that is not laid out yet
			e.names[n.name] = ref{g, bounds{c1, r1, c2, r2}}
		}
	}
	return e, nil
}

// fill computes every formula of a sheet that has no value yet.
func (e *evaluator) fill(g *grid) error {
	for r, row := range g.rows {
		for c := range row {
			x := &row[c]
			if x.formula == "" || x.value != nil {
				continue
			}
			if v, bad := e.cell(g, c+1, r+1).(fault); bad {
				return errors.Join(e.failed, fmt.Errorf("sheet %s, cell %s: %s in %s", g.name, at(c+1, r+1), v, x.formula))
			}
		}
	}
	return e.failed
}

// cell is the value of a cell: nil, float64, string or fault.
func (e *evaluator) cell(g *grid, column, row int) any {
	if row < 1 || column < 1 || row > len(g.rows) || column > len(g.rows[row-1]) {
		return nil
	}
	x := &g.rows[row-1][column-1]
	if x.value != nil || x.formula == "" {
		return x.value
	}
	if len(e.faults) > 0 {
		if f, bad := e.faults[x]; bad {
			return f
		}
	}
	if x.running {
		e.fail(fmt.Errorf("sheet %s, cell %s depends on itself", g.name, at(column, row)))
		return outOfArea
	}
	if x.tree == nil {
		var err error
		if x.tree, err = e.parser.parse(x.formula, column, row); err != nil {
			e.fail(fmt.Errorf("sheet %s, cell %s: %w", g.name, at(column, row), err))
			e.faults[x] = noValue
			return noValue
		}
	}
	x.running = true
	v := e.single(e.eval(x.tree, spot{g, column, row}))
	x.running = false
	switch y := v.(type) {
	case bool:
		v = number01(y)
	case float64:
		if v = any(tidy(y)); math.IsNaN(y) || math.IsInf(y, 0) {
			v = noNumber
		}
	case nil:
		v = 0.0
	}
	if f, bad := v.(fault); bad {
		e.faults[x] = f
	} else {
		x.value = v
	}
	return v
}

func (e *evaluator) fail(err error) {
	if e.failed == nil {
		e.failed = err
	}
}

// spot is the cell whose formula is computed.
type spot struct {
	g           *grid
	column, row int
}

// array is a block of values, row by row.
type array struct {
	columns int
	values  []any
}

// eval gives nil, float64, string, bool, fault, ref or array.
func (e *evaluator) eval(n *node, here spot) any {
	switch n.op {
	case "number":
		return n.value
	case "text":
		return n.text
	case "area":
		to := here.g
		if n.sheet != "" {
			if to = e.grids[n.sheet]; to == nil {
				e.fail(fmt.Errorf("no sheet %s", n.sheet))
				return outOfArea
			}
		}
		c, r := n.place.from(here.column, here.row)
		return ref{to, bounds{c, r, c, r}}
	case "name":
		r, ok := e.names[n.text]
		if !ok {
			e.fail(fmt.Errorf("no cell is named %s", n.text))
			return outOfArea
		}
		return r
	case ":":
		a, ok1 := e.eval(n.args[0], here).(ref)
		b, ok2 := e.eval(n.args[1], here).(ref)
		if !ok1 || !ok2 || a.g != b.g {
			return outOfArea
		}
		return ref{a.g, bounds{min(a.c1, b.c1), min(a.r1, b.r1), max(a.c2, b.c2), max(a.r2, b.r2)}}
	case "negative":
		return e.spread(func(x []any) any { return arithmetic("-", 0.0, x[0]) }, e.eval(n.args[0], here))
	case "call":
		return e.call(n, here)
	}
	a, b := e.eval(n.args[0], here), e.eval(n.args[1], here)
	if x, ok := e.alone(a); ok {
		if y, ok := e.alone(b); ok {
			return operate(n.op, x, y)
		}
	}
	return e.spread(func(x []any) any { return operate(n.op, x[0], x[1]) }, a, b)
}

// alone is a value that is no block.
func (e *evaluator) alone(v any) (any, bool) {
	switch x := v.(type) {
	case ref:
		if x.c1 != x.c2 || x.r1 != x.r2 {
			return nil, false
		}
		return e.cell(x.g, x.c1, x.r1), true
	case array:
		return nil, false
	}
	return v, true
}

// operand is a block or a single value, read place by place.
type operand struct {
	area            ref // where it is an area
	values          []any
	length, columns int
}

func operandOf(v any) operand {
	switch x := v.(type) {
	case ref:
		columns := x.c2 - x.c1 + 1
		return operand{area: x, length: columns * (x.r2 - x.r1 + 1), columns: columns}
	case array:
		return operand{values: x.values, length: len(x.values), columns: x.columns}
	}
	return operand{values: []any{v}, length: 1, columns: 1}
}

// at is the value at a place; a single value stands at every one.
func (e *evaluator) at(o operand, k int) any {
	if o.length == 1 {
		k = 0
	}
	switch {
	case k >= o.length:
		return notFound
	case o.area.g != nil:
		return e.cell(o.area.g, o.area.c1+k%o.columns, o.area.r1+k/o.columns)
	}
	return o.values[k]
}

// operands are those of a function applied place by place, and the shape of what
// it gives.
func operands(args []any) (all []operand, length, columns int) {
	all = make([]operand, len(args))
	for i, a := range args {
		all[i] = operandOf(a)
		if n := all[i].length; n > 1 || length == 0 {
			length, columns = n, all[i].columns
		}
	}
	return all, length, columns
}

// spread applies a function of single values to blocks, place by place.
func (e *evaluator) spread(f func([]any) any, args ...any) any {
	all, length, columns := operands(args)
	out := array{columns, make([]any, length)}
	single := make([]any, len(args))
	for k := range length {
		for i, o := range all {
			single[i] = e.at(o, k)
		}
		out.values[k] = f(single)
	}
	if length == 1 {
		return out.values[0]
	}
	return out
}

func (e *evaluator) block(r ref) array {
	columns := r.c2 - r.c1 + 1
	out := array{columns, make([]any, 0, columns*(r.r2-r.r1+1))}
	for row := r.r1; row <= r.r2; row++ {
		for column := r.c1; column <= r.c2; column++ {
			out.values = append(out.values, e.cell(r.g, column, row))
		}
	}
	return out
}

// single is the value of a cell where a formula names one.
func (e *evaluator) single(v any) any {
	switch x := v.(type) {
	case ref:
		if x.c1 == x.c2 && x.r1 == x.r2 {
			return e.cell(x.g, x.c1, x.r1)
		}
		return noValue
	case array:
		return x.values[0]
	}
	return v
}

func number01(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// operate applies an operator to single values.
func operate(op string, a, b any) any {
	if f, bad := a.(fault); bad {
		return f
	}
	if f, bad := b.(fault); bad {
		return f
	}
	switch op {
	case "&":
		return textOf(a) + textOf(b)
	case "=", "<>", "<", ">", "<=", ">=":
		return compare(op, a, b)
	}
	return arithmetic(op, a, b)
}

func arithmetic(op string, a, b any) any {
	if f, bad := b.(fault); bad {
		return f
	}
	x, ok1 := toNumber(a)
	y, ok2 := toNumber(b)
	if !ok1 || !ok2 {
		return noValue
	}
	switch op {
	case "+":
		return x + y
	case "-":
		return x - y
	case "*":
		return x * y
	case "/":
		if y == 0 {
			return divided
		}
		return x / y
	}
	return math.Pow(x, y)
}

func toNumber(v any) (float64, bool) {
	switch x := v.(type) {
	case nil:
		return 0, true
	case float64:
		return x, true
	case bool:
		return number01(x), true
	}
	return 0, false
}

func textOf(v any) string {
	switch x := v.(type) {
	case nil:
		return ""
	case string:
		return x
	case float64:
		return strconv.FormatFloat(tidy(x), 'G', -1, 64)
	}
	return fmt.Sprint(v)
}

// compare follows the sheets: numbers lie below texts, texts know no case, an
// empty cell is 0 or "".
func compare(op string, a, b any) any {
	c := order(a, b)
	switch op {
	case "=":
		return c == 0
	case "<>":
		return c != 0
	case "<":
		return c < 0
	case ">":
		return c > 0
	case "<=":
		return c <= 0
	}
	return c >= 0
}

func order(a, b any) int {
	x, isText := a.(string)
	y, alsoText := b.(string)
	if isText && b == nil {
		y, alsoText = "", true
	}
	if alsoText && a == nil {
		x, isText = "", true
	}
	switch {
	case isText && alsoText:
		return strings.Compare(strings.ToLower(x), strings.ToLower(y))
	case isText:
		return 1
	case alsoText:
		return -1
	}
	v, _ := toNumber(a)
	w, _ := toNumber(b)
	switch {
	case v < w:
		return -1
	case v > w:
		return 1
	}
	return 0
}
