package document

import (
	"errors"
	"fmt"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"parch/internal/quantity"
)

// problemsOf reads a document and returns its messages, the structural ones included.
func problemsOf(t *testing.T, text string, use func(*Node)) []string {
	t.Helper()
	root, err := Parse("job.yaml", []byte(text))
	if err == nil {
		if use != nil {
			use(root)
		}
		err = root.Problems().Err()
	}
	var invalid *Invalid
	if err != nil && !errors.As(err, &invalid) {
		t.Fatalf("%T is not *Invalid", err)
	}
	if invalid == nil {
		return nil
	}
	return invalid.Lines()
}

func TestNotADocument(t *testing.T) {
	for _, c := range []struct{ name, text, want string }{
		{"nothing", "", "job.yaml: the file is empty"},
		{"only a comment", "# nothing\n", "job.yaml: the file is empty"},
		{"null", "~", "job.yaml: the file is empty"},
		{"binary", "a: 1\n\x7fELF\x00", "job.yaml:2: this is not a text file: it contains a zero byte"},
		{"latin 1", "a: 21 \xb0C", "job.yaml:1: this is not text in UTF-8: byte 0xb0 cannot be read; save the file as UTF-8"},
		{"escape", "a: 1\nb: \x1b[31m", "job.yaml:2: control character U+001B is not allowed"},
		{"too large", "a: " + strings.Repeat("x", 1<<20), "job.yaml: the file is larger than 1 MiB (1048579 bytes)"},
		{"two documents", "a: 1\n---\nb: 2\n", "job.yaml:2: a second YAML document begins here; a file holds one"},
		{"bad second document", "a: 1\n...\nb: [\n", "job.yaml:3: this is not valid YAML: did not find expected <document start>"},
		{"indentation", "lots:\n  - name: a\n    x: 1\n   y: 2\n", `job.yaml:4: the line does not fit the list before it; check the indentation and the "-"`},
		{"two colons", "a: 1\nb: c: d\n", `job.yaml:2: a ":" stands where no key may be; check the indentation, and put text that contains ": " in quotes`},
		{"open quote", "a: \"x\nb: 2\n", "job.yaml:2: a quote is not closed"},
		{"open list", "a: [1, 2\nb: 3\n", `job.yaml:2: a "]" or a comma is missing`},
		{"alias of nothing", "a: 1\nb: *x\nc: 3\nd: 4\n", "job.yaml:2: aliases (*name) are not used here; write the value out"},
		{"lists 20000 deep", "a: 1\nb: " + strings.Repeat("[", 20000), "job.yaml:2: nested deeper than 32 levels"},
		{"keys 20000 deep", strings.Repeat("{a: ", 20000) + "1" + strings.Repeat("}", 20000), "job.yaml:1: nested deeper than 32 levels"},
		{"dashes 20000 deep", strings.Repeat("- ", 20000) + "1", "job.yaml:1: nested deeper than 32 levels"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if diff := cmp.Diff([]string{c.want}, problemsOf(t, c.text, nil)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestStructure(t *testing.T) {
	for _, c := range []struct {
		name, text string
		want       []string
	}{
		{"key twice", "a: 1\nb: 2\na: 3\n", []string{`job.yaml:3: "a" stands twice; it is already on line 1`}},
		{"key twice inside", "lots:\n- a: 1\n  a: 3\n", []string{`job.yaml:3: lots[0]: "a" stands twice; it is already on line 2`}},
		{"anchor and alias", "a: &x 1\nb: *x\n", []string{
			"job.yaml:1: a: anchors (&name) are not used here; write the value out where it is needed",
			"job.yaml:2: b: aliases (*name) are not used here; write the value out",
		}},
		{"merge", "<<: {a: 1}\n", []string{"job.yaml:1: merge keys (<<) are not used here; write the values out"}},
		{"tags", "a: !foo 1\nb: !!str 3\n", []string{"job.yaml:1: a: tags (!name) are not used here", "job.yaml:2: b: tags (!name) are not used here"}},
		{"key of keys", "a: {? [1]: 2}\n", []string{"job.yaml:1: a: a key must be a word"}},
		{"empty key", "\"\": 2\n", []string{"job.yaml:1: a key is empty"}},
		{"33 deep", strings.Repeat("[", 33) + strings.Repeat("]", 33), []string{"job.yaml:1: " + strings.Repeat("[0]", 32) + ": nested deeper than 32 levels"}},
		{"32 deep", strings.Repeat("[", 32) + strings.Repeat("]", 32), nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			if diff := cmp.Diff(c.want, problemsOf(t, c.text, nil)); diff != "" {
				t.Error(diff)
			}
		})
	}
}

// Every level doubles the one before it: expanded, it would fill the memory.
func TestAliasBomb(t *testing.T) {
	var bomb strings.Builder
	bomb.WriteString("a0: &a0 [x, x]\n")
	for i := 1; i < 60; i++ {
		fmt.Fprintf(&bomb, "a%d: &a%d [*a%d, *a%d]\n", i, i, i-1, i-1)
	}
	started := time.Now()
	lines := problemsOf(t, bomb.String(), nil)
	if len(lines) != 51 || lines[50] != "job.yaml: 128 more problems are not shown" {
		t.Errorf("%d messages, the last %q", len(lines), lines[len(lines)-1])
	}
	if took := time.Since(started); took > time.Second {
		t.Errorf("took %v", took)
	}
}

func TestReading(t *testing.T) {
	text := `title: Plan
site: {room: 21}
lots:
  - solvnet: toluene
    water: 480
    owned: perhaps
    kind: best
    date: 1 May
    count: many
    list: 3
    none:
`
	got := problemsOf(t, text, func(root *Node) {
		f := root.Map("title", "site", "lots")
		if title := f.Get("title"); title.Text() != "Plan" || title.Path() != "title" || title.Line() != 1 {
			t.Errorf("title %q at %s:%d", title.Text(), title.Path(), title.Line())
		}
		f.Get("site").Map("room").Get("room").Quantity(quantity.Temperature)
		lot := f.Get("lots").Items()[0].Map("solvent", "water", "owned", "kind", "date", "count", "list", "none", "target")
		lot.Need("target").Quantity(quantity.WaterContent)
		lot.Get("water").Quantity(quantity.WaterContent)
		lot.Get("owned").Bool()
		lot.Get("kind").OneOf("cost", "time")
		lot.Get("date").Date()
		lot.Get("count").Int()
		lot.Get("list").Items()
		lot.Get("none").Text()
		lot.Get("not there").Text()
	})
	want := []string{
		`job.yaml:2: site.room: "21" has no unit; write "21 °C"`,
		`job.yaml:4: lots[0]: unknown key "solvnet"; did you mean "solvent"?`,
		`job.yaml:4: lots[0]: "target" is missing`,
		`job.yaml:5: lots[0].water: "480" has no unit; write "480 mg/kg"`,
		`job.yaml:6: lots[0].owned: "perhaps" is neither yes nor no`,
		`job.yaml:7: lots[0].kind: "best" is not allowed here; allowed: cost, time`,
		`job.yaml:8: lots[0].date: "1 May" is not a date; write it like "2026-10-01"`,
		`job.yaml:9: lots[0].count: "many" is not a whole number`,
		`job.yaml:10: lots[0].list: a list is wanted here, this is a single value`,
		`job.yaml:11: lots[0].none: is empty`,
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestNearest(t *testing.T) {
	known := []string{"toluene", "tetrahydrofuran", "THF", "1-butanol", "2-butanone", "acetonitrile"}
	for typed, want := range map[string][]string{
		"tolune": {"toluene"}, "Toluene": {"toluene"}, "butanol": {"1-butanol"}, "thf": {"THF"}, "furan": {"tetrahydrofuran"},
		"xyz": nil, "": nil, strings.Repeat("t", 100): nil,
	} {
		if diff := cmp.Diff(want, Nearest(typed, known)); diff != "" {
			t.Errorf("%q: %s", typed, diff)
		}
	}
}

// Hostile files are answered soon and without much text. The time allowed is far
// above what is needed (under 0.1 s), so that a busy machine does not fail it; work
// that grew with the square of the size would.
func TestHostileFilesAreQuick(t *testing.T) {
	var distinct strings.Builder
	for i := range 8000 {
		fmt.Fprintf(&distinct, "solvemt%05d: 1\n", i)
	}
	for name, text := range map[string]string{
		"same key": strings.Repeat("a: 1\n", 20000), "many keys": distinct.String(), "long list": "[" + strings.Repeat("1,", 50000) + "]",
		"comments": strings.Repeat("-\n #x\n", 17000), "anchors": strings.Repeat("- &a 1\n", 14000), "documents": strings.Repeat("---\na: 1\n", 10000),
		"long key": "? a" + strings.Repeat("b", 50000) + "\n: {" + strings.Repeat("c: 1, ", 8000) + "c: 1}",
	} {
		started := time.Now()
		lines := problemsOf(t, text, func(root *Node) { root.Map("title", "solvent", "batch") })
		if took := time.Since(started); took > 5*time.Second {
			t.Errorf("%s took %v", name, took)
		}
		if printed := len(strings.Join(lines, "\n")); len(lines) == 0 || printed > 20000 {
			t.Errorf("%s: %d messages of %d bytes", name, len(lines), printed)
		}
	}
}
