package study_test

import (
	"math"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/study"
)

const twoLots = `
site: {attended hours per day: 7 h}
exclude: {steps: [soak, column, salt, reactive, forerun, buy]}
lots:
  - {name: a, solvent: toluene, batch: 14 L, batches: 400 /yr, water: 300 mg/kg, target: 60 mg/kg}
  - {name: b, solvent: toluene, batch: 14 L, batches: 600 /yr, water: 300 mg/kg, target: 60 mg/kg}
`

// A still is not left alone: it has 5 days of 7 h. Two lots that need more are told
// so; what both pay for is split by their batches, 400 to 600.
func TestARigIsBookedMoreThanFull(t *testing.T) {
	r := compare(t, twoLots, study.Options{})
	hours := r.Lots[0].Best().Run.Outcomes[0].HoursTotal
	if b := r.Bookings[0]; b.Item != "still-20l" && b.Item != "still-50l" || math.Abs(b.Share-1000*hours/52/35) > 1e-9 || !(b.Share > 1) {
		t.Errorf("%+v, want %g", b, 1000*hours/52/35)
	}
	if text := strings.Join(r.Warnings, "\n"); !strings.Contains(text, "is booked ") {
		t.Errorf("no conflict is told: %s", text)
	}
	if len(r.Shared) < 2 {
		t.Fatalf("still and receiver serve both: %+v", r.Shared)
	}
	for _, s := range r.Shared {
		if !s.Parts[0].Add(s.Parts[1]).Equal(s.Yearly.Round(2)) || !s.Parts[0].Equal(s.Yearly.Mul(decimal.RequireFromString("0.4")).Round(2)) || !s.Charged.Equal(s.Yearly.Mul(decimal.NewFromInt(2))) {
			t.Errorf("%+v", s)
		}
	}
}

// Attended work beyond the hours of a day waits for the next: 1 h a day makes a trap
// of 2 to 3 attended hours a work of three days, with 23 h between them.
func TestHoursOfAttendanceStretchTheTime(t *testing.T) {
	long := compare(t, strings.Replace(twoLots, "7 h", "1 h", 1), study.Options{}).Lots[0].Best()
	short := compare(t, strings.Replace(twoLots, "7 h", "24 h", 1), study.Options{}).Lots[0].Best()
	days := math.Ceil(long.Run.HoursAttended)
	if days < 2 || math.Abs(long.Run.HoursWaiting-(days-1)*23) > 1e-9 || short.Run.HoursWaiting != 0 {
		t.Errorf("%g attended, waiting %g; %g", long.Run.HoursAttended, long.Run.HoursWaiting, short.Run.HoursWaiting)
	}
}

// Too dry fails too: of a band from 40 to 80 mg/kg a dry grade of 10 mg/kg misses the
// lower end.
func TestABandHasALowerEnd(t *testing.T) {
	l := compare(t, `
prices: [{item: toluene-dry, pack: 20 L, price: 600 EUR, date: 2026-10-01, water: 10 mg/kg}]
lots: [{name: lot, solvent: toluene, batch: 10 L, water: 400 mg/kg, target: 80 mg/kg, not below: 40 mg/kg}]
`, study.Options{}).Lots[0]
	buy := routeOf(t, &l, "buy")
	if buy.Meets() || !buy.Run.TooDry {
		t.Errorf("buy leaves %g and passes", buy.Run.WaterOut)
	}
	for _, r := range l.Routes {
		if u := l.Uncertainty; r.Meets() && (r.Run.WaterOut < 40e-6+u-1e-12 || r.Run.WaterOut > 80e-6-u+1e-12) {
			t.Errorf("%s leaves %g outside the band and passes", r.ID, r.Run.WaterOut)
		}
	}
}

// Hazards that a site excludes keep their steps out.
func TestHazardsAreKeptOut(t *testing.T) {
	yaml := "exclude: {hazards: [boiling, used sieve in an oven]}\n" + strings.Split(demo(t), "title:")[0] + "lots: [{name: lot, solvent: toluene, batch: 10 L, batches: 20 /yr, water: 400 mg/kg, target: 80 mg/kg}]\n"
	for _, r := range compare(t, yaml, study.Options{}).Lots[0].Routes {
		for i, s := range r.Run.Route {
			if s.Kind.Heated() {
				t.Errorf("%s boils at step %d", r.ID, i+1)
			}
		}
		for _, after := range r.Run.Settings.Sieve {
			if after != "discard" {
				t.Errorf("%s: %s", r.ID, after)
			}
		}
	}
}
