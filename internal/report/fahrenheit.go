package report

import (
	"regexp"
	"strconv"
	"sync"

	"parch/internal/quantity"
)

// printedCelsius is a temperature in a text, or a range of them; few answers need it.
var printedCelsius = sync.OnceValue(func() *regexp.Regexp {
	return regexp.MustCompile(`(?:(-?[0-9]+(?:\.[0-9]+)?) to )?(-?[0-9]+(?:\.[0-9]+)?) °C`)
})

// both puts °F beside every °C of a text where the question was asked in °F.
func (p *page) both(text string) string {
	if !p.fahrenheit {
		return text
	}
	return printedCelsius().ReplaceAllStringFunc(text, func(found string) string {
		ends := printedCelsius().FindStringSubmatch(found)
		if ends[1] == "" {
			return found + " = " + ofCelsius(ends[2]) + " °F"
		}
		return found + " = " + ofCelsius(ends[1]) + " to " + ofCelsius(ends[2]) + " °F"
	})
}

func (p *page) eachBoth(texts []string) []string {
	var all []string
	for _, text := range texts {
		all = append(all, p.both(text))
	}
	return all
}

// ofCelsius is a printed temperature in °F.
func ofCelsius(printed string) string {
	value, err := strconv.ParseFloat(printed, 64)
	if err != nil {
		return quantity.Unknown
	}
	return inFahrenheit(value)
}

// inFahrenheit is a temperature in °C as one in °F.
func inFahrenheit(celsius float64) string { return quantity.Significant(celsius*9/5+32, 3) }
