package workbook

import (
	"strings"
	"testing"
)

// Ids are broken between their steps where those fit, else at a colon or a hyphen, never
// within a word; nothing of an id is lost.
func TestIdsAreFoldedBetweenWords(t *testing.T) {
	wide := widthOf("salt:magnesium-sulfate+", 10, false)
	for _, c := range []struct {
		id, want string
		width    float64
		fits     bool
	}{
		{"buy", "buy", wide, true},
		{"salt:magnesium-sulfate+soak:sieve-3a", "salt:magnesium-sulfate+\nsoak:sieve-3a", wide, true},
		{"trap+forerun+soak:sieve-3a", "trap+forerun+\nsoak:sieve-3a", wide / 2 * 1.4, true},
		{"soak:sieve-3a", "soak:\nsieve-3a", widthOf("sieve-3a", 10, false), true},
		{"reactive:phosphorus-pentoxide", "reactive:\nphosphorus-\npentoxide", widthOf("phosphorus-", 10, false), true},
		{"magnesium", "magnesium", 20, false},
	} {
		got, fits := folded(c.id, c.width, 10, false)
		if got != c.want || fits != c.fits || strings.ReplaceAll(got, "\n", "") != c.id {
			t.Errorf("%s in %.0f points: %q, %v", c.id, c.width, got, fits)
		}
	}
}
