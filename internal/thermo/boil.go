package thermo

import (
	"fmt"
	"math"
)

// Bounds of pressure within which the model is used.
const (
	LowestPressurePa  = 1e3
	HighestPressurePa = 110e3
)

// CheckPressure refuses a pressure outside the range of the model.
func CheckPressure(pressurePa float64) error {
	if !(pressurePa >= LowestPressurePa && pressurePa <= HighestPressurePa) {
		return fmt.Errorf("pressure %.4g kPa is outside 1 to 110 kPa", pressurePa/1e3)
	}
	return nil
}

const temperatureToleranceK = 1e-9

// Boil returns the boiling temperature of a pure component at pressurePa.
func Boil(p *Pure, pressurePa float64) (tK float64, err error) {
	lo, hi := searchRange(p)
	tK, err = Brent(func(t float64) float64 {
		return math.Log(p.VapourPressurePa.At(t) / pressurePa)
	}, lo, hi, temperatureToleranceK)
	if err != nil {
		return math.NaN(), fmt.Errorf("%s: no boiling point at %.4g kPa: %w", p.Called(), pressurePa/1e3, err)
	}
	return tK, nil
}

// searchRange is where a vapour pressure curve may be asked for a boiling
// point between 1 and 110 kPa.
func searchRange(p *Pure) (lo, hi float64) {
	lo, hi = 200, 520
	if p.CriticalK > 0 {
		hi = math.Min(hi, 0.999*p.CriticalK)
	}
	return lo, hi
}

// Mixture is water (component 0) and a solvent (component 1) in one phase model.
type Mixture struct {
	Water, Solvent *Pure
	NRTL           NRTL
	Limits         []Limit // where the model must not be used
}

// Vapour is a vapour in equilibrium with a boiling liquid.
type Vapour struct {
	TempK  float64
	YWater float64 // mole fraction
}

// Bubble returns the boiling temperature and the vapour of a liquid of water
// mole fraction xWater:
//
//	x1 gamma1 Psat1 + x2 gamma2 Psat2 = P,  y1 = x1 gamma1 Psat1 / P
//
// Newton's method on ln P from a start near the pure boiling points; the
// equation is smooth and monotone in T, so Brent takes over if it stalls.
func (m *Mixture) Bubble(xWater, pressurePa float64) (Vapour, error) {
	return m.BubbleFrom(xWater, pressurePa, 0)
}

// BubbleFrom is Bubble with a first guess of the temperature (0: none).
func (m *Mixture) BubbleFrom(xWater, pressurePa, guessK float64) (Vapour, error) {
	if !(xWater >= 0 && xWater <= 1) {
		return Vapour{}, fmt.Errorf("mole fraction %g is outside 0 to 1", xWater)
	}
	if v, ok := m.bubbleByNewton(xWater, pressurePa, guessK); ok {
		return v, nil
	}
	lo, hi := searchRange(m.Solvent)
	t, err := Brent(func(t float64) float64 { f, _ := m.bubbleExcess(xWater, pressurePa, t); return f }, lo, hi, temperatureToleranceK)
	if err != nil {
		return Vapour{}, fmt.Errorf("water + %s, x = %.4g, %.4g kPa: no bubble point: %w", m.Solvent.Called(), xWater, pressurePa/1e3, err)
	}
	_, y := m.bubbleExcess(xWater, pressurePa, t)
	return Vapour{t, y}, nil
}

// bubbleExcess is ln(bubble pressure/pressure) and the vapour at tK.
func (m *Mixture) bubbleExcess(xWater, pressurePa, tK float64) (lnRatio, yWater float64) {
	water, solvent := m.partials(xWater, tK)
	sum := water + solvent
	return math.Log(sum / pressurePa), water / sum
}

func (m *Mixture) bubbleByNewton(xWater, pressurePa, guessK float64) (Vapour, bool) {
	t := guessK
	if t <= 0 {
		t = 350
	}
	for range 30 {
		f, _ := m.bubbleExcess(xWater, pressurePa, t)
		g, _ := m.bubbleExcess(xWater, pressurePa, t+slopeStepK)
		slope := (g - f) / slopeStepK
		step := -f / slope
		if !(slope > 0) || math.Abs(step) > 60 {
			break
		}
		t += step
		if math.Abs(step) < 1e-7 {
			_, y := m.bubbleExcess(xWater, pressurePa, t)
			return Vapour{t, y}, !math.IsNaN(y)
		}
	}
	return Vapour{}, false
}

const slopeStepK = 1e-4

// partials are the partial pressures of water and solvent over a liquid.
func (m *Mixture) partials(xWater, tK float64) (waterPa, solventPa float64) {
	lnW, lnS := m.NRTL.Pair(xWater, tK)
	waterPa = xWater * math.Exp(lnW) * m.Water.VapourPressurePa.At(tK)
	solventPa = (1 - xWater) * math.Exp(lnS) * m.Solvent.VapourPressurePa.At(tK)
	return waterPa, solventPa
}

// MoleFraction turns a mass fraction of water into a mole fraction.
func (m *Mixture) MoleFraction(water float64) float64 {
	n := water / m.Water.MolarMassKgPerMol
	return n / (n + (1-water)/m.Solvent.MolarMassKgPerMol)
}

// MassFraction turns a mole fraction of water into a mass fraction.
func (m *Mixture) MassFraction(xWater float64) float64 {
	w := xWater * m.Water.MolarMassKgPerMol
	return w / (w + (1-xWater)*m.Solvent.MolarMassKgPerMol)
}

// Activity is the water activity of a solution with the mass fraction water.
func (m *Mixture) Activity(water, tK float64) float64 {
	x := m.MoleFraction(water)
	lnW, _ := m.NRTL.Pair(x, tK)
	return x * math.Exp(lnW)
}

// WarmJ is the heat that takes so many moles of water and solvent from one
// temperature to another.
func (m *Mixture) WarmJ(water, solvent, fromK, toK float64) float64 {
	return water*m.Water.WarmJPerMol(fromK, toK) + solvent*m.Solvent.WarmJPerMol(fromK, toK)
}

// MolarVolume of a liquid in m3/mol, from additive volumes of the pure liquids.
func (m *Mixture) MolarVolume(xWater, tK float64) float64 {
	return xWater*m.Water.MolarMassKgPerMol/m.Water.DensityKgPerM3.At(tK) +
		(1-xWater)*m.Solvent.MolarMassKgPerMol/m.Solvent.DensityKgPerM3.At(tK)
}
