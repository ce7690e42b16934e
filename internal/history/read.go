package history

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

// Told is a history as it was read, and the water that the sieve still holds.
type Told struct {
	Key       string  // of the catalog's history, or ""
	Text      string  // in words
	OvenK     float64 // 0 where it saw no oven
	KgPerKg   float64
	Low, High float64 // NaN where no band is known
	Note      string  // how it came about where the catalog does not have it
	Origin    catalog.Origin
	Stated    bool             // by the owner of the sorbent
	Care      Activation       // what was done after the oven, where the loading was computed from it
	Oven      quantity.Reading // as typed; empty where no temperature was
}

// Computed reports whether the loading was worked out from the isotherm, with what
// handling and standing are assumed to add.
func (t Told) Computed() bool { return t.Care != Activation{} }

// Room is where the sieve was kept, and the isotherm that it follows.
type Room struct {
	TempK, WaterPa float64
	Loading        func(waterPa, tK float64) float64 // kg/kg
}

// Mistake is a history that cannot be taken, with what is allowed.
type Mistake struct{ Message, Hint string }

func (m *Mistake) Error() string {
	if m.Hint == "" {
		return m.Message
	}
	return m.Message + "; " + m.Hint
}

func mistake(text, format string, args ...any) *Mistake {
	return &Mistake{Message: quantity.Quote(text) + fmt.Sprintf(format, args...)}
}

// Usual is the history that is taken where none is given.
const Usual = "furnace-300"

// Read reads a history: a key of the catalog, what the sieve is stated to hold, or
// the temperature of the oven with what was done after it. The error is a Mistake.
func Read(text string, c *catalog.Catalog, room Room) (Told, error) {
	if stated, ok, err := StatedResidual(text); ok {
		return ofOwner(text, stated, err)
	}
	for _, h := range c.Histories {
		if strings.EqualFold(h.Key, strings.Join(strings.Fields(text), "-")) {
			return Of(c, h), nil
		}
	}
	oven, rest, err := leadingTemperature(text)
	if err != nil {
		m := mistake(text, " is not a history known here")
		m.Hint = `write the oven's temperature ("300 C", "300 C closed hot", "250 C, closed hot, 30 d", "200 C, vacuum 1 hPa"), what the sieve holds ("residual 1.5 g/100 g") or one of: ` + strings.Join(keys(c), ", ")
		return Told{}, m
	}
	care, err := aftercare(rest)
	if err != nil {
		m := mistake(text, ": %s", err)
		m.Hint = `after the temperature may stand: closed hot, left open, 30 d (days since), vacuum 1 hPa`
		return Told{}, m
	}
	told, err := fromOven(c, text, oven.SI, care, room)
	told.Oven = oven
	return told, err
}

func keys(c *catalog.Catalog) (all []string) {
	for _, h := range c.Histories {
		all = append(all, h.Key)
	}
	return all
}

// Of is a history of the catalog.
func Of(c *catalog.Catalog, h catalog.History) Told {
	t := Told{Key: h.Key, Text: h.Text, OvenK: h.TemperatureK, KgPerKg: h.ResidualKgPerKg.SI, Origin: h.ResidualKgPerKg.Origin}
	t.Low, t.High = band(c, t.KgPerKg)
	if h.ResidualKgPerKg.Banded() {
		t.Low, t.High = h.ResidualKgPerKg.Low, h.ResidualKgPerKg.High
	}
	return t
}

// band is that of a history without one of its own.
func band(c *catalog.Catalog, kgPerKg float64) (low, high float64) {
	factor := c.Doubts[catalog.DoubtResidual].SI
	return kgPerKg / factor, kgPerKg * factor
}

