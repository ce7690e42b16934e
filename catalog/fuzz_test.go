package catalog_test

import (
	"errors"
	"os"
	"strings"
	"testing"
	"time"

	"parch/catalog"
	"parch/internal/document"
)

// FuzzLoadWith holds the reader of own data to three promises whatever the file:
// it does not panic, it answers soon, and it gives either messages with their
// place or a catalog that is valid as a whole.
func FuzzLoadWith(f *testing.F) {
	for _, name := range []string{"testdata/own.yaml", "testdata/four-numbers.yaml"} {
		data, err := os.ReadFile(name)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(data)
	}
	f.Add([]byte("solvents: {bench: {name: &a [*a]}}\n"))
	f.Add([]byte("sources: {a: b}\nprices: {x: {price: 1e999 EUR/kg, source: a}}\n"))
	built, err := catalog.Load()
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		started := time.Now()
		cat, err := catalog.LoadWith(catalog.File{Name: "own.yaml", Data: data})
		if took := time.Since(started); took > 5*time.Second {
			t.Errorf("took %v for %d bytes", took, len(data))
		}
		if err != nil {
			if cat != nil {
				t.Error("a catalog beside an error: nothing may be half loaded")
			}
			checkPlaces(t, err)
			return
		}
		if len(cat.Solvents) < len(built.Solvents) || len(cat.Agents) < len(built.Agents) {
			t.Errorf("%d solvents and %d agents: entries were lost", len(cat.Solvents), len(cat.Agents))
		}
	})
}

// checkPlaces wants a file and a printable line in every message.
func checkPlaces(t *testing.T, err error) {
	t.Helper()
	var invalid *document.Invalid
	if !errors.As(err, &invalid) || invalid.Count() == 0 {
		t.Errorf("no message says where: %v", err)
		return
	}
	for line := range strings.Lines(err.Error()) {
		line = strings.TrimSuffix(line, "\n")
		if strings.ContainsAny(line, "\r\x1b\x00") || len(line) > 3000 {
			t.Errorf("message %q", line)
		}
	}
}
