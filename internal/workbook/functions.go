package workbook

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strconv"

	"github.com/shopspring/decimal"
)

// call evaluates a function of the list that the workbook keeps to.
func (e *evaluator) call(n *node, here spot) any {
	switch n.text {
	case "IF":
		return e.choose(n, here)
	case "IFERROR":
		v := e.eval(n.args[0], here)
		if _, bad := e.single(v).(fault); bad {
			return e.eval(n.args[1], here)
		}
		return v
	case "INDEX":
		return e.index(n, here)
	case "MATCH":
		return e.match(e.single(e.eval(n.args[0], here)), e.eval(n.args[1], here), e.single(e.eval(n.args[2], here)))
	case "SUMIFS", "COUNTIFS", "COUNTIF":
		return e.conditional(n, here)
	}
	args := make([]any, len(n.args))
	for i, a := range n.args {
		args[i] = e.eval(a, here)
	}
	if f, ok := ofOne[n.text]; ok {
		if x, ok := e.alone(args[0]); ok {
			return f(x)
		}
		return e.spread(func(x []any) any { return f(x[0]) }, args[0])
	}
	return e.ofMany(n.text, args)
}

// choose evaluates only the branch that holds, as sheets do.
func (e *evaluator) choose(n *node, here spot) any {
	condition := e.single(e.eval(n.args[0], here))
	if f, bad := condition.(fault); bad {
		return f
	}
	holds, ok := toNumber(condition)
	switch {
	case !ok:
		return noValue
	case holds != 0:
		return e.eval(n.args[1], here)
	case len(n.args) > 2:
		return e.eval(n.args[2], here)
	}
	return false
}

// ofOne are functions of one value, applied place by place.
var ofOne = map[string]func(any) any{
	"ABS":  numeric(math.Abs),
	"EXP":  numeric(math.Exp),
	"INT":  numeric(math.Floor),
	"LN":   positive(math.Log),
	"SQRT": notNegative(math.Sqrt),
	"NOT": func(v any) any {
		if f, bad := v.(fault); bad {
			return f
		}
		x, _ := toNumber(v)
		return x == 0
	},
	"ISNUMBER": func(v any) any { _, ok := v.(float64); return ok },
	"ISERROR":  func(v any) any { _, bad := v.(fault); return bad },
	"ISNA":     func(v any) any { return v == notFound },
	"LEN":      func(v any) any { return float64(len([]rune(textOf(v)))) },
}

func numeric(f func(float64) float64) func(any) any {
	return func(v any) any {
		if bad, ok := v.(fault); ok {
			return bad
		}
		x, ok := toNumber(v)
		if !ok {
			return noValue
		}
		return f(x)
	}
}

func positive(f func(float64) float64) func(any) any {
	return guarded(f, func(x float64) bool { return x > 0 })
}

func notNegative(f func(float64) float64) func(any) any {
	return guarded(f, func(x float64) bool { return x >= 0 })
}

func guarded(f func(float64) float64, allowed func(float64) bool) func(any) any {
	inner := numeric(f)
	return func(v any) any {
		if x, ok := toNumber(v); ok && !allowed(x) {
			return noNumber
		}
		return inner(v)
	}
}

// ofMany are functions of all values of their arguments.
func (e *evaluator) ofMany(name string, args []any) any {
	switch name {
	case "ROUND":
		return e.spread(func(x []any) any {
			v, ok1 := toNumber(x[0])
			d, ok2 := toNumber(x[1])
			if !ok1 || !ok2 {
				return noValue
			}
			return roundTo(v, int(d))
		}, args...)
	case "SMALL", "LARGE":
		return e.placed(args[0], e.single(args[1]), name == "LARGE")
	case "ROWS":
		if r, ok := args[0].(ref); ok {
			return float64(r.r2 - r.r1 + 1)
		}
		return noValue
	case "SUMPRODUCT":
		return e.sumOfProducts(args)
	}
	return e.fold(name, args)
}

