// Package quantity reads and prints physical quantities and money as people
// write them: "18 L", "480 mg/kg", "21 °C", "0.24 EUR/kWh". Everything it
// returns is in SI units; everything it prints has a space before the unit.
package quantity

import "fmt"

// Dimension is what a quantity measures. Its text reads after "is" in a message.
type Dimension string

// The dimensions, each with the SI unit of Reading.SI.
const (
	Volume                Dimension = "a volume"                       // m3
	Mass                  Dimension = "a mass"                         // kg
	WaterContent          Dimension = "a water content by mass"        // kg/kg of solution
	MassRatio             Dimension = "a mass ratio"                   // kg/kg
	Temperature           Dimension = "a temperature"                  // K
	TemperatureDifference Dimension = "a temperature difference"       // K
	Power                 Dimension = "a power"                        // W
	Energy                Dimension = "an energy"                      // J
	Pressure              Dimension = "a pressure"                     // Pa
	InversePressure       Dimension = "an inverse pressure"            // 1/Pa
	Time                  Dimension = "a time"                         // s
	Length                Dimension = "a length"                       // m
	Share                 Dimension = "a share"                        // 1
	MassConcentration     Dimension = "a mass concentration"           // kg/m3
	PerYear               Dimension = "a number per year"              // 1/yr
	Density               Dimension = "a density"                      // kg/m3
	MolarMass             Dimension = "a molar mass"                   // kg/mol
	Amount                Dimension = "an amount of substance"         // mol
	Number                Dimension = "a plain number"                 // 1
	Flow                  Dimension = "a flow"                         // m3/s
	HoldUp                Dimension = "a hold-up of liquid on solid"   // m3/kg
	Rate                  Dimension = "a rate constant"                // 1/s
	HeatPerMole           Dimension = "a heat per mole"                // J/mol
	MolarHeatCapacity     Dimension = "a molar heat capacity"          // J/(mol K)
	HeatCapacity          Dimension = "a heat capacity by mass"        // J/(kg K)
	Viscosity             Dimension = "a viscosity"                    // Pa s
	MassPerEnergy         Dimension = "a mass per energy"              // kg/J
	Diffusivity           Dimension = "a diffusion coefficient"        // m2/s
	Velocity              Dimension = "a velocity or film coefficient" // m/s
)

// Reading is a quantity as it was read.
type Reading struct {
	SI   float64
	Unit string // as typed, without surplus spaces
	Note string // how it was read where that is not plain, such as `"ppm" read as mg/kg (by mass)`
}

// unit is one way to write a dimension: SI = value*factor/per + offset, where a
// factor or a divisor of 0 stands for 1. Small factors are kept as divisors, so
// that 480 mg/kg is the same number as 0.00048.
type unit struct {
	symbol              string
	factor, per, offset float64
	note                string
}

func (u unit) toSI(value float64) float64 { return value*orOne(u.factor)/orOne(u.per) + u.offset }

func (u unit) fromSI(si float64) float64 { return (si - u.offset) * orOne(u.per) / orOne(u.factor) }

func orOne(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}

// Units lists the units that a dimension may be written in, the usual ones first.
func Units(d Dimension) []string {
	var list []string
	for _, u := range units[d] {
		list = append(list, u.symbol)
	}
	return list
}

// IsUnit reports whether a unit as typed is that of the dimension: "f" is "°F".
func IsUnit(d Dimension, typed, symbol string) bool {
	u, ok := lookUp(d, typed)
	return ok && u.symbol == symbol
}

func lookUp(d Dimension, symbol string) (unit, bool) {
	if full, ok := spellings[symbol]; ok {
		symbol = full
	}
	for _, u := range units[d] {
		if u.symbol == symbol {
			return u, true
		}
	}
	return unit{}, false
}

// mustLookUp serves printing, where the unit is chosen by the program.
func mustLookUp(d Dimension, symbol string) unit {
	u, ok := lookUp(d, symbol)
	if !ok {
		panic(fmt.Sprintf("quantity: %q is no unit of %s", symbol, d))
	}
	return u
}
