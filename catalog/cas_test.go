package catalog_test

import (
	"fmt"
	"testing"

	"parch/catalog"
)

// The check digit of a CAS number is the sum of its digits, each times its place from the
// right, modulo 10 (rule of the registry). 141-78-6: 8x1 + 7x2 + 1x3 + 4x4 + 1x5 = 46, so 6.
func TestMistypedCheckDigit(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for typed, want := range map[string]string{
		"141-78-5":   "the check digit of 141-78-5 does not fit; 141-78-6 is ethyl acetate",
		" 141-78-0 ": "the check digit of 141-78-0 does not fit; 141-78-6 is ethyl acetate",
		"108-88-4":   "the check digit of 108-88-4 does not fit; 108-88-3 is toluene",
		"7732-18-4":  "the check digit of 7732-18-4 does not fit; 7732-18-5 is water",
		"64-18-5":    "the check digit of 64-18-5 does not fit: with these digits a CAS number ends in 6", // formic acid, not in the catalog
		"64-18-6":    "",
		"141-78-6":   "",
		"toluene":    "",
		"141-786":    "",
		"":           "",
	} {
		if got := cat.MistypedCAS(typed); got != want {
			t.Errorf("%q: %q, want %q", typed, got, want)
		}
	}
	for _, s := range cat.Solvents {
		for last := range 10 {
			typed := fmt.Sprintf("%s%d", s.CAS[:len(s.CAS)-1], last)
			want := fmt.Sprintf("the check digit of %s does not fit; %s is %s", typed, s.CAS, s.Name)
			if typed == s.CAS {
				want = ""
			}
			if got := cat.MistypedCAS(typed); got != want {
				t.Errorf("%q: %q, want %q", typed, got, want)
			}
		}
	}
}
