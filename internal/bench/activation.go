package bench

import (
	"errors"
	"math"

	"parch/catalog"
	"parch/internal/history"
	"parch/internal/routes"
)

// Activation is the history of a sieve and the water that it still holds.
type Activation struct {
	history.Told
	Borrowed bool // found on zeolites, and the agent is none
}

func noActivation() Activation {
	return Activation{Told: history.Told{Low: math.NaN(), High: math.NaN()}}
}

// activated reads the history: a key of the catalog, or a temperature with what
// was done after it.
func (r *reader) activated() {
	text, ok := r.flags["activated"]
	if !ok {
		text = history.Usual
	}
	told, err := history.Read(text, r.cat, r.room())
	r.askedIn(told.Oven)
	var m *history.Mistake
	if errors.As(err, &m) {
		r.mistake("--activated: "+m.Message, m.Hint)
		return
	}
	if since := told.Since(); since != "" {
		r.q.Notes = append(r.q.Notes, "--activated: "+since)
	}
	r.q.Activation = Activation{Told: told}
	if r.q.Agent.Kind != "sieve" && !told.Stated {
		r.q.Activation.borrow(r.cat.Practice[routes.OxideHistory])
	}
}

// room is where the lot stands, with the isotherm of the agent.
func (r *reader) room() history.Room {
	waterPa := r.cat.Practice["site-humidity"].SI * r.q.water.VapourPressurePa.At(r.q.TempK)
	return history.Room{TempK: r.q.TempK, WaterPa: waterPa, Loading: r.q.Agent.Isotherm.LoadingKgPerKg}
}

// borrow takes over what a zeolite with the history holds, within a band (kg/kg by
// kg/kg).
func (a *Activation) borrow(share catalog.Value) {
	a.Borrowed = true
	a.Text += ", as for a zeolite"
	a.Low, a.High = share.Low*a.KgPerKg, share.High*a.KgPerKg
	a.Origin = catalog.Origin{Source: share.Source, Confidence: share.Confidence, Note: "the figure is for zeolites"}
}
