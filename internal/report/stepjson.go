package report

import (
	"io"
	"math"

	"parch/catalog"
	"parch/internal/bench"
	"parch/internal/quantity"
)

// stepAloneOut is a step that was asked for by itself: the element of the steps of a
// comparison, and beside it what the text says of it.
type stepAloneOut struct {
	stepOut
	Low         number       `json:"water_out_low_mg_per_kg"` // null where no band is known
	High        number       `json:"water_out_high_mg_per_kg"`
	BandOf      []string     `json:"band_of"` // what was taken to both ends
	InMgPerL    number       `json:"water_in_mg_per_l"`
	InMmolPerL  number       `json:"water_in_mmol_per_l"`
	OutMgPerL   number       `json:"water_out_mg_per_l"`
	OutMmolPerL number       `json:"water_out_mmol_per_l"`
	VolumeL     number       `json:"volume_l"`
	Temperature number       `json:"temperature_c"`
	Why         string       `json:"why"`
	TurnsOn     *string      `json:"turns_on"`
	Missed      *string      `json:"missed"`
	AtStep      number       `json:"hours_attended_at_step"`
	Elsewhere   number       `json:"hours_attended_elsewhere"`
	Sizes       []sizeOut    `json:"sizes"`
	Advice      []adviceOut  `json:"advice"`
	Course      []pointOut   `json:"course"`
	Figures     []figureOut  `json:"figures"`
	ReadAs      []string     `json:"read_as"`
	Warnings    []string     `json:"warnings"`
	RestsOn     []basisOut   `json:"rests_on"`
	Cautions    []citedOut   `json:"cautions"`
	Sources     []sourcesOut `json:"sources"`
}

// sizeOut is the dose for one of the times that people plan with.
type sizeOut struct {
	Hours     number `json:"hours"`
	CapacityG number `json:"capacity_g"`
	SpeedG    number `json:"speed_g"`
	ChargeG   number `json:"charge_g"`
	Rules     string `json:"rules"`
	Reached   number `json:"reached_mg_per_kg"`
	Enough    bool   `json:"enough"`
	Advice    string `json:"advice"`
}

type adviceOut struct {
	Topic string `json:"topic"`
	Text  string `json:"text"`
}

// pointOut is a point of the course. Where OrLess is set, no less water is claimed.
type pointOut struct {
	Hours  number `json:"hours"`
	Water  number `json:"water_mg_per_kg"`
	OrLess bool   `json:"or_less"`
}

type figureOut struct {
	Name  string `json:"name"`
	Value number `json:"value"`
	Unit  string `json:"unit"`
}

// basisOut is a number that the answer rests on, with how far it is to be trusted.
type basisOut struct {
	What       string             `json:"what"`
	Value      string             `json:"value"`
	Note       string             `json:"note"`
	Source     string             `json:"source"`
	Confidence catalog.Confidence `json:"confidence"`
	OwnData    bool               `json:"own_data"`
}

// citedOut is a caution with where it comes from.
type citedOut struct {
	cautionOut
	Source     string             `json:"source"`
	Confidence catalog.Confidence `json:"confidence"`
}

type sourcesOut struct {
	ID        string `json:"id"`
	Reference string `json:"reference"`
}

// StepJSON writes what one step does, as an element of the steps of a comparison with
// all that the text says beside it.
func StepJSON(w io.Writer, a *bench.Answer) error {
	q := a.Question
	out := stepAloneOut{
		stepOut:     showStep(&a.Outcome),
		Low:         number(a.Low * mgPerKg),
		High:        number(a.High * mgPerKg),
		BandOf:      listed(a.Bands),
		VolumeL:     number(q.VolumeM3 * 1e3),
		Temperature: celsius(q.TempK),
		Why:         whyItStops(&a.Outcome),
		TurnsOn:     known(a.RuledBy),
		Missed:      known(a.Missed()),
		AtStep:      number(a.OwnHours),
		Elsewhere:   number(a.HoursAttended - a.OwnHours),
		Sizes:       []sizeOut{},
		Advice:      []adviceOut{},
		Course:      []pointOut{},
		Figures:     []figureOut{},
		ReadAs:      listed(q.Notes),
		Warnings:    listed(a.Warnings),
		RestsOn:     []basisOut{},
		Cautions:    []citedOut{},
		Sources:     []sourcesOut{},
	}
	out.InMgPerL, out.InMmolPerL = byVolume(q, q.Water)
	out.OutMgPerL, out.OutMmolPerL = byVolume(q, a.Out.Water())
	for _, s := range a.Sizes {
		out.Sizes = append(out.Sizes, sizeOut{number(s.Hours), number(s.CapacityGrams), number(s.SpeedGrams), number(s.DoseGrams), s.Ruling, number(s.Reached * mgPerKg), s.Enough, s.Advice})
	}
	for _, x := range a.Advice {
		out.Advice = append(out.Advice, adviceOut{x.Topic, x.Text})
	}
	for _, p := range a.Watch(watched) {
		water, orLess := claimedOf(a, p.Water)
		out.Course = append(out.Course, pointOut{number(p.Hours), number(water * mgPerKg), orLess})
	}
	for _, f := range a.Figures {
		if math.IsNaN(f.Value) || math.IsInf(f.Value, 0) { // does not exist, or never comes
			continue
		}
		out.Figures = append(out.Figures, figureOut{f.Name, number(f.Value), f.Unit})
	}
	for _, b := range a.Basis {
		out.RestsOn = append(out.RestsOn, basisOut{b.What, b.Value, b.Note, b.Source, b.Confidence, b.Own})
	}
	for _, c := range byLevel(a.Cautions) {
		out.Cautions = append(out.Cautions, citedOut{cautionOut{c.Code, c.Level, c.Text}, c.Source, c.Confidence})
	}
	for _, s := range a.Sources {
		out.Sources = append(out.Sources, sourcesOut{s.ID, s.Reference})
	}
	return writeJSON(w, out)
}

// byVolume is a water content (kg/kg) in mg/L and in mmol/L.
func byVolume(q *bench.Question, water float64) (mgPerL, mmolPerL number) {
	kgPerM3 := q.KgPerM3(water)
	return number(water * kgPerM3 * 1e3), number(quantity.MillimolePerLitre(water, kgPerM3))
}

// listed is never null.
func listed(texts []string) []string { return append([]string{}, texts...) }
