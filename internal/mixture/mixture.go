// Package mixture puts the models of liquids together from the catalog: water and
// a solvent, or water, a solvent and a carrier.
package mixture

import (
	"fmt"

	"parch/catalog"
	"parch/internal/thermo"
)

const waterKey = "water"

// Pair is water and a solvent, with the limits of their model. The solvent must
// have data on water.
func Pair(c *catalog.Catalog, s *catalog.Solvent) *thermo.Mixture {
	return &thermo.Mixture{Water: &c.Solvents[waterKey].Pure, Solvent: &s.Pure, NRTL: s.Water.NRTL, Limits: s.Water.Limits}
}

// KgPerM3 is the density of a solvent with a water content (kg/kg) at tK, from additive
// volumes.
func KgPerM3(c *catalog.Catalog, s *catalog.Solvent, water, tK float64) float64 {
	return 1 / (water/c.Solvents[waterKey].Pure.DensityKgPerM3.At(tK) + (1-water)/s.Pure.DensityKgPerM3.At(tK))
}

// alcoholContractionM3PerMol is that of ethanol and water: 913.8 kg/m3 at 50 % m/m
// and 20 °C (OIML R 22, from memory) is 1.04 cm3/mol less than the two volumes. The
// other alcohols shrink by 2.6 to 4.5 in the same units (from memory).
const alcoholContractionM3PerMol = 4.8e-6

// Ternary is water, a solvent and a carrier: the set fitted to the three together
// where the catalog has one, else the three pairs. The limits of both water pairs
// hold.
func Ternary(c *catalog.Catalog, solvent, carrier string) (*thermo.Ternary, error) {
	s, k := c.Solvents[solvent], c.Solvents[carrier]
	if s == nil || s.Water == nil || k == nil || k.Water == nil {
		return nil, fmt.Errorf("no data on water in %s and in %s", solvent, carrier)
	}
	key := [2]string{solvent, carrier}
	m := &thermo.Ternary{
		Pure:   [thermo.MaxComponents]*thermo.Pure{&c.Solvents[waterKey].Pure, &s.Pure, &k.Pure},
		Limits: append(append([]thermo.Limit(nil), s.Water.Limits...), k.Water.Limits...),
	}
	pair, together := c.Pairs[key], c.Ternaries[key]
	switch {
	case together != nil:
		m.NRTL, m.Extra = together.NRTL, together.Extra
	case pair != nil:
		m.NRTL = thermo.JoinPairs(s.Water.NRTL, k.Water.NRTL, pair.NRTL)
	default:
		return nil, fmt.Errorf("the catalog has no activity model of %s with %s", s.Name, k.Name)
	}
	if s.Class == "alcohol" || s.Class == "small-alcohol" {
		m.ContractionM3PerMol = alcoholContractionM3PerMol
	}
	if pair != nil {
		m.SpuriousGapBelowK = pair.SpuriousGapBelowK
	}
	return m, nil
}
