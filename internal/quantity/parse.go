package quantity

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"
)

// longest is the most characters that a quantity may have; no unit needs more.
const longest = 60

// leadingNumber is the number that text begins with, "" if there is none: a sign,
// digits with at most one decimal point, an exponent.
func leadingNumber(text string) string {
	at := signLength(text)
	whole := digitsLength(text[at:])
	end := at + whole
	if strings.HasPrefix(text[end:], ".") {
		if fraction := digitsLength(text[end+1:]); whole+fraction > 0 {
			end += 1 + fraction
		}
	}
	if end == at {
		return ""
	}
	if rest := text[end:]; rest != "" && (rest[0] == 'e' || rest[0] == 'E') {
		sign := signLength(rest[1:])
		if n := digitsLength(rest[1+sign:]); n > 0 {
			end += 1 + sign + n
		}
	}
	return text[:end]
}

func signLength(s string) int {
	if s != "" && (s[0] == '+' || s[0] == '-') {
		return 1
	}
	return 0
}

func digitsLength(s string) int {
	n := 0
	for n < len(s) && s[n] >= '0' && s[n] <= '9' {
		n++
	}
	return n
}

// Parse reads a number and a unit of dimension d. The space between them may be
// left out. Negative values are read; the caller knows what is sensible. Errors
// say what was typed and what is allowed.
func Parse(text string, d Dimension) (Reading, error) {
	value, symbol, err := split(text, d)
	if err != nil {
		return Reading{}, err
	}
	if symbol == "" && d != Number {
		return Reading{}, fmt.Errorf("%s has no unit; %s", Quote(text), advice(text, d))
	}
	u, ok := lookUp(d, symbol)
	if !ok {
		return Reading{}, wrongUnit(text, symbol, d)
	}
	si := u.toSI(value)
	if math.IsInf(si, 0) {
		return Reading{}, fmt.Errorf("%s is too large", Quote(text))
	}
	return Reading{SI: si, Unit: symbol, Note: u.note}, nil
}

// split takes the text apart and checks the number.
func split(text string, d Dimension) (value float64, symbol string, err error) {
	clean := strings.TrimSpace(text)
	if clean == "" {
		return 0, "", fmt.Errorf("is empty; %s", advice(text, d))
	}
	if utf8.RuneCountInString(clean) > longest {
		return 0, "", fmt.Errorf("%s is longer than any quantity; %s", Quote(text), advice(text, d))
	}
	digits, rest, err := splitNumber(clean)
	if err != nil {
		return 0, "", err
	}
	if digits == "" {
		return 0, "", fmt.Errorf("%s does not begin with a number; %s", Quote(text), advice(text, d))
	}
	value, err = strconv.ParseFloat(digits, 64)
	if errors.Is(err, strconv.ErrRange) {
		return 0, "", fmt.Errorf("%s is too large", Quote(text))
	}
	return value, tidyUnit(rest), err
}

// splitNumber finds the number at the front. It refuses what would be read
// differently in different countries.
func splitNumber(clean string) (digits, rest string, err error) {
	clean = strings.Replace(clean, "\u2212", "-", 1) // minus sign
	if word := strings.ToLower(strings.TrimLeft(clean, "+-.")); strings.HasPrefix(word, "nan") || strings.HasPrefix(word, "inf") {
		return "", "", fmt.Errorf("%s is not a finite number", Quote(clean))
	}
	digits = leadingNumber(clean)
	rest = clean[len(digits):]
	next := strings.TrimLeft(rest, " \u00a0\u202f\u2009")
	switch {
	case digits == "" || rest == "":
	case strings.HasPrefix(rest, ","):
		return "", "", fmt.Errorf("%s has a comma; write a decimal point (1.5) and no thousands separator (1500)", Quote(clean))
	case strings.HasPrefix(next, "1/"): // a unit such as 1/h
	case startsWithDigit(next) || startsWithDigit(strings.TrimLeft(rest, "'_’.")):
		return "", "", fmt.Errorf("%s has a thousands separator; write the number in one piece (1500)", Quote(clean))
	}
	return digits, rest, nil
}

