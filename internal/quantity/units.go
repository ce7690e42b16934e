package quantity

// Factors are exact unless a comment says otherwise. Those of the US gallon
// (231 in3, 1 in = 25.4 mm), the pound (0.453 592 37 kg), the atmosphere and the
// degree Fahrenheit are definitions printed in NIST SP 811 (2008), Appendix B.
const (
	usGallonM3 = 231 * 0.0254 * 0.0254 * 0.0254
	poundKg    = 0.45359237
	mmHgPa     = 133.322387415 // conventional: 13 595.1 kg/m3 x 9.806 65 m/s2 x 1 mm
	zeroCelsiK = 273.15
	hourS      = 3600
	dayS       = 86400
	yearS      = 365.25 * dayS // Julian year, a convention; used for the life of equipment
)

const (
	noteppm     = `"ppm" read as mg/kg (by mass)`
	notePercent = `"%" read as per cent by mass (% m/m)`

	notePerVolume = `"% m/v" read as g per 100 mL`
)

// units lists, per dimension, what may be written; the first is the one that messages suggest.
var units = map[Dimension][]unit{
	Volume: {
		{symbol: "L", per: 1e3}, {symbol: "mL", per: 1e6}, {symbol: "m3", factor: 1}, {symbol: "US gal", factor: usGallonM3},
		{symbol: "uL", per: 1e9}, {symbol: "cm3", per: 1e6},
	},
	Mass: {
		{symbol: "kg", factor: 1}, {symbol: "g", per: 1e3}, {symbol: "mg", per: 1e6}, {symbol: "ug", per: 1e9},
		{symbol: "t", factor: 1e3}, {symbol: "lb", factor: poundKg},
	},
	WaterContent: {
		{symbol: "mg/kg", per: 1e6}, {symbol: "ppm", per: 1e6, note: noteppm}, {symbol: "g/kg", per: 1e3},
		{symbol: "% m/m", per: 1e2}, {symbol: "%", per: 1e2, note: notePercent}, {symbol: "kg/kg", factor: 1},
		{symbol: "ug/g", per: 1e6}, {symbol: "mg/g", per: 1e3},
	},
	MassRatio: {
		{symbol: "kg/kg", factor: 1}, {symbol: "g/g", factor: 1}, {symbol: "g/kg", per: 1e3}, {symbol: "mg/kg", per: 1e6},
		{symbol: "g/100 g", per: 1e2}, {symbol: "% m/m", per: 1e2},
	},
	Temperature: {
		{symbol: "°C", factor: 1, offset: zeroCelsiK}, {symbol: "K", factor: 1},
		{symbol: "°F", factor: 5, per: 9, offset: zeroCelsiK - 32*5.0/9},
	},
	TemperatureDifference: {{symbol: "K", factor: 1}, {symbol: "°C", factor: 1}, {symbol: "°F", factor: 5, per: 9}},
	Power:                 {{symbol: "kW", factor: 1e3}, {symbol: "W", factor: 1}},
	Energy: {
		{symbol: "kWh", factor: 3.6e6}, {symbol: "Wh", factor: 3600}, {symbol: "J", factor: 1}, {symbol: "kJ", factor: 1e3}, {symbol: "MJ", factor: 1e6},
	},
	Pressure: {
		{symbol: "hPa", factor: 100}, {symbol: "kPa", factor: 1e3}, {symbol: "Pa", factor: 1}, {symbol: "bar", factor: 1e5},
		{symbol: "mbar", factor: 100}, {symbol: "MPa", factor: 1e6}, {symbol: "mmHg", factor: mmHgPa}, {symbol: "Torr", factor: 101325, per: 760},
		{symbol: "atm", factor: 101325},
	},
	InversePressure: {{symbol: "1/Pa", factor: 1}, {symbol: "1/kPa", per: 1e3}},
	Time: {
		{symbol: "h", factor: hourS}, {symbol: "min", factor: 60}, {symbol: "s", factor: 1}, {symbol: "d", factor: dayS},
		{symbol: "week", factor: 7 * dayS}, {symbol: "yr", factor: yearS},
	},
	Length: {
		{symbol: "m", factor: 1}, {symbol: "cm", per: 1e2}, {symbol: "mm", per: 1e3}, {symbol: "um", per: 1e6}, {symbol: "nm", per: 1e9}, {symbol: "in", factor: 0.0254},
	},
	Share: {{symbol: "%", per: 1e2}},
	MassConcentration: {
		{symbol: "g/L", factor: 1}, {symbol: "mg/L", per: 1e3}, {symbol: "kg/m3", factor: 1}, {symbol: "g/mL", factor: 1e3},
		{symbol: "mg/mL", factor: 1}, {symbol: "mg/m3", per: 1e6}, {symbol: "g/m3", per: 1e3}, {symbol: "% m/v", factor: 10, note: notePerVolume},
	},
	// A month and a week are counted as people plan: twelve and fifty-two to the year.
	PerYear: {{symbol: "/yr", factor: 1}, {symbol: "/month", factor: 12}, {symbol: "/week", factor: 52}},
	Density: {
		{symbol: "kg/m3", factor: 1}, {symbol: "g/mL", factor: 1e3}, {symbol: "g/cm3", factor: 1e3}, {symbol: "kg/L", factor: 1e3}, {symbol: "g/L", factor: 1},
	},
	MolarMass: {{symbol: "g/mol", per: 1e3}, {symbol: "kg/mol", factor: 1}},
	Amount:    {{symbol: "mol", factor: 1}, {symbol: "mmol", per: 1e3}, {symbol: "kmol", factor: 1e3}},
	Number:    {{symbol: "", factor: 1}},
	Flow: {
		{symbol: "L/min", per: 60e3}, {symbol: "mL/min", per: 60e6}, {symbol: "L/h", per: 1e3 * hourS},
		{symbol: "m3/h", per: hourS}, {symbol: "m3/s", factor: 1},
	},
	HoldUp: {{symbol: "L/kg", per: 1e3}, {symbol: "mL/g", per: 1e3}, {symbol: "m3/kg", factor: 1}},
	Rate: {
		{symbol: "1/h", per: hourS}, {symbol: "1/min", per: 60}, {symbol: "1/s", factor: 1},
	},
	HeatPerMole:       {{symbol: "kJ/mol", factor: 1e3}, {symbol: "J/mol", factor: 1}},
	MolarHeatCapacity: {{symbol: "J/mol/K", factor: 1}},
	HeatCapacity:      {{symbol: "kJ/kg/K", factor: 1e3}, {symbol: "J/kg/K", factor: 1}, {symbol: "J/g/K", factor: 1e3}},
	Viscosity:         {{symbol: "mPa s", per: 1e3}, {symbol: "Pa s", factor: 1}},
	MassPerEnergy:     {{symbol: "kg/kWh", per: 3.6e6}, {symbol: "g/kWh", per: 3.6e9}, {symbol: "kg/J", factor: 1}},
	Diffusivity:       {{symbol: "m2/s", factor: 1}, {symbol: "cm2/s", per: 1e4}},
	Velocity:          {{symbol: "m/s", factor: 1}, {symbol: "cm/s", per: 1e2}, {symbol: "mm/s", per: 1e3}},
}

