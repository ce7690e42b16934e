package costs_test

import (
	"encoding/xml"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/outside"
)

// Capital recovery factors as printed in tables of engineering economy (to five
// decimals; from memory, the same in every such table), such as Thuesen &
// Fabrycky, Engineering Economy, appendix of interest factors.
func TestAnnuityAgainstTables(t *testing.T) {
	for _, c := range []struct{ interest, years, want float64 }{
		{0.06, 5, 0.23740}, {0.06, 10, 0.13587}, {0.08, 10, 0.14903}, {0.10, 5, 0.26380}, {0.10, 10, 0.16275}, {0.10, 20, 0.11746}, {0, 5, 0.2},
	} {
		if got := costs.AnnuityFactor(c.interest, c.years); math.Abs(got-c.want) > 0.5e-5 {
			t.Errorf("%g over %g years: %.6f, want %.5f", c.interest, c.years, got, c.want)
		}
	}
}

// Annuity, present value and straight line against a spreadsheet's own PMT, NPV,
// PV and SLN.
func TestAgainstASpreadsheet(t *testing.T) {
	npv := func(outlay, saving string, interest, years float64) float64 {
		return costs.PresentValue(decimal.RequireFromString(outlay), decimal.RequireFromString(saving), interest, years).InexactFloat64()
	}
	cases := []struct {
		formula string
		got     float64
	}{
		{"-PMT(0.06;5;1)", costs.AnnuityFactor(0.06, 5)},
		{"-PMT(0.1;10;1)", costs.AnnuityFactor(0.1, 10)},
		{"-PMT(0.085;7.5;1)", costs.AnnuityFactor(0.085, 7.5)},
		{"NPV(0.06;700;700;700;700;700)-2140", npv("2140", "700", 0.06, 5)},
		{"NPV(0.1;50;50;50)-300", npv("300", "50", 0.1, 3)},
		{"NPV(0.06;-20;-20)-90", npv("90", "-20", 0.06, 2)},
		{"-PV(0.03;12;481.25)-3000", npv("3000", "481.25", 0.03, 12)},
		{"SLN(2140;0;5)/2140", costs.AnnuityFactor(0, 5)},
	}
	formulas := make([]string, len(cases))
	for i, c := range cases {
		formulas[i] = c.formula
	}
	for i, want := range evaluate(t, formulas) {
		if math.Abs(cases[i].got-want) > 1e-9*math.Max(1, math.Abs(want)) {
			t.Errorf("%s = %.12g, here %.12g", formulas[i], want, cases[i].got)
		}
	}
}

// evaluate has a spreadsheet compute formulas (OpenFormula) to 12 decimals.
func evaluate(t *testing.T, formulas []string) []float64 {
	t.Helper()
	soffice := outside.Program(t, "soffice")
	var rows strings.Builder
	for _, f := range formulas {
		var escaped strings.Builder
		if err := xml.EscapeText(&escaped, fmt.Appendf(nil, `of:=TEXT(%s;"0.000000000000")`, f)); err != nil {
			t.Fatal(err)
		}
		fmt.Fprintf(&rows, `<table:table-row><table:table-cell table:formula="%s"/></table:table-row>`, escaped.String())
	}
	dir := t.TempDir()
	sheet := filepath.Join(dir, "formulas.fods")
	content := fmt.Sprintf(`<?xml version="1.0" encoding="UTF-8"?><office:document xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" `+
		`xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:of="urn:oasis:names:tc:opendocument:xmlns:of:1.2" office:version="1.3" `+
		`office:mimetype="application/vnd.oasis.opendocument.spreadsheet"><office:body><office:spreadsheet><table:table table:name="a">%s</table:table>`+
		`</office:spreadsheet></office:body></office:document>`, rows.String())
	if err := os.WriteFile(sheet, []byte(content), 0o644); err != nil {
		t.Fatal(err)
	}
	run := exec.CommandContext(t.Context(), soffice, "-env:UserInstallation=file://"+filepath.Join(dir, "profile"), "--headless", "--convert-to", "csv", "--outdir", dir, sheet)
	if text, err := run.CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, text)
	}
	data, err := os.ReadFile(filepath.Join(dir, "formulas.csv"))
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.Fields(string(data))
	if len(lines) != len(formulas) {
		t.Fatalf("%d values for %d formulas:\n%s", len(lines), len(formulas), data)
	}
	values := make([]float64, len(lines))
	for i, line := range lines {
		if values[i], err = strconv.ParseFloat(line, 64); err != nil {
			t.Fatalf("%s: %v", formulas[i], err)
		}
	}
	return values
}
