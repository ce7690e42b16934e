package workbook

import (
	"strings"
	"testing"

	"parch/internal/costs"
)

// A default of a lot is called by the number that the lot has on all sheets, from 1; the
// key of the job counts from 0.
func TestDefaultsNameTheLotAsSheetsDo(t *testing.T) {
	for key, want := range map[string]string{"lots[0].heater": "lot 1: heater", "lots[11].free water": "lot 12: free water", "site.cooling": "site.cooling"} {
		if got := lotCalled(key); got != want {
			t.Errorf("%s is called %q, want %q", key, got, want)
		}
	}
	m, err := newModel(jobReport(t, "acetonitrile"))
	if err != nil {
		t.Fatal(err)
	}
	found := false
	for _, row := range lay(m).gridOf(sheetInputs).rows {
		for _, c := range row {
			s, _ := c.value.(string)
			found = found || s == "lot 1: heater"
			if strings.Contains(s, "[") {
				t.Errorf("Inputs says %q", s)
			}
		}
	}
	if !found {
		t.Error("Inputs does not list the heater of lot 1")
	}
}

// Tests are counted in the plural; a first charge that is not bought again is said.
func TestOrderNotesAreSentences(t *testing.T) {
	p := costs.Purchase{Unit: "test", Why: "the only pack on offer", Leftover: 48, Orders: []costs.Order{{Every: 237, Each: 1}}, Peak: 1}
	if s := orderNote(&p); !strings.Contains(s, "; 48 tests left at the end of the year; ") || !strings.Contains(s, "at most 1 test in store at once") {
		t.Error(s)
	}
	p = costs.Purchase{Unit: "kg", Process: 5, LaterYears: 3}
	if s := orderNote(&p); !strings.Contains(s, "later years use up 3 kg") {
		t.Error(s)
	}
	p.LaterYears = 5
	if s := orderNote(&p); strings.Contains(s, "later years") {
		t.Error(s)
	}
}
