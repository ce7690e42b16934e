package document

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// kind says what a Node is.
type kind byte

const (
	empty kind = iota // a key without a value, "~" and "null"
	single
	list
	keyed
)

// place says what stands for the path of a node.
type place byte

const (
	inTree place = iota // keys and places in lists
	isRow               // nothing: the line says it
	isCell              // the heading of its column
)

// Node is a value of the document. The methods of a nil Node do nothing and
// return zero values, so that a missing key can be read like any other.
type Node struct {
	problems *Problems
	parent   *Node
	key      string  // the key in the parent; "" in a list and at the root
	value    string  // of a single value, as typed
	inside   []*Node // of a list or of a set of keys, in the order of the file
	line     int32
	keyLine  int32 // of the key in the parent
	index    int32 // the place in the parent's list
	kind     kind
	place    place
	broken   bool // a problem with this value is already recorded
}

// Entry is a key and its value.
type Entry struct {
	Key  string
	Line int
	Node *Node
}

// Problems returns the collector of the whole document.
func (n *Node) Problems() *Problems { return n.problems }

// Line is the line of the value, from 1.
func (n *Node) Line() int {
	if n == nil {
		return 0
	}
	return int(n.line)
}

// Path says where the value stands: "lots[0].water"; "" at the root.
func (n *Node) Path() string {
	if n == nil || n.parent == nil {
		return ""
	}
	before := n.parent.Path()
	switch {
	case n.place == isRow:
		return ""
	case n.place == isCell:
		return fmt.Sprintf("column %q", segment(n.key))
	case n.key == "":
		return before + "[" + strconv.Itoa(int(n.index)) + "]"
	case before == "":
		return segment(n.key)
	}
	return before + "." + segment(n.key)
}

// Where is the place of the value for a message: "job.yaml:14: lots[0].water".
func (n *Node) Where() string {
	where := n.problems.where(n.Line())
	if path := n.Path(); path != "" {
		where += ": " + path
	}
	return where
}

// With is a single value with a text added to it: an amount and the currency that
// stands in another column.
func (n *Node) With(suffix string) *Node {
	if n == nil || n.IsList() || n.IsMap() || suffix == "" {
		return n
	}
	joined := *n
	joined.value += suffix
	return &joined
}

// segment keeps a path short and printable.
func segment(key string) string {
	const most = 40
	if utf8.RuneCountInString(key) > most {
		key = string([]rune(key[:min(len(key), 4*most+4)])[:most-1]) + "…"
	}
	quoted := strconv.Quote(key)
	return strings.ReplaceAll(quoted[1:len(quoted)-1], `\"`, `"`)
}

// Fail records a problem with this value.
func (n *Node) Fail(format string, args ...any) {
	if n == nil || n.broken {
		return
	}
	n.failAt(n.Line(), format, args...)
}

func (n *Node) failAt(line int, format string, args ...any) {
	text := fmt.Sprintf(format, args...)
	if path := n.Path(); path != "" {
		text = path + ": " + text
	}
	n.problems.Add(line, "%s", text)
}

// IsList reports whether the value is a list.
func (n *Node) IsList() bool { return n != nil && n.kind == list }

// IsMap reports whether the value has keys.
func (n *Node) IsMap() bool { return n != nil && n.kind == keyed }

// IsEmpty reports whether there is no value: no key, or nothing after its colon.
func (n *Node) IsEmpty() bool { return n == nil || n.kind == empty }

func (n *Node) what() string {
	switch {
	case n.IsList():
		return "a list"
	case n.IsMap():
		return "a set of keys"
	case n.IsEmpty():
		return "empty"
	}
	return "a single value"
}
