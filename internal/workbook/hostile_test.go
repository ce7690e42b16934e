package workbook

import (
	"strings"
	"testing"
)

// Names that would do harm if they were taken for a formula, a reference or
// markup, or that are hard to show.
var hostileNames = []string{
	`=HYPERLINK("x","y")`, "+1", "-1", "@SUM(A1)", `say "no"`, "it's 'quoted'!A1", strings.Repeat("long ", 60), strings.Repeat("x", 300),
	"حمض الخليك", "🧪 lot 🧪", "two\nlines", "tab\there", "&P &N", "<b>bold</b>", "]]>", "_x0041_",
}

// A name is shown as text on every sheet that speaks of the lot, and nothing else
// comes of it: no formula, no defined name, no broken part.
func TestNamesAreShownAsText(t *testing.T) {
	for _, name := range hostileNames {
		r := synthetic()
		r.Lots[0].Job.Name, r.Job.Title, r.Job.File = name, name, name
		for i := range r.Lots[0].Routes {
			route := &r.Lots[0].Routes[i]
			route.Label, route.Run.Outcomes[0].WhyText, route.Run.Outcomes[0].RuledBy = name, name, name
		}
		b := readBook(t, written(t, r))
		charts(t, b) // every part must be well formed
		want := spacedAlike(name)
		for _, sheet := range []string{sheetReadMe, sheetDecision, sheetInputs, sheetSteps, sheetCosts, sheetCompare, sheetRanges, sheetBenchCard} {
			shown := false
			for _, c := range b.cells[sheet] {
				shown = shown || strings.Contains(spacedAlike(c.text), want)
			}
			if !shown {
				t.Errorf("%q is not shown on %s", name, sheet)
			}
		}
		for _, sheet := range b.sheets {
			for place, c := range b.cells[sheet] {
				if c.formula != "" && strings.Contains(c.formula, name) && len(name) > 2 {
					t.Errorf("%q stands in the formula %s!%s: %s", name, sheet, place, c.formula)
				}
			}
		}
		for n := range b.names {
			if !strings.HasPrefix(n, "_xlnm.") && !validName.MatchString(n) {
				t.Errorf("%q made the name %s", name, n)
			}
		}
	}
}

// spacedAlike are the words of a text, however they are spaced.
func spacedAlike(s string) string { return strings.Join(strings.Fields(s), " ") }
