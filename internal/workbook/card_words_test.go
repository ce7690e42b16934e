package workbook

import (
	"fmt"
	"strings"
	"testing"

	"parch/internal/steps"
)

// A card says of a soak the hours that it is set to stand, whatever attendance the sieve
// takes besides: the time in the oven is no part of them.
func TestCardSaysHowLongASoakStands(t *testing.T) {
	m, err := newModel(demo(t))
	if err != nil {
		t.Fatal(err)
	}
	l, soaks := lay(m), 0
	for _, r := range l.routes {
		if len(r.Run.Outcomes) != 1 || r.Run.Outcomes[0].Kind != steps.Soak {
			continue
		}
		soaks++
		want := fmt.Sprintf("Soak: stirred for %s h;", significant(r.Run.Settings.SoakHours[0]))
		if said := l.cardWords(r, mostExpected).settings; len(said) != 1 || !strings.HasPrefix(said[0], want) {
			t.Errorf("lot %d, %s: %q, want %q", r.lot.no, r.ID, said, want)
		}
	}
	if soaks == 0 {
		t.Error("no soak")
	}
}
