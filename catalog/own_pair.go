package catalog

import (
	"fmt"
	"math"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// Typical heats of solution of water, J/mol: the slopes of the solubilities of the
// built-in solvents about 25 °C are 17 to 37 kJ/mol for hydrocarbons and their
// chlorides and 1 to 19 for liquids with oxygen (-5 for triethylamine).
const (
	heatOfSolutionJ      = 27e3
	heatOfSolutionPolarJ = 10e3
)

// ownPair reads a full set, or makes one of the solubility of water at one
// temperature.
func (s *shelf) ownPair(root *document.Node, f document.Fields, v *Solvent) *WaterPair {
	full, single := f.Get("water pair"), f.Get("water solubility")
	switch {
	case full != nil && single != nil:
		single.Fail(`stands beside "water pair"; give one of the two`)
		return nil
	case full != nil:
		return s.waterPair(full, v.Name)
	case single == nil:
		root.Fail(`"water pair" or "water solubility" is missing`)
		return nil
	}
	return s.onePointPair(single, v)
}

// onePointPair is a one-parameter model, ln gamma_i = A (1 - x_i)^2 (Margules),
// whose organic layer holds the given water at one temperature:
//
//	A = ln((1 - x)/x)/(1 - 2 x)
//
// Its slope with 1/T follows from ln x = ln x0 - H/R (1/T - 1/T0) with a typical
// heat of solution H. It is symmetric: the aqueous layer holds as much solvent by
// mole as the organic layer holds water, which overstates what the water takes
// away. Written as NRTL with alpha = 0 and both tau = A/2.
func (s *shelf) onePointPair(n *document.Node, v *Solvent) *WaterPair {
	value, tK := s.valueAt(n, quantity.WaterContent)
	if value.SI == 0 || v.MolarMass.SI == 0 {
		return nil
	}
	moles := value.SI / waterKgPerMol
	x := moles / (moles + (1-value.SI)/v.MolarMass.SI)
	if x > largestSolubilityX {
		n.Fail("%q is a mole fraction of %.2f; one solubility describes a water-immiscible solvent up to %.2f only. Give a full water pair", value.Text, x, largestSolubilityX)
		return nil
	}
	heatJ := heatOfSolutionJ
	if atoms, err := parseFormula(v.Formula); err == nil && atoms["O"]+atoms["N"]+atoms["S"] > 0 {
		heatJ = heatOfSolutionPolarJ
	}
	halfA, halfB, heatJ := onePoint(x, tK, heatJ)
	w := &WaterPair{
		A12: halfA, B12: halfB, A21: halfA, B21: halfB, TMinK: tK - oneSolubilityK, TMaxK: tK + oneSolubilityK,
		Quality: "D", FittedTo: fmt.Sprintf("%s at %s", value.Text, quantity.FormatTemperature(tK)), Origin: value.Origin,
		SolubilityBand: oneSolubilityBand, BandOrigin: Origin{Source: estimate, Confidence: Assumption, Note: "one solubility, slope assumed", Own: true},
		NRTL: thermo.BinaryNRTL(halfA, halfB, halfA, halfB, 0),
	}
	checkGaps(n, w, v.Name)
	w.Confidence = Assumption // its one point may be published, its slope and shape are not
	w.Note = join(w.Note, fmt.Sprintf("one-parameter model through one solubility; heat of solution %.2g kJ/mol assumed; the solvent in water is overstated", heatJ/1e3))
	v.guess("the activity model: one parameter from the water held at %s, heat of solution %.2g kJ/mol; other temperatures within a factor of %g",
		quantity.FormatTemperature(tK), heatJ/1e3, oneSolubilityBand)
	return w
}

// A symmetric pair parts where A is above 2. Water and a liquid that takes up much
// of it would mix when warm with the usual slope; the slope is cut down to what
// leaves A at leastMargules at warmestGapK, the upper end of what is checked.
const leastMargules, warmestGapK = 2.02, 383.15

// onePoint returns tau = a + b/T (b in K) of onePointPair and the heat of solution
// that it has, in J/mol: the one asked for, or less where the gap would close.
func onePoint(x, tK, heatJPerMol float64) (a, b, heatJ float64) {
	margules := func(x float64) float64 { return math.Log((1-x)/x) / (1 - 2*x) }
	const h = 1e-6
	slope := (margules(x*(1+h)) - margules(x*(1-h))) / (2 * h) // dA/d ln x
	b = -slope * heatJPerMol / thermo.GasConstant              // dA/d(1/T)
	if tK < warmestGapK {
		b = math.Min(b, (margules(x)-leastMargules)/(1/tK-1/warmestGapK))
	}
	return (margules(x) - b/tK) / 2, b / 2, -b * thermo.GasConstant / slope
}
