package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/thermo"
)

// SoakRig is the vessel and how it stands.
type SoakRig struct {
	TempK         float64
	DepthM        float64 // liquid height
	StillRatePerS float64 // mixing rate of a still bottle of depth RateDepthM
	RateDepthM    float64
	Vessels       int
	AttendedS     float64 // each vessel
	WaterMolarM3  float64 // m3/mol, for the diffusion coefficient
	Association   float64 // of the solvent, in that coefficient; 0: 1

	Stirred            bool
	RelativeVelocityMS float64 // of the liquid past a bead that is stirred

	// Outline leaves out what is told of a soak beside its dose, water and losses: its
	// course, floor and figures, why it ends, what rules it and what it warns of.
	Outline bool

	// Lots of the same kind that go over a charge as it is before it is taken out,
	// this one the last; 0: 1. Between them the beads stay wet and shut.
	Lots int

	// Water that the solvent makes on the sorbent (ketones condense), kg/kg per
	// second at 100 kg/m3, as the net rise seen in the liquid; 0: none.
	CondensationPerS float64
}

// bath is a soak whose dose is not yet chosen.
type bath struct {
	sorption
	rig      SoakRig
	volumeM3 float64
	mixPerS  float64 // k_mix
	beadPerS float64 // film and bead in series, per (kg/m3) of dose
	// Of the usual beads in place of a stirred powder, likewise; 0: no such powder.
	asBeadsPerS float64
}

func newBath(m *thermo.Mixture, feed Lot, sorbent Sorbent, rig SoakRig) (*bath, error) {
	b := &bath{sorption: newSorption(m, feed, sorbent, rig.TempK), rig: rig}
	if err := errors.Join(b.check(), b.checkVessel(), b.checkLots()); err != nil {
		return nil, err
	}
	b.volumeM3 = LotVolume(m, feed, rig.TempK)
	b.mixPerS = b.mixing()
	s := streamOf(m.Solvent, rig.TempK, rig.WaterMolarM3, rig.Association)
	sherwood := 2.0 // a bead in still liquid
	if rig.Stirred {
		sherwood = stirredSherwood(s.reynolds(rig.RelativeVelocityMS, sorbent.BeadDiameterM), s.schmidt())
	}
	if !rig.Stirred && sorbent.DispersionPerS > 0 {
		sorbent.BeadDiameterM = layerM // a powder that settles is reached through the top of its layer only
	}
	b.beadPerS = perDose(s, sherwood, sorbent)
	if rig.Stirred && sorbent.DispersionPerS > 0 {
		beads := sorbent
		beads.BeadDiameterM = math.Max(layerM, sorbent.BeadDiameterM)
		b.asBeadsPerS = perDose(s, stirredSherwood(s.reynolds(rig.RelativeVelocityMS, beads.BeadDiameterM), s.schmidt()), beads)
	}
	return b, nil
}

// perDose is the rate of film and bead in series, 1/s for a dose of 1 kg/m3.
func perDose(s stream, sherwood float64, beads Sorbent) float64 {
	areaPerKg := 6 / beads.BeadDiameterM / beads.BeadKgPerM3
	return areaPerKg * inSeries(s.film(sherwood, beads.BeadDiameterM), insideBead(s, beads))
}

// layerM is the grain of the usual beads. A settled powder is taken for such: a
// layer of it is no better reached than a layer of them. A stirred powder is taken
// to be no slower than they are, stirred the same way (assumptions).
const layerM = 2e-3

// mixing is k_mix: slower in a taller still vessel, without bound in a stirred
// one unless a powder is hard to keep suspended.
func (b *bath) mixing() float64 {
	switch {
	case !b.rig.Stirred:
		return b.rig.StillRatePerS * b.rig.RateDepthM / b.rig.DepthM
	case b.sorbent.DispersionPerS > 0:
		return b.sorbent.DispersionPerS
	}
	return math.Inf(1)
}

