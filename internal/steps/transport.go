package steps

import (
	"math"

	"parch/internal/thermo"
)

// Diffusivity of water in a solvent, m2/s, by Wilke & Chang (AIChE J. 1 (1955)
// 264):
//
//	D = 7.4e-8 sqrt(phi M) T/(mu V^0.6)   M g/mol, mu mPa s, V cm3/mol, D cm2/s
//
// The association factor phi is 1 for most solvents, 1.9 for methanol and 1.5
// for ethanol; 0 stands for 1. The equation overstates water as a solute in
// organic liquids by up to a factor of two.
func Diffusivity(solvent *thermo.Pure, tK, waterMolarM3, association float64) float64 {
	molarMass := solvent.MolarMassKgPerMol * 1e3
	viscosity := solvent.ViscosityPaS.At(tK) * 1e3
	return 7.4e-8 * math.Sqrt(orOne(association)*molarMass) * tK / (viscosity * math.Pow(waterMolarM3*1e6, 0.6)) * 1e-4
}

// orOne reads a factor that was left out as 1.
func orOne(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}

// stream is a liquid as the film around a bead meets it.
type stream struct {
	kgPerM3, viscosityPaS, diffusivityM2S float64
}

func streamOf(solvent *thermo.Pure, tK, waterMolarM3, association float64) stream {
	return stream{solvent.DensityKgPerM3.At(tK), solvent.ViscosityPaS.At(tK), Diffusivity(solvent, tK, waterMolarM3, association)}
}

func (s stream) reynolds(velocityMS, diameterM float64) float64 {
	return s.kgPerM3 * velocityMS * diameterM / s.viscosityPaS
}

func (s stream) schmidt() float64 { return s.viscosityPaS / (s.kgPerM3 * s.diffusivityM2S) }

// film turns a Sherwood number into a film coefficient, m/s.
func (s stream) film(sherwood, diameterM float64) float64 {
	return sherwood * s.diffusivityM2S / diameterM
}

// stirredSherwood of a bead in a liquid that moves past it:
//
//	Sh = 2 + 0.552 Re^(1/2) Sc^(1/3)
//
// Froessling, Gerlands Beitr. Geophys. 52 (1938) 170; Ranz and Marshall (Chem.
// Eng. Prog. 48 (1952) 141) have 0.6 in place of 0.552. Both from memory. At rest
// Sh = 2, which is exact for diffusion from a sphere.
func stirredSherwood(reynolds, schmidt float64) float64 {
	return 2 + 0.552*math.Sqrt(reynolds)*math.Cbrt(schmidt)
}

// packedSherwood of a bead in a bed, with the superficial velocity in Re:
//
//	Sh = 2 + 1.1 Re^0.6 Sc^(1/3),  3 < Re < 10 000
//
// Wakao & Funazkri, Chem. Eng. Sci. 33 (1978) 1375, from memory. Drying columns
// run at Re below 3, where it extrapolates; the bead, not the film, rules there.
func packedSherwood(reynolds, schmidt float64) float64 {
	return 2 + 1.1*math.Pow(reynolds, 0.6)*math.Cbrt(schmidt)
}

const packedLowestReynolds = 3

// insideBead is the coefficient of diffusion through the macropores, m/s, from
// the linear driving force of Glueckauf (Trans. Faraday Soc. 51 (1955) 1540):
//
//	k_int = 5 D_e/R,  D_e = D porosity/tortuosity
func insideBead(s stream, b Sorbent) float64 {
	return 5 * s.diffusivityM2S * b.Porosity / b.Tortuosity / (b.BeadDiameterM / 2)
}

// inSeries adds coefficients as resistances one after the other.
func inSeries(a, b float64) float64 { return 1 / (1/a + 1/b) }

// pressureDropPaPerM of a bed of spheres, Ergun, Chem. Eng. Prog. 48 (1952) 89:
//
//	dp/dz = 150 mu (1-e)^2 u/(e^3 d^2) + 1.75 rho (1-e) u^2/(e^3 d)
func pressureDropPaPerM(s stream, velocityMS, voidShare, diameterM float64) float64 {
	solid, void3 := 1-voidShare, voidShare*voidShare*voidShare
	return 150*s.viscosityPaS*solid*solid*velocityMS/(void3*diameterM*diameterM) +
		1.75*s.kgPerM3*solid*velocityMS*velocityMS/(void3*diameterM)
}
