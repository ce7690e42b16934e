package report

import "parch/internal/study"

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
	ID            string `json:"id"`
	CostPerLitre  number `json:"cost_per_litre"`
	HoursAttended number `json:"hours_attended"`
	WasteKg       number `json:"waste_kg"`
	EnergyKWh     number `json:"energy_kwh"`
	BeatenBy      string `json:"beaten_by,omitempty"` // no worse in all four and better in one
}

func showFront(l *study.Lot) []frontOut {
	all := make([]frontOut, len(l.Front))
	for i, f := range l.Front {
		all[i] = frontOut{f.ID, number(f.CostPerLitre), number(f.HoursAttended), number(f.WasteKg), number(f.EnergyKWh), f.DominatedBy}
	}
	return all
}

// whatIfOut is the cheapest route over start water (rows) and target (columns).
type whatIfOut struct {
	StartWater []number          `json:"start_water_mg_per_kg"`
	Target     []number          `json:"target_mg_per_kg"`
	Cheapest   [][]whatIfCellOut `json:"cheapest"`
}

// whatIfCellOut has a note in place of a route where there is none.
type whatIfCellOut struct {
	ID           string `json:"id,omitempty"`
	CostPerLitre number `json:"cost_per_litre"`
	Note         string `json:"note,omitempty"`
}

func showWhatIf(w *study.WhatIf) *whatIfOut {
	if w == nil {
		return nil
	}
	out := &whatIfOut{StartWater: contents(w.StartWater), Target: contents(w.Target), Cheapest: make([][]whatIfCellOut, len(w.Cells))}
	for i, row := range w.Cells {
		for _, c := range row {
			out.Cheapest[i] = append(out.Cheapest[i], whatIfCellOut{c.ID, number(c.CostPerLitre), c.Note})
		}
	}
	return out
}

// contents are waters in mg/kg.
func contents(kgPerKg []float64) []number {
	all := make([]number, len(kgPerKg))
	for i, w := range kgPerKg {
		all[i] = number(w * mgPerKg)
	}
	return all
}
