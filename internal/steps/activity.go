package steps

import (
	"math"

	"parch/internal/thermo"
)

// WaterAtActivity is the solution (kg/kg) in which water has the given activity
// at tK. Where the solvent does not mix with water, no solution passes
// saturation, and its content is returned for any higher activity.
func WaterAtActivity(m *thermo.Mixture, activity, tK float64) (float64, error) {
	highest, ok, err := m.Solubility(tK)
	if err != nil {
		return math.NaN(), err
	}
	if !ok {
		highest = 1
	}
	return waterAtActivity(m, activity, tK, highest)
}

// waterAtActivity looks up to highest, the saturated solution or 1.
func waterAtActivity(m *thermo.Mixture, activity, tK, highest float64) (float64, error) {
	highest = math.Min(highest, 1-1e-9)
	if m.Activity(highest, tK) <= activity {
		return highest, nil
	}
	lnW, err := thermo.Brent(func(lnW float64) float64 {
		return math.Log(m.Activity(math.Exp(lnW), tK) / activity)
	}, lnLeastWater, math.Log(highest), 1e-13)
	if err != nil {
		return math.NaN(), err
	}
	return math.Exp(lnW), nil
}
