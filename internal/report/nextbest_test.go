package report_test

import (
	"bytes"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/report"
	"parch/internal/study"
)

// Where the second route lacks a price, nothing is said of what it costs beside the best.
func TestNextBestWithoutAPriceIsNotCompared(t *testing.T) {
	r := synthetic()
	r.Lots[0].Routes[1].Bill.NoPrice = []string{"toluene-dry"}
	var out bytes.Buffer
	if err := report.Text(&out, r, report.Options{}); err != nil {
		t.Fatal(err)
	}
	text := strings.Join(strings.Fields(out.String()), " ")
	if strings.Contains(text, "The next best is") {
		t.Error("a route without a price is called the next best by cost")
	}
	if want := "The others lack a price and are not compared by cost."; !strings.Contains(text, want) {
		t.Errorf("%q is not said", want)
	}
}

// By how much the next best costs more counts what missing the target is expected to cost,
// where the job states it; the price a litre beside it does not, and that is said.
func TestNextBestSaysThatMissesAreCounted(t *testing.T) {
	for _, stated := range []bool{false, true} {
		r := synthetic()
		if stated {
			r.Lots[0].Routes[0].Miss = &study.Miss{PerBatch: decimal.NewFromInt(5), PerLitre: decimal.NewFromInt(1)}
		}
		var out bytes.Buffer
		if err := report.Text(&out, r, report.Options{}); err != nil {
			t.Fatal(err)
		}
		text := strings.Join(strings.Fields(out.String()), " ")
		if strings.Contains(text, "Expected misses are counted in that.") != stated {
			t.Errorf("a failed batch stated: %t\n%s", stated, text)
		}
	}
}
