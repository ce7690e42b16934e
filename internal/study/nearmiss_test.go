package study_test

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"parch/internal/quantity"
	"parch/internal/steps"
	"parch/internal/study"
)

// A near miss is what the same lot gives in a job that never had the constraint: its
// route, water and hours are those that a comparison of that job puts first.
func TestANearMissIsTheAnswerWithoutTheConstraint(t *testing.T) {
	const lot = "lots:\n- {solvent: toluene, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, target: 60 mg/kg"
	for _, c := range []struct {
		told             string // how the near miss begins
		bound, unbounded string // the job with the constraint, and without
	}{
		{
			"needed within 1 h: without it ",
			"exclude: {steps: [buy, column]}\n" + lot + ", needed within: 1 h}\n",
			"exclude: {steps: [buy, column]}\nobjective: time\n" + lot + "}\n",
		},
		{
			"0.5 attended hours per day: without it ",
			"exclude: {steps: [buy, soak, column]}\nsite: {attended hours per day: 0.5 h}\n" + lot + ", needed within: 12 h}\n",
			"exclude: {steps: [buy, soak, column]}\nsite: {attended hours per day: 24 h}\nobjective: time\n" + lot + ", needed within: 12 h}\n",
		},
		{
			"4e+03 litres per week: without it ",
			"exclude: {steps: [buy, soak, column, salt, reactive]}\n" + lot + ", litres per week: 4000 L}\n",
			"exclude: {steps: [buy, soak, column, salt, reactive]}\nobjective: time\n" + lot + "}\n",
		},
		{
			"what the job excludes: without it ",
			"exclude: {steps: [trap, forerun, salt, soak, column, reactive, buy]}\n" + lot + "}\n",
			lot + "}\n",
		},
	} {
		misses := study0(t, c.bound).NearMisses
		free := compare(t, c.unbounded, study.Options{}).Lots[0].Routes[0]
		if free.Rank != 1 {
			t.Errorf("%s: nothing without the constraint", c.told)
			continue
		}
		want := fmt.Sprintf("%s%s leaves %s in %.3g h", c.told, free.ID, quantity.FormatWater(free.Run.WaterOut), free.Run.HoursTotal)
		if !slices.Contains(misses, want) {
			t.Errorf("want %q among\n%s", want, strings.Join(misses, "\n"))
		}
	}
}

// study0 is the only lot of a job in which no route is left.
func study0(t *testing.T, yaml string) study.Lot {
	t.Helper()
	l := compare(t, yaml, study.Options{}).Lots[0]
	if l.Best() != nil {
		t.Fatalf("%s reaches the limit", l.Best().ID)
	}
	return l
}

// Where only drying to a band fails, lifting its lower end gives the grade that is too dry.
func TestTheLowerEndOfABandIsANearMiss(t *testing.T) {
	l := study0(t, `
exclude: {steps: [settle, trap, forerun, salt, soak, column, reactive]}
prices: [{item: toluene-dry, pack: 20 L, price: 600 EUR, date: 2026-10-01, water: 10 mg/kg}]
lots: [{name: lot, solvent: toluene, batch: 10 L, water: 400 mg/kg, target: 80 mg/kg, not below: 40 mg/kg}]
`)
	want := "not below 40 mg/kg: without it buy leaves 10 mg/kg in "
	if !slices.ContainsFunc(l.NearMisses, func(m string) bool { return strings.HasPrefix(m, want) }) {
		t.Errorf("want %q among\n%s", want, strings.Join(l.NearMisses, "\n"))
	}
}

// A target that nothing reaches is missed by what the driest of all routes leaves: no
// route of the comparison leaves less, and of those that leave no more, to a thousandth,
// it is the cheapest.
func TestTheDriestIsTheNearestMissOfATarget(t *testing.T) {
	l := study0(t, `
exclude: {steps: [soak, column, reactive, buy]}
lots: [{solvent: toluene, batch: 18 L, water: 480 mg/kg, target: 15 mg/kg, needed within: 72 h}]
`)
	least := math.Inf(1)
	for _, r := range l.Routes {
		least = min(least, r.Run.WaterOut)
	}
	cheapest, id := math.Inf(1), ""
	for _, r := range l.Routes {
		if cost := r.Bill.PerLitre.InexactFloat64(); r.Run.WaterOut <= least*1.001 && cost < cheapest {
			cheapest, id = cost, r.ID
		}
	}
	want := fmt.Sprintf("target 15 mg/kg: the driest is %s, which leaves %s", id, quantity.FormatWater(least))
	if !slices.Contains(l.NearMisses, want) {
		t.Errorf("want %q among\n%s", want, strings.Join(l.NearMisses, "\n"))
	}
	if !slices.ContainsFunc(l.NearMisses, func(m string) bool {
		return m == "needed within 72 h: lifted alone, no route reaches the limit either"
	}) {
		t.Errorf("the time is not what is wrong:\n%s", strings.Join(l.NearMisses, "\n"))
	}
}

// A lot of 200 L goes into the flask of 22 L at 67 % of it: 200/14.74 makes fourteen
// charges, which is told as too many; a lot of 2 L hardly covers its floor.
func TestAStillOfTheWrongSizeIsTold(t *testing.T) {
	for volume, want := range map[string]string{
		"200 L": "the still takes the lot in 14 charges: a larger one is wanted",
		"30 L":  "the still takes the lot in 3 charges",
		"2 L":   "the lot fills 9.1 % of the still's flask: a smaller one is wanted",
	} {
		l := compare(t, "equipment: [{item: still-20l, owned: yes}, {item: receiver-light, owned: yes}]\nexclude: {steps: [soak, column, salt, reactive, forerun, buy]}\n"+
			"lots: [{solvent: toluene, batch: "+volume+", water: 400 mg/kg, target: 80 mg/kg}]\n", study.Options{}).Lots[0]
		for _, r := range l.Routes {
			if r.Run.Route[len(r.Run.Route)-1].Kind == steps.Trap && !slices.Contains(r.Warnings, want) {
				t.Errorf("%s of %s: want %q among %q", r.ID, volume, want, r.Warnings)
			}
		}
	}
}

// A carrier fills the flask too: 100 L of tert-butanol go into 50 L at 67 % in three
// charges, with their dichloromethane in four. What is told of the still is what the
// steps are computed with.
func TestTheStillChargesToldAreTheOnesComputed(t *testing.T) {
	l := compare(t, "lots: [{solvent: tert-butanol, batch: 100 L, batches: 6 /yr, water: 1 %, target: 200 mg/kg}]\n", study.Options{}).Lots[0]
	carried := 0
	for _, r := range l.Routes {
		most := 0.0
		for _, o := range r.Run.Outcomes {
			if n := o.Figure("still charges"); n > most { // not a number where there is none
				most = n
			}
		}
		want := fmt.Sprintf("the still takes the lot in %g charges", most)
		if o := r.Run.Outcomes[0]; o.Kind.Heated() && !slices.Contains(r.Warnings, want) {
			t.Errorf("%s: want %q among %q", r.ID, want, r.Warnings)
		}
		if strings.HasPrefix(r.ID, "trap:dichloromethane") && most == 4 {
			carried++
		}
	}
	if carried == 0 {
		t.Error("no route with the carrier takes a charge more")
	}
}
