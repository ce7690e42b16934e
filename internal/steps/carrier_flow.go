package steps

import (
	"math"

	"parch/internal/thermo"
)

// condensed is a mole of vapour at the head and what the receiver makes of it.
type condensed struct {
	pot, head thermo.Boiling
	split     thermo.TernarySplit
}

// climb boils the pot and follows its vapour up the column. At total reflux,
// and with the organic layer returned it is nearly that, the liquid on a stage
// is like the vapour that rises to it.
func (r *refluxing) climb(s *state) (c condensed, err error) {
	x := s.pot
	for k := range r.plan.Stages + 1 {
		if r.near[k], err = r.m.Boil(x, r.eq.PressurePa, r.near[k]); err != nil {
			return c, err
		}
		c.head = r.near[k]
		if k > 0 && alike(x, c.head.Y) {
			break // pinched at an azeotrope
		}
		x = c.head.Y
	}
	c.pot = r.near[0]
	return c, nil
}

// alike reports whether a vapour is like its liquid.
func alike(x, y Fractions) bool {
	const share = 1e-6
	for i := range x {
		if math.Abs(y[i]-x[i]) > share*x[i] {
			return false
		}
	}
	return true
}

// condense boils the pot and parts a mole of the head's vapour in the receiver.
func (r *refluxing) condense(s *state) (c condensed, err error) {
	if c, err = r.climb(s); err != nil {
		return c, err
	}
	c.split, err = r.part(c.head.Y)
	return c, err
}

// part splits amounts or fractions n at the receiver's temperature, with the
// water of the organic layer from tie-lines where they are known.
func (r *refluxing) part(n Fractions) (thermo.TernarySplit, error) {
	z := scaled(n, 1/total(n))
	split, err := r.m.FlashFrom(z, r.eq.ReceiverK, r.split)
	if err != nil {
		return split, err
	}
	if split.Guides() { // a false pair of layers, met by a trial past the edge, would lead on to others
		r.split = split
	}
	wet, _ := r.m.Rewet(split, z, r.eq.ReceiverK, r.eq.Organic, r.plan.OrganicWater)
	return wet, nil
}

// flow is the change of state per mole of vapour.
type flow func(s *state) (state, condensed, error)

// vapour is a mole at the head, kept from the pot. As much vapour leaves the pot
// (constant molar overflow), whose latent heat counts, and is cooled to the receiver's
// temperature.
func (r *refluxing) vapour(c *condensed) state {
	y := c.head.Y
	condensed := r.latent(c.pot.Y, c.pot.TempK) + r.sensible(y, r.eq.ReceiverK, c.pot.TempK)
	return state{pot: scaled(y, -1), boiledMol: 1, boiledKg: r.massKg(c.pot.Y), condensedJ: condensed}
}

// filling returns nothing.
func (r *refluxing) filling(s *state) (state, condensed, error) {
	c, err := r.climb(s)
	if err != nil {
		return state{}, c, err
	}
	d := r.vapour(&c)
	d.held = c.head.Y
	return d, c, nil
}

// pushing keeps the condensate and returns as much dry carrier by volume: a full
// receiver runs over by what falls into it, whichever layer that joins.
func (r *refluxing) pushing(s *state) (state, condensed, error) {
	d, c, err := r.filling(s)
	if err != nil {
		return state{}, c, err
	}
	d.pushedM3 = r.m.MolarVolume(c.head.Y, r.eq.ReceiverK)
	returned := Fractions{inCarrier: d.pushedM3 / r.carrierM3()}
	d.held[inCarrier] -= returned[inCarrier]
	d.pot[inCarrier] += returned[inCarrier]
	return d, c, nil
}

// returning returns the organic layer of the condensate.
func (r *refluxing) returning(s *state) (state, condensed, error) {
	c, err := r.condense(s)
	if err != nil {
		return state{}, c, err
	}
	aqueous := scaled(c.split.Aqueous, c.split.AqueousShare*r.efficiency(s))
	if !c.split.Exists {
		aqueous = Fractions{}
	}
	d := r.vapour(&c)
	d.pot, d.aqueous = scaled(aqueous, -1), aqueous
	return d, c, nil
}

// stripping draws the head of the column off.
func (r *refluxing) stripping(s *state) (state, condensed, error) {
	c, err := r.climb(s)
	if err != nil {
		return state{}, c, err
	}
	d := r.vapour(&c)
	d.drawn = c.head.Y
	boiled := 1 + r.plan.RefluxRatio
	d.condensedJ += r.plan.RefluxRatio * r.latent(c.pot.Y, c.pot.TempK) // which falls back hot
	d.boiledMol, d.boiledKg = boiled, boiled*d.boiledKg
	return d, c, nil
}
