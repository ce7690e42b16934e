package catalog

import (
	"math"

	"parch/internal/thermo"
)

// Carrier is a solvent that may carry water out of another.
type Carrier struct {
	Key    string
	ByName bool   // only where the job accepts it by name
	Reason string // why, or what to mind

	NotWith       []string // classes of solvent that it reacts with
	NotWithReason string
	NotWithOrigin Origin
	Origin
}

// CarrierPair is the NRTL set of a solvent (component 0) and a carrier (component 1).
type CarrierPair struct {
	Solvent, Carrier  string
	NRTL              thermo.NRTL
	TMinK, TMaxK      float64
	SpuriousGapBelowK float64 // below it the set splits liquids that mix; 0: it never does
	Origin
}

// TernarySet is a set for water (component 0), an alcohol (1) and a carrier (2):
// three pairs and a term that vanishes in every pair, to be used together.
type TernarySet struct {
	Alcohol, Carrier string
	NRTL             thermo.NRTL
	Extra            thermo.TernaryTerm
	Quality          string  // A or B
	TMinK, TMaxK     float64 // of the data
	// MissWater and MissAlcohol are by how much ln a differs between the layers of
	// the published tie-lines, the median of the set.
	MissWater, MissAlcohol float64
	Band                   float64 // factor on the water of the organic layer: the larger of those of the fit and of tie-lines held back
	Origin
}

// OrganicLayer is the water of an organic layer in a receiver at 15 to 35 C and,
// for some pairs, the alcohol that it shares with the aqueous layer:
//
//	ln r = q0 + q1 ln s + q2 (ln s)^2   for SMin <= s <= SMax
//
// r = alcohol/(alcohol + carrier) in the organic and s = alcohol/(alcohol + water)
// in the aqueous layer, by mass. Never for a hot layer.
type OrganicLayer struct {
	Alcohol, Carrier string
	thermo.OrganicLayer
	Distribution       bool    // whether Q may be used
	DistributionFactor float64 // published against computed r, as a factor
	Q                  [3]float64
	SMin, SMax         float64
	Origin
}

// Share is r of the organic layer over an aqueous layer with s. Only where
// Distribution is set, for SMin <= s <= SMax.
func (l *OrganicLayer) Share(s float64) float64 {
	ln := math.Log(s)
	return math.Exp(l.Q[0] + ln*(l.Q[1]+ln*l.Q[2]))
}
