package workbook

import (
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"parch/internal/steps"
	"parch/internal/study"
)

// many is a made-up report of many lots and routes.
func many(lots, list int) *study.Report {
	r := synthetic()
	kinds := []steps.Kind{steps.Soak, steps.Trap, steps.Salt, steps.Column, steps.Forerun}
	r.Lots = nil
	for i := range lots {
		var all []study.Route
		for k := range list {
			route := madeUp(r.Book, fmt.Sprintf("soak:agent-%02d", k), 5e-6, float64(10+k), 1, float64(1+k))
			o := &route.Run.Outcomes[0]
			o.Kind = kinds[k%len(kinds)]
			for h := range 25 {
				o.Course = append(o.Course, steps.Point{Hours: float64(h), Water: 480e-6 / float64(1+h)})
			}
			all = append(all, ranked(route, k+1))
		}
		r.Lots = append(r.Lots, madeUpLot(fmt.Sprintf("lot %d", i+1), 15e-6, all...))
	}
	return r
}

// Forty lots of sixty routes still give a file that can be opened and mailed.
func TestManyLots(t *testing.T) {
	data := written(t, many(40, 60))
	if mb := len(data) >> 20; mb > 8 {
		t.Errorf("the file has %d MB", mb)
	}
	b := readBook(t, data)
	if _, _, c := b.named(t, "check_total"); c.raw != "0" {
		t.Errorf("check_total is %s", c.raw)
	}
	if n := len(charts(t, b)); n > 4*mostLotsDrawn+40 { // one on each card
		t.Errorf("%d charts", n)
	}
	lotsOnDecision(t, b, 40)
}

// Decision holds every lot or counts it among those left out.
func TestDecisionOfMoreLotsThanFit(t *testing.T) {
	if left := lotsOnDecision(t, readBook(t, written(t, many(70, 1))), 70); left < 70-mostInLines {
		t.Errorf("%d lots are said to be left out", left)
	}
}

var leftOut = regexp.MustCompile(`^(\d+) lots more do not fit on this page`)

func lotsOnDecision(t *testing.T, b *book, lots int) (left int) {
	t.Helper()
	there := map[string]bool{}
	for _, c := range b.cells[sheetDecision] {
		if strings.HasPrefix(c.text, "lot ") {
			there[c.text] = true
		}
		if m := leftOut.FindStringSubmatch(c.text); m != nil {
			left, _ = strconv.Atoi(m[1])
		}
	}
	if len(there)+left != lots {
		t.Errorf("Decision holds %d of %d lots and says that %d are left out", len(there), lots, left)
	}
	return left
}

func BenchmarkManyLots(b *testing.B) {
	r := many(40, 60)
	b.ReportAllocs()
	for b.Loop() {
		if err := Write(io.Discard, r); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkDemo(b *testing.B) {
	r, err := loadDemo()
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if err := Write(io.Discard, r); err != nil {
			b.Fatal(err)
		}
	}
}
