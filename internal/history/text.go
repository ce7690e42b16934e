package history

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
)

// leadingTemperature takes the longest beginning of the text that is a temperature.
func leadingTemperature(text string) (oven quantity.Reading, rest []string, err error) {
	words := strings.Fields(strings.ReplaceAll(text, ",", " "))
	for n := min(3, len(words)); n > 0; n-- {
		reading, err := quantity.Parse(strings.Join(words[:n], " "), quantity.Temperature)
		if err == nil {
			return reading, words[n:], nil
		}
	}
	return oven, nil, fmt.Errorf("no temperature")
}

// aftercare reads what was done with a sieve after the oven, each of it once.
func aftercare(words []string) (a Activation, err error) {
	rest := strings.Join(words, " ")
	seen := map[string]bool{}
	for rest != "" {
		what, after, err := oneCare(rest, &a)
		if err != nil {
			return a, err
		}
		if seen[what] {
			return a, fmt.Errorf("%s is said twice", what)
		}
		seen[what], rest = true, after
	}
	switch {
	case a.ClosedHot && a.LeftOpen:
		return a, fmt.Errorf("closed hot and left open contradict each other")
	case a.LeftOpen && a.Days == 0:
		return a, fmt.Errorf("left open for how long? write it like \"left open, 3 d\"")
	}
	return a, nil
}

// oneCare takes one thing that was done off the beginning of the text.
func oneCare(text string, a *Activation) (what, rest string, err error) {
	for _, phrase := range []string{"closed hot", "closed while hot"} {
		if after, ok := cutPhrase(text, phrase); ok {
			a.ClosedHot = true
			return "closed hot", after, nil
		}
	}
	if after, ok := cutPhrase(text, "left open"); ok {
		a.LeftOpen = true
		return "left open", after, nil
	}
	if after, ok := cutPhrase(text, "vacuum"); ok {
		a.VacuumPa, rest, err = leading(after, quantity.Pressure)
		switch {
		case err != nil:
			err = fmt.Errorf("a vacuum of what? write what its gauge reads, like \"vacuum 1 hPa\"")
		case a.VacuumPa <= 0:
			err = fmt.Errorf("a vacuum of %s is not possible; write what its gauge reads, like \"vacuum 1 hPa\"", after)
		}
		return "the vacuum", rest, err
	}
	since := text
	if after, ok := cutPhrase(text, "for"); ok {
		since = after
	}
	seconds, rest, err := leading(since, quantity.Time)
	if err != nil {
		return "", text, fmt.Errorf("%s is not understood", quantity.Quote(text))
	}
	a.Days = seconds / 86400
	return "the time since", rest, nil
}

// cutPhrase takes a phrase off the beginning of a text; case does not count.
func cutPhrase(text, phrase string) (after string, ok bool) {
	if len(text) < len(phrase) || !strings.EqualFold(text[:len(phrase)], phrase) {
		return text, false
	}
	after = text[len(phrase):]
	return strings.TrimSpace(after), after == "" || after[0] == ' '
}

// leading takes a quantity of one or two words off the beginning of a text.
func leading(text string, d quantity.Dimension) (si float64, rest string, err error) {
	words := strings.Fields(text)
	for n := min(2, len(words)); n > 0; n-- {
		var reading quantity.Reading
		if reading, err = quantity.Parse(unitCase(words[:n], d), d); err == nil {
			return reading.SI, strings.Join(words[n:], " "), nil
		}
	}
	if err == nil {
		err = fmt.Errorf("nothing follows")
	}
	return 0, text, err
}

// unitCase writes a unit as it is written, whatever its case was.
func unitCase(words []string, d quantity.Dimension) string {
	text := strings.Join(words, " ")
	for _, unit := range quantity.Units(d) {
		number := strings.TrimRight(text, "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ")
		if strings.EqualFold(text[len(number):], unit) {
			return number + unit
		}
	}
	return text
}
