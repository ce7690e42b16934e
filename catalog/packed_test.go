package catalog_test

import (
	"bytes"
	"flag"
	"os"
	"testing"

	"parch/catalog"
)

var update = flag.Bool("update", false, "write packed.bin anew")

func TestPackedIsOfTheFilesBesideIt(t *testing.T) {
	want, err := catalog.Packed(catalog.BuiltIn())
	if err != nil {
		t.Fatal(err)
	}
	if *update {
		if err := os.WriteFile("packed.bin", want, 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	if got, err := os.ReadFile("packed.bin"); err != nil || !bytes.Equal(got, want) {
		t.Errorf("a file of the catalog has changed since packed.bin was written (%v); run: go test ./catalog -run Packed -update", err)
	}
}
