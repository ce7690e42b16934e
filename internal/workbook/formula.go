package workbook

import (
	"fmt"
	"strconv"
	"strings"
)

// A formula is read into a tree once. Grammar, the loosest binding first:
//
//	comparison = join {("="|"<>"|"<="|">="|"<"|">") join}
//	join       = sum {"&" sum}
//	sum        = product {("+"|"-") product}
//	product    = signed {("*"|"/") signed}
//	signed     = ["-"] power
//	power      = atom ["^" signed]
//	atom       = number | "text" | (comparison) | NAME(comparison, ...) | reference [":" reference] | name
//
// The minus binds looser than ^ here, where sheets bind it tighter; the workbook
// writes no formula in which that matters.
//
// Places that are not fixed with $ are kept as offsets from the cell that holds the
// formula, so that the cells of a column that hold one formula share its tree.
type node struct {
	op    string // an operator, "number", "text", "call", "area" or "name"
	text  string // of a text, a call or a name
	value float64
	args  []*node
	sheet string // of an area, "" for the own
	place place
}

// place is a cell in a formula, each coordinate fixed or an offset.
type place struct {
	column, row           int
	fixedColumn, fixedRow bool
}

// from is the cell that a place stands for in a formula of the given cell.
func (p place) from(column, row int) (int, int) {
	if p.fixedColumn {
		column = 0
	}
	if p.fixedRow {
		row = 0
	}
	return column + p.column, row + p.row
}

// bounds are the first and last column and row of an area.
type bounds struct{ c1, r1, c2, r2 int }

// parser reads formulas; those that are the same but for the cell they stand in are
// read once.
type parser struct {
	trees       map[string]*node // by the formula with its places as offsets
	tokens      []string
	at          int
	column, row int // of the cell
	key         []byte
}

func newParser() *parser { return &parser{trees: map[string]*node{}} }

// parse reads the formula of a cell.
func (p *parser) parse(s string, column, row int) (*node, error) {
	p.tokens, p.key, p.at, p.column, p.row = p.tokens[:0], p.key[:0], 0, column, row
	for rest := s; rest != ""; {
		n := tokenLength(rest)
		if n == 0 {
			return nil, fmt.Errorf("formula %q: cannot read %q", s, rest)
		}
		p.tokens = append(p.tokens, rest[:n])
		p.key = p.addKey(p.key, rest[:n])
		rest = strings.TrimLeft(rest[n:], " ")
	}
	if n := p.trees[string(p.key)]; n != nil {
		return n, nil
	}
	n, err := p.binary(0)
	if err == nil && p.at < len(p.tokens) {
		err = fmt.Errorf("%q is left over", p.tokens[p.at])
	}
	if err != nil {
		return nil, fmt.Errorf("formula %q: %w", s, err)
	}
	p.trees[string(p.key)] = n
	return n, nil
}

// addKey adds a token to the key, a cell as its offset.
func (p *parser) addKey(key []byte, token string) []byte {
	x, ok := placeOf(token, p.column, p.row)
	if !ok {
		return append(append(key, token...), ' ')
	}
	for _, part := range []struct {
		at    int
		fixed bool
	}{{x.column, x.fixedColumn}, {x.row, x.fixedRow}} {
		key = strconv.AppendInt(append(key, '['), int64(part.at), 10)
		if part.fixed {
			key = append(key, '$')
		}
	}
	return append(key, ' ')
}

// tokenLength is how many bytes the first token of a formula has; 0 for none.
func tokenLength(s string) int {
	switch c := s[0]; {
	case c == '"':
		return quotedLength(s, '"')
	case c == '\'':
		if n := quotedLength(s, '\''); n > 0 && n < len(s) && s[n] == '!' {
			return n + 1
		}
		return 0
	case c >= '0' && c <= '9':
		return numberLength(s)
	case c == '$' || isLetter(c):
		n := wordLength(s)
		if n < len(s) && (s[n] == '!' || s[n] == '(') {
			n++ // a sheet or a function
		}
		return n
	case strings.HasPrefix(s, "<>") || strings.HasPrefix(s, "<=") || strings.HasPrefix(s, ">="):
		return 2
	case strings.IndexByte("-+*/^&=<>(),:", c) >= 0:
		return 1
	}
	return 0
}

func isLetter(c byte) bool { return c|0x20 >= 'a' && c|0x20 <= 'z' }

func wordLength(s string) (n int) {
	for n < len(s) && (isLetter(s[n]) || s[n] >= '0' && s[n] <= '9' || s[n] == '$' || s[n] == '_' || s[n] == '.') {
		n++
	}
	return n
}

// numberLength reads digits, a point and an exponent.
func numberLength(s string) (n int) {
	for n < len(s) {
		c := s[n]
		sign := (c == '-' || c == '+') && n > 0 && s[n-1]|0x20 == 'e'
		if !(c >= '0' && c <= '9' || c == '.' || c|0x20 == 'e' || sign) {
			break
		}
		n++
	}
	return n
}

