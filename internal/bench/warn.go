package bench

import (
	"fmt"
	"math"
	"slices"

	"parch/internal/quantity"
	"parch/internal/steps"
	"parch/internal/study"
)

// Dissolved lots are warned of by the study; what the step itself rests on that
// stands outside its data comes from here.
func (a *Answer) warn(ofLot []string) {
	a.Warnings = append(a.Warnings, ofLot...)
	a.Warnings = append(a.Warnings, a.Outcome.Warnings...)
	if a.Kind != steps.Settle {
		a.warnOfTwoLayers()
	}
	switch a.Kind {
	case steps.Soak:
		a.warnSoak()
	case steps.Column:
		a.warnIsotherm()
	case steps.Trap:
		if carrier := a.Case.Catalog.Carriers[a.Carrier]; carrier != nil && carrier.ByName {
			a.warning("%s: %s (%s)", a.Question.Carrier.Name, carrier.Reason, carrier.Confidence)
		}
	case steps.Salt:
		if target := a.Question.Agent.Claim.Target; given(a.Question.Goal) && a.Question.Goal < target.SI {
			a.warning("a salt is not the last step for a target under %s (%s): a sieve follows", target.Text, target.Confidence)
		}
	case steps.Reactive:
		if a.Agent == "sodium" {
			a.warning("sodium is computed to show what it does, not because it is advised")
		}
	}
	seen := map[string]bool{}
	a.Warnings = slices.DeleteFunc(a.Warnings, func(w string) bool {
		again := seen[w]
		seen[w] = true
		return again
	})
}

// warnOfTwoLayers says where more water is named than the solvent dissolves.
func (a *Answer) warnOfTwoLayers() {
	q := a.Question
	holds, partly, err := a.Case.Mixture.Solubility(q.TempK)
	if err == nil && partly && q.Water > holds*(1+1e-3) {
		a.warning("%s dissolves %s of water at %s: the rest of the %s stands as a layer or droplets, computed with the lot; let it settle first",
			q.Solvent.Name, quantity.FormatWater(holds), quantity.FormatTemperature(q.TempK), quantity.FormatWater(q.Water))
	}
}

func (a *Answer) warning(format string, args ...any) {
	a.Warnings = append(a.Warnings, fmt.Sprintf(format, args...))
}

// fitK is the temperature at which the rates of still vessels were found, and
// farK how far from it they are still taken.
const (
	fitK = 298.15
	farK = 10
)

func (a *Answer) warnSoak() {
	q, c := a.Question, a.Case.Catalog
	dose := a.Figure("dose")
	if least := c.Practice["dose-minimum"]; dose < least.SI*(1-1e-9) {
		a.warning("a dose of %s lies under the %s to 200 g/L of the published dryings behind the rate: extrapolated", quantity.FormatConcentration(dose), least.Text)
	}
	if most := q.Agent.MaxDose; most != nil && dose > most.SI*(1+1e-9) {
		a.warning("a dose of %s is above the largest practical one, %s", quantity.FormatConcentration(dose), most.Text)
	}
	if !q.Stirred && math.Abs(q.TempK-fitK) > farK {
		a.warning("the mixing rate of a still vessel was found near %.0f °C and is taken unchanged at %s", fitK-zeroCelsius, quantity.FormatTemperature(q.TempK))
	}
	if q.FreeWaterM3 > 0 {
		a.warning("free water goes over the sieve: computed as if it were dissolved, and the sieve warms; draw it off first")
	}
	a.warnIsotherm()
}

func (a *Answer) warnIsotherm() {
	i := a.Question.Agent.Isotherm
	a.Warnings = append(a.Warnings, study.Borrowed(a.Case, a.Agent)...)
	if t := a.Question.TempK; i.TMaxK > 0 && (t < i.TMinK-farK || t > i.TMaxK+farK) {
		a.warning("%s lies outside the %.0f to %.0f °C of the isotherm: extrapolated", quantity.FormatTemperature(t), i.TMinK-zeroCelsius, i.TMaxK-zeroCelsius)
	}
	if band := a.Question.Agent.LoadingBand; band > 1 {
		a.warning("%s: loading known to a factor of %.2g only", a.Question.Agent.Name, band)
	}
}
