package job

import (
	"fmt"

	"parch/internal/document"
	"parch/internal/mixture"
	"parch/internal/quantity"
)

// saturatedWord stands for a lot that holds all the water it can dissolve.
const saturatedWord = "saturated"

// water reads the dissolved water of a lot: a content, a band of it, or
// "saturated", which is what the solvent holds at the temperature of the room.
func (r *reader) water(n *document.Node, lot *Lot) (ok bool) {
	switch {
	case n != nil && n.IsMap():
		return r.waterBand(n, lot)
	case n != nil && !n.IsList() && isRange(n):
		return r.waterRange(n, lot)
	case n == nil || n.IsList() || n.Text() != saturatedWord:
		lot.Water, ok = r.content(n, lot, between(0, 0.5, "0 mg/kg to 500000 mg/kg, or saturated"))
		return ok
	}
	lot.Saturated = true
	s := r.cat.Solvents[lot.Solvent]
	if s == nil {
		return false
	}
	var partly bool
	var err error
	if s.Water == nil {
		err = fmt.Errorf("no data on water in %s", s.Name)
	} else {
		lot.Water, partly, err = mixture.Pair(r.cat, s).Solubility(r.job.Site.RoomK)
	}
	room := quantity.FormatTemperature(r.job.Site.RoomK)
	switch {
	case err != nil:
		n.Fail("how much water %s holds at %s is not known (%v); give its content", s.Name, room, err)
	case !partly:
		n.Fail("%s takes up any amount of water at %s and is never saturated; give its content", s.Name, room)
	default:
		r.note(n, "%s holds %s at %s", s.Name, quantity.FormatWater(lot.Water), room)
		return true
	}
	return false
}
