package report_test

import (
	"bytes"
	"encoding/json"
	"io"
	"strings"
	"testing"
	"unicode/utf8"

	"parch/catalog"
	"parch/internal/inspect"
	"parch/internal/listing"
	"parch/internal/proof"
	"parch/internal/report"
)

// fits checks that a text keeps to 100 columns.
func fits(t *testing.T, what string, write func(io.Writer) error) string {
	t.Helper()
	var text bytes.Buffer
	if err := write(&text); err != nil {
		t.Fatalf("%s: %v", what, err)
	}
	for line := range strings.Lines(text.String()) {
		if n := utf8.RuneCountInString(strings.TrimSuffix(line, "\n")); n > 100 {
			t.Errorf("%s: %d columns: %q", what, n, line)
		}
	}
	return text.String()
}

// valid checks that a document is JSON.
func valid(t *testing.T, what string, write func(io.Writer) error) {
	t.Helper()
	var doc bytes.Buffer
	if err := write(&doc); err != nil || !json.Valid(doc.Bytes()) {
		t.Errorf("%s is no JSON: %v", what, err)
	}
}

// Every entry of the catalog is shown, as text of 100 columns and as JSON.
func TestEveryEntryIsShown(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	kinds := listing.Of(cat)
	fits(t, "kinds", func(w io.Writer) error { return report.CatalogText(w, cat, kinds) })
	valid(t, "kinds", func(w io.Writer) error { return report.CatalogJSON(w, cat, kinds) })
	for _, k := range kinds {
		fits(t, k.Name, func(w io.Writer) error { return report.KindText(w, k) })
		valid(t, k.Name, func(w io.Writer) error { return report.KindJSON(w, k) })
		for _, e := range k.Entries {
			what := k.Name + " " + e.Key
			text := fits(t, what, func(w io.Writer) error { return report.EntryText(w, cat, k, e) })
			valid(t, what, func(w io.Writer) error { return report.EntryJSON(w, cat, k, e) })
			for _, f := range e.Facts {
				if f.Source != "" && k.Name != "sources" && !strings.Contains(text, f.Source+":") {
					t.Errorf("%s: the reference of %s is not printed", what, f.Source)
				}
			}
		}
	}
}

func TestProofIsShown(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	all, err := catalog.LoadChecks()
	if err != nil {
		t.Fatal(err)
	}
	r, err := proof.Run(cat, all)
	if err != nil {
		t.Fatal(err)
	}
	text := fits(t, "proof", func(w io.Writer) error { return report.ProofText(w, r, cat.Date) })
	valid(t, "proof", func(w io.Writer) error { return report.ProofJSON(w, r, cat.Date) })
	for _, row := range r.Rows {
		// a long source is broken over lines: its first words must be there
		if words := strings.Fields(row.Source); !strings.Contains(text, words[0]) {
			t.Errorf("the source of %s of %s is not printed: %s", row.Quantity, row.Subject, row.Source)
		}
	}
	if n := strings.Count(text, "excused "); n < 50 {
		t.Errorf("%d excused rows are shown", n)
	}
}

func TestSheetWithCarrier(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	s, err := inspect.Solvent(cat, cat.Solvents["ethanol"], 101325, 298.15)
	if err != nil {
		t.Fatal(err)
	}
	if err := s.AddCarrier(cat, "cyclohexane"); err != nil {
		t.Fatal(err)
	}
	fits(t, "sheet", func(w io.Writer) error { return report.SheetText(w, s) })
	var doc bytes.Buffer
	if err := report.SheetJSON(&doc, s); err != nil {
		t.Fatal(err)
	}
	checkKeys(t, doc.Bytes(), sheetKeys+" ternary_azeotrope")
	checkKeys(t, doc.Bytes(), "temperature_c water_mass_percent solvent_mass_percent carrier_mass_percent", "ternary_azeotrope")
}