// sumOfProducts multiplies blocks place by place and adds up. A text counts as 0
// beside other blocks.
func (e *evaluator) sumOfProducts(args []any) any {
	all, length, _ := operands(args)
	sum := 0.0
	for k := range length {
		product := 1.0
		for _, o := range all {
			v := e.at(o, k)
			if f, bad := v.(fault); bad {
				return f
			}
			x, isNumber := toNumber(v)
			if !isNumber && len(all) == 1 {
				return noValue
			}
			product *= x
		}
		sum += product
	}
	return sum
}

// placed is the number that stands at a place of the sorted numbers of an area.
func (e *evaluator) placed(area, place any, largest bool) any {
	r, ok := area.(ref)
	k, isNumber := toNumber(place)
	if !ok || !isNumber {
		return noValue
	}
	var all []float64
	for _, v := range e.block(r).values {
		if f, bad := v.(fault); bad {
			return f
		}
		if x, ok := v.(float64); ok {
			all = append(all, x)
		}
	}
	sort.Float64s(all)
	i := int(k) - 1
	if largest {
		i = len(all) - int(k)
	}
	if i < 0 || i >= len(all) {
		return noNumber
	}
	return all[i]
}

// fold runs over all numbers of areas and single values.
func (e *evaluator) fold(name string, args []any) any {
	sum, count, low, high, all, filled := 0.0, 0.0, math.Inf(1), math.Inf(-1), true, 0.0
	for _, a := range args {
		_, fromSheet := a.(ref)
		o := operandOf(a)
		for k := range o.length {
			v := e.at(o, k)
			if f, bad := v.(fault); bad && name != "COUNT" && name != "COUNTA" {
				return f
			}
			if v != nil && v != "" {
				filled++
			}
			x, ok := toNumber(v)
			if !ok || v == nil {
				continue
			}
			if _, truth := v.(bool); truth && fromSheet {
				continue
			}
			sum, count, low, high, all = sum+x, count+1, min(low, x), max(high, x), all && x != 0
		}
	}
	switch name {
	case "SUM":
		return sum
	case "COUNT":
		return count
	case "COUNTA":
		return filled
	case "MIN":
		if count == 0 {
			return 0.0
		}
		return low
	case "MAX":
		if count == 0 {
			return 0.0
		}
		return high
	case "AND":
		return all
	case "OR":
		return sum != 0
	}
	e.fail(fmt.Errorf("function %s is not known here", name))
	return noValue
}

// index is the cell of an area by its row and column, both counted from 1.
func (e *evaluator) index(n *node, here spot) any {
	area, ok := e.eval(n.args[0], here).(ref)
	if !ok {
		return outOfArea
	}
	row, column := 1.0, 1.0
	for i, into := range []*float64{&row, &column} {
		if i+1 >= len(n.args) {
			break
		}
		v := e.single(e.eval(n.args[i+1], here))
		if f, bad := v.(fault); bad {
			return f
		}
		x, ok := toNumber(v)
		if !ok {
			return noValue
		}
		*into = math.Trunc(x)
	}
	if len(n.args) == 2 && area.r1 == area.r2 { // a row is counted by its columns
		row, column = 1, row
	}
	r, c := area.r1+int(row)-1, area.c1+int(column)-1
	if r < area.r1 || r > area.r2 || c < area.c1 || c > area.c2 {
		return outOfArea
	}
	return ref{area.g, bounds{c, r, c, r}}
}

// match is the place of a value: the first that equals it (0), or the last that is
// not above it in a rising row (1).
func (e *evaluator) match(what, where, how any) any {
	if f, bad := what.(fault); bad {
		return f
	}
	r, ok := where.(ref)
	if !ok {
		return noValue
	}
	exact, _ := toNumber(how)
	length := (r.r2 - r.r1 + 1) * (r.c2 - r.c1 + 1)
	at := func(i int) any {
		if r.c1 == r.c2 {
			return e.cell(r.g, r.c1, r.r1+i)
		}
		return e.cell(r.g, r.c1+i, r.r1)
	}
	if exact == 0 {
		for i := range length {
			if v := at(i); v != nil && order(v, what) == 0 {
				return float64(i + 1)
			}
		}
		return notFound
	}
	n := sort.Search(length, func(i int) bool { return order(at(i), what) > 0 })
	if n == 0 {
		return notFound
	}
	return float64(n)
}