// spellings maps other ways to write a unit to the one in the tables.
var spellings = map[string]string{
	"l": "L", "ml": "mL", "litre": "L", "litres": "L", "liter": "L", "liters": "L", "m³": "m3", "cm³": "cm3", "µL": "uL", "μL": "uL",
	"US gallon": "US gal", "US gallons": "US gal",
	"µg": "ug", "μg": "ug", "lbs": "lb",
	"µg/g": "ug/g", "μg/g": "ug/g", "wt%": "% m/m", "wt %": "% m/m", "% w/w": "% m/m", "%m/m": "% m/m", "%w/w": "% m/m", "g/100g": "g/100 g",
	"C": "°C", "degC": "°C", "deg C": "°C", "℃": "°C", "° C": "°C", "F": "°F", "degF": "°F", "deg F": "°F", "℉": "°F", "° F": "°F",
	"c": "°C", "°c": "°C", "degc": "°C", "deg c": "°C", "celsius": "°C", "Celsius": "°C", "degrees C": "°C", "degrees Celsius": "°C", "degrees celsius": "°C",
	"f": "°F", "°f": "°F", "degf": "°F", "deg f": "°F", "fahrenheit": "°F", "Fahrenheit": "°F", "degrees F": "°F", "degrees Fahrenheit": "°F", "degrees fahrenheit": "°F",
	"ppmw": "ppm", "ppm w": "ppm", "ppm(w)": "ppm", "ppm (w)": "ppm", "ppm w/w": "ppm", "ppm m/m": "ppm", "ppm (m/m)": "ppm", "ppm (w/w)": "ppm", "ppm by mass": "ppm", "ppm by weight": "ppm", "wtppm": "ppm", "wt ppm": "ppm",
	"torr": "Torr", "/Pa": "1/Pa", "Pa^-1": "1/Pa", "Pa-1": "1/Pa",
	"hour": "h", "hours": "h", "hr": "h", "hrs": "h", "minute": "min", "minutes": "min", "second": "s", "seconds": "s", "sec": "s",
	"day": "d", "days": "d", "weeks": "week", "year": "yr", "years": "yr", "a": "yr",
	"metre": "m", "µm": "um", "μm": "um",
	"% m/V": "% m/v", "%m/v": "% m/v", "%m/V": "% m/v", "% w/v": "% m/v", "%w/v": "% m/v",
	"g/l": "g/L", "mg/l": "mg/L", "g/ml": "g/mL", "mg/ml": "mg/mL", "kg/m³": "kg/m3", "g/m³": "g/m3", "mg/m³": "mg/m3", "g/cm³": "g/cm3", "kg/l": "kg/L",
	"/year": "/yr", "/a": "/yr", "/y": "/yr", "per year": "/yr", "1/yr": "/yr", "1/year": "/yr", "1/month": "/month", "per month": "/month", "1/week": "/week", "per week": "/week",
	"l/min": "L/min", "ml/min": "mL/min", "l/h": "L/h", "m³/h": "m3/h", "m³/s": "m3/s",
	"l/kg": "L/kg", "ml/g": "mL/g", "m³/kg": "m3/kg",
	"/h": "1/h", "/min": "1/min", "/s": "1/s",
	"J/(mol K)": "J/mol/K", "J/(kg K)": "J/kg/K", "kJ/(kg K)": "kJ/kg/K", "J/(g K)": "J/g/K", "Pa·s": "Pa s", "mPa·s": "mPa s", "m²/s": "m2/s", "cm²/s": "cm2/s",
}

