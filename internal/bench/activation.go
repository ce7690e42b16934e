package bench

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/assay"
	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// Activation is the history of a sieve and the water that it still holds.
type Activation struct {
	Key       string  // of the catalog's history, or ""
	Text      string  // in words
	OvenK     float64 // 0 where it saw no oven
	KgPerKg   float64
	Low, High float64 // NaN where no band is known
	Note      string  // how it came about where the catalog does not have it
	Origin    catalog.Origin
}

func noActivation() Activation { return Activation{Low: math.NaN(), High: math.NaN()} }

func ofHistory(h catalog.History) Activation {
	a := Activation{Key: h.Key, Text: h.Text, OvenK: h.TemperatureK, KgPerKg: h.ResidualKgPerKg.SI, Low: math.NaN(), High: math.NaN(), Origin: h.ResidualKgPerKg.Origin}
	if h.ResidualKgPerKg.Banded() {
		a.Low, a.High = h.ResidualKgPerKg.Low, h.ResidualKgPerKg.High
	}
	return a
}

// usualHistory is taken where none is given.
const usualHistory = "furnace-300"

// activated reads the history: a key of the catalog, or a temperature with what
// was done after it.
func (r *reader) activated() {
	text, ok := r.flags["activated"]
	if !ok {
		text = usualHistory
	}
	for _, h := range r.cat.Histories {
		if strings.EqualFold(h.Key, strings.TrimSpace(text)) {
			r.q.Activation = ofHistory(h)
			return
		}
	}
	if stated, ok, err := job.StatedResidual(text); ok {
		r.statedResidual(stated, err)
		return
	}
	ovenK, rest, err := leadingTemperature(text)
	if err != nil {
		r.mistake(fmt.Sprintf("--activated: %s is not a history known here", quantity.Quote(text)),
			`write the oven's temperature ("300 C", "300 C closed hot", "250 C, closed hot, 30 d", "200 C, vacuum 1 hPa"), what the sieve holds ("residual 1.5 g/100 g") or one of: `+strings.Join(r.historyKeys(), ", "))
		return
	}
	kept, err := aftercare(rest)
	if err != nil {
		r.mistake(fmt.Sprintf("--activated: %s: %s", quantity.Quote(text), err), `after the temperature may stand: closed hot, left open, 30 d (days since), vacuum 1 hPa`)
		return
	}
	r.fromOven(text, ovenK, kept)
}

// statedResidual takes what the owner of the sieve says that it holds.
func (r *reader) statedResidual(stated job.Residual, err error) {
	if err != nil {
		r.mistake("--activated: "+err.Error(), `write it like "residual 1.5 g/100 g" or "residual 1.5 g/100 g, 300 C"`)
		return
	}
	a := noActivation()
	a.Text, a.OvenK, a.KgPerKg = "residual loading as stated", stated.OvenK, stated.KgPerKg
	a.Origin = catalog.Origin{Source: "as stated", Confidence: catalog.Assumption, Note: "not checked here"}
	r.q.Activation = a
}

func (r *reader) historyKeys() (keys []string) {
	for _, h := range r.cat.Histories {
		keys = append(keys, h.Key)
	}
	return keys
}

// leadingTemperature takes the longest beginning of the text that is a temperature.
func leadingTemperature(text string) (tK float64, rest []string, err error) {
	words := strings.Fields(strings.ReplaceAll(text, ",", " "))
	for n := min(3, len(words)); n > 0; n-- {
		reading, err := quantity.Parse(strings.Join(words[:n], " "), quantity.Temperature)
		if err == nil {
			return reading.SI, words[n:], nil
		}
	}
	return 0, nil, fmt.Errorf("no temperature")
}

