package report_test

import (
	"bytes"
	"strings"
	"testing"

	"parch/internal/report"
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
