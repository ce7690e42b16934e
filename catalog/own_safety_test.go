package catalog_test

import (
	"strings"
	"testing"

	"parch/catalog"
)

// Own data cannot make a dangerous pair harmless: not by a verdict, not by the
// class of a built-in solvent, not by a class that the formula contradicts.
// Halogenated solvents with active metals: Prudent Practices in the Laboratory
// (1995) p. 103.
func TestOwnDataCannotMakeADangerousPairHarmless(t *testing.T) {
	const sources = "sources: {me: \"bench book\"}\n"
	sample := string(ownFile(t, "four-numbers.yaml").Data)
	for _, c := range []struct{ what, data, want string }{
		{"a verdict on a solvent", sources + "matrix:\n  common: {source: me, confidence: memory}\n  solvents:\n    dichloromethane:\n      sodium: {ok: \"we always do that\"}\n",
			"dichloromethane with sodium is dangerous"},
		{"a verdict on a class", sources + "matrix:\n  common: {source: me, confidence: memory}\n  classes:\n    chlorinated:\n      magnesium: {caution: \"slowly\"}\n",
			"chlorinated with magnesium is dangerous"},
		{"a class the formula contradicts", strings.Replace(sample, "formula: C8H10", "formula: C2H4Cl2", 1), "it is halogenated"},
		{"an alkane with oxygen", strings.NewReplacer("formula: C8H10", "formula: C4H10O", "class: aromatic", "class: alkane").Replace(sample), "it holds O"},
		{"another class for a built-in solvent", strings.NewReplacer("bench-xylene:", "ethanol:", "formula: C8H10", "formula: C2H6O", "class: aromatic", "class: ether").Replace(sample),
			`of class "small-alcohol"`},
	} {
		if _, err := catalog.LoadWith(catalog.File{Name: "own.yaml", Data: []byte(c.data)}); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %q", c.what, err, c.want)
		}
	}
	stricter := sources + "matrix:\n  common: {source: me, confidence: memory}\n  solvents:\n    toluene:\n      sieve-4a: {unsuitable: \"site rule\"}\n"
	c, err := catalog.LoadWith(catalog.File{Name: "own.yaml", Data: []byte(stricter)})
	if err != nil {
		t.Fatal(err)
	}
	if v, _ := c.Verdict(c.Solvents["toluene"], "sieve-4a"); v.Word != "unsuitable" {
		t.Errorf("a stricter verdict was not taken: %+v", v)
	}
}
