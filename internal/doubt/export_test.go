package doubt

// ResidualOn is for the tests.
func (l *Lot) ResidualOn(agent string) []float64 { return l.residualOn(agent) }
