package thermo

import "fmt"

// Limit is a range of conditions outside which a pair's or a mixture's model
// must not be used. A bound of 0 does not bind.
type Limit struct {
	LowestK, HighestK   float64 // of the liquid
	LowestPa, HighestPa float64
	Reason              string // why, in words for the user
}

// OutsideModel says which condition lies outside the model, and why that matters.
type OutsideModel struct{ Condition, Reason string }

func (e *OutsideModel) Error() string { return e.Condition + ": " + e.Reason }

func checkTemperature(limits []Limit, tK float64) error {
	for _, l := range limits {
		switch {
		case l.LowestK > 0 && tK < l.LowestK:
			return &OutsideModel{fmt.Sprintf("%.1f °C is below %.1f °C", tK-273.15, l.LowestK-273.15), l.Reason}
		case l.HighestK > 0 && tK > l.HighestK:
			return &OutsideModel{fmt.Sprintf("%.1f °C is above %.1f °C", tK-273.15, l.HighestK-273.15), l.Reason}
		}
	}
	return nil
}

func checkPressure(limits []Limit, pressurePa float64) error {
	if err := CheckPressure(pressurePa); err != nil {
		return err
	}
	for _, l := range limits {
		switch {
		case l.LowestPa > 0 && pressurePa < l.LowestPa:
			return &OutsideModel{fmt.Sprintf("%.4g kPa is below %.4g kPa", pressurePa/1e3, l.LowestPa/1e3), l.Reason}
		case l.HighestPa > 0 && pressurePa > l.HighestPa:
			return &OutsideModel{fmt.Sprintf("%.4g kPa is above %.4g kPa", pressurePa/1e3, l.HighestPa/1e3), l.Reason}
		}
	}
	return nil
}

// CheckTemperature refuses a liquid temperature outside the limits of the model.
func (m *Mixture) CheckTemperature(tK float64) error { return checkTemperature(m.Limits, tK) }

// CheckPressure refuses a pressure outside the limits of the model.
func (m *Mixture) CheckPressure(pressurePa float64) error {
	return checkPressure(m.Limits, pressurePa)
}

// CheckTemperature refuses a liquid temperature outside the limits of the model.
func (m *Ternary) CheckTemperature(tK float64) error {
	if tK < m.SpuriousGapBelowK {
		return &OutsideModel{
			fmt.Sprintf("%.1f °C is below %.1f °C", tK-273.15, m.SpuriousGapBelowK-273.15),
			fmt.Sprintf("the model would split %s and %s, which mix", m.Pure[InSolvent].Called(), m.Pure[InCarrier].Called()),
		}
	}
	return checkTemperature(m.Limits, tK)
}

// CheckPressure refuses a pressure outside the limits of the model.
func (m *Ternary) CheckPressure(pressurePa float64) error {
	return checkPressure(m.Limits, pressurePa)
}
