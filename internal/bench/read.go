package bench

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// reader fills a question and collects what is wrong with the request.
type reader struct {
	cat      *catalog.Catalog
	q        *Question
	flags    map[string]string
	mistakes []error
}

func (r *reader) mistake(message, hint string) {
	r.mistakes = append(r.mistakes, &Mistake{message, hint})
}

// Read reads a request. The error joins a Mistake for each thing that is wrong.
func Read(c *catalog.Catalog, req Request) (*Question, error) {
	k, err := kind(req.Kind)
	if err != nil {
		return nil, err
	}
	r := &reader{cat: c, flags: req.Flags, q: &Question{Kind: k, Solvent: req.Solvent, Stirred: req.Stirred, Powder: req.Powder, water: &c.Solvents["water"].Pure}}
	r.fit()
	r.conditions()
	r.agent()
	r.carrier()
	r.stages()
	r.returns()
	r.amounts()
	if req.Solvent != nil {
		r.contents()
	}
	r.dose()
	r.solvable()
	if len(r.mistakes) > 0 {
		return nil, errors.Join(r.mistakes...)
	}
	return r.q, nil
}

// limits are what makes physical sense, with the words for it.
type limits struct {
	low, high float64
	text      string
}

const zeroCelsius = 273.15

var (
	anyVolume      = limits{5e-5, 10, "0.05 L to 10000 L"}
	anyRinse       = limits{0, 10, "0 mL to the volume"}
	anyFree        = limits{0, 10, "0 mL to less than the volume"}
	anyTemperature = limits{zeroCelsius - 20, zeroCelsius + 100, "-20 °C to 100 °C (-4 °F to 212 °F)"}
	anyReceiver    = limits{zeroCelsius + 1, zeroCelsius + 40, "1 °C to 40 °C (34 °F to 104 °F); water would freeze in a colder one"}
	anyPressure    = limits{1e3, 110e3, "1 kPa to 110 kPa (10 hPa to 1100 hPa), absolute"}
	anyPower       = limits{10, 1e5, "10 W to 100 kW"}
	anyHeight      = limits{0.01, 5, "0.01 m to 5 m"}
	anyPeroxide    = limits{0, 10, "0 mg/L to 10000 mg/L"}
	anyDose        = limits{0.01, 1000, "0.01 g/L to 1000 g/L, which fills the vessel"}
	anyTime        = limits{60, 183 * 86400, "1 min to 183 d"}
	anyReagent     = limits{1e-9, 1e6, "more than 0 mol"}
	anyWater       = limits{1e-9, 0.5, "0.001 mg/kg to 500000 mg/kg"}
	anyGoal        = limits{1e-8, 0.5, "0.01 mg/kg to 500000 mg/kg"}
)

// measure reads a flag within limits. Where it was not given, or is wrong, the
// answer is otherwise.
func (r *reader) measure(flag string, d quantity.Dimension, l limits, otherwise float64) float64 {
	text, ok := r.flags[flag]
	if !ok {
		return otherwise
	}
	reading, err := quantity.Parse(text, d)
	if d == quantity.Temperature {
		r.askedIn(reading)
	}
	return r.within(flag, text, reading, err, l, otherwise)
}

// askedIn remembers a temperature in °F: the answer then has both.
func (r *reader) askedIn(t quantity.Reading) {
	if quantity.IsUnit(quantity.Temperature, t.Unit, "°F") {
		r.q.inFahrenheit = true
	}
}

func (r *reader) within(flag, text string, reading quantity.Reading, err error, l limits, otherwise float64) float64 {
	const rounding = 1e-9
	switch {
	case err != nil:
		r.mistake(fmt.Sprintf("--%s: %s", flag, err), "")
		return otherwise
	case !(reading.SI >= l.low-rounding*math.Abs(l.low) && reading.SI <= l.high*(1+rounding)):
		r.mistake(fmt.Sprintf("--%s: %s is not possible here; allowed: %s", flag, quantity.Quote(text), l.text), "")
		return otherwise
	}
	if reading.Note != "" {
		r.q.Notes = append(r.q.Notes, fmt.Sprintf("--%s: %s", flag, reading.Note))
	}
	return reading.SI
}

// conditions reads where the step is done. What is left out comes from the
// catalog's practice.
func (r *reader) conditions() {
	q := r.q
	q.TempK = r.measure("temperature", quantity.Temperature, anyTemperature, r.cat.Practice["site-room"].SI)
	q.ReceiverK = r.measure("receiver", quantity.Temperature, anyReceiver, r.cat.Practice["site-receiver"].SI)
	if tap := r.cat.Practice["coolant-tap"]; q.ReceiverK < tap.SI-1e-9 {
		r.mistake(fmt.Sprintf("--receiver: %s is colder than the cooling water from the tap (%s)", quantity.Quote(r.flags["receiver"]), quantity.FormatTemperature(tap.SI)),
			"where a chiller cools it, a job file says so: site: {receiver: 5 °C, cooling: chiller}")
	}
	q.PressurePa = r.measure("pressure", quantity.Pressure, anyPressure, r.cat.Practice["site-pressure"].SI)
	q.HeaterW = r.measure("power", quantity.Power, anyPower, 0)
	q.HeightM = r.measure("height", quantity.Length, anyHeight, 0)
	q.PeroxideKgPerM3 = r.measure("peroxide", quantity.MassConcentration, anyPeroxide, math.NaN())
}

