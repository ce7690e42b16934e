package document

import (
	"slices"
	"strconv"
	"strings"
	"time"

	"parch/internal/quantity"
)

// Fields are the values of a map by key. A key that is not there gives a nil Node.
type Fields struct {
	node  *Node
	known []*Node // few enough that a search is quicker than a map
}

// Get returns the value of a key, nil where it is not there.
func (f Fields) Get(key string) *Node {
	for _, n := range f.known {
		if n.key == key {
			return n
		}
	}
	return nil
}

// Has reports whether the key is there.
func (f Fields) Has(key string) bool { return f.Get(key) != nil }

// Need is Get for a key that must be there; it records a problem where it is not.
func (f Fields) Need(key string) *Node {
	if n := f.Get(key); n != nil {
		return n
	}
	if f.node != nil && !f.node.broken && f.node.IsMap() {
		f.node.Fail("%q is missing", key)
	}
	return nil
}

// Map reads a set of keys. Others than the allowed ones are problems.
func (n *Node) Map(allowed ...string) Fields {
	fields := Fields{node: n}
	if !n.holds(keyed) {
		return fields
	}
	n.mend(allowed)
	fields.known = make([]*Node, 0, len(n.inside))
	for _, value := range n.inside {
		if slices.Contains(allowed, value.key) {
			fields.known = append(fields.known, value)
			continue
		}
		offer := n.Offer(value.key, allowed)
		if offer == "" && len(allowed) <= 12 {
			offer = "; allowed: " + strings.Join(allowed, ", ")
		}
		n.failAt(int(value.keyLine), "unknown key %q%s", segment(value.key), offer)
	}
	return fields
}

// Entries reads a set of keys of any name, in the order of the file.
func (n *Node) Entries() []Entry {
	if !n.holds(keyed) {
		return nil
	}
	entries := make([]Entry, len(n.inside))
	for i, value := range n.inside {
		entries[i] = Entry{value.key, int(value.keyLine), value}
	}
	return entries
}

// Items reads a list.
func (n *Node) Items() []*Node {
	if !n.holds(list) {
		return nil
	}
	return n.inside
}

// holds reports whether the value is of a kind that holds others, and records a
// problem where it is not.
func (n *Node) holds(wanted kind) bool {
	switch {
	case n == nil || n.broken:
		return false
	case n.kind == wanted:
		return true
	case wanted == list:
		n.Fail("a list is wanted here, this is %s", n.what())
	default:
		n.Fail("keys with values are wanted here, this is %s", n.what())
	}
	return false
}

// Texts reads a list of texts.
func (n *Node) Texts() []string {
	var texts []string
	for _, item := range n.Items() {
		if text := item.Text(); text != "" {
			texts = append(texts, text)
		}
	}
	return texts
}

// scalar returns the text as it was typed. ok is false where a problem was recorded.
func (n *Node) scalar() (text string, ok bool) {
	switch {
	case n == nil || n.broken:
		return "", false
	case n.IsList() || n.IsMap():
		n.Fail("a single value is wanted here, this is %s", n.what())
		return "", false
	case n.kind == empty || strings.TrimSpace(n.value) == "":
		n.Fail("is empty")
		return "", false
	}
	return strings.TrimSpace(n.value), true
}

// Text reads a text, without spaces around it.
func (n *Node) Text() string {
	text, _ := n.scalar()
	return text
}

// Is says whether the node is a number with a unit of dimension d. It records no problem.
func (n *Node) Is(d quantity.Dimension) bool {
	if n == nil || n.IsList() || n.IsMap() {
		return false
	}
	_, err := quantity.Parse(n.value, d)
	return err == nil
}

// Quantity reads a number with a unit. ok is false where a problem was recorded.
func (n *Node) Quantity(d quantity.Dimension) (reading quantity.Reading, ok bool) {
	text, ok := n.scalar()
	if !ok {
		return reading, false
	}
	reading, err := quantity.Parse(text, d)
	if err != nil {
		n.Fail("%v", err)
		return quantity.Reading{}, false
	}
	return reading, true
}

// Money reads an amount of money. ok is false where a problem was recorded.
func (n *Node) Money() (money quantity.Money, ok bool) {
	text, ok := n.scalar()
	if !ok {
		return money, false
	}
	money, err := quantity.ParseMoney(text)
	if err != nil {
		n.Fail("%v", err)
		return quantity.Money{}, false
	}
	return money, true
}

// Number reads a finite number without a unit.
func (n *Node) Number() float64 {
	reading, _ := n.Quantity(quantity.Number)
	return reading.SI
}

// Int reads a whole number.
func (n *Node) Int() int {
	text, ok := n.scalar()
	if !ok {
		return 0
	}
	i, err := strconv.Atoi(text)
	if err != nil {
		n.Fail("%s is not a whole number", quantity.Quote(text))
		return 0
	}
	return i
}

// Bool reads yes or no (or true or false).
func (n *Node) Bool() bool {
	text, ok := n.scalar()
	if !ok {
		return false
	}
	switch strings.ToLower(text) {
	case "yes", "true":
		return true
	case "no", "false":
		return false
	}
	n.Fail("%s is neither yes nor no", quantity.Quote(text))
	return false
}

// OneOf reads one of the given words.
func (n *Node) OneOf(words ...string) string {
	text, ok := n.scalar()
	if !ok {
		return ""
	}
	if !slices.Contains(words, text) {
		n.Fail("%s is not allowed here; allowed: %s", quantity.Quote(text), strings.Join(words, ", "))
		return ""
	}
	return text
}

// Date reads an ISO 8601 date such as 2026-10-01.
func (n *Node) Date() string {
	text, ok := n.scalar()
	if !ok {
		return ""
	}
	if _, err := time.Parse(time.DateOnly, text); err != nil {
		n.Fail(`%s is not a date; write it like "2026-10-01"`, quantity.Quote(text))
		return ""
	}
	return text
}
