package study

// BreakEven is where two routes change places as one figure of the job changes
// and the rest stays as it is.
type BreakEven struct {
	Key    string  // as in the JSON: "start_water_mg_per_kg", ...
	What   string  // the question, in words
	Unit   string  // of At, From and To: "mg/kg", "L/month", "EUR/h", "EUR/kg", "uses", "uses/yr"
	Now    float64 // the figure as the job has it
	At     float64 // where the order changes; NaN where it never does
	From   float64 // the range that was searched
	To     float64
	Below  string // the route that is ahead under At (or everywhere, where Never)
	Above  string // the route that is ahead over At
	Never  bool   // the order is the same from From to To
	Step   bool   // a cost jumps at At, where a route ceases to reach the limit or becomes possible
	Answer string // in a sentence
}

// FrontPoint is a route in the trade-off of cost, attended time, waste and energy.
type FrontPoint struct {
	ID            string
	CostPerLitre  float64 // money
	HoursAttended float64
	WasteKg       float64
	EnergyKWh     float64
	DominatedBy   string // a route that is no worse in all four and better in one; "" on the front
}

// WhatIf is the cheapest route over a grid of start water and target.
type WhatIf struct {
	StartWater []float64 // kg/kg, rising
	Target     []float64 // kg/kg, rising
	Cells      [][]WhatIfCell
}

// WhatIfCell belongs to one start water (row) and one target (column).
type WhatIfCell struct {
	ID           string  // of the cheapest route that reaches the target; "" where none does
	CostPerLitre float64 // money; NaN where there is no route
	Note         string  // "dry already", "cannot be shown", "no route"; "" where there is a route
}
