// Package thermo computes pure-component properties, activity coefficients,
// boiling points, liquid splits and azeotropes of water and solvents.
//
// All quantities are SI: kelvin, pascal, mole, kilogram, cubic metre, joule.
// The vapour is an ideal gas; the liquid follows NRTL (modified Raoult's law).
package thermo

// Pure holds what the equations need of one component.
type Pure struct {
	Key                  string
	Name                 string // as it is called in texts; "": the key
	MolarMassKgPerMol    float64
	MeltingK, CriticalK  float64
	VapourPressurePa     Correlation
	HeatOfVaporizationJ  Correlation // J/mol
	HeatCapacityJPerMolK Correlation // liquid
	DensityKgPerM3       Correlation // liquid
	ViscosityPaS         Correlation // liquid
}

// Called is the name of the liquid in texts.
func (p *Pure) Called() string {
	if p.Name == "" {
		return p.Key
	}
	return p.Name
}

// WarmJPerMol is the heat that takes a mole of the liquid from one temperature to
// another. It is a difference of contents, so that what is warmed in steps takes what
// it takes at once.
func (p *Pure) WarmJPerMol(fromK, toK float64) float64 {
	return p.contentJPerMol(toK) - p.contentJPerMol(fromK)
}

// contentJPerMol is the heat content of the liquid above 298.15 K: the integral of its
// heat capacity by Boole's rule, exact for polynomials up to the fifth power of T.
func (p *Pure) contentJPerMol(tK float64) float64 {
	const fromK = 298.15
	at := func(share float64) float64 { return p.HeatCapacityJPerMolK.At(fromK + share*(tK-fromK)) }
	return (7*at(0) + 32*at(0.25) + 12*at(0.5) + 32*at(0.75) + 7*at(1)) / 90 * (tK - fromK)
}
