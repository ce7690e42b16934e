package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// Sorbent is a bed of beads and what it still holds.
type Sorbent struct {
	Key             string
	Loading         func(partialPressurePa, tK float64) float64 // kg water per kg, at equilibrium
	ResidualKgPerKg float64                                     // from the sieve's history
	CapacityShare   float64                                     // of a new sieve's capacity
	BeadDiameterM   float64
	BeadKgPerM3     float64 // of the bead with its pores
	Porosity        float64 // macropores of the bead
	Tortuosity      float64
	HoldUpM3PerKg   float64 // solvent kept on drained beads
	MaxDoseKgPerM3  float64
}

// SoakRig is the vessel and how it stands.
type SoakRig struct {
	TempK         float64
	DepthM        float64 // liquid height
	StillRatePerS float64 // mixing rate of a still bottle of depth RateDepthM
	RateDepthM    float64
	Vessels       int
	AttendedS     float64 // each vessel
	WaterMolarM3  float64 // m3/mol, for the diffusion coefficient
}

// ErrWetSieve means that the sieve would give water to the solvent.
var ErrWetSieve = errors.New("the sieve is wetter than the solvent")

// bath is a soak whose dose is not yet chosen.
type bath struct {
	m         *thermo.Mixture
	sorbent   Sorbent
	rig       SoakRig
	feed      Lot
	volumeM3  float64
	mixPerS   float64 // k_mix
	beadPerS  float64 // film and bead in series, per (kg/m3) of dose
	psatWater float64
}

func newBath(m *thermo.Mixture, feed Lot, sorbent Sorbent, rig SoakRig) *bath {
	b := &bath{m: m, sorbent: sorbent, rig: rig, feed: feed}
	b.volumeM3 = LotVolume(m, feed, rig.TempK)
	b.mixPerS = rig.StillRatePerS * rig.RateDepthM / rig.DepthM
	b.psatWater = m.Water.VapourPressurePa.At(rig.TempK)
	d := Diffusivity(m.Solvent, rig.TempK, rig.WaterMolarM3)
	film := 2 * d / sorbent.BeadDiameterM // Sh = 2, a bead in still liquid
	inside := 5 * d * sorbent.Porosity / sorbent.Tortuosity / (sorbent.BeadDiameterM / 2)
	areaPerKg := 6 / sorbent.BeadDiameterM / sorbent.BeadKgPerM3
	b.beadPerS = areaPerKg / (1/film + 1/inside)
	return b
}

// LotVolume is the volume of a lot in m3, from additive volumes.
func LotVolume(m *thermo.Mixture, l Lot, tK float64) float64 {
	return l.SolventKg/m.Solvent.DensityKgPerM3.At(tK) + l.WaterKg/m.Water.DensityKgPerM3.At(tK)
}

// Diffusivity of water in a solvent, m2/s, by Wilke & Chang (AIChE J. 1 (1955)
// 264), association factor 1:
//
//	D = 7.4e-8 sqrt(M) T/(mu V^0.6)   M g/mol, mu mPa s, V cm3/mol, D cm2/s
//
// It overstates water as a solute in organic liquids by up to a factor of two.
func Diffusivity(solvent *thermo.Pure, tK, waterMolarM3 float64) float64 {
	molarMass := solvent.MolarMassKgPerMol * 1e3
	viscosity := solvent.ViscosityPaS.At(tK) * 1e3
	return 7.4e-8 * math.Sqrt(molarMass) * tK / (viscosity * math.Pow(waterMolarM3*1e6, 0.6)) * 1e-4
}

// loading of the sorbent in equilibrium with a solution of water (kg/kg). Free
// water beside the solution holds the activity at one.
func (b *bath) loading(water float64) float64 {
	pressure := math.Min(1, b.m.Activity(water, b.rig.TempK)) * b.psatWater
	return b.sorbent.CapacityShare * b.sorbent.Loading(pressure, b.rig.TempK)
}

const leastWater = 1e-20 // kg/kg, the lower end of every search

// floor is the solution in equilibrium with the sorbent's residual loading,
// which no dose and no time can pass.
func (b *bath) floor() (float64, error) {
	return b.balanced(math.Log(0.5), func(w float64) float64 { return b.loading(w) - b.sorbent.ResidualKgPerKg })
}

