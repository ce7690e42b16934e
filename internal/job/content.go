package job

import (
	"parch/internal/document"
	"parch/internal/mixture"
	"parch/internal/quantity"
)

// content reads a water content within limits (kg/kg): by mass, or by volume of the
// lot with the density that the solvent has with so much water at the temperature
// of the room.
func (r *reader) content(n *document.Node, lot *Lot, l limits) (kgPerKg float64, ok bool) {
	return r.contentOf(n, n.Text(), lot, l)
}

// contentOf reads a content that is the text of the node or a part of it.
func (r *reader) contentOf(n *document.Node, text string, lot *Lot, l limits) (kgPerKg float64, ok bool) {
	if text == "" { // told already
		return 0, false
	}
	reading, err := r.parseContent(text, lot)
	if err != nil {
		n.Fail("%v", err)
		return 0, false
	}
	if !l.hold(reading.SI) {
		n.Fail("%s is not possible here; allowed: %s", quantity.Quote(n.Text()), l.text)
		return 0, false
	}
	if reading.Note != "" && r.cat.Solvents[lot.Solvent] != nil {
		r.note(n, "%s", reading.Note)
	}
	return reading.SI, true
}

// parseContent lets the density settle with the water, which changes it little. Where
// the solvent or the room is not known, which is told at its own place, any density
// serves to check the rest.
func (r *reader) parseContent(text string, lot *Lot) (reading quantity.Reading, err error) {
	const rounds, someKgPerM3 = 4, 1000
	s := r.cat.Solvents[lot.Solvent]
	for range rounds {
		kgPerM3 := float64(someKgPerM3)
		if s != nil && r.job.Site.RoomK > 0 {
			kgPerM3 = mixture.KgPerM3(r.cat, s, reading.SI, r.job.Site.RoomK)
		}
		if reading, err = quantity.ParseContent(text, quantity.Solution{KgPerM3: kgPerM3, NoReagent: true}); err != nil {
			break
		}
	}
	return reading, err
}