// ofOwner takes what the owner of the sieve says that it holds.
func ofOwner(text string, s Stated, err error) (Told, error) {
	if err != nil {
		return Told{}, &Mistake{quantity.Quote(text) + ": " + err.Error(), `write it like "residual 1.5 g/100 g" or "residual 1.5 g/100 g, 300 °C"`}
	}
	return Told{
		Stated: true, Text: "residual loading as stated", OvenK: s.OvenK, KgPerKg: s.KgPerKg, Low: math.NaN(), High: math.NaN(),
		Origin: catalog.Origin{Source: "as stated", Confidence: catalog.Assumption, Note: "not checked here"},
	}, nil
}

// fromOven takes the catalog's figure for a plain activation, or one that was
// closed hot, where it has one; else the isotherm at the oven and what handling
// and time put back.
func fromOven(c *catalog.Catalog, text string, ovenK float64, care Activation, room Room) (Told, error) {
	if (care == Activation{}) {
		return plain(c, text, ovenK)
	}
	if (care == Activation{ClosedHot: true}) {
		if i := slices.IndexFunc(c.Histories, func(h catalog.History) bool {
			return math.Abs(h.TemperatureK-ovenK) < 1e-6 && strings.HasSuffix(h.Key, "-closed")
		}); i >= 0 {
			return Of(c, c.Histories[i]), nil
		}
	}
	return computed(c, text, ovenK, care, room)
}

// plain is an activation with ordinary handling: of the catalog, or between two of it.
func plain(c *catalog.Catalog, text string, ovenK float64) (Told, error) {
	kgPerKg, key, lowK, highK, ok := ActivatedAt(c.Histories, ovenK)
	if !ok {
		return Told{}, mistake(text, " is not possible here; allowed: %s to %s, where there are data", quantity.FormatTemperature(lowK), quantity.FormatTemperature(highK))
	}
	for _, h := range c.Histories {
		if h.Key == key {
			return Of(c, h), nil
		}
	}
	t := Told{Text: quantity.FormatTemperature(ovenK) + " oven", OvenK: ovenK, KgPerKg: kgPerKg}
	t.Low, t.High = band(c, kgPerKg)
	t.Note = fmt.Sprintf("what the sieve still holds, %s, is interpolated between the catalog's activation temperatures", quantity.Format(kgPerKg, quantity.MassRatio, "g/100 g", 3))
	t.Origin = catalog.Origin{Source: "memory", Confidence: catalog.Memory, Note: "between figures from memory"}
	return t, nil
}

// computed adds the history up from the isotherm.
func computed(c *catalog.Catalog, text string, ovenK float64, care Activation, room Room) (Told, error) {
	care.OvenK, care.RoomK, care.RoomWaterPa = ovenK, room.TempK, room.WaterPa
	left, err := ResidualLoading(room.Loading, care, DefaultPickup)
	if err != nil {
		return Told{}, mistake(text, ": %s", err)
	}
	t := Told{
		Text: text, OvenK: ovenK, KgPerKg: left.KgPerKg, Low: left.Low, High: left.High, Note: strings.Join(left.Notes, "; "), Care: care,
		Origin: catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Note: "handling and standing are assumed"},
	}
	return noDrierThanFresh(c, t), nil
}

// noDrierThanFresh: what has stood since an oven in room air holds no less than the
// catalog gives for that oven with ordinary handling.
func noDrierThanFresh(c *catalog.Catalog, t Told) Told {
	fresh, _, _, _, ok := ActivatedAt(c.Histories, t.OvenK)
	if !ok || t.Care.ClosedHot || t.Care.VacuumPa > 0 || t.KgPerKg >= fresh {
		return t
	}
	t.KgPerKg, t.High = fresh, math.Max(t.High, fresh)
	t.Note += fmt.Sprintf("; taken as %.2g, which is what the catalog has for that oven without standing", 100*fresh)
	return t
}

// Since tells how a time in a history was read; "" where there is none.
func (t Told) Since() string {
	if t.Care.Days == 0 {
		return ""
	}
	unit := map[bool]string{true: "d", false: "h"}[t.Care.Days >= 1]
	return quantity.Format(t.Care.Days*86400, quantity.Time, unit, 3) + " read as the time since the oven, not the time in it"
}