func (b *bath) checkVessel() error {
	if b.rig.Stirred {
		return checkAmount("a velocity past the beads", "m/s", b.rig.RelativeVelocityMS, 0, 3)
	}
	return checkAmount("a liquid height", "m", b.rig.DepthM, 1e-3, 20)
}

// MostLots go over a charge before it is taken out, whatever it still holds: beads
// that are poured over so often turn to dust (assumption).
const MostLots = 12

func (b *bath) checkLots() error {
	if b.rig.CondensationPerS > 0 && b.rig.Lots > 1 {
		return fmt.Errorf("%w: %s makes water on the sorbent: a charge is not used again as it is", ErrNoSense, b.m.Solvent.Called())
	}
	return checkAmount("a number of lots over one charge", "", float64(b.rig.Lots), 0, MostLots)
}

// lots over one charge, this one with them.
func (b *bath) lots() float64 { return orOne(float64(b.rig.Lots)) }

// beforeKg is the water that the lots before have left on the charge. All that they
// brought is counted, as much as there can be.
func (b *bath) beforeKg() float64 { return (b.lots() - 1) * b.feed.WaterKg }

// LotVolume is the volume of a lot in m3, from additive volumes.
func LotVolume(m *thermo.Mixture, l Lot, tK float64) float64 {
	return l.SolventKg/m.Solvent.DensityKgPerM3.At(tK) + l.WaterKg/m.Water.DensityKgPerM3.At(tK)
}

// equilibrium of doseKg of sorbent with the whole lot:
//
//	n W0 + m q0 = W + m q(a_w(W))
//
// where the lot is the last of n over the charge.
func (b *bath) equilibrium(doseKg float64) (float64, error) {
	return b.equilibriumFrom(doseKg, b.sorbent.ResidualKgPerKg)
}

func (b *bath) equilibriumFrom(doseKg, residualKgPerKg float64) (float64, error) {
	feed := b.feed.Water()
	return b.balanced(math.Log(feed), func(w float64) float64 {
		return b.feed.SolventKg*(w/(1-w)-feed/(1-feed)) + doseKg*(b.loading(w)-residualKgPerKg) - b.beforeKg()
	})
}

// rate is K in w(t) = w_eq + (w_0 - w_eq) exp(-K t):
//
//	1/K = 1/k_mix + 1/(k_f a) + 1/(k_int a)
//
// and of a stirred powder at least that of the usual beads.
func (b *bath) rate(doseKgPerM3 float64) float64 {
	return math.Max(1/(1/b.mixPerS+1/(b.beadPerS*doseKgPerM3)), b.asBeadsPerS*doseKgPerM3)
}

// doseOfRate is the dose (kg/m3) whose rate is k, NaN where none is as fast.
func (b *bath) doseOfRate(kPerS float64) float64 {
	dose := math.NaN()
	if kPerS < b.mixPerS {
		dose = 1 / (b.beadPerS * (1/kPerS - 1/b.mixPerS))
	}
	if asBeads := kPerS / b.asBeadsPerS; b.asBeadsPerS > 0 && !(asBeads >= dose) {
		dose = asBeads
	}
	return dose
}

// made is the water that condensation adds in timeS, kg/kg. It is counted on
// top of the drying, as it is seen in the liquid.
func (b *bath) made(doseKgPerM3, timeS float64) float64 {
	return b.rig.CondensationPerS * doseKgPerM3 / condensationDose * timeS
}

const condensationDose = 100 // kg/m3, at which CondensationPerS is stated

func (b *bath) water(doseKgPerM3, timeS float64) (float64, error) {
	eq, err := b.equilibrium(doseKgPerM3 * b.volumeM3)
	if err != nil {
		return math.NaN(), err
	}
	return b.course(eq, doseKgPerM3, timeS), nil
}

// course is the water after timeS on the way to eq.
func (b *bath) course(eq, doseKgPerM3, timeS float64) float64 {
	return eq + (b.feed.Water()-eq)*math.Exp(-b.rate(doseKgPerM3)*timeS) + b.made(doseKgPerM3, timeS)
}