// equilibrium of doseKg of sorbent with the whole lot:
//
//	W0 + m q0 = W + m q(a_w(W))
func (b *bath) equilibrium(doseKg float64) (float64, error) {
	feed := b.feed.Water()
	return b.balanced(math.Log(feed), func(w float64) float64 {
		return b.feed.SolventKg*(w/(1-w)-feed/(1-feed)) + doseKg*(b.loading(w)-b.sorbent.ResidualKgPerKg)
	})
}

// balanced is the water at which a surplus that grows with the water is zero.
func (b *bath) balanced(lnHighest float64, surplus func(w float64) float64) (float64, error) {
	if surplus(leastWater) >= 0 {
		return leastWater, nil
	}
	lnW, err := thermo.Brent(func(lnW float64) float64 { return surplus(math.Exp(lnW)) }, math.Log(leastWater), lnHighest, 1e-13)
	if err != nil {
		return math.NaN(), fmt.Errorf("%w: %s holding %.3g g/100 g against %s", ErrWetSieve, b.sorbent.Key, 100*b.sorbent.ResidualKgPerKg, quantity.FormatWater(b.feed.Water()))
	}
	return math.Exp(lnW), nil
}

// rate is K in w(t) = w_eq + (w_0 - w_eq) exp(-K t):
//
//	1/K = 1/k_mix + 1/(k_f a) + 1/(k_int a)
func (b *bath) rate(doseKgPerM3 float64) float64 {
	return 1 / (1/b.mixPerS + 1/(b.beadPerS*doseKgPerM3))
}

func (b *bath) water(doseKgPerM3, timeS float64) (float64, error) {
	eq, err := b.equilibrium(doseKgPerM3 * b.volumeM3)
	if err != nil {
		return math.NaN(), err
	}
	return eq + (b.feed.Water()-eq)*math.Exp(-b.rate(doseKgPerM3)*timeS), nil
}

// SoakDose is how much sorbent a soak needs, kg per m3 of solvent.
type SoakDose struct {
	Capacity float64 // enough to hold the water, given for ever; NaN where nothing is enough
	Speed    float64 // enough area to be in time, if it held nothing; NaN where none is enough
	Dose     float64 // what both together need, at most the largest practical dose
	Enough   bool
}

// dose solves for the sorbent that reaches goal within timeS.
func (b *bath) dose(goal, timeS float64) (SoakDose, error) {
	d := SoakDose{Capacity: math.NaN(), Speed: math.NaN(), Dose: b.sorbent.MaxDoseKgPerM3}
	feed := b.feed.Water()
	if goal >= feed {
		return SoakDose{Enough: true}, nil
	}
	if spare := b.loading(goal) - b.sorbent.ResidualKgPerKg; spare > 0 {
		d.Capacity = b.feed.SolventKg * (feed/(1-feed) - goal/(1-goal)) / spare / b.volumeM3
	}
	if k := math.Log(feed/goal) / timeS; k < b.mixPerS {
		d.Speed = 1 / (b.beadPerS * (1/k - 1/b.mixPerS))
	}
	reached, err := b.water(d.Dose, timeS)
	if err != nil || reached > goal {
		return d, err
	}
	return b.exact(d, goal, timeS)
}

const leastDose = 1e-6 // kg/m3, the lower end of the search

// exact finds the dose at which the balance holds with the equilibrium that
// time and rate ask for:
//
//	w_eq = (w - w_0 e)/(1 - e), e = exp(-K(m) t)
func (b *bath) exact(d SoakDose, goal, timeS float64) (SoakDose, error) {
	feed := b.feed.Water()
	spare := func(lnDose float64) float64 {
		dose := math.Exp(lnDose)
		e := math.Exp(-b.rate(dose) * timeS)
		eq := (goal - feed*e) / (1 - e)
		if eq <= 0 {
			return -feed * b.feed.SolventKg
		}
		taken := b.feed.SolventKg * (feed/(1-feed) - eq/(1-eq))
		return dose*b.volumeM3*(b.loading(eq)-b.sorbent.ResidualKgPerKg) - taken
	}
	lnDose, err := thermo.Brent(spare, math.Log(leastDose), math.Log(d.Dose), 1e-12)
	if err != nil {
		return d, err
	}
	d.Dose, d.Enough = math.Exp(lnDose), true
	return d, nil
}
