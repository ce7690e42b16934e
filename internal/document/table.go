package document

import (
	"bytes"
	"encoding/csv"
	"errors"
	"io"
	"regexp"
	"slices"
	"strings"
)

// mostRows bounds a table; a person's list is far shorter.
const mostRows = 10000

// Table reads a table of comma or semicolon separated values (RFC 4180, quotes
// included) with one line of headings out of the known ones. It becomes a list of
// sets of keys, so that it is read like a document; an empty cell is a key that is
// not there.
//
// In the numeric columns a decimal comma becomes a point where it cannot be
// anything else. A number that may be read in two ways is a problem, and so is a
// cell that a spreadsheet would take for a formula. Finish with
// node.Problems().Err().
func Table(name string, data []byte, known, numeric []string) (*Node, error) {
	found := &Problems{file: name}
	data = bytes.TrimPrefix(data, []byte("\uFEFF"))
	checkBytes(data, found)
	if found.Count() == 0 && len(bytes.TrimSpace(data)) == 0 {
		found.Add(0, "the file is empty")
	}
	if found.Count() > 0 {
		return nil, found.Err()
	}
	t := &table{found: found, known: known, numeric: numeric, root: &Node{problems: found, kind: list, line: 1}}
	t.read(data)
	if t.heads == nil {
		return nil, found.Err()
	}
	return t.root, nil
}

type table struct {
	found   *Problems
	known   []string
	numeric []string
	heads   []string
	root    *Node
}

func (t *table) read(data []byte) {
	first, _, _ := bytes.Cut(data, []byte("\n"))
	r := csv.NewReader(bytes.NewReader(data))
	r.Comma, r.FieldsPerRecord = separator(first), -1
	for {
		record, err := r.Read()
		var bad *csv.ParseError
		switch {
		case errors.Is(err, io.EOF):
			return
		case errors.As(err, &bad):
			t.found.Add(bad.Line, "a quotation mark stands where none may be, or is not closed: %v", bad.Err)
			return
		case err != nil:
			t.found.Add(0, "%v", err)
			return
		}
		line, _ := r.FieldPos(0)
		switch {
		case t.heads == nil:
			if !t.headings(record, line) {
				return
			}
		case len(t.root.inside) == mostRows:
			t.found.Add(line, "more than %d rows", mostRows)
			return
		case strings.TrimSpace(strings.Join(record, "")) != "":
			t.row(record, line, r.Comma)
		}
	}
}

// separator is the one that the line of headings has more of.
func separator(headings []byte) rune {
	if bytes.Count(headings, []byte(";")) >= bytes.Count(headings, []byte(",")) {
		return ';'
	}
	return ','
}

func (t *table) headings(record []string, line int) bool {
	var heads []string
	before := t.found.Count()
	for i, head := range record {
		head = strings.ToLower(strings.Join(strings.Fields(head), " "))
		switch {
		case head == "":
			t.found.Add(line, "column %d has no heading", i+1)
		case slices.Contains(heads, head):
			t.found.Add(line, "two columns are headed %q", segment(head))
		case !slices.Contains(t.known, head):
			t.found.Add(line, "unknown column %q%s; allowed: %s", segment(head), t.root.Offer(head, t.known), strings.Join(t.known, ", "))
		}
		heads = append(heads, head)
	}
	if t.found.Count() > before {
		return false
	}
	t.heads = heads
	return true
}

func (t *table) row(record []string, line int, comma rune) {
	row := &Node{problems: t.found, parent: t.root, place: isRow, kind: keyed, line: int32(line)}
	if len(record) != len(t.heads) {
		t.found.Add(line, "%d cells, but the headings name %d; a text that contains %q stands in quotation marks", len(record), len(t.heads), comma)
		return
	}
	for i, text := range record {
		text = strings.TrimSpace(text)
		if text == "" {
			continue
		}
		cell := &Node{problems: t.found, parent: row, key: t.heads[i], place: isCell, kind: single, value: text, line: row.line, keyLine: row.line}
		t.check(cell)
		row.inside = append(row.inside, cell)
	}
	t.root.inside = append(t.root.inside, row)
}

var (
	formula = regexp.MustCompile(`^(?:[=@\t]|[+-][^0-9]|[+])`)
	// decimalComma cannot separate thousands: a zero in front, or not three digits behind.
	decimalComma = regexp.MustCompile(`^(-?(?:0|[0-9]+)),([0-9]+)(.*)$`)
	separated    = regexp.MustCompile(`^-?[0-9]+[.,'’ \x{a0}\x{202f}][0-9]+[.,'’ \x{a0}\x{202f}][0-9]`)
	twoWays      = regexp.MustCompile(`^-?[1-9][0-9]{0,2}[.,][0-9]{3}(?:[^0-9]|$)`)
)

// check refuses formulas and, in a numeric column, what may be read in two ways.
func (t *table) check(n *Node) {
	text := n.value
	switch {
	case formula.MatchString(text):
		n.Fail("%q begins like a formula of a spreadsheet; write the value itself", shortened(text))
		n.broken = true
	case !slices.Contains(t.numeric, n.key):
	case separated.MatchString(text):
		n.Fail("%q has a thousands separator; write the number in one piece, such as 1234.50", shortened(text))
		n.broken = true
	case twoWays.MatchString(text):
		plain := strings.NewReplacer(".", "", ",", "").Replace(text)
		point := strings.Replace(text, ",", ".", 1)
		at := strings.IndexByte(point, '.')
		n.Fail("%q may be read as %s or as %s; write it without the separator, or with another number of decimals (%s0%s)", shortened(text),
			shortened(plain), shortened(point), shortened(point[:at+4]), shortened(point[at+4:]))
		n.broken = true
	default:
		n.value = decimalComma.ReplaceAllString(text, "$1.$2$3")
	}
}

func shortened(text string) string { return segment(text) }
