package catalog_test

import (
	"fmt"
	"maps"
	"slices"
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

// A dangerous material stays so under a name of the user's own: alkali metals and hydrides
// with halogenated solvents (Prudent Practices in the Laboratory, 1995, p. 103), phosphorus
// pentoxide with acetone (common practice), however its formula is written. What no built-in
// agent stands for is the user's to judge.
func TestADangerousMaterialUnderAnotherName(t *testing.T) {
	built, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	classes := map[string]bool{}
	for pair := range built.Matrix {
		if built.Solvents[pair[0]] == nil {
			classes[pair[0]] = true
		}
	}
	for _, c := range []struct{ formula, need, want string }{
		{"Na", "1.276", "as sodium is"},
		{"K", "2.170", "as sodium is"},
		{"NaK", "1.723", "as sodium is"},
		{"Ca", "2.225", "as magnesium is"},
		{"NaH", "1.332", "as calcium-hydride is"},
		{"LiAlH4", "", "is not a formula"},
		{"NaAlH4", "2.998", "as calcium-hydride is"},
		{"NaOH", "2.220", "as potassium-hydroxide is"},
		{"P2O5", "7.879", "as phosphorus-pentoxide is"},
		{"BaO", "", "is not a formula"},
		{"B2O3", "3.864", ""},
	} {
		if c.need == "" {
			c.need = "1"
		}
		data := "sources: {me: \"bench book\"}\nagents:\n  ours:\n    name: our agent\n    kind: reactive\n    formula: " + c.formula + `
    reaction:
      equation: as the book has it
      water:    1
      need:     {value: ` + c.need + ` g/g, source: me, confidence: derived}
      surplus:  {value: 3, source: me, confidence: assumption}
      activity: {value: 0.01, source: me, confidence: memory}
      feed:     {value: 500 mg/kg, source: me, confidence: memory}
      waste:    waste-reactive
matrix:
  common: {source: me, confidence: memory}
  classes:
`
		for _, class := range slices.Sorted(maps.Keys(classes)) {
			data += fmt.Sprintf("    %s:\n      ours: {ok: we always do that}\n", class)
		}
		data += "prices:\n  kept under: 2026-10-01\n  common: {source: me, confidence: published}\n  items:\n    ours: {price: 9.80 EUR/kg}\n"
		_, err := catalog.LoadWith(catalog.File{Name: "own.yaml", Data: []byte(data)})
		if shared := err != nil && strings.Contains(err.Error(), "is dangerous with"); shared != strings.HasPrefix(c.want, "as ") {
			t.Errorf("%s: %v, want %q", c.formula, err, c.want)
		}
		if c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)) {
			t.Errorf("%s: %v, want %q", c.formula, err, c.want)
		}
	}
}