// aftercare reads what was done with a sieve after the oven.
func aftercare(words []string) (a steps.Activation, err error) {
	rest := strings.ToLower(strings.Join(words, " "))
	for rest != "" {
		before := rest
		for phrase, note := range map[string]func(){
			"closed hot": func() { a.ClosedHot = true }, "closed while hot": func() { a.ClosedHot = true },
			"left open": func() { a.LeftOpen = true },
		} {
			if after, ok := strings.CutPrefix(rest, phrase); ok {
				note()
				rest = strings.TrimSpace(after)
			}
		}
		if after, ok := strings.CutPrefix(rest, "vacuum "); ok {
			if a.VacuumPa, rest, err = leading(after, quantity.Pressure); err != nil {
				return a, err
			}
		} else if days, after, err := leading(rest, quantity.Time); err == nil {
			a.Days, rest = days/86400, after
		}
		if rest == before {
			return a, fmt.Errorf("%s is not understood", quantity.Quote(rest))
		}
	}
	return a, nil
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

// unitCase undoes the lower case of a unit.
func unitCase(words []string, d quantity.Dimension) string {
	text := strings.Join(words, " ")
	for _, unit := range quantity.Units(d) {
		if before, ok := strings.CutSuffix(text, strings.ToLower(unit)); ok && !strings.ContainsAny(before, "abcdefghijklmnopqrstuvwxyz") {
			return before + unit
		}
	}
	return text
}

// fromOven takes the catalog's figure for a plain activation, or one that was
// closed hot, where it has one; else the isotherm at the oven and what handling
// and time put back.
func (r *reader) fromOven(text string, ovenK float64, kept steps.Activation) {
	plain := kept == steps.Activation{}
	if kgPerKg, key, low, high, ok := job.ActivatedAt(r.cat.Histories, ovenK); plain {
		if !ok {
			r.mistake(fmt.Sprintf("--activated: %s is not possible here; allowed: %s to %s, where there are data", quantity.Quote(text), quantity.FormatTemperature(low), quantity.FormatTemperature(high)), "")
			return
		}
		r.interpolated(ovenK, kgPerKg, key)
		return
	}
	if (kept == steps.Activation{ClosedHot: true}) {
		if i := slices.IndexFunc(r.cat.Histories, func(h catalog.History) bool {
			return math.Abs(h.TemperatureK-ovenK) < 1e-6 && strings.HasSuffix(h.Key, "-closed")
		}); i >= 0 {
			r.q.Activation = ofHistory(r.cat.Histories[i])
			return
		}
	}
	r.computed(text, ovenK, kept)
}

func (r *reader) interpolated(ovenK, kgPerKg float64, key string) {
	for _, h := range r.cat.Histories {
		if h.Key == key {
			r.q.Activation = ofHistory(h)
			return
		}
	}
	a := noActivation()
	a.Text, a.OvenK, a.KgPerKg = quantity.FormatTemperature(ovenK)+" oven", ovenK, kgPerKg
	a.Note = fmt.Sprintf("what the sieve still holds, %.2g g/100 g, is interpolated between the catalog's activation temperatures", 100*kgPerKg)
	a.Origin = catalog.Origin{Source: "memory", Confidence: catalog.Memory, Note: "between figures from memory"}
	r.q.Activation = a
}

// computed adds the history up from the agent's isotherm.
func (r *reader) computed(text string, ovenK float64, kept steps.Activation) {
	kept.OvenK, kept.RoomK = ovenK, r.q.TempK
	kept.RoomWaterPa = r.cat.Practice["site-humidity"].SI * assay.SaturationPa(kept.RoomK)
	left, err := steps.ResidualLoading(steps.Sorbent{Loading: r.q.Agent.Isotherm.LoadingKgPerKg}, kept, steps.DefaultPickup)
	if err != nil {
		r.mistake(fmt.Sprintf("--activated: %s: %s", quantity.Quote(text), err), "")
		return
	}
	r.q.Activation = Activation{
		Text: text, OvenK: ovenK, KgPerKg: left.KgPerKg, Low: left.Low, High: left.High, Note: strings.Join(left.Notes, "; "),
		Origin: catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Note: "handling and standing are assumed"},
	}
}
