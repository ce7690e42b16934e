package quantity

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func TestFormat(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{FormatWater(4.8e-4), "480 mg/kg"},
		{FormatWater(0.0105), "10500 mg/kg"},
		{FormatWater(3.629e-6), "3.63 mg/kg"},
		{FormatWater(math.NaN()), "–"},
		{FormatVolume(0.018), "18 L"},
		{FormatVolume(2.5e-5), "25 mL"},
		{FormatVolume(0), "0 L"},
		{FormatMass(5), "5 kg"},
		{FormatMass(0.0123), "12.3 g"},
		{FormatHours(72 * 3600), "72 h"},
		{FormatEnergy(3.6e6), "1 kWh"},
		{FormatPower(1600), "1.6 kW"},
		{FormatPower(60), "60 W"},
		{FormatTemperature(294.15), "21 °C"},
		{FormatTemperature(383.78), "110.6 °C"},
		{FormatTemperature(math.Inf(1)), "–"},
		{FormatPressure(101325), "101.3 kPa"},
		{FormatShare(0.9), "90 %"},
		{FormatPerYear(40), "40 /yr"},
		{FormatLength(0.25), "0.25 m"},
		{FormatLength(0.002), "2 mm"},
		{FormatConcentration(0.005), "5 mg/L"},
		{FormatConcentration(100), "100 g/L"},
		{Format(3, Number, "", 3), "3"},
		{Significant(-1e-30, 3), "-0.000000000000000000000000000001"},
		{Significant(math.Copysign(0, -1), 3), "0"},
		{Significant(999.6, 3), "1000"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
}

// What is printed can be read back, to the figures that were printed.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := rapid.SampledFrom([]Dimension{Volume, Mass, WaterContent, Temperature, Power, Energy, Pressure, Time, Length, Share, MassConcentration, PerYear, Flow, HoldUp}).Draw(t, "dimension")
		symbol := rapid.SampledFrom(Units(d)).Draw(t, "unit")
		si := rapid.Float64Range(1e-9, 1e9).Draw(t, "si")
		text := Format(si, d, symbol, 15)
		back, err := Parse(text, d)
		scale := max(si, math.Abs(mustLookUp(d, symbol).offset)) // an offset costs digits
		if err != nil || math.Abs(back.SI-si) > 1e-12*scale {
			t.Fatalf("%g printed as %q read as %g, %v", si, text, back.SI, err)
		}
	})
}
