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

// boilsInTheRoom refuses a pot that boils before it is heated; enoughPa is the
// pressure at which it boils at a temperature.
func boilsInTheRoom(pot string, startK, roomK, pressurePa float64, enoughPa func(tK float64) float64) error {
	if startK > roomK {
		return nil
	}
	return fmt.Errorf("%s boils at %.1f °C at %.4g kPa, not above the room's %.1f °C, which takes more than %.2g kPa",
		pot, startK-273.15, pressurePa/1e3, roomK-273.15, roundedUp(enoughPa(roomK)/1e3))
}

const (
	// flaskLossWPerM2K is the least that an insulated flask loses to the room, over
	// the area of a ball of the charge (assumption: still air and its radiation behind
	// some centimetres of wool).
	flaskLossWPerM2K = 5.0
	// mostCondensedW is what the largest glass condensers of a laboratory or a pilot
	// hall take up (assumption: 1 m2 of coil, 300 W/(m2 K) and some 35 K).
	mostCondensedW = 10e3
)

// hotCharge is a charge that is to be brought to the boil and kept there.
type hotCharge struct {
	heatUpJ, volumeM3, warmerK float64 // warmer than the room
}

// lossW is what it loses to the room at least.
func (h hotCharge) lossW() float64 {
	areaM2 := math.Cbrt(36*math.Pi) * math.Pow(h.volumeM3, 2.0/3)
	return flaskLossWPerM2K * areaM2 * h.warmerK
}

// checkHeater refuses a heater that takes longer than longestS (0: no limit) to
// bring a charge to the boil or does not make up for what the flask loses, and one
// whose vapour no condenser takes up.
func checkHeater(heaterW, heatShare, longestS float64, h hotCharge) error {
	netW, litres := heaterW*heatShare, h.volumeM3*litrePerM3
	if !(netW > 0) {
		return fmt.Errorf("%w: no heat reaches the liquid", ErrHeater)
	}
	if heatUpS := h.heatUpJ / netW; longestS > 0 && heatUpS > longestS {
		return fmt.Errorf("%w: %.4g W in the liquid take %.3g h to bring %.3g L to the boil, the limit is %.3g h",
			ErrHeater, netW, heatUpS/secondsPerHour, litres, longestS/secondsPerHour)
	}
	if lossW := h.lossW(); heaterW < lossW {
		return fmt.Errorf("%w: %.4g W do not keep %.3g L at the boil: %.0f K above the room it loses %.3g W at least in an insulated flask (%.2g W per m2 and K, assumption)",
			ErrHeater, heaterW, litres, h.warmerK, lossW, flaskLossWPerM2K)
	}
	if netW > mostCondensedW {
		return fmt.Errorf("%w: %.3g kW of vapour come off %.3g L, and the largest glass condensers take up about %.3g kW (assumption)",
			ErrBoilUp, netW/1e3, litres, mostCondensedW/1e3)
	}
	return nil
}
