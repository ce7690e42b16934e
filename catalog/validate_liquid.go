package catalog

import (
	"math"

	"parch/internal/document"
)

// usual is what a property of an organic liquid is, over the solvents of the trade
// (ranges from memory, drawn around those of the catalog).
type usual struct {
	key, what string
	low, high float64
	text      string
	of        func(v *Solvent, tK float64) float64
}

// Properties at 25 °C, or just above the melting point.
var usualOfAll = []usual{
	{"viscosity", "viscosity", 0.2e-3, 5e-3, "0.2 to 5 mPa s", func(v *Solvent, tK float64) float64 { return v.Viscosity.At(tK) }},
	{"viscosity", "fall of the viscosity over 30 K", 1.2, 3.5, "a factor of 1.2 to 3.5", func(v *Solvent, tK float64) float64 { return v.Viscosity.At(tK) / v.Viscosity.At(tK+30) }},
	{"density", "expansion", 0.75e-3, 1.8e-3, "7.5e-4 to 1.8e-3 per kelvin", expansion},
	{"density", "density over that of the atoms' volumes", 0.85, 1.25, "0.85 to 1.25", atomicDensity},
	{"heat capacity", "rise of the heat capacity over 50 K", 1.015, 1.29, "a factor of 1.015 to 1.29", func(v *Solvent, tK float64) float64 { return v.HeatCapacity.At(tK+50) / v.HeatCapacity.At(tK) }},
	{"heat of vaporization", "fall of the heat of vaporization to the boiling point", 0.97, 1.27, "a factor of 0.97 to 1.27", func(v *Solvent, tK float64) float64 {
		return v.HeatOfVaporization.At(tK) / v.HeatOfVaporization.At(v.BoilingPoint.SI)
	}},
}

var usualOfPlain = []usual{
	{"heat capacity", "heat capacity", 1600, 3100, "1.6 to 3.1 kJ/kg/K", specificHeat},
}

var usualOfHalogenated = []usual{
	{"heat capacity", "heat capacity", 800, 1400, "0.8 to 1.4 kJ/kg/K with halogens", specificHeat},
}

func specificHeat(v *Solvent, tK float64) float64 { return v.HeatCapacity.At(tK) / v.MolarMass.SI }

// atomicDensity is the density over M/(5 V) kg/L with M in g/mol and V the sum of
// the volumes of the atoms: 1 for H, 2 for Li to F, 4 for Na to Cl (Girolami, J.
// Chem. Educ. 71 (1994) 962, from memory). Rings and hydroxyl groups add some 10 %.
func atomicDensity(v *Solvent, tK float64) float64 {
	count, err := parseFormula(v.Formula)
	if err != nil {
		return 1 // said where the formula stands
	}
	volume := 0.0
	for element, n := range count {
		each := 2.0
		switch element {
		case "H":
			each = 1
		case "Na", "Mg", "Al", "Si", "P", "S", "Cl":
			each = 4
		}
		volume += each * float64(n)
	}
	return v.Density.At(tK) / (v.MolarMass.SI * 1e6 / (5 * volume))
}

// unusual is how much wider the bounds are for an own solvent, as a factor.
const unusual = 1.3

func expansion(v *Solvent, tK float64) float64 {
	return math.Log(v.Density.At(tK-5)/v.Density.At(tK+5)) / 10
}

// checkLiquid compares the curves of a solvent with what liquids of its sort do. A
// slip in a coefficient seldom leaves level and slope where they belong. An own
// solvent may be unusual: its bounds are wider.
func checkLiquid(f document.Fields, v *Solvent, slopeWithin float64) {
	if v.Key == waterKey || v.MolarMass.SI == 0 {
		return
	}
	tK := math.Max(298.15, v.MeltingPoint.SI+6)
	kinds := usualOfPlain
	if v.Hazards.Halogenated {
		kinds = usualOfHalogenated
	}
	for _, list := range [][]usual{usualOfAll, kinds} {
		for _, u := range list {
			low, high := u.low, u.high
			if v.Own {
				low, high = low/unusual, high*unusual
			}
			if y := u.of(v, tK); !(y >= low && y <= high) {
				f.Get(u.key).Fail("the %s at %.0f °C is %.3g in SI units; %s is usual", u.what, tK-zeroCelsiusK, y, u.text)
			}
		}
	}
	if ratio := clapeyronJ(v.Pure.VapourPressurePa, tK) / v.HeatOfVaporization.At(tK); !(math.Abs(ratio-1) <= slopeWithin) {
		f.Get("vapour pressure").Fail("its slope at %.0f °C gives %.2f times the heat of vaporization; within %.0f %% is wanted", tK-zeroCelsiusK, ratio, 100*slopeWithin)
	}
}

// Entropies of vaporization at the boiling point, J/mol/K: 88 by Trouton's rule, up to
// 110 with hydrogen bonds and down to 60 where the vapour pairs up, as of acetic acid
// (from memory). Where the vapour pressure is made of the heat of vaporization nothing
// else tells a wrong one.
const (
	leastTrouton, mostTrouton = 55.0, 125.0
)

func checkTrouton(f document.Fields, v *Solvent) {
	tb := v.BoilingPoint.SI
	if entropy := v.HeatOfVaporization.At(tb) / tb; !(entropy >= leastTrouton && entropy <= mostTrouton) {
		f.Get("heat of vaporization").Fail("is %.3g J/mol/K at the boiling point; %g to %g is usual (Trouton's rule: 88)", entropy, leastTrouton, mostTrouton)
	}
}
