package report

import (
	"math"

	"parch/internal/study"
)

// breakEvensOut are the break-evens of a lot by key: start_water_mg_per_kg,
// litres_a_month_against_buying, technician_per_hour, sieve_per_kg,
// uses_of_a_sieve, uses_a_year_of_a_receiver. A question that does not arise for a
// lot has no key.
type breakEvensOut map[string]breakEvenOut

type breakEvenOut struct {
	Question string `json:"question"`
	Unit     string `json:"unit"`
	Now      number `json:"now"`
	At       number `json:"at"` // null where the order never changes
	From     number `json:"searched_from"`
	To       number `json:"searched_to"`
	Below    string `json:"cheapest_below"`
	Above    string `json:"cheapest_above"`
	Never    bool   `json:"never"`
	Step     bool   `json:"step"` // a cost jumps at "at"
	Answer   string `json:"answer"`
}

func showBreakEvens(l *study.Lot) breakEvensOut {
	all := breakEvensOut{}
	for _, b := range l.BreakEvens {
		all[b.Key] = breakEvenOut{b.What, b.Unit, number(b.Now), number(b.At), number(b.From), number(b.To), b.Below, b.Above, b.Never, b.Step, b.Answer}
	}
	return all
}

// frontOut is a route in the trade-off of cost, attended hours, waste and energy.
type frontOut struct {
	ID           string  `json:"id"`
	CostPerLitre number  `json:"cost_per_litre"`
	Attended     number  `json:"hours_attended"`
	WasteKg      number  `json:"waste_kg"`
	EnergyKWh    number  `json:"energy_kwh"`
	DominatedBy  *string `json:"dominated_by"`
}

func showFront(l *study.Lot) []frontOut {
	all := make([]frontOut, len(l.Front))
	for i, p := range l.Front {
		all[i] = frontOut{p.ID, number(p.CostPerLitre), number(p.HoursAttended), number(p.WasteKg), number(p.EnergyKWh), known(p.DominatedBy)}
	}
	return all
}

// whatIfOut is the cheapest route for each start water (row) and target (column).
type whatIfOut struct {
	StartWater []number       `json:"start_water_mg_per_kg"`
	Target     []number       `json:"target_mg_per_kg"`
	Cells      [][]whatIfCell `json:"cells"`
}

type whatIfCell struct {
	ID           *string `json:"id"`
	CostPerLitre number  `json:"cost_per_litre"`
	Note         string  `json:"note,omitempty"`
}

func showWhatIf(l *study.Lot) *whatIfOut {
	if l.WhatIf == nil {
		return nil
	}
	out := &whatIfOut{Cells: make([][]whatIfCell, len(l.WhatIf.Cells))}
	for _, w := range l.WhatIf.StartWater {
		out.StartWater = append(out.StartWater, number(w*mgPerKg))
	}
	for _, w := range l.WhatIf.Target {
		out.Target = append(out.Target, number(w*mgPerKg))
	}
	for i, row := range l.WhatIf.Cells {
		for _, c := range row {
			if math.IsInf(c.CostPerLitre, 0) {
				c.CostPerLitre = math.NaN()
			}
			out.Cells[i] = append(out.Cells[i], whatIfCell{known(c.ID), number(c.CostPerLitre), c.Note})
		}
	}
	return out
}
