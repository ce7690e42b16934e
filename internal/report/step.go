package report

import (
	"fmt"
	"io"
	"math"
	"regexp"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/bench"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// StepText prints what one step does for a terminal. It ends with cautions and
// sources.
func StepText(w io.Writer, a *bench.Answer) error {
	p := &page{w: w, fahrenheit: a.Question.InFahrenheit()}
	p.say(0, 3, "%s", stepTitle(a))
	p.line("")
	p.stepResult(a)
	p.sizes(a.Sizes, a.Question.Charges)
	p.advice(a.Advice)
	p.watch(a)
	p.figures(&a.Outcome)
	p.notes("Read as", a.Question.Notes)
	p.notes("Warnings", p.eachBoth(a.Warnings))
	p.basis(a.Basis)
	p.stepCautions(a.Cautions)
	p.heading("Sources:")
	for _, s := range a.Sources {
		p.say(5, 4, "%s: %s", s.ID, s.Reference)
	}
	return p.close()
}

func stepTitle(a *bench.Answer) string {
	q := a.Question
	title := fmt.Sprintf("%s: %s of %s", sentence(string(q.Kind)), quantity.FormatVolume(q.VolumeM3), q.Solvent.Name)
	if q.Agent != nil {
		title += fmt.Sprintf(", %s of %s", dose(&a.Outcome, q.VolumeM3), q.Sorbent())
	}
	if q.Kind == steps.Soak {
		still := map[bool]string{true: "stirred", false: "still"}[q.Stirred]
		if q.Charges > 1 {
			title += fmt.Sprintf(" in %d charges", q.Charges)
		}
		title += fmt.Sprintf(", %s, %s h", still, quantity.Significant(a.Course[len(a.Course)-1].Hours, 3))
	}
	title += ", at " + temperature(q)
	if usual := a.Case.Catalog.Practice["site-pressure"].SI; math.Abs(q.PressurePa-usual) > 1e-6*usual {
		title += ", boiled at " + quantity.FormatPressure(q.PressurePa)
	}
	return title
}

// dose is the one that was asked for or found, else the agent by volume of the lot.
func dose(o *steps.Outcome, volumeM3 float64) string {
	if asked := o.Figure("dose"); !math.IsNaN(asked) {
		return quantity.Significant(asked, 3) + " g/L"
	}
	return quantity.Significant(o.AgentKg/volumeM3, 3) + " g/L"
}

// temperature is given back in the unit it was given in.
func temperature(q *bench.Question) string {
	if q.InFahrenheit() {
		return fmt.Sprintf("%s (%s)", quantity.Format(q.TempK, quantity.Temperature, "°F", 3), quantity.FormatTemperature(q.TempK))
	}
	return quantity.FormatTemperature(q.TempK)
}

const resultIndent, topicWidth = 3, 12

// topic prints a paragraph beside its short heading.
func (p *page) topic(heading, format string, args ...any) {
	text := wrapped(p.both(fmt.Sprintf(format, args...)), width-resultIndent-topicWidth)
	for i, s := range text {
		if i > 0 {
			heading = ""
		}
		p.line(strings.Repeat(" ", resultIndent) + fmt.Sprintf("%-*s", topicWidth, heading) + s)
	}
}

func (p *page) stepResult(a *bench.Answer) {
	q := a.Question
	p.topic("In", "%s", inUnits(q, q.Water)+freeWater(q))
	p.topic("Out", "%s", inUnits(q, a.Out.Water()))
	if a.Spans() {
		p.topic("Between", "%s and %s, with all of these at their good or at their bad ends: %s",
			quantity.FormatWater(a.Low), quantity.FormatWater(a.High), strings.Join(a.Bands, "; "))
	} else if len(a.Bands) > 0 {
		p.topic("Between", "%s at both ends of %s", quantity.FormatWater(a.Out.Water()), strings.Join(a.Bands, "; "))
	} else if a.Why != steps.AtTarget {
		p.topic("Between", "no band is known")
	}
	p.topic("Floor", "%s", floor(a))
	p.topic("Stops", "%s", whyItStops(&a.Outcome))
	if a.RuledBy != "" && a.RuledBy != a.WhyText {
		p.topic("Turns on", "%s", a.RuledBy)
	}
}

// floor of a step; an empty sorbent has none that matters.
func floor(a *bench.Answer) string {
	if q := a.Question; q.Agent != nil && q.Agent.Isotherm != nil && q.Activation.KgPerKg == 0 {
		return "none: the sorbent is taken to be empty"
	}
	if math.IsNaN(a.Floor) {
		return "none was met"
	}
	return withPlace(quantity.FormatWater(a.Floor), a.FloorOf)
}

// withPlace adds to a floor what it is the floor of, where that is not plain.
func withPlace(floor, of string) string {
	if of == "" {
		return floor
	}
	return floor + ", of " + of
}

func freeWater(q *bench.Question) string {
	if q.FreeWaterM3 == 0 {
		return ""
	}
	return fmt.Sprintf(", and %s of free water beside it", quantity.FormatVolume(q.FreeWaterM3))
}

// reasoned is a text that begins with the word of its reason.
var reasoned = regexp.MustCompile("^[a-z ]+: ")

func whyItStops(o *steps.Outcome) string {
	if reasoned.MatchString(o.WhyText) {
		return o.WhyText
	}
	return string(o.Why) + ": " + o.WhyText
}

// inUnits gives a water content in the units of a bench.
func inUnits(q *bench.Question, water float64) string {
	kgPerM3 := q.KgPerM3(water)
	parts := []string{quantity.FormatWater(water)}
	if water >= 1e-3 {
		parts = append(parts, quantity.Format(water, quantity.WaterContent, "% m/m", 3))
	}
	return strings.Join(append(parts, quantity.FormatByVolume(water, kgPerM3), quantity.FormatMolar(water, kgPerM3)), " = ")
}

// sizes shows the dose for each of the times that people plan with; of several
// charges each has the time to itself.
func (p *page) sizes(all []steps.SoakSize, charges int) {
	if len(all) == 0 {
		return
	}
	heading := "Sizes for the times that people plan with:"
	if charges > 1 {
		heading = fmt.Sprintf("Sizes of %d charges together, each left for the time:", charges)
	}
	p.heading(heading)
	rows := make([][]string, len(all))
	for i, s := range all {
		rows[i] = []string{
			quantity.Significant(s.Hours, 3), quantity.Significant(s.CapacityGrams, 3), quantity.Significant(s.SpeedGrams, 3),
			quantity.Significant(s.DoseGrams, 3), s.Ruling, mgKg(s.Reached), "",
		}
		if !s.Enough {
			rows[i][4], rows[i][6] = "none helps", s.Advice
		}
	}
	p.table([]column{{"Hours", true, 0}, {"Capacity\ng", true, 0}, {"Speed\ng", true, 0}, {"Charge\ng", true, 0}, {"What rules", false, 20}, {"Reached\nmg/kg", true, 0}, {"", false, 30}}, rows)
}

func (p *page) advice(all []bench.Advice) {
	if len(all) == 0 {
		return
	}
	p.heading("At the bench:")
	last := ""
	for _, a := range all {
		topic := a.Topic
		if topic == last {
			topic = ""
		}
		last = a.Topic
		p.topic("  "+topic, "%s", a.Text)
	}
}

func (p *page) figures(o *steps.Outcome) {
	var rows [][]string
	for _, f := range o.Figures {
		value, unit := smaller(f)
		if text := quantity.Significant(value, 3); text != quantity.Unknown {
			rows = append(rows, []string{f.Name, text, unit})
			if p.fahrenheit && unit == "°C" {
				rows = append(rows, []string{"", inFahrenheit(value), "°F"})
			}
		}
	}
	if len(rows) == 0 {
		return
	}
	p.heading("Figures:")
	p.table([]column{{"Figure", false, 60}, {"Value", true, 0}, {"Unit", false, 0}}, rows)
}

// smaller is a figure in a smaller unit where it is far below its own.
func smaller(f steps.Figure) (value float64, unit string) {
	if unit, known := map[string]string{"L": "mL", "kg": "g"}[f.Unit]; known && f.Value > 0 && f.Value < 0.01 {
		return 1e3 * f.Value, unit
	}
	return f.Value, f.Unit
}

// basis lists the numbers that the answer rests on, each with its grade.
func (p *page) basis(all []bench.Basis) {
	p.heading("Rests on:")
	for _, b := range all {
		text := b.What
		if b.Value != "" {
			text += ": " + b.Value
		}
		if b.Note != "" {
			text += " (" + b.Note + ")"
		}
		p.say(5, 4, "%s [%s, %s%s]", text, b.Source, b.Confidence, ownData(b.Origin))
	}
}

func ownData(o catalog.Origin) string {
	if o.Own {
		return ", own data"
	}
	return ""
}

func (p *page) stepCautions(all []catalog.Caution) {
	p.heading("Cautions:")
	for _, c := range byLevel(all) {
		p.say(5, 4, "%s, %s: %s [%s, %s]", c.Level, c.Code, p.both(c.Text), c.Source, c.Confidence)
	}
}

// byLevel are cautions with the gravest first.
func byLevel(all []catalog.Caution) []catalog.Caution {
	sorted := slices.Clone(all)
	slices.SortStableFunc(sorted, func(a, b catalog.Caution) int {
		return slices.Index(levels, a.Level) - slices.Index(levels, b.Level)
	})
	return sorted
}
