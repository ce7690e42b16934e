package workbook

import "testing"

// Formulas stay short in the longest workbook too.
func TestLiveFormulasStayShort(t *testing.T) {
	lots := lotsBlock()
	lots.rows = rows{7, 46}
	for _, b := range append([]*liveBlock{lots}, allBlocks()...) {
		for _, c := range b.columns {
			f, err := b.expand(c.formula, 6500, lots, 12)
			if err != nil {
				t.Error(err)
			}
			if len(f) > 120 {
				t.Errorf("%s, %s: %d characters: %s", b.kind, c.key, len(f), f)
			}
		}
	}
}

func allBlocks() (out []*liveBlock) {
	for _, k := range liveBlocks {
		out = append(out, k.make())
	}
	return out
}
