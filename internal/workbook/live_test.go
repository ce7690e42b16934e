package workbook

import (
	"strings"
	"testing"
)

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

// After any edit the sheets that hold results of the run say so on the printed page,
// each card beside its amounts too.
func TestResultsOfTheRunSayThatSomethingWasEdited(t *testing.T) {
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l, _, err := layLive(m)
	if err != nil {
		t.Fatal(err)
	}
	for _, edit := range [][]change{nil, {{name: "lot2_batch_litres", value: "11"}}, {{name: "price_electricity_kwh", value: "0.3"}}} {
		read := recalculated(t, l, edit)
		said := func(sheet string, column, row int) bool {
			s, _ := read(sheet, column, row).(string)
			return strings.HasPrefix(s, "Edited since") && strings.Contains(s, runAgain)
		}
		for _, sheet := range []string{sheetRanges, sheetBuying} {
			if said(sheet, 1, frameRows+2) != (edit != nil) {
				t.Errorf("%s after %v: %v", sheet, edit, read(sheet, 1, frameRows+2))
			}
		}
		for _, card := range l.gridOf(sheetBenchCard).printed {
			top, amounts := read(sheetBenchCard, cardRouteEnd+1, card.first+1), read(sheetBenchCard, cardText, card.first+4)
			if said(sheetBenchCard, cardRouteEnd+1, card.first+1) != (edit != nil) || said(sheetBenchCard, cardText, card.first+4) != (edit != nil) {
				t.Errorf("card in row %d after %v: %v, %v", card.first, edit, top, amounts)
			}
		}
	}
}
