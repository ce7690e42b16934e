package steps

import (
	"math"

	"parch/internal/thermo"
)

// HydratePair is a salt and the next hydrate it goes over to. The two together
// hold the activity of water at one value until the first is used up.
type HydratePair struct {
	Name             string
	Activity         float64 // at 25 °C
	WaterMolPerMol   float64 // taken by one formula unit in this step
	HeatJPerMolWater float64 // released, from liquid water; 0: activity taken as constant
}

// At is the activity of water over the pair at tK:
//
//	ln a(T) = ln a(298.15 K) - (H/R)(1/T - 1/298.15)
//
// with H the heat released. A warmer salt dries less.
func (p HydratePair) At(tK float64) float64 {
	return p.Activity * math.Exp(-p.HeatJPerMolWater/thermo.GasConstant*(1/tK-1/referenceK))
}

const referenceK = 298.15

// waterGibbsJPerMol is the Gibbs energy of formation of liquid water at 25 °C,
// NBS Tables (J. Phys. Chem. Ref. Data 11, suppl. 2, 1982), from memory.
const waterGibbsJPerMol = -237.129e3

// PairActivity is the activity of water at 25 °C over a dry salt and a hydrate
// with waterMol more, from their Gibbs energies of formation:
//
//	a_w = exp((G_hydrate - G_dry - n G_water)/(n R T))
//
// An error of 1 kJ/mol in the difference shifts it by a factor exp(0.4/n).
func PairActivity(dryJPerMol, hydrateJPerMol, waterMol float64) float64 {
	perWater := (hydrateJPerMol-dryJPerMol)/waterMol - waterGibbsJPerMol
	return math.Exp(perWater / (thermo.GasConstant * referenceK))
}

// hydration is how far a salt goes and what it leaves.
type hydration struct {
	water   float64 // kg/kg in the solvent
	takenKg float64
	pair    int // working pair, or the last one used up
	spent   bool
}

// hydrate lets doseKg of dry salt come to equilibrium with a lot, one pair after
// the other: a pair works until its salt is gone or the solvent has come down to
// what the pair leaves (kg/kg).
func hydrate(m *thermo.Mixture, feed Lot, salt SaltAgent, leaves []float64, doseKg float64) hydration {
	var h hydration
	leftKg := feed.WaterKg
	for i, p := range salt.Pairs {
		leastKg := feed.SolventKg * leaves[i] / (1 - leaves[i])
		if leftKg <= leastKg {
			break // the salt stops short of this pair
		}
		capacityKg := doseKg / salt.MolarMassKgPerMol * p.WaterMolPerMol * m.Water.MolarMassKgPerMol
		taken := math.Min(leftKg-leastKg, capacityKg)
		leftKg -= taken
		h.takenKg += taken
		h.pair, h.spent = i, taken == capacityKg
		if !h.spent {
			break
		}
	}
	h.water = leftKg / (leftKg + feed.SolventKg)
	return h
}
