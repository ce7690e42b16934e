package bench

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
)

// dose reads the agent per volume of the lot. By mass of the lot ("10 % m/m") it
// becomes one by volume with the density of the lot, as a mass ("5 lb") with the
// volume where that is given; a share that does not say of what is refused.
func (r *reader) dose() {
	text, ok := r.flags["dose"]
	if !ok {
		return
	}
	reading, err := quantity.Parse(text, quantity.MassConcentration)
	if err == nil {
		r.q.DoseKgPerM3 = r.within("dose", text, reading, nil, anyDose, r.q.DoseKgPerM3)
		return
	}
	if other, ok := r.doseOtherwise(text); ok {
		r.q.DoseKgPerM3 = r.within("dose", text, other, nil, anyDose, r.q.DoseKgPerM3)
		return
	}
	message := fmt.Sprintf("--dose: %s", err)
	if strings.Contains(message, "allowed: ") {
		message += `; by mass of the lot also % m/m, g/kg; with --volume also a mass, such as "500 g"`
	}
	r.mistake(message, "")
}

// doseOtherwise reads a dose by mass of the lot, as a mass in the volume, or as a density.
func (r *reader) doseOtherwise(text string) (quantity.Reading, bool) {
	typed := quantity.Quote(strings.TrimSpace(text))
	if dense, err := quantity.Parse(text, quantity.Density); err == nil {
		return dense, true
	}
	if mass, err := quantity.Parse(text, quantity.Mass); err == nil && r.flags["volume"] != "" && r.q.VolumeM3 > 0 {
		mass.SI /= r.q.VolumeM3
		mass.Note = fmt.Sprintf("%s in %s read as %s", typed, quantity.FormatVolume(r.q.VolumeM3), quantity.FormatConcentration(mass.SI))
		return mass, true
	}
	byMass, err := quantity.Parse(text, quantity.MassRatio)
	if err != nil || r.q.Solvent == nil {
		return quantity.Reading{}, false
	}
	kgPerM3 := r.q.KgPerM3(orZero(r.q.Water))
	byMass.SI *= kgPerM3
	byMass.Note = fmt.Sprintf("%s read as %s: agent per mass of the lot, with %s kg/m3", typed,
		quantity.FormatConcentration(byMass.SI), quantity.Significant(kgPerM3, 4))
	return byMass, true
}
