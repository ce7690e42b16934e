package catalog_test

import (
	"bytes"
	"flag"
	"os"
	"testing"

	"parch/catalog"
)

var update = flag.Bool("update", false, "write packed.bin and names.txt anew")

func TestPackedIsOfTheFilesBesideIt(t *testing.T) {
	want, err := catalog.Packed(catalog.BuiltIn())
	if err != nil {
		t.Fatal(err)
	}
	cat, err := catalog.Parse(catalog.BuiltIn())
	if err != nil {
		t.Fatal(err)
	}
	for name, want := range map[string][]byte{"packed.bin": want, "names.txt": catalog.Names(cat)} {
		if *update {
			if err := os.WriteFile(name, want, 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		if got, err := os.ReadFile(name); err != nil || !bytes.Equal(got, want) {
			t.Errorf("a file of the catalog has changed since %s was written (%v); run: go test ./catalog -run Packed -update", name, err)
		}
	}
}