// conditional are the functions that select rows by equality with a value, or by
// a comparison such as ">0".
func (e *evaluator) conditional(n *node, here spot) any {
	rest, sum := n.args, ref{}
	if n.text == "SUMIFS" {
		var ok bool
		if sum, ok = e.eval(n.args[0], here).(ref); !ok {
			return noValue
		}
		rest = rest[1:]
	}
	var criteria []criterion
	for i := 0; i+1 < len(rest); i += 2 {
		column, ok := e.eval(rest[i], here).(ref)
		if !ok || column.c1 != column.c2 {
			return noValue
		}
		criteria = append(criteria, e.criterion(column, e.single(e.eval(rest[i+1], here))))
	}
	sort.SliceStable(criteria, func(i, j int) bool { return criteria[i].size() < criteria[j].size() })
	rows := criteria[0].rows
	if c := criteria[0]; c.compare != "" { // no equality to begin with
		for i := range c.column.r2 - c.column.r1 + 1 {
			rows = append(rows, i)
		}
	}
	total := 0.0
	for _, row := range rows {
		if slices.ContainsFunc(criteria, func(c criterion) bool { return !c.holds(e.cell(c.column.g, c.column.c1, c.column.r1+row)) }) {
			continue
		}
		if sum.g == nil {
			total++
			continue
		}
		v := e.cell(sum.g, sum.c1, sum.r1+row)
		if f, bad := v.(fault); bad {
			return f
		}
		if x, ok := v.(float64); ok {
			total += x
		}
	}
	return total
}

// criterion is a column and what its rows are asked for.
type criterion struct {
	column  ref
	compare string // ">" or "<", "" for equality
	value   any
	rows    []int // from 0, in which an equality holds
}

func (c criterion) size() int {
	if c.compare != "" {
		return math.MaxInt
	}
	return len(c.rows)
}

func (c criterion) holds(v any) bool {
	if c.compare == "" {
		return v == c.value
	}
	x, isNumber := v.(float64)
	limit, _ := c.value.(float64)
	return isNumber && (c.compare == ">" && x > limit || c.compare == "<" && x < limit)
}

// criterion reads what a column is asked for: a value, or a text such as "<5".
func (e *evaluator) criterion(column ref, asked any) criterion {
	s, isText := asked.(string)
	if !isText || len(s) < 2 || s[0] != '>' && s[0] != '<' {
		return criterion{column, "", asked, e.rowsWith(column, asked)}
	}
	limit, err := strconv.ParseFloat(s[1:], 64)
	if err != nil {
		e.fail(fmt.Errorf("%q is no comparison", s))
	}
	return criterion{column: column, compare: s[:1], value: limit}
}

// rowsWith are the rows of a column, from 0, that hold a value.
func (e *evaluator) rowsWith(column ref, value any) []int {
	key := fmt.Sprint(column.g.name, column.bounds)
	known, ok := e.rowsOf[key]
	if !ok {
		known = map[any][]int{}
		for i := range column.r2 - column.r1 + 1 {
			v := e.cell(column.g, column.c1, column.r1+i)
			known[v] = append(known[v], i)
		}
		e.rowsOf[key] = known
	}
	return known[value]
}

// roundTo rounds half away from zero, as sheets do, seeing the number as it is
// written with 15 digits.
func roundTo(v float64, decimals int) float64 {
	d := decimal.NewFromFloat(tidy(v)).Round(int32(decimals))
	return d.InexactFloat64()
}
