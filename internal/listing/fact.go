package listing

import (
	"fmt"
	"strconv"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

const zeroCelsiusK = 273.15

// facts collects the facts of an entry.
type facts []Fact

// say adds a statement in words.
func (f *facts) say(what, text string, o catalog.Origin) {
	if text != "" {
		*f = append(*f, fact(what, text, "", o))
	}
}

func fact(what, value, unit string, o catalog.Origin) Fact {
	return Fact{What: what, Value: value, Unit: unit, Source: o.Source, Confidence: o.Confidence, Note: o.Note, Own: o.Own}
}

// value adds a number with its band. A value that does not exist is left out.
func (f *facts) value(what string, v *catalog.Value) {
	if v == nil || v.Text == "" {
		return
	}
	number, unit, ok := split(v.Text)
	one := fact(what, number, unit, v.Origin)
	if ok && v.Banded() {
		one.Low, one.High = inUnitOf(*v, v.Low), inUnitOf(*v, v.High)
	}
	*f = append(*f, one)
}

// split parts "0.25 mL/g" into the number and its unit; ok is false for words.
func split(text string) (number, unit string, ok bool) {
	number, unit, _ = strings.Cut(text, " ")
	if _, err := strconv.ParseFloat(number, 64); err != nil {
		return text, "", false
	}
	return number, unit, true
}

// inUnitOf gives an SI value in the unit that a value is written in.
func inUnitOf(v catalog.Value, si float64) string {
	number, unit, _ := split(v.Text)
	written, _ := strconv.ParseFloat(number, 64)
	switch {
	case unit == "°C":
		return quantity.Significant(si-zeroCelsiusK, 6)
	case written == 0 || v.SI == 0 || unit == "°F":
		return "" // no way to tell the size of the unit
	}
	return quantity.Significant(si*written/v.SI, 4)
}

// plain prints a number of a model, large and small ones with an exponent.
func plain(x float64) string { return strconv.FormatFloat(x, 'g', 7, 64) }

// span is a range of temperatures, "" where none is stated.
func span(lowK, highK float64) string {
	if highK == 0 {
		return ""
	}
	return fmt.Sprintf("%s to %s °C", quantity.Significant(lowK-zeroCelsiusK, 4), quantity.Significant(highK-zeroCelsiusK, 4))
}
