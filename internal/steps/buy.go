package steps

import (
	"fmt"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// RunBuy replaces the lot by volumeM3 of a dry grade with at most grade
// (kg/kg) of water as sold.
func RunBuy(m *thermo.Mixture, feed Lot, volumeM3, grade, attendedS, tempK float64) Outcome {
	massKg := volumeM3 / (grade/m.Water.DensityKgPerM3.At(tempK) + (1-grade)/m.Solvent.DensityKgPerM3.At(tempK))
	return Outcome{
		Kind: Buy,
		In:   feed, Out: Lot{SolventKg: massKg * (1 - grade), WaterKg: massKg * grade, TempK: tempK},
		Floor:         grade,
		Why:           AtGrade,
		WhyText:       fmt.Sprintf("sold with at most %s", quantity.FormatWater(grade)),
		HoursTotal:    attendedS / secondsPerHour,
		HoursAttended: attendedS / secondsPerHour,
	}
}
