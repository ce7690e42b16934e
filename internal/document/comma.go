package document

import (
	"slices"
	"strings"
)

// tail counts the entries after place i of a map that a comma cut off its value, as in
// {solvent: 1,4-dioxane}: between braces a comma ends a value, and what follows it on the
// line reads as keys that have none.
func (n *Node) tail(i int, allowed []string) (entries int) {
	v := n.inside[i]
	if v.kind != single || v.broken || v.place != inTree {
		return 0
	}
	for _, next := range n.inside[i+1:] {
		if next.kind != empty || next.keyLine != v.line || begins(next.key, allowed) {
			break
		}
		entries++
	}
	return entries
}

// begins reports whether a text begins with one of the keys, whose colon is missing then.
func begins(text string, keys []string) bool {
	return slices.ContainsFunc(keys, func(key string) bool { return text == key || strings.HasPrefix(text, key+" ") })
}

// cutAt records that a comma has cut the value at place i, and takes away the entries
// that were made of its tail.
func (n *Node) cutAt(i, tail int, advice string) {
	v := n.inside[i]
	v.Fail("the comma after %q ends the value: %s", segment(v.value), advice)
	v.broken = true
	n.inside = slices.Delete(n.inside, i+1, i+1+tail)
}

// mend finds all values of a map that a comma has cut.
func (n *Node) mend(allowed []string) {
	for i := 0; i < len(n.inside); i++ {
		if tail := n.tail(i, allowed); tail > 0 {
			n.cutAt(i, tail, "put a text with a comma in quotes, write a number with a decimal point")
		}
	}
}

// Known tells of the value of a key that a comma has cut what it can be called instead:
// other gives that for the whole text, "" where it is not known. To be asked before Map.
func (n *Node) Known(key string, other func(whole string) string) {
	if n == nil || n.broken || n.kind != keyed {
		return
	}
	i := slices.IndexFunc(n.inside, func(v *Node) bool { return v.key == key })
	if i < 0 {
		return
	}
	whole := n.inside[i].value
	for k := range n.tail(i, nil) {
		whole += "," + n.inside[i+1+k].key
		if word := other(whole); word != "" {
			n.cutAt(i, k+1, `put "`+whole+`" in quotes or write `+word)
			return
		}
	}
}