// byVolume: what a volume of water in a volume of solvent would be depends on both
// densities, and gases are counted so too.
const byVolume = `is by volume of what is not clear; write "mg/kg", or "% V/V"`

const needsDensity = "would need the density of the wet solvent; give the water by mass"

// refused lists units that people write and that cannot be taken, with the reason and what to write instead.
var refused = map[Dimension]map[string]string{
	Volume: {
		"gal":     `could be a US or an imperial gallon; write "US gal", or litres`,
		"gallon":  `could be a US or an imperial gallon; write "US gal", or litres`,
		"gallons": `could be a US or an imperial gallon; write "US gal", or litres`,
		"cc":      `is written "mL"`,
	},
	WaterContent: {
		"mg/L": needsDensity, "mg/l": needsDensity, "g/L": needsDensity, "g/l": needsDensity, "mmol/L": needsDensity, "mmol/l": needsDensity,
		"mM": needsDensity, "% V/V": needsDensity, "% v/v": needsDensity, "vol%": needsDensity, "vol %": needsDensity, "%V/V": needsDensity, "%v/v": needsDensity,
		"% m/V": needsDensity, "% m/v": needsDensity, "% w/v": needsDensity,
		"mol %": "is an amount of substance; give the water by mass", "mol%": "is an amount of substance; give the water by mass",
		"ppmv": byVolume, "ppm v/v": byVolume, "ppm(v)": byVolume, "ppm (v)": byVolume, "ppm (v/v)": byVolume, "ppm by volume": byVolume,
		"ppb": `is too fine to be measured; write "mg/kg"`,
	},
	MassConcentration: {
		"ppm": `is not clear for a solution; test strips read mg/L: write "mg/L"`,
		"%":   `is not clear: by mass of solvent ("% m/m") or by its volume ("% m/v")`,
	},
	PerYear: {
		"/day": "depends on the working days of the year; give the number per week, month or year",
		"/d":   "depends on the working days of the year; give the number per week, month or year",
	},
	Pressure: {
		"psi":  `could be gauge or absolute; write the absolute pressure in "hPa" or "kPa"`,
		"barg": "is a gauge pressure; write the absolute pressure",
	},
	Power: {"hp": `is written in "W" or "kW"`},
}
