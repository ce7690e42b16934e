package document_test

import (
	"testing"

	"github.com/google/go-cmp/cmp"

	"parch/internal/document"
)

// Between braces a comma ends a value (YAML 1.2, 7.4: flow collection entries are parted
// by a comma). A text that holds one is told so in one message, and the rest is read.
func TestCommaBetweenBraces(t *testing.T) {
	known := func(whole string) string {
		return map[string]string{"1,4-dioxane": "1-4-dioxane", "2,2,4-trimethylpentane": "isooctane"}[whole]
	}
	const advice = `put a text with a comma in quotes, write a number with a decimal point`
	for _, c := range []struct {
		text string
		want []string
	}{
		{`{solvent: 1,4-dioxane, water: 3}`, []string{`f:1: solvent: the comma after "1" ends the value: put "1,4-dioxane" in quotes or write 1-4-dioxane`}},
		{`{water: 3, solvent: 2,2,4-trimethylpentane}`, []string{`f:1: solvent: the comma after "2" ends the value: put "2,2,4-trimethylpentane" in quotes or write isooctane`}},
		{`{solvent: 1,3-dioxolane, water: 3}`, []string{`f:1: solvent: the comma after "1" ends the value: ` + advice}},
		{`{name: a drum, blue, solvent: thf, water: 0,5 %}`, []string{`f:1: name: the comma after "a drum" ends the value: ` + advice, `f:1: water: the comma after "0" ends the value: ` + advice}},
		{`{solvent: thf, water 3}`, []string{`f:1: unknown key "water 3"; did you mean "water"?`}},
		{`{solvent: thf, water}`, []string{`f:1: water: is empty`}},
		{"solvent: thf\ncolour:\n", []string{`f:2: unknown key "colour"; allowed: name, solvent, water`}},
		{`{solvent: "1,4-dioxane", water: 3}`, nil},
	} {
		root, err := document.Parse("f", []byte(c.text))
		if err != nil {
			t.Fatal(err)
		}
		root.Known("solvent", known)
		f := root.Map("name", "solvent", "water")
		for _, key := range []string{"name", "solvent", "water"} {
			f.Get(key).Text()
		}
		var got []string
		if invalid, ok := root.Problems().Err().(*document.Invalid); ok {
			got = invalid.Lines()
		}
		if diff := cmp.Diff(c.want, got); diff != "" {
			t.Errorf("%s (-want +got):\n%s", c.text, diff)
		}
	}
}
