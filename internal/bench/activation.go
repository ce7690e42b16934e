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
	"parch/internal/routes"
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
	Stated    bool // by the owner of the sorbent
	Borrowed  bool // found on zeolites, and the agent is none
}

func noActivation() Activation { return Activation{Low: math.NaN(), High: math.NaN()} }

func (r *reader) ofHistory(h catalog.History) Activation {
	a := Activation{Key: h.Key, Text: h.Text, OvenK: h.TemperatureK, KgPerKg: h.ResidualKgPerKg.SI, Origin: h.ResidualKgPerKg.Origin}
	a.Low, a.High = r.residualBand(a.KgPerKg)
	if h.ResidualKgPerKg.Banded() {
		a.Low, a.High = h.ResidualKgPerKg.Low, h.ResidualKgPerKg.High
	}
	return a
}

// residualBand is that of a history without a band of its own.
func (r *reader) residualBand(kgPerKg float64) (low, high float64) {
	factor := r.cat.Doubts[catalog.DoubtResidual].SI
	return kgPerKg / factor, kgPerKg * factor
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
	if stated, ok, err := job.StatedResidual(text); ok {
		r.statedResidual(stated, err)
		return
	}
	r.history(text)
	if r.q.Agent.Kind != "sieve" {
		r.q.Activation.borrow(r.cat.Practice[routes.OxideHistory])
	}
}

// borrow takes over what a zeolite with the history holds, within a band (kg/kg by
// kg/kg).
func (a *Activation) borrow(share catalog.Value) {
	a.Borrowed = true
	a.Text += ", as for a zeolite"
	a.Low, a.High = share.Low*a.KgPerKg, share.High*a.KgPerKg
	a.Origin = catalog.Origin{Source: share.Source, Confidence: share.Confidence, Note: "the figure is for zeolites"}
}

func (r *reader) history(text string) {
	for _, h := range r.cat.Histories {
		if strings.EqualFold(h.Key, strings.Join(strings.Fields(text), "-")) {
			r.q.Activation = r.ofHistory(h)
			return
		}
	}
	oven, rest, err := leadingTemperature(text)
	if err != nil {
		r.mistake(fmt.Sprintf("--activated: %s is not a history known here", quantity.Quote(text)),
			`write the oven's temperature ("300 C", "300 C closed hot", "250 C, closed hot, 30 d", "200 C, vacuum 1 hPa"), what the sieve holds ("residual 1.5 g/100 g") or one of: `+strings.Join(r.historyKeys(), ", "))
		return
	}
	r.askedIn(oven)
	kept, err := aftercare(rest)
	if err != nil {
		r.mistake(fmt.Sprintf("--activated: %s: %s", quantity.Quote(text), err), `after the temperature may stand: closed hot, left open, 30 d (days since), vacuum 1 hPa`)
		return
	}
	r.fromOven(text, oven.SI, kept)
}

// statedResidual takes what the owner of the sieve says that it holds.
func (r *reader) statedResidual(stated job.Residual, err error) {
	if err != nil {
		r.mistake("--activated: "+err.Error(), `write it like "residual 1.5 g/100 g" or "residual 1.5 g/100 g, 300 C"`)
		return
	}
	a := noActivation()
	a.Stated, a.Text, a.OvenK, a.KgPerKg = true, "residual loading as stated", stated.OvenK, stated.KgPerKg
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
func aftercare(words []string) (a steps.Activation, err error) {
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
func oneCare(text string, a *steps.Activation) (what, rest string, err error) {
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
			r.q.Activation = r.ofHistory(r.cat.Histories[i])
			return
		}
	}
	r.computed(text, ovenK, kept)
}

func (r *reader) interpolated(ovenK, kgPerKg float64, key string) {
	for _, h := range r.cat.Histories {
		if h.Key == key {
			r.q.Activation = r.ofHistory(h)
			return
		}
	}
	a := Activation{Text: quantity.FormatTemperature(ovenK) + " oven", OvenK: ovenK, KgPerKg: kgPerKg}
	a.Low, a.High = r.residualBand(kgPerKg)
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
	if kept.Days > 0 {
		r.q.Notes = append(r.q.Notes, fmt.Sprintf("--activated: %s read as the time since the oven, not the time in it", quantity.Format(kept.Days*86400, quantity.Time, map[bool]string{true: "d", false: "h"}[kept.Days >= 1], 3)))
	}
	a := Activation{
		Text: text, OvenK: ovenK, KgPerKg: left.KgPerKg, Low: left.Low, High: left.High, Note: strings.Join(left.Notes, "; "),
		Origin: catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Note: "handling and standing are assumed"},
	}
	r.q.Activation = r.noDrierThanFresh(a, kept)
}

// noDrierThanFresh: what has stood since an oven in room air holds no less than the
// catalog gives for that oven with ordinary handling.
func (r *reader) noDrierThanFresh(a Activation, kept steps.Activation) Activation {
	fresh, _, _, _, ok := job.ActivatedAt(r.cat.Histories, a.OvenK)
	if !ok || kept.ClosedHot || kept.VacuumPa > 0 || a.KgPerKg >= fresh {
		return a
	}
	a.KgPerKg, a.High = fresh, math.Max(a.High, fresh)
	a.Note += fmt.Sprintf("; taken as %.2g, which is what the catalog has for that oven without standing", 100*fresh)
	return a
}
