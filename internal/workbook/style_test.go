package workbook

import (
	"strings"
	"testing"
)

// Every number keeps clear of the right edge of its cell by its format, in every section
// of it, and by nothing else: LibreOffice 7.4 forgets the indent of a number beside one
// that differs in its format alone (seen on printed pages).
func TestNumbersKeepClearOfTheEdge(t *testing.T) {
	seen := map[styled]bool{}
	for _, g := range layoutOf(t).grids {
		for _, row := range g.rows {
			for _, c := range row {
				if (c.isNumber() || c.right) && c.look != heading && c.format != "" && c.format != "General" {
					seen[styled{c.look, c.format, true}] = true
				}
			}
		}
	}
	for s := range seen {
		st := s.style()
		if st.Alignment.Horizontal != "right" || st.Alignment.Indent != 0 || st.CustomNumFmt == nil {
			t.Fatalf("%+v is aligned %+v", s, *st.Alignment)
		}
		for _, section := range strings.Split(*st.CustomNumFmt, ";") {
			if !strings.HasSuffix(section, `"   "`) {
				t.Errorf("%+v is written %q", s, *st.CustomNumFmt)
			}
		}
	}
	if len(seen) < 10 {
		t.Errorf("%d styles of numbers", len(seen))
	}
}
