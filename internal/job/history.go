package job

import (
	"fmt"
	"sort"
	"strings"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/quantity"
)

// history reads how the sieve was activated: a key of the catalog, or the
// temperature of an activation with ordinary handling. Either way it becomes the
// water that the sieve still holds.
func (r *reader) history(lot *document.Node, n *document.Node, out *Lot) {
	curve := activations(r.cat.Histories)
	switch {
	case n == nil && len(curve) == 0:
		r.problems.Add(0, "sieve history is not given, and the catalog has none")
	case n == nil:
		usual := curve[len(curve)-1]
		out.SieveHistory, out.SieveHistoryK, out.ResidualLoading = usual.Key, usual.TemperatureK, usual.ResidualKgPerKg.SI
		r.job.Defaults = append(r.job.Defaults, Default{
			Key: lot.Path() + ".sieve history", Text: usual.Text, Source: usual.ResidualKgPerKg.Source,
			Confidence: string(usual.ResidualKgPerKg.Confidence), Date: r.cat.Date,
		})
	case r.stated(n, out):
	case strings.ContainsAny(firstOf(n.Text()), "0123456789+-.") && len(curve) > 0:
		r.activatedAt(n, curve, out)
	default:
		r.namedHistory(n, out)
	}
}

func firstOf(text string) string { return text[:min(len(text), 1)] }

func (r *reader) namedHistory(n *document.Node, out *Lot) {
	typed := n.Text()
	if typed == "" {
		return
	}
	var keys []string
	for _, h := range r.cat.Histories {
		if strings.EqualFold(h.Key, typed) {
			out.SieveHistory, out.SieveHistoryK, out.ResidualLoading = h.Key, h.TemperatureK, h.ResidualKgPerKg.SI
			return
		}
		keys = append(keys, h.Key)
	}
	n.Fail("%s is not a history known here; give the temperature of the activation (\"300 °C\"), what it holds (\"residual 1.5 g/100 g\") or one of: %s",
		quantity.Quote(typed), strings.Join(keys, ", "))
}

// activatedAt interpolates the residual loading linearly between the catalog's
// activation temperatures, and says so.
func (r *reader) activatedAt(n *document.Node, curve []catalog.History, out *Lot) {
	first, last := curve[0], curve[len(curve)-1]
	text := fmt.Sprintf("%s to %s, where there are data", quantity.FormatTemperature(first.TemperatureK), quantity.FormatTemperature(last.TemperatureK))
	tK, ok := r.measure(n, quantity.Temperature, between(first.TemperatureK, last.TemperatureK, text))
	if !ok {
		return
	}
	out.SieveHistoryK = tK
	at := sort.Search(len(curve), func(i int) bool { return curve[i].TemperatureK >= tK-1e-6 })
	high := curve[min(at, len(curve)-1)]
	if high.TemperatureK-tK < 1e-6 {
		out.SieveHistory, out.ResidualLoading = high.Key, high.ResidualKgPerKg.SI
		return
	}
	low := curve[at-1]
	share := (tK - low.TemperatureK) / (high.TemperatureK - low.TemperatureK)
	out.ResidualLoading = low.ResidualKgPerKg.SI + share*(high.ResidualKgPerKg.SI-low.ResidualKgPerKg.SI)
	r.note(n, "residual water of the sieve, %s, is interpolated between %s and %s",
		quantity.Format(out.ResidualLoading, quantity.MassRatio, "g/100 g", 3),
		quantity.FormatTemperature(low.TemperatureK), quantity.FormatTemperature(high.TemperatureK))
}

// activations sorts the histories that have a temperature. Where two share one,
// that which leaves more water counts: it is the ordinary handling.
func activations(all []catalog.History) []catalog.History {
	var curve []catalog.History
	for _, h := range all {
		if h.TemperatureK > 0 {
			curve = append(curve, h)
		}
	}
	sort.SliceStable(curve, func(i, j int) bool {
		if curve[i].TemperatureK != curve[j].TemperatureK {
			return curve[i].TemperatureK < curve[j].TemperatureK
		}
		return curve[i].ResidualKgPerKg.SI > curve[j].ResidualKgPerKg.SI
	})
	var distinct []catalog.History
	for _, h := range curve {
		if len(distinct) == 0 || distinct[len(distinct)-1].TemperatureK != h.TemperatureK {
			distinct = append(distinct, h)
		}
	}
	return distinct
}
