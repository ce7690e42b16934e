package workbook

import (
	"fmt"
	"strings"
	"testing"
)

// Reasons that differ in figures alone share a line, names with figures in them do not.
func TestReasonsOfAKindShareALine(t *testing.T) {
	var list []*excludedGroup
	for i, reason := range []string{
		"soak: 0.4 mg/kg is at or below the 196 mg/kg asked for", "soak: 12 mg/kg is at or below the 196 mg/kg asked for",
		"column: 9.5 mg/kg is at or below the 196 mg/kg asked for", "dearer than soak:sieve-3a, worth less than 1 % of it",
		"dearer than soak:sieve-4a, worth less than 1 % of it", "soak: 0.035 mg/kg is at or below the 196 mg/kg asked for"} {
		list = grouped(list, reason, fmt.Sprintf("r%d", i))
	}
	want := [][2]string{
		{"r0, r1, r5", "soak: 0.035 to 12 mg/kg is at or below the 196 mg/kg asked for"},
		{"r2", "column: 9.5 mg/kg is at or below the 196 mg/kg asked for"},
		{"r3", "dearer than soak:sieve-3a, worth less than 1 % of it"}, {"r4", "dearer than soak:sieve-4a, worth less than 1 % of it"}}
	if len(list) != len(want) {
		t.Fatalf("%d lines, want %d", len(list), len(want))
	}
	for i, e := range list {
		if got := [2]string{listed(e.ids, mostListed), e.reason()}; got != want[i] {
			t.Errorf("line %d: %q, want %q", i+1, got, want[i])
		}
	}
}

// A long list names the first routes and counts the rest.
func TestLongListsAreCounted(t *testing.T) {
	var ids []string
	for i := range 1000 {
		ids = append(ids, fmt.Sprintf("route%03d", i))
	}
	if s := listed(ids, mostListed); !strings.HasPrefix(s, "route000, route001, ") || !strings.HasSuffix(s, "route089, and 910 more") {
		t.Error(s)
	}
	if s := listed(ids[:2], mostListed); s != "route000, route001" {
		t.Error(s)
	}
	if s := listed([]string{strings.Repeat("x", 2000)}, mostListed); len(s) != 2000 {
		t.Error("the one route is not named")
	}
}

// A row of a list is as high as its texts: the routes stand in lines of their own, each as
// full as it gets, which no reader has to break again.
func TestListsAreAsHighAsTheirText(t *testing.T) {
	for _, k := range everyKind(t) {
		g := k.layout.gridOf(sheetCompare)
		size, lists := paints[words].size, 0
		for r, row := range g.rows {
			if len(row) < listText || row[0].look != words || row[listText-1].look != words {
				continue
			}
			routes, _ := row[listRoutes-1].value.(string)
			reason, _ := row[listText-1].value.(string)
			if routes == "" || reason == "" {
				continue
			}
			lists++
			room := g.roomFor(listRoutes, r+1)
			lines := strings.Split(routes, "\n")
			for i, line := range lines {
				if widthOf(line, size, false) > room {
					t.Errorf("%s: row %d of Compare: %q is wider than its room", k.name, r+1, line)
				}
				if next, _, _ := strings.Cut(lines[min(i+1, len(lines)-1)], " "); i+1 < len(lines) && strings.HasSuffix(line, ",") && widthOf(line+" "+next, size, false) < listSpared*room {
					t.Errorf("%s: row %d of Compare: %q has room after %q", k.name, r+1, next, line)
				}
			}
			first, _ := row[0].value.(string)
			want := linesHigh(max(len(lines), wrapped(first, g.roomFor(1, r+1), size, g.mayBeBold(1, r+1)), wrapped(reason, g.roomFor(listText, r+1), size, false)))
			if got := g.height(r + 1); got != want {
				t.Errorf("%s: row %d of Compare is %g points high, its text %g", k.name, r+1, got, want)
			}
		}
		if k.name == "demonstration" && lists < 50 {
			t.Errorf("only %d rows", lists)
		}
	}
}

// What cheaper routes keep out of a lot stands in one line, with those routes named; a
// beginning that several of them keep out stands there once.
func TestWhatIsDearerSharesALine(t *testing.T) {
	const saves = ", and what it saves in attended hours, energy and waste is worth less than 1 % of it"
	var list []*excludedGroup
	for _, x := range [][2]string{{"settle", "nothing settles"}, {"trap+…", "at best dearer than soak:sieve-3a, with trap, forerun next" + saves},
		{"forerun+…", "at best dearer than soak:sieve-4a" + saves}, {"trap+…", "at best dearer than buy, with buy next" + saves}, {"trap+forerun", "dearer than buy" + saves}} {
		list = grouped(list, x[1], x[0])
	}
	want := [][2]string{{"settle", "nothing settles"}, {"trap+…, forerun+…", "at best dearer than soak:sieve-3a, soak:sieve-4a or buy" + saves},
		{"trap+forerun", "dearer than buy" + saves}}
	list = dearerTogether(list)
	if len(list) != len(want) {
		t.Fatalf("%d lines, want %d", len(list), len(want))
	}
	for i, e := range list {
		if got := [2]string{strings.Join(e.ids, ", "), e.reason()}; got != want[i] {
			t.Errorf("line %d: %q, want %q", i+1, got, want[i])
		}
	}
	g, lines := layoutOf(t).gridOf(sheetCompare), map[string]int{}
	for _, row := range g.rows {
		if len(row) >= listText {
			if reason, _ := row[listText-1].value.(string); strings.HasPrefix(reason, "at best dearer than ") {
				lot, _ := row[0].value.(string)
				if lines[lot]++; lines[lot] > 1 {
					t.Errorf("%s has another line: %s", lot, reason)
				}
			}
		}
	}
	if len(lines) == 0 {
		t.Error("the demonstration has no such line")
	}
}
