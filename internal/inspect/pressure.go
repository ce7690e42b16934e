package inspect

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// Change is a pressure at which the kind of azeotrope changes.
type Change struct {
	PressurePa   float64
	Below, Above thermo.AzeotropeKind
	BoilingK     float64 // of the dry solvent at that pressure
}

const (
	pressureSteps   = 8     // of the scan, evenly in ln P
	pressureWithin  = 0.005 // relative, of a change
	atmospherePa    = 101325
	narrowHalvings  = 12
	kindNotComputed = thermo.AzeotropeKind("")
)

// changes scans the pressures of the model for other kinds of azeotrope. A
// pressure at which nothing can be computed is passed over.
func changes(m *thermo.Mixture) (list []Change) {
	kind := func(lnPa float64) thermo.AzeotropeKind {
		if a, err := azeotrope(m, math.Exp(lnPa)); err == nil {
			return a.Kind
		}
		return kindNotComputed
	}
	low, high := math.Log(thermo.LowestPressurePa), math.Log(thermo.HighestPressurePa)
	lastLn, last := low, kind(low)
	for i := 1; i <= pressureSteps; i++ {
		nextLn := low + (high-low)*float64(i)/pressureSteps
		next := kind(nextLn)
		if next != last && next != kindNotComputed && last != kindNotComputed {
			list = append(list, change(m, math.Exp(narrow(kind, lastLn, nextLn, last)), last, next))
		}
		lastLn, last = nextLn, next
	}
	return list
}

func change(m *thermo.Mixture, pressurePa float64, below, above thermo.AzeotropeKind) Change {
	boilingK, err := thermo.Boil(m.Solvent, pressurePa)
	if err != nil {
		boilingK = math.NaN()
	}
	return Change{pressurePa, below, above, boilingK}
}

// narrow closes in on the change between two pressures.
func narrow(kind func(float64) thermo.AzeotropeKind, low, high float64, below thermo.AzeotropeKind) float64 {
	for range narrowHalvings {
		middle := (low + high) / 2
		if kind(middle) == below {
			low = middle
		} else {
			high = middle
		}
		if high-low < pressureWithin {
			break
		}
	}
	return (low + high) / 2
}

// azeotrope solves for the azeotrope and refuses one outside the limits of the
// model, by its temperature or, where there is none, by the boiling point.
func azeotrope(m *thermo.Mixture, pressurePa float64) (thermo.Azeotrope, error) {
	if err := m.CheckPressure(pressurePa); err != nil {
		return thermo.Azeotrope{}, err
	}
	a, err := m.FindAzeotrope(pressurePa)
	if err != nil {
		return a, err
	}
	tK := a.TempK
	if a.Kind == thermo.NoAzeotrope {
		if tK, err = thermo.Boil(m.Solvent, pressurePa); err != nil {
			return a, err
		}
	}
	if frozen := math.Max(m.Water.MeltingK, m.Solvent.MeltingK); a.Kind != thermo.NoAzeotrope && tK < frozen {
		return a, fmt.Errorf("the azeotrope is computed at %.1f °C, where one of the two is frozen (%.1f °C)", tK-kelvinAt0C, frozen-kelvinAt0C)
	}
	return a, m.CheckTemperature(tK)
}

// changeNotes says how the azeotrope changes with pressure, and first where it is
// another kind here than at atmospheric pressure.
func (s *Sheet) changeNotes(m *thermo.Mixture) (list []string) {
	usual, err := azeotrope(m, atmospherePa)
	if err == nil && s.AzeotropeTrouble == "" && usual.Kind != s.Azeotrope.Kind {
		list = append(list, fmt.Sprintf("at %s the pair has %s, at this pressure %s", quantity.FormatPressure(atmospherePa), kindText(usual.Kind), kindText(s.Azeotrope.Kind)))
	}
	for _, c := range s.Changes {
		doubt := ""
		if pair := s.Solvent.Water; pair.TMaxK > 0 && !(c.BoilingK >= pair.TMinK && c.BoilingK <= pair.TMaxK) {
			doubt = ", outside the temperatures that it was fitted to"
		}
		list = append(list, fmt.Sprintf("in the model the pair has %s below about %s and %s above it%s", kindText(c.Below),
			quantity.Format(c.PressurePa, quantity.Pressure, "kPa", 2), kindText(c.Above), doubt))
	}
	return list
}

func kindText(k thermo.AzeotropeKind) string {
	switch k {
	case thermo.NoAzeotrope:
		return "no azeotrope"
	case thermo.Heterogeneous:
		return "a heterogeneous azeotrope"
	}
	return "a homogeneous azeotrope"
}
