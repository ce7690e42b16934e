package workbook

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/study"
)

func TestSameReportSameBytes(t *testing.T) {
	for name, r := range map[string]*study.Report{"demonstration": demo(t), "made up": synthetic()} {
		first := written(t, r)
		for range 3 {
			if !bytes.Equal(first, written(t, r)) {
				t.Fatalf("%s: two writes differ", name)
			}
		}
	}
	again, err := runDemo(nil, usual)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(written(t, demo(t)), written(t, again)) {
		t.Error("two runs of the demonstration differ")
	}
}

// Text is never taken for a formula, wherever it stands.
func TestHostileTextStaysText(t *testing.T) {
	b := readBook(t, written(t, synthetic()))
	found := 0
	for _, sheet := range b.sheets {
		for place, c := range b.cells[sheet] {
			if strings.Contains(c.formula, "1+1 ") || strings.Contains(c.formula, "=") && strings.HasPrefix(c.formula, "=") {
				t.Errorf("%s!%s: text became the formula %s", sheet, place, c.formula)
			}
			if strings.ContainsAny(c.text, "\x00\x1b") {
				t.Errorf("%s!%s: control characters", sheet, place)
			}
			if strings.Contains(c.text, "ünï 水") {
				found++
			}
		}
	}
	if found < 10 {
		t.Errorf("the text stands in %d cells only", found)
	}
	for name, part := range b.parts {
		if strings.Contains(string(part), "oddFooter") && !strings.Contains(string(part), "&amp;L&amp;A&amp;RPage &amp;P of &amp;N</oddFooter>") {
			t.Errorf("%s: the footer is not the one that was set", name)
		}
	}
}

func TestLongTextIsCut(t *testing.T) {
	r := synthetic()
	r.Lots[0].Job.Name = strings.Repeat("水", 40000)
	for place, c := range readBook(t, written(t, r)).cells["Compare"] {
		if n := len([]rune(c.text)); n > longestText {
			t.Errorf("%s holds %d characters", place, n)
		}
	}
}

// Level routes are ranked by id; a target that cannot be shown is not reached.
func TestTiesAndUnshownTargets(t *testing.T) {
	b := readBook(t, written(t, synthetic()))
	if _, _, c := b.named(t, "check_total"); c.raw != "0" {
		t.Errorf("check_total is %s", c.raw)
	}
	want := [][3]string{{"soak:b", "yes", "2"}, {"soak:a", "yes", "1"}, {"soak:c", "yes", "3"}, {"trap", "no", ""}, {"trap", "no", ""}}
	for i, w := range want {
		row := 7 + i
		cells := b.cells["Compare"]
		got := [3]string{cells[at(2, row)].text, cells[at(3, row)].text, cells[at(8, row)].raw}
		if got != w {
			t.Errorf("row %d: %q, want %q", row, got, w)
		}
	}
}

func TestNoRoutesAtAll(t *testing.T) {
	r := synthetic()
	r.Lots = r.Lots[2:]
	b := readBook(t, written(t, r))
	if got := b.cells["Compare"]["A7"].text; got != "No route is offered." {
		t.Errorf("Compare says %q", got)
	}
	if _, _, c := b.named(t, "check_total"); c.raw != "0" {
		t.Errorf("check_total is %s", c.raw)
	}
}

// What cannot be stored is refused before anything is written.
func TestRefusals(t *testing.T) {
	for name, c := range map[string]struct {
		spoil func(*study.Report)
		says  string
	}{
		"not a number": {func(r *study.Report) { r.Lots[0].Routes[0].Run.WaterOut = math.NaN() }, "not a number that a sheet can hold"},
		"infinite":     {func(r *study.Report) { r.Lots[0].Job.Water = math.Inf(1) }, "not a number that a sheet can hold"},
		"no litres":    {func(r *study.Report) { r.Lots[0].Routes[1].Run.LitresDelivered = 0 }, "delivers no solvent"},
		"no price":     {func(r *study.Report) { delete(r.Book, "sieve-3a") }, "no price for sieve-3a"},
		"other price": {func(r *study.Report) {
			r.Book["sieve-3a"] = costs.Price{Item: "sieve-3a", Unit: "kg", PerUnit: decimal.NewFromInt(1)}
		}, "the book says 1"},
		"bad name":      {func(r *study.Report) { r.Book["Ü 1"] = costs.Price{Item: "Ü 1", Unit: "kg"} }, "cannot be the name of a cell"},
		"name twice":    {func(r *study.Report) { r.Book["still_20l"] = costs.Price{Item: "still_20l", Unit: "each"} }, "two cells would have the name price_still_20l_each"},
		"no date":       {func(r *study.Report) { r.CatalogDate = "yesterday" }, `"yesterday" is not a date`},
		"bad objective": {func(r *study.Report) { r.Job.Objective = "fame" }, `objective "fame" is not one of cost, time, waste, energy`},
	} {
		r := synthetic()
		c.spoil(r)
		var out bytes.Buffer
		err := Write(&out, r)
		if err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: error %v, want %q in it", name, err, c.says)
		}
		if out.Len() > 0 {
			t.Errorf("%s: %d bytes were written", name, out.Len())
		}
	}
	if Write(&bytes.Buffer{}, nil) == nil {
		t.Error("no report, no error")
	}
}

func TestValidNames(t *testing.T) {
	for name, want := range map[string]bool{"price_toluene_litre": true, "check_total": true, "T1": false, "vol1": false, "r1c1": false,
		"price": false, "price__kg": false, "1_a": false, "price_A": false, "price_a b": false} {
		if got := validName.MatchString(name); got != want {
			t.Errorf("%q: %v, want %v", name, got, want)
		}
	}
}

func TestTidyKeepsFifteenDigits(t *testing.T) {
	for _, v := range []float64{2.0 / 3, 1 - 1.0/(1<<53), -1e-300 / 3, 0, 123456789.123456789} {
		got := tidy(v)
		if fmt.Sprintf("%.14e", got) != fmt.Sprintf("%.14e", v) || math.Abs(got-v) > 5e-15*math.Abs(v) {
			t.Errorf("tidy(%v) = %v", v, got)
		}
		if got != tidy(got) {
			t.Errorf("tidy(%v) changes again", got)
		}
	}
}

// Numbers that a sheet shows keep three significant figures.
func TestFormats(t *testing.T) {
	for _, c := range []struct {
		values []float64
		want   string
	}{
		{[]float64{477.4, 11.43}, "#,##0.0"}, {[]float64{0.0123}, "#,##0.0000"}, {[]float64{40, 24}, "#,##0"},
		{[]float64{1234.5}, "#,##0"}, {nil, "#,##0"}, {[]float64{0, 1.5}, "#,##0.00"}, {[]float64{1e-9}, "#,##0.0000"},
	} {
		if got := formatFor(c.values...); got != c.want {
			t.Errorf("formatFor(%v) = %s, want %s", c.values, got, c.want)
		}
	}
	if got := exactFormat([]float64{48, 0.245, 3.333333}); got != "#,##0.000000" {
		t.Errorf("exactFormat: %s", got)
	}
	if got := exactFormat([]float64{48, 0.24}); got != "#,##0.00" {
		t.Errorf("exactFormat: %s", got)
	}
}
