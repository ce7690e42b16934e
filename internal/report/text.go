package report

import (
	"fmt"
	"io"
	"math"
	"unicode"
	"unicode/utf8"

	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/study"
)

// Options say what the text mentions besides the report.
type Options struct {
	Workbook string // where the workbook was written, "" for none
	JSON     string // where the JSON was written, "" for none
	CSV      string // the folder where the tables were written, "" for none
	All      bool   // print every route, not only the first ones
}

// Text prints the report for a terminal: for each lot the best route with the
// reason, the ranking, the routes that miss, those not offered, and cautions.
func Text(w io.Writer, r *study.Report, opts Options) error {
	p := &page{w: w, all: opts.All}
	title := r.Job.Title
	if title == "" {
		title = r.Job.File
	}
	p.say(0, 2, "%s", title)
	p.say(0, 2, "parch %s, catalog of %s. %s", r.Version, r.CatalogDate, priceNote(r))
	for i := range r.Lots {
		p.lot(i+1, r, &r.Lots[i])
	}
	p.bookings(r)
	p.buying(r)
	p.doubtful(r)
	p.weak(r.Weak)
	p.notes("Notes on the job", r.Warnings)
	p.files(opts)
	return p.close()
}

func priceNote(r *study.Report) string {
	if r.Job.Invented {
		return fmt.Sprintf("Money in %s. Every price of this job is invented for demonstration; the others are indicative.", r.Job.Currency)
	}
	own, indicative := 0, 0
	for _, price := range r.Book {
		if price.Own {
			own++
		} else if price.Indicative {
			indicative++
		}
	}
	note := fmt.Sprintf("Money in %s.", r.Job.Currency)
	if own > 0 {
		note += " " + count(float64(own), "price", "prices") + " of your own."
	}
	if indicative > 0 {
		note += " " + count(float64(indicative), "indicative price", "indicative prices") + " of the catalog: check before use."
	}
	return note
}

func (p *page) lot(n int, r *study.Report, l *study.Lot) {
	p.line("")
	p.say(0, 3, "%d. %s: %s of %s, %s a year, from %s to %s", n, l.Job.Name, quantity.FormatVolume(l.Job.BatchM3),
		solventName(l), count(l.Job.BatchesPerYear, "batch", "batches"), startWater(&l.Job), quantity.FormatWater(l.Job.Target))
	p.acceptance(l)
	if l.NothingToDo != "" {
		p.say(3, 0, "%s.", sentence(l.NothingToDo))
	}
	if l.NothingToDo == "" || len(l.Routes) > 0 {
		p.verdict(r, l)
		p.ranking(r, l)
		p.missing(l)
		p.nearMisses(l)
		p.breakEvens(l)
		p.front(l)
		p.whatIf(r, l)
	}
	p.excluded(l)
	p.cautions(l)
	p.notes("Warnings", p.lotWarnings(l))
}

// startWater is the water of a lot as delivered, in words.
func startWater(lot *job.Lot) string {
	text := quantity.FormatWater(lot.Water)
	if lot.Saturated {
		text = "saturated (" + text + ")"
	}
	if lot.FreeWaterM3 > 0 {
		text += " with " + quantity.FormatVolume(lot.FreeWaterM3) + " of free water"
	}
	return text
}

func solventName(l *study.Lot) string {
	if l.Solvent != nil && l.Solvent.Name != "" {
		return l.Solvent.Name
	}
	return l.Job.Solvent
}

func (p *page) acceptance(l *study.Lot) {
	switch {
	case l.CannotShow != "":
		p.say(3, 0, "Target %s.", l.CannotShow)
	case !math.IsNaN(l.AcceptAt):
		p.say(3, 0, "Accepted at or below %s: the target less %s, the uncertainty of the mean of %s.",
			quantity.FormatWater(l.AcceptAt), quantity.FormatWater(l.Uncertainty),
			count(float64(l.Injections), "Karl Fischer injection", "Karl Fischer injections"))
	}
}

// sentence begins a text with a capital letter.
func sentence(s string) string {
	r, size := utf8.DecodeRuneInString(s)
	return string(unicode.ToUpper(r)) + s[size:]
}

func count(n float64, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return quantity.Significant(n, 4) + " " + many
}

func (p *page) files(opts Options) {
	if opts == (Options{}) {
		return
	}
	p.line("")
	if opts.Workbook != "" {
		p.line("Workbook: " + opts.Workbook)
	}
	if opts.JSON != "" {
		p.line("JSON:     " + opts.JSON)
	}
	if opts.CSV != "" {
		p.line("Tables:   " + opts.CSV)
	}
}
