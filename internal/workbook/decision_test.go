package workbook

import (
	"os/exec"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"parch/internal/outside"
	"parch/internal/study"
)

// Letters of 7 points are what can still be read on paper (common practice, no
// source). Each lot stands on the page in full, in a line, or is counted as left out.
func TestDecisionIsLegible(t *testing.T) {
	few := func(n int) *study.Report {
		r := *demo(t)
		r.Lots = r.Lots[:n]
		return &r
	}
	for name, r := range map[string]*study.Report{"one lot": few(1), "two lots": few(2), "three lots": few(3), "made-up lots": synthetic(),
		"4": many(4, 3), "6": many(6, 3), "12": many(12, 3), "30": many(30, 3), "40": many(40, 3)} {
		m, err := newModel(r)
		if err != nil {
			t.Fatal(err)
		}
		g := lay(m).decision()
		if points := 10 * g.pageScale(rows{1, g.last()}); points < 7 {
			t.Errorf("%s: printed in %.2f points", name, points)
		}
		full, shown, out := decisionHolds(t, g)
		if shown+out != len(r.Lots) {
			t.Errorf("%s: %d lots are shown and %d left out of %d", name, shown, out, len(r.Lots))
		}
		if len(r.Lots) <= 3 && full != len(r.Lots) {
			t.Errorf("%s: only %d stand there in full", name, full)
		}
		if len(r.Lots) <= 12 && out > 0 {
			t.Errorf("%s: %d are left out", name, out)
		}
	}
}

// decisionHolds counts the lots of the page to sign: those with sentences, all in its
// table, and those it says it leaves out.
func decisionHolds(t *testing.T, g *grid) (full, shown, out int) {
	t.Helper()
	lots := map[float64]bool{}
	for _, row := range g.rows {
		if len(row) == 0 {
			continue
		}
		switch s := row[0].value.(type) {
		case float64:
			lots[s] = true
		case string:
			if row[0].look == block && strings.HasPrefix(s, "Lot ") {
				full++
			}
			if n, _, left := strings.Cut(s, " lots more do not fit"); left {
				var err error
				if out, err = strconv.Atoi(n); err != nil {
					t.Fatal(err)
				}
			}
		}
	}
	return full, len(lots), out
}

// Each card, too, prints in letters of 7 points, which is the scale that is stored for
// the whole sheet, and the id of a route fits the cell in which it is chosen.
func TestCardsAreLegible(t *testing.T) {
	reports := map[string]*study.Report{"demonstration": demo(t), "made-up lots": synthetic(), "many lots": many(6, 8)}
	for _, name := range aliveJobs {
		reports[name] = jobReport(t, name)
	}
	for name, r := range reports {
		m, err := newModel(r)
		if err != nil {
			t.Fatal(err)
		}
		g := lay(m).gridOf(sheetBenchCard)
		if points := float64(g.percent) * 10 / 100; points < 7 {
			t.Errorf("%s: cards are printed in %.1f points", name, points)
		}
		for _, card := range g.printed {
			row := card.first + 1
			for _, c := range g.rows[row-1][cardHelper-1:] {
				id, _ := c.value.(string)
				if width := widthOf(id, 10, false); width > g.roomFor(cardText, row) {
					t.Errorf("%s: %s is %.0f points wide, its cell %.0f", name, id, width, g.roomFor(cardText, row))
				}
			}
		}
	}
}

var wordPlace = regexp.MustCompile(`yMin="([0-9.]+)" xMax="[0-9.]+" yMax="[0-9.]+">(Recommended|Prepared)<`)

// checkLetters holds the size of the letters of the page to sign, by the distance of
// two of its rows on the printed page, to what can be read.
func checkLetters(t *testing.T, pdf string, page int, g *grid) {
	t.Helper()
	no := strconv.Itoa(page)
	out, err := exec.CommandContext(t.Context(), outside.Program(t, "pdftotext"), "-bbox", "-f", no, "-l", no, pdf, "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	places, rowOf := map[string]float64{}, map[string]int{}
	for _, m := range wordPlace.FindAllStringSubmatch(string(out), -1) {
		place, err := strconv.ParseFloat(m[1], 64)
		if err != nil {
			t.Fatal(err)
		}
		if first, known := places[m[2]]; !known || place < first {
			places[m[2]] = place
		}
	}
	for r, row := range g.rows {
		for _, c := range row {
			s, _ := c.value.(string)
			word, _, _ := strings.Cut(s, " ")
			if _, known := rowOf[word]; !known && (word == "Recommended" || word == "Prepared") {
				rowOf[word] = r + 1
			}
		}
	}
	if len(places) != 2 || len(rowOf) != 2 {
		t.Fatalf("found on the page %v, in the sheet %v", places, rowOf)
	}
	scale := (places["Prepared"] - places["Recommended"]) / g.span(rowOf["Recommended"], rowOf["Prepared"]-1)
	t.Logf("letters of %.2f points", 10*scale)
	if 10*scale < 7 {
		t.Errorf("letters of %.2f points", 10*scale)
	}
}

// Where routes reach the limit and prices are missing, the page names the prices that
// are asked for.
func TestDecisionNamesMissingPrices(t *testing.T) {
	if testing.Short() {
		t.Skip("runs a job")
	}
	for _, k := range everyKind(t) {
		if k.name != "no prices" {
			continue
		}
		for _, c := range k.book.cells[sheetDecision] {
			if strings.HasPrefix(c.text, "Routes reach the limit") && strings.Contains(c.text, "electricity") && strings.Contains(c.text, "technician") {
				return
			}
		}
		t.Error("the page does not say that prices are missing")
	}
}
