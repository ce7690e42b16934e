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
