package bench

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
)

// dose reads the agent per volume of the lot. By mass of the lot ("10 % m/m") it
// becomes one by volume with the density of the lot; a share that does not say of
// what is refused.
func (r *reader) dose() {
	text, ok := r.flags["dose"]
	if !ok {
		return
	}
	byMass, err := quantity.Parse(text, quantity.MassRatio)
	if err != nil || r.q.Solvent == nil {
		r.q.DoseKgPerM3 = r.measure("dose", quantity.MassConcentration, anyDose, r.q.DoseKgPerM3)
		return
	}
	kgPerM3 := r.q.KgPerM3(orZero(r.q.Water))
	byMass.SI *= kgPerM3
	byMass.Note = fmt.Sprintf("%s read as %s: agent per mass of the lot, with %s kg/m3", quantity.Quote(strings.TrimSpace(text)),
		quantity.FormatConcentration(byMass.SI), quantity.Significant(kgPerM3, 4))
	r.q.DoseKgPerM3 = r.within("dose", text, byMass, nil, anyDose, r.q.DoseKgPerM3)
}
