package job

import (
	"errors"

	"parch/internal/document"
	"parch/internal/history"
	"parch/internal/quantity"
)

// zeolite is the sorbent that the catalog's histories were found on, and for which a
// history is told. What handling and standing put back on another goes by its own isotherm.
const zeolite = "sieve-3a"

// history reads how the sieve was activated and kept: see history.Read. It becomes the
// water that the sieve still holds.
func (r *reader) history(lot *document.Node, n *document.Node, out *Lot) {
	if n == nil {
		r.usualHistory(lot, out)
		return
	}
	text := n.Text()
	if text == "" {
		return
	}
	told, err := history.Read(text, r.cat, r.storeroom(zeolite))
	var m *history.Mistake
	if errors.As(err, &m) {
		n.Fail("%s", m.Error())
		return
	}
	r.take(told, out)
	switch {
	case told.Stated:
		r.note(n, "the sieve is taken to hold %s as stated; it is not checked", quantity.Format(told.KgPerKg, quantity.MassRatio, "g/100 g", 3))
	case told.Computed():
		out.SieveTreatment = text
		out.ResidualBand = &ResidualBand{Low: told.Low / told.KgPerKg, High: told.High / told.KgPerKg}
		out.OtherResiduals = r.others(text, told.KgPerKg)
		r.note(n, "the sieve is taken to hold %s: %s; another sorbent what its own isotherm says", quantity.Format(told.KgPerKg, quantity.MassRatio, "g/100 g", 3), told.Note)
	case told.Note != "":
		r.note(n, "%s", told.Note)
	}
	if since := told.Since(); since != "" {
		r.note(n, "%s", since)
	}
}

// others are what the other sorbents hold after a history that is added up, as shares of
// what the zeolite holds (kg/kg).
func (r *reader) others(text string, zeoliteKgPerKg float64) map[string]float64 {
	shares := map[string]float64{}
	for key, a := range r.cat.Agents {
		if a.Isotherm == nil || key == zeolite {
			continue
		}
		if told, err := history.Read(text, r.cat, r.storeroom(key)); err == nil {
			shares[key] = told.KgPerKg / zeoliteKgPerKg
		}
	}
	return shares
}

// usualHistory is the catalog's hottest activation, which is said.
func (r *reader) usualHistory(lot *document.Node, out *Lot) {
	curve := history.Activations(r.cat.Histories)
	if len(curve) == 0 {
		r.problems.Add(0, "sieve history is not given, and the catalog has none")
		return
	}
	usual := curve[len(curve)-1]
	r.take(history.Of(r.cat, usual), out)
	r.job.Defaults = append(r.job.Defaults, Default{
		Key: lot.Path() + ".sieve history", Text: usual.Text, Source: usual.ResidualKgPerKg.Source,
		Confidence: string(usual.ResidualKgPerKg.Confidence), Date: r.cat.Date,
	})
}

func (r *reader) take(told history.Told, out *Lot) {
	out.SieveHistory, out.SieveHistoryK, out.ResidualLoading, out.ResidualStated = told.Key, told.OvenK, told.KgPerKg, told.Stated
}

// storeroom is the room of the site, which a sorbent took its water from. A room that is
// wrong is told at its own place.
func (r *reader) storeroom(sorbent string) history.Room {
	room := history.Room{TempK: r.job.Site.RoomK, Loading: func(float64, float64) float64 { return 0 }}
	if room.TempK <= 0 {
		room.TempK = zeroCelsius + 20
	}
	if water := r.cat.Solvents["water"]; water != nil {
		room.WaterPa = r.job.Site.Humidity * water.Pure.VapourPressurePa.At(room.TempK)
	}
	if a := r.cat.Agents[sorbent]; a != nil && a.Isotherm != nil {
		room.Loading = a.Isotherm.LoadingKgPerKg
	}
	return room
}