// amounts reads how much there is, of the lot and of the agent.
func (r *reader) amounts() {
	q := r.q
	q.VolumeM3 = r.measure("volume", quantity.Volume, anyVolume, 1e-3)
	q.FreeWaterM3 = r.measure("free-water", quantity.Volume, anyFree, 0)
	if q.FreeWaterM3 >= q.VolumeM3 {
		r.mistake(fmt.Sprintf("--free-water: %s is as much as the volume (%s) or more", quantity.Quote(r.flags["free-water"]), quantity.FormatVolume(q.VolumeM3)), "")
	}
	q.RinseM3 = r.measure("rinse", quantity.Volume, anyRinse, 0)
	if q.RinseM3 > q.VolumeM3 {
		r.mistake(fmt.Sprintf("--rinse: %s is more than the volume (%s)", quantity.Quote(r.flags["rinse"]), quantity.FormatVolume(q.VolumeM3)), "")
	}
	q.ReagentMol = r.measure("reagent", quantity.Amount, anyReagent, math.NaN())
	q.DoseKgPerM3 = math.NaN()
	q.TimeS = r.time()
	q.Charges = r.charges()
}

// mostCharges is as many as anybody decants.
const mostCharges = 5

// charges reads how many charges make up the dose.
func (r *reader) charges() int {
	text, ok := r.flags["charges"]
	if !ok {
		return 1
	}
	n, err := strconv.Atoi(strings.TrimSpace(text))
	if err != nil || n < 1 || n > mostCharges {
		r.mistake(fmt.Sprintf("--charges: %s is not a number of charges; allowed: 1 to %d", quantity.Quote(text), mostCharges), "")
		return 1
	}
	return n
}

// time reads a time; a bare number is hours, as the flag is called.
func (r *reader) time() float64 {
	text, ok := r.flags["hours"]
	if !ok {
		return math.NaN()
	}
	withUnit := text
	if _, err := quantity.Parse(text, quantity.Number); err == nil {
		withUnit += " h"
	}
	reading, err := quantity.Parse(withUnit, quantity.Time)
	return r.within("hours", text, reading, err, anyTime, math.NaN())
}

// contents reads the water of the lot and the water wanted.
func (r *reader) contents() {
	q := r.q
	q.Water = r.content("water", anyWater)
	q.Goal = r.content("to", anyGoal)
	if q.Goal >= q.Water && q.FreeWaterM3 == 0 {
		r.mistake(fmt.Sprintf("--to: %s is not below the water of the lot (%s): there is nothing to do", quantity.Quote(r.flags["to"]), quantity.FormatWater(q.Water)), "")
	}
}

// content reads a water content by mass, or by volume with the density that
// the solvent has with so much water.
func (r *reader) content(flag string, l limits) float64 {
	text, ok := r.flags[flag]
	if !ok {
		return math.NaN()
	}
	if flag == "water" && strings.EqualFold(strings.TrimSpace(text), "saturated") {
		return r.saturated()
	}
	var reading quantity.Reading
	var err error
	for range 4 { // the density changes little with the water: it settles at once
		kgPerM3 := r.q.KgPerM3(reading.SI)
		reading, err = quantity.ParseContent(text, quantity.Solution{
			KgPerM3: kgPerM3, ReagentMol: orZero(r.q.ReagentMol), SolventKg: r.q.VolumeM3 * kgPerM3,
		})
		if err != nil {
			break
		}
	}
	if err != nil && !given(r.q.ReagentMol) && strings.Contains(strings.ReplaceAll(text, " ", ""), "mol%") {
		r.mistake(fmt.Sprintf("--%s: %s", flag, err), `the reagent of the whole lot is given with --reagent "0.5 mol", the lot with --volume "10 L"`)
		return math.NaN()
	}
	return r.within(flag, text, reading, err, l, math.NaN())
}

// saturated is what the solvent dissolves at the temperature of the lot.
func (r *reader) saturated() float64 {
	at := quantity.FormatTemperature(r.q.TempK)
	water, partly, err := mixture.Pair(r.cat, r.q.Solvent).Solubility(r.q.TempK)
	switch {
	case err != nil:
		r.mistake(fmt.Sprintf("--water: how much water %s holds at %s is not known (%v); give its content", r.q.Solvent.Name, at, err), "")
	case !partly:
		r.mistake(fmt.Sprintf("--water: %s takes up any amount of water at %s and is never saturated; give its content", r.q.Solvent.Name, at), "")
	default:
		r.q.Notes = append(r.q.Notes, fmt.Sprintf("--water: saturated read as %s, what %s holds at %s", quantity.FormatWater(water), r.q.Solvent.Name, at))
		return water
	}
	return math.NaN()
}

func orZero(x float64) float64 {
	if math.IsNaN(x) {
		return 0
	}
	return x
}

// solvable refuses what says too much or too little to be solved.
func (r *reader) solvable() {
	has := func(flag string) bool { _, ok := r.flags[flag]; return ok }
	dose, hours, to := has("dose"), has("hours"), has("to")
	switch r.q.Kind {
	case steps.Soak:
		switch {
		case dose && hours && to:
			r.mistake("--dose, --hours and --to are one too many", "give two of them; the third is solved for")
		case !to && !(dose && hours):
			r.mistake("soak needs --dose and --hours, or --to", `--to alone sizes the dose for overnight, 24 h and 72 h; with --hours it solves for the dose, with --dose for the time`)
		}
	case steps.Column:
		if !dose && !to {
			r.mistake("column needs --to or --dose", `--to "20 mg/kg" sizes the bed; --dose "100 g/L" is the bed per litre of the lot`)
		}
	case steps.Salt, steps.Reactive:
		if dose && hours && to {
			r.mistake("--dose, --hours and --to are one too many", "give two of them; the third is solved for")
		}
	}
}
