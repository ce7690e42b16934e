package catalog_test

import (
	"reflect"
	"strings"
	"testing"

	"parch/catalog"
)

// The part of the catalog that a step asks for is the same as in the whole of it, for
// every solvent by every name that it has (needs no outside value).
func TestLoadForIsPartOfLoad(t *testing.T) {
	whole, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for key, solvent := range whole.Solvents {
		names := append([]string{key, " " + strings.ToUpper(solvent.Name)}, solvent.Aliases...)
		part, ok := catalog.LoadFor(names...)
		if !ok || len(part.Solvents) > 2 {
			t.Fatalf("%q do not all name one solvent", names)
		}
		if !reflect.DeepEqual(part.Solvents[key], solvent) {
			t.Errorf("%s is not as it stands in the catalog", key)
		}
	}
	part, ok := catalog.LoadFor("ethanol", "toluene")
	if !ok {
		t.Fatal("no part for a solvent and its carrier")
	}
	part.Solvents, part.Prices, part.Emissions = whole.Solvents, whole.Prices, whole.Emissions
	if !reflect.DeepEqual(part, whole) {
		t.Error("what is not of a solvent differs")
	}
	for _, name := range []string{"", "tolune", "toluene;"} {
		if _, ok := catalog.LoadFor(name); ok {
			t.Errorf("%q is taken for a solvent", name)
		}
	}
}

func BenchmarkLoadFor(b *testing.B) {
	for b.Loop() {
		catalog.LoadFor("toluene")
	}
}
