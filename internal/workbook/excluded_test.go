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
