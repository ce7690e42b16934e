package report

import (
	"io"
	"math"

	"parch/internal/proof"
	"parch/internal/quantity"
)

type proofOut struct {
	CatalogDate string        `json:"catalog_date"`
	Rows        []proofRowOut `json:"rows"`
	Kinds       []tallyOut    `json:"kinds"`
	Quantities  []tallyOut    `json:"quantities"`
	Excused     number        `json:"excused_percent"`
	OfPublished number        `json:"excused_percent_of_published"`
	Failed      int           `json:"failed"`
}

type proofRowOut struct {
	Quantity    string  `json:"quantity"`
	Subject     string  `json:"subject"`
	Partner     *string `json:"partner"`
	Temperature number  `json:"temperature_c"`
	PressureKPa number  `json:"pressure_kpa"`
	Condition   *string `json:"condition"`
	Unit        string  `json:"unit"`
	Published   number  `json:"published"`
	Computed    number  `json:"computed"`
	Ratio       number  `json:"ratio"`
	Deviation   number  `json:"deviation"`
	Limit       number  `json:"limit"`
	LimitUnit   string  `json:"limit_unit"`
	Kind        string  `json:"kind"`
	Confidence  string  `json:"confidence"`
	Verdict     string  `json:"verdict"`
	WithinLimit bool    `json:"within_limit"`
	Reason      *string `json:"reason"`
	ExcusedTo   number  `json:"excused_to"`
	NotComputed *string `json:"not_computed"`
	Source      string  `json:"source"`
	Row         *string `json:"row"`
}

type tallyOut struct {
	Quantity    *string `json:"quantity"`
	Kind        string  `json:"kind"`
	Rows        int     `json:"rows"`
	Within      int     `json:"within_limit"`
	Share       number  `json:"within_limit_percent"`
	Excused     int     `json:"excused"`
	Missed      int     `json:"missed"`
	NotComputed int     `json:"not_computed"`
	LeastRatio  number  `json:"least_ratio"`
	MostRatio   number  `json:"most_ratio"`
}

// ProofJSON writes the proof as one JSON document. A deviation is in the unit of
// its limit: per cent of the published value, a factor, or a difference.
func ProofJSON(w io.Writer, r *proof.Result, catalogDate string) error {
	all, published := r.ExcusedShare()
	out := proofOut{CatalogDate: catalogDate, Excused: number(100 * all), OfPublished: number(100 * published), Failed: len(r.Failures()), Rows: make([]proofRowOut, len(r.Rows))}
	for i := range r.Rows {
		out.Rows[i] = showProofRow(&r.Rows[i])
	}
	out.Kinds, out.Quantities = showTallies(r.Kinds), showTallies(r.Quantities)
	return writeJSON(w, out)
}

func showProofRow(row *proof.Row) proofRowOut {
	out := proofRowOut{
		Quantity: row.Quantity, Subject: row.Subject, Partner: known(row.Partner), Condition: known(row.Condition),
		Temperature: number(math.NaN()), PressureKPa: number(math.NaN()), ExcusedTo: number(math.NaN()), Unit: row.Unit,
		Published: number(row.Published), Computed: number(row.Computed), Ratio: number(row.Ratio), Deviation: number(row.Deviation),
		Limit: number(row.Limit), LimitUnit: row.LimitUnit, Kind: string(row.Kind), Confidence: string(row.Confidence),
		Verdict: string(row.Verdict), WithinLimit: row.Within, Reason: known(row.Reason), NotComputed: known(row.Trouble),
		Source: row.Source, Row: known(row.Place),
	}
	if row.ExcusedTo > 0 {
		out.ExcusedTo = number(row.ExcusedTo)
	}
	if row.TempK > 0 {
		out.Temperature = number(quantity.In(row.TempK, quantity.Temperature, "°C"))
	}
	if row.PressurePa > 0 {
		out.PressureKPa = number(row.PressurePa / 1e3)
	}
	return out
}

func showTallies(all []proof.Tally) []tallyOut {
	out := make([]tallyOut, len(all))
	for i, t := range all {
		out[i] = tallyOut{
			Quantity: known(t.Quantity), Kind: string(t.Kind), Rows: t.Rows, Within: t.Within, Share: number(100 * float64(t.Within) / float64(t.Rows)),
			Excused: t.Excused, Missed: t.Missed, NotComputed: t.NotComputed, LeastRatio: number(t.LeastRatio), MostRatio: number(t.MostRatio),
		}
	}
	return out
}
