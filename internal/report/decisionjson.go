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
