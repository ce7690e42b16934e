package steps

import (
	"fmt"
	"math"
)

// Water at 20 °C.
const (
	coolantHeatCapacity = 4180.0 // J/(kg K)
	coolantDensity      = 998.0  // kg/m3
)

// condense sizes the cooling of a still: all the heat that reaches the liquid
// leaves through the condenser, the rest is lost from flask and mantle.
func condense(heaterW, heatShare, runM3PerS, riseK float64) Condenser {
	duty := heaterW * heatShare
	c := Condenser{DutyW: duty, HeatLossW: heaterW - duty, RiseK: riseK}
	c.NeededM3PerS = duty / (coolantHeatCapacity * coolantDensity * riseK)
	c.RunM3PerS = math.Max(runM3PerS, c.NeededM3PerS)
	c.RunRiseK = duty / (coolantHeatCapacity * coolantDensity * c.RunM3PerS)
	return c
}

// Coolant is the cooling water as it comes in, and what a condenser needs.
type Coolant struct {
	InK         float64 // 0: not checked
	DifferenceK float64 // least of the condensing vapour over the water, mean of in and out
}

// leastK is the lowest temperature at which a vapour may condense.
func (c Coolant) leastK(riseK float64) float64 {
	return c.InK + riseK/2 + math.Max(c.DifferenceK, riseK/2)
}

// takes refuses a vapour that condenses at tK only, too close to the cooling water;
// enoughPa is the pressure at which it would condense at a temperature.
func (c Coolant) takes(condenser Condenser, tK, pressurePa float64, enoughPa func(tK float64) float64) error {
	leastK := c.leastK(condenser.RunRiseK)
	if c.InK <= 0 || tK >= leastK {
		return nil
	}
	return fmt.Errorf("the vapour condenses at %.1f °C at %.4g kPa, the coolant comes in at %.1f °C and leaves at %.1f °C: a condenser wants %.3g K between the two on average (common practice), which takes %.2g kPa or more",
		tK-273.15, pressurePa/1e3, c.InK-273.15, c.InK+condenser.RunRiseK-273.15, c.DifferenceK, roundedUp(enoughPa(leastK)/1e3))
}

// roundedUp to two digits.
func roundedUp(x float64) float64 {
	place := math.Pow(10, math.Floor(math.Log10(x))-1)
	return math.Ceil(x/place) * place
}

// checkHeater refuses a heater that takes longer than longestS (0: no limit) to
// bring a charge to the boil.
func checkHeater(heatUpJ, netW, longestS, chargeM3 float64) error {
	if !(netW > 0) {
		return fmt.Errorf("%w: no heat reaches the liquid", ErrHeater)
	}
	if heatUpS := heatUpJ / netW; longestS > 0 && heatUpS > longestS {
		return fmt.Errorf("%w: %.4g W in the liquid take %.3g h to bring %.3g L to the boil, the limit is %.3g h",
			ErrHeater, netW, heatUpS/secondsPerHour, chargeM3*litrePerM3, longestS/secondsPerHour)
	}
	return nil
}