// quotedLength is the length of a quoted text; a quote in it stands twice.
func quotedLength(s string, quote byte) int {
	for n := 1; n < len(s); n++ {
		if s[n] != quote {
			continue
		}
		if n+1 < len(s) && s[n+1] == quote {
			n++
			continue
		}
		return n + 1
	}
	return 0
}

var bindings = [][]string{{"=", "<>", "<=", ">=", "<", ">"}, {"&"}, {"+", "-"}, {"*", "/"}}

func (p *parser) peek() string {
	if p.at < len(p.tokens) {
		return p.tokens[p.at]
	}
	return ""
}

func (p *parser) takes(words ...string) (string, bool) {
	for _, w := range words {
		if p.at < len(p.tokens) && p.tokens[p.at] == w {
			p.at++
			return w, true
		}
	}
	return "", false
}

func (p *parser) binary(level int) (*node, error) {
	if level == len(bindings) {
		return p.signed()
	}
	left, err := p.binary(level + 1)
	for err == nil {
		op, ok := p.takes(bindings[level]...)
		if !ok {
			break
		}
		var right *node
		right, err = p.binary(level + 1)
		left = &node{op: op, args: []*node{left, right}}
	}
	return left, err
}

func (p *parser) signed() (*node, error) {
	if _, ok := p.takes("-"); ok {
		n, err := p.signed()
		return &node{op: "negative", args: []*node{n}}, err
	}
	n, err := p.ranged()
	if _, ok := p.takes("^"); ok && err == nil {
		var right *node
		right, err = p.signed()
		n = &node{op: "^", args: []*node{n, right}}
	}
	return n, err
}

// ranged joins two references, "INDEX(a,1):INDEX(a,9)".
func (p *parser) ranged() (*node, error) {
	n, err := p.atom()
	if _, ok := p.takes(":"); ok && err == nil {
		var right *node
		if right, err = p.atom(); err != nil {
			return nil, err
		}
		if right.op == "area" && right.sheet == "" {
			right.sheet = n.sheet
		}
		n = &node{op: ":", args: []*node{n, right}}
	}
	return n, err
}

func (p *parser) atom() (*node, error) {
	t := p.peek()
	p.at++
	switch {
	case t == "":
		return nil, fmt.Errorf("it ends too early")
	case t == "(":
		n, err := p.binary(0)
		return n, p.close(err)
	case t[0] == '"':
		return &node{op: "text", text: strings.ReplaceAll(t[1:len(t)-1], `""`, `"`)}, nil
	case strings.HasSuffix(t, "!"):
		n, err := p.atom()
		if err == nil && n.op != "area" {
			err = fmt.Errorf("%s names no cell", t)
		}
		if err == nil {
			n.sheet = strings.Trim(t[:len(t)-1], "'")
		}
		return n, err
	case strings.HasSuffix(t, "("):
		return p.call(t[:len(t)-1])
	case t[0] >= 'a' && t[0] <= 'z':
		return &node{op: "name", text: t}, nil
	case t[0] >= '0' && t[0] <= '9':
		v, err := strconv.ParseFloat(t, 64)
		return &node{op: "number", value: v}, err
	}
	if x, ok := placeOf(t, p.column, p.row); ok {
		return &node{op: "area", place: x}, nil
	}
	return nil, fmt.Errorf("%q is no cell", t)
}

func (p *parser) close(err error) error {
	if _, ok := p.takes(")"); !ok && err == nil {
		return fmt.Errorf("a bracket is not closed before %q", p.peek())
	}
	return err
}

func (p *parser) call(name string) (*node, error) {
	n := &node{op: "call", text: name}
	if _, ok := p.takes(")"); ok {
		return n, nil
	}
	for {
		arg, err := p.binary(0)
		if err != nil {
			return nil, err
		}
		n.args = append(n.args, arg)
		if _, ok := p.takes(","); !ok {
			return n, p.close(nil)
		}
	}
}

// placeOf reads a cell such as $C$7; ok is false for other words.
func placeOf(t string, column, row int) (x place, ok bool) {
	i, digits := 0, 0
	if x.fixedColumn = i < len(t) && t[i] == '$'; x.fixedColumn {
		i++
	}
	letters := i
	for ; i < len(t) && t[i] >= 'A' && t[i] <= 'Z'; i++ {
		x.column = x.column*26 + int(t[i]-'A') + 1
	}
	if letters = i - letters; letters < 1 || letters > 3 {
		return x, false
	}
	if x.fixedRow = i < len(t) && t[i] == '$'; x.fixedRow {
		i++
	}
	for ; i < len(t) && t[i] >= '0' && t[i] <= '9'; i++ {
		x.row, digits = x.row*10+int(t[i]-'0'), digits+1
	}
	if i < len(t) || digits < 1 || digits > 7 {
		return x, false
	}
	if !x.fixedColumn {
		x.column -= column
	}
	if !x.fixedRow {
		x.row -= row
	}
	return x, true
}
