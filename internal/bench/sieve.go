package bench

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
)

// adviseCharges tells what each of several charges does.
func (a *Answer) adviseCharges() {
	for i := range a.Question.Charges {
		a.tell("charges", "charge %d leaves %s and ends at %s g/100 g", i+1,
			quantity.FormatWater(a.Figure(fmt.Sprintf("water after charge %d", i+1))/1e6),
			quantity.Significant(a.Figure(fmt.Sprintf("loading after, charge %d", i+1)), 3))
	}
	whole := a.asked()
	whole.Charges = 1
	if one, err := a.Case.Single(whole); err == nil && given(whole.DoseKgPerM3) && given(whole.TimeS) {
		a.tell("charges", "all of it in one charge for %s h would leave %s", quantity.Significant(whole.TimeS/3600, 3), quantity.FormatWater(one.Out.Water()))
	}
}

// atTheEnd is what a single charge holds then; each of several is told by itself.
func (a *Answer) atTheEnd() string {
	if held := a.Figure("loading after"); given(held) {
		return fmt.Sprintf(" and %s at the end", quantity.Significant(held, 3))
	}
	return ""
}

// floorOfHistory says what no dose and no time pass.
func (a *Answer) floorOfHistory() string {
	if a.Question.Activation.KgPerKg == 0 {
		return "an empty sieve sets no floor, and none is met in practice"
	}
	return fmt.Sprintf("no dose and no time pass the floor of %s that this sets", quantity.FormatWater(a.Floor))
}

// Sorbent names the agent and its form.
func (q *Question) Sorbent() string {
	if q.Powder {
		return strings.TrimSuffix(q.Agent.Name, ", beads") + ", powder"
	}
	return q.Agent.Name
}
