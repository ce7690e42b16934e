package quantity

import (
	"math"
	"strconv"
)

// Unknown is printed where there is no number.
const Unknown = "–"

// Significant prints x rounded to the given significant figures, without an
// exponent and without trailing zeros after the point.
func Significant(x float64, figures int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return Unknown
	}
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', max(figures, 1)-1, 64), 64)
	if err != nil {
		return Unknown
	}
	if rounded == 0 {
		return "0" // and never "-0"
	}
	return strconv.FormatFloat(rounded, 'f', -1, 64)
}

// Format prints an SI value in a unit of its dimension: Format(0.018, Volume,
// "L", 3) is "18 L". A unit that the dimension does not have is a mistake of the
// program and panics.
func Format(si float64, d Dimension, symbol string, figures int) string {
	text := Significant(In(si, d, symbol), figures)
	if text == Unknown || symbol == "" {
		return text
	}
	return text + " " + symbol
}

// In gives an SI value in a unit of its dimension.
func In(si float64, d Dimension, symbol string) float64 { return mustLookUp(d, symbol).fromSI(si) }

// FormatWater prints kg/kg as mg/kg.
func FormatWater(kgPerKg float64) string { return Format(kgPerKg, WaterContent, "mg/kg", 3) }

// FormatVolume prints m3 as L, or as mL below a tenth of a litre.
func FormatVolume(m3 float64) string {
	if math.Abs(m3) < 1e-4 && m3 != 0 {
		return Format(m3, Volume, "mL", 3)
	}
	return Format(m3, Volume, "L", 3)
}

// FormatMass prints kg as kg, or as g below a tenth of a kilogram.
func FormatMass(kg float64) string {
	if math.Abs(kg) < 0.1 && kg != 0 {
		return Format(kg, Mass, "g", 3)
	}
	return Format(kg, Mass, "kg", 3)
}

// FormatHours prints seconds as h.
func FormatHours(s float64) string { return Format(s, Time, "h", 3) }

// FormatEnergy prints J as kWh.
func FormatEnergy(j float64) string { return Format(j, Energy, "kWh", 3) }

// FormatPower prints W as kW, or as W below 100 W.
func FormatPower(w float64) string {
	if math.Abs(w) < 100 && w != 0 {
		return Format(w, Power, "W", 3)
	}
	return Format(w, Power, "kW", 3)
}

// FormatTemperature prints K as °C to a tenth of a degree.
func FormatTemperature(k float64) string {
	celsius := math.Round(In(k, Temperature, "°C")*10) / 10
	text := Significant(celsius, 12)
	if text == Unknown {
		return text
	}
	return text + " °C"
}

// FormatPressure prints Pa as kPa.
func FormatPressure(pa float64) string { return Format(pa, Pressure, "kPa", 4) }

// FormatShare prints a share as per cent.
func FormatShare(share float64) string { return Format(share, Share, "%", 3) }

// FormatPerYear prints a number per year: "40 /yr".
func FormatPerYear(n float64) string { return Format(n, PerYear, "/yr", 3) }

// FormatLength prints m as m, or as mm below a centimetre.
func FormatLength(m float64) string {
	if math.Abs(m) < 0.01 && m != 0 {
		return Format(m, Length, "mm", 3)
	}
	return Format(m, Length, "m", 3)
}

// FormatConcentration prints kg/m3 as mg/L below 1 g/L, else as g/L.
func FormatConcentration(kgPerM3 float64) string {
	if math.Abs(kgPerM3) < 1 {
		return Format(kgPerM3, MassConcentration, "mg/L", 3)
	}
	return Format(kgPerM3, MassConcentration, "g/L", 3)
}
