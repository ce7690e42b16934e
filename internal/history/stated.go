package history

import (
	"fmt"
	"strings"

	"parch/internal/quantity"
)

// Stated is what a sieve is said to hold, weighed or titrated by its owner
// rather than inferred from an oven.
type Stated struct {
	KgPerKg float64
	OvenK   float64 // that it comes from; 0: not stated
}

// Bounds of a stated residual loading, kg/kg, and of its oven, K.
const (
	mostResidual      = 0.25
	coolestK, hottest = 293.15, 923.15
)

// StatedResidual reads "residual 1.5 g/100 g", with or without the oven after it:
// "residual 1.5 g/100 g, 300 °C". ok is false where the text is no such statement.
func StatedResidual(text string) (r Stated, ok bool, err error) {
	words := strings.Fields(text)
	if len(words) == 0 || !strings.EqualFold(words[0], "residual") {
		return Stated{}, false, nil
	}
	amount, oven, withOven := strings.Cut(strings.Join(words[1:], " "), ",")
	loading, err := quantity.Parse(amount, quantity.MassRatio)
	if err != nil {
		return Stated{}, true, err
	}
	if !(loading.SI >= 0 && loading.SI <= mostResidual) {
		return Stated{}, true, fmt.Errorf("%s of water on a sieve is not possible here; allowed: 0 g/100 g to %.0f g/100 g", quantity.Quote(strings.TrimSpace(amount)), 100*mostResidual)
	}
	r.KgPerKg = loading.SI
	if !withOven {
		return r, true, nil
	}
	at, err := quantity.Parse(oven, quantity.Temperature)
	if err == nil && !(at.SI >= coolestK && at.SI <= hottest) {
		err = fmt.Errorf("%s is not possible for an oven; allowed: %s to %s", quantity.Quote(strings.TrimSpace(oven)), quantity.FormatTemperature(coolestK), quantity.FormatTemperature(hottest))
	}
	r.OvenK = at.SI
	return r, true, err
}
