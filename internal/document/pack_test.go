package document

import (
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// drawn draws a document as YAML in flow style: texts, empty values, lists, keys.
func drawn(depth int) *rapid.Generator[string] {
	return rapid.Custom(func(t *rapid.T) string {
		what := rapid.IntRange(0, 3).Draw(t, "what")
		if depth > 4 {
			what %= 2
		}
		text := ""
		switch what {
		case 0:
			return "~"
		case 1:
			return `"` + rapid.StringMatching(`[a-z0-9 °:,-]{0,200}`).Draw(t, "text") + `"`
		case 2:
			for range rapid.IntRange(0, 5).Draw(t, "items") {
				text += drawn(depth+1).Draw(t, "item") + ",\n"
			}
			return "[" + text + "]"
		}
		for i := range rapid.IntRange(0, 5).Draw(t, "keys") {
			text += string(rune('a'+i)) + ": " + drawn(depth+1).Draw(t, "value") + ",\n"
		}
		return "{" + text + "}"
	})
}

// A packed tree is the tree that was packed, with lines, paths and messages.
func TestPackedIsTheSame(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		root, err := Parse("a.yaml", []byte(drawn(0).Draw(t, "document")))
		if err != nil || root.Problems().Count() > 0 {
			t.Skip("no document")
		}
		again, err := Unpack("a.yaml", string(root.Pack(nil)))
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(everything(root), everything(again)); diff != "" {
			t.Error(diff)
		}
	})
}

// everything that a reader can ask of the nodes of a tree.
func everything(n *Node) []string {
	all := []string{n.Where(), n.what(), n.value, n.key}
	for _, value := range n.inside {
		all = append(append(all, n.problems.where(int(value.keyLine))), everything(value)...)
	}
	return all
}

func FuzzUnpack(f *testing.F) {
	root, err := Parse("a.yaml", []byte("a: {b: 1, c: [2, ~]}"))
	if err != nil {
		f.Fatal(err)
	}
	f.Add(string(root.Pack(nil)))
	f.Add("")
	f.Fuzz(func(t *testing.T, packed string) {
		if root, err := Unpack("a.yaml", packed); (root == nil) == (err == nil) {
			t.Errorf("%v, %v", root, err)
		}
	})
}
