package report

import (
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
)

// Nothing is left out in silence: equipment that is bought has a payback, or the reason why it has none.
func TestPaybackSaysWhenItHasNothingToCompareWith(t *testing.T) {
	none := costs.Year{Equipment: decimal.NewFromInt(150)}
	if text := investment(&none, "EUR"); !strings.Contains(text, "there is none to reckon the payback against") {
		t.Errorf("equipment is bought and nothing is said of its payback: %q", text)
	}
	if text := investment(&costs.Year{}, "EUR"); text != "" {
		t.Errorf("no equipment is bought: %q", text)
	}
}
