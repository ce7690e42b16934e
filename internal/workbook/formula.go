package workbook

import (
	"fmt"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"
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
type node struct {
	op    string // an operator, "number", "text", "call", "area" or "name"
	text  string // of a text, a call or a name
	value float64
	args  []*node
	sheet string // of an area, "" for the own
	place bounds
}

// bounds are the first and last column and row of an area.
type bounds struct{ c1, r1, c2, r2 int }

type parser struct {
	tokens []string
	at     int
}

func parseFormula(s string) (*node, error) {
	p := &parser{}
	for rest := s; rest != ""; {
		n := tokenLength(rest)
		if n == 0 {
			return nil, fmt.Errorf("formula %q: cannot read %q", s, rest)
		}
		p.tokens = append(p.tokens, rest[:n])
		rest = strings.TrimLeft(rest[n:], " ")
	}
	n, err := p.binary(0)
	if err == nil && p.at < len(p.tokens) {
		err = fmt.Errorf("%q is left over", p.tokens[p.at])
	}
	if err != nil {
		return nil, fmt.Errorf("formula %q: %w", s, err)
	}
	return n, nil
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
	return place(t)
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

// place reads a cell such as $C$7.
func place(t string) (*node, error) {
	c, r, err := excelize.CellNameToCoordinates(strings.ReplaceAll(t, "$", ""))
	return &node{op: "area", place: bounds{c, r, c, r}}, err
}