func startsWithDigit(s string) bool { return s != "" && s[0] >= '0' && s[0] <= '9' }

// tidyUnit drops surplus spaces: "mg / kg" is "mg/kg".
func tidyUnit(s string) string {
	s = strings.Join(strings.Fields(s), " ")
	s = strings.ReplaceAll(s, " /", "/")
	return strings.ReplaceAll(s, "/ ", "/")
}

func wrongUnit(text, symbol string, d Dimension) error {
	if d == Number {
		return fmt.Errorf("%s has a unit; a plain number is wanted here", Quote(text))
	}
	if reason, ok := refused[d][symbol]; ok {
		return fmt.Errorf("%s: %q %s; allowed: %s", Quote(text), symbol, reason, allowed(d))
	}
	if other, ok := meaning(symbol); ok {
		return fmt.Errorf("%s is %s, but %s is wanted here; allowed: %s", Quote(text), other, d, allowed(d))
	}
	for _, u := range units[d] {
		if strings.EqualFold(u.symbol, symbol) {
			return fmt.Errorf("%s: the unit is written %q", Quote(text), u.symbol)
		}
	}
	return fmt.Errorf("%s: %q is not a unit known here; allowed: %s", Quote(text), symbol, allowed(d))
}

// meaning names the dimension that a unit belongs to; the everyday ones win.
func meaning(symbol string) (Dimension, bool) {
	for _, d := range everyday {
		if _, ok := lookUp(d, symbol); ok {
			return d, true
		}
	}
	return "", false
}

var everyday = []Dimension{
	Volume, Mass, WaterContent, Temperature, Power, Energy, Pressure, Time, Length, MassConcentration, PerYear, Density,
	MolarMass, Flow, HoldUp, Rate, HeatPerMole, MassRatio, Amount,
}

func allowed(d Dimension) string { return strings.Join(Units(d), ", ") }

// advice shows how to write it, with the number as typed where there is one.
func advice(text string, d Dimension) string {
	digits := leadingNumber(strings.TrimSpace(text))
	if digits == "" || slices.Contains([]Dimension{Share, Number}, d) {
		return fmt.Sprintf("write it like %q", examples[d])
	}
	first := units[d][0].symbol
	return fmt.Sprintf("write %q", digits+gap(first)+first)
}

var examples = map[Dimension]string{
	Volume: "18 L", Mass: "2 kg", WaterContent: "480 mg/kg", MassRatio: "0.02 kg/kg", Temperature: "21 °C", TemperatureDifference: "5 K",
	Power: "1.6 kW", Energy: "2 kWh", Pressure: "1013 hPa", InversePressure: "1e-10 1/Pa", Time: "48 h", Length: "0.25 m", Share: "90 %",
	MassConcentration: "5 g/L", PerYear: "40 /yr", Density: "867 kg/m3", MolarMass: "92.14 g/mol", Amount: "0.5 mol", Number: "3", Flow: "2 L/min",
	HoldUp: "0.25 L/kg", Rate: "0.22 1/h", HeatPerMole: "35 kJ/mol", MolarHeatCapacity: "157 J/mol/K", HeatCapacity: "1.05 kJ/kg/K",
	Viscosity: "0.55 mPa s", MassPerEnergy: "0.25 kg/kWh", Diffusivity: "6e-9 m2/s", Velocity: "0.2 m/s",
}

func gap(symbol string) string {
	if symbol == "" {
		return ""
	}
	return " "
}

// Quote quotes text for a message: control characters escaped, long text cut.
func Quote(text string) string {
	const most = 60
	if utf8.RuneCountInString(text) > most {
		text = string([]rune(text[:min(len(text), 4*most+4)])[:most-1]) + "…"
	}
	return strconv.Quote(text)
}
