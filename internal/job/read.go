package job

import (
	"errors"
	"fmt"
	"sort"
	"strings"
	"unicode"
	"unicode/utf8"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/listing"
	"parch/internal/quantity"
)

// Objectives are what a comparison may minimise.
var Objectives = []string{"cost", "time", "waste", "energy"}

// Currencies are those in which the catalog's indicative prices are taken at par.
// In another one an item has only the price that the job gives.
var Currencies = []string{"EUR", "USD", "GBP", "CHF"}

// stepKinds are the steps that a job may exclude.
var stepKinds = []string{"settle", "trap", "forerun", "salt", "soak", "column", "reactive", "buy"}

// assumption is both the source and the confidence of a default that the program
// chooses itself.
const assumption = string(catalog.Assumption)

// Read reads a job file. name is what messages call it. The error lists every
// problem with its line; then there is no job.
//
// A top-level "invented: yes" marks every price of the job as invented, which
// all output then repeats.
func Read(name string, data []byte, cat *catalog.Catalog) (*Job, error) {
	return ReadWith(name, data, cat, nil)
}

// ReadWith is Read for a job that may name a price list: files returns its content.
func ReadWith(name string, data []byte, cat *catalog.Catalog, files func(name string) ([]byte, error)) (*Job, error) {
	root, err := document.Parse(name, data)
	if err != nil {
		return nil, err
	}
	r := &reader{cat: cat, job: &Job{File: name}, problems: root.Problems(), files: files}
	r.whole(root)
	if err := r.err(); err != nil {
		return nil, err
	}
	r.job.Warnings = r.sortedNotes()
	if own := listing.Own(cat); own != "" {
		r.job.Warnings = append([]string{own}, r.job.Warnings...)
	}
	return r.job, nil
}

// reader fills a job and remembers what it had to interpret.
type reader struct {
	cat       *catalog.Catalog
	job       *Job
	problems  *document.Problems
	notes     []note
	byDefault string // follows the currency in a message where the job does not give one
	files     func(name string) ([]byte, error)
	list      *document.Problems // of the price list
	listed    error              // why the price list could not be read
}

// err is what is wrong with the job and with its price list.
func (r *reader) err() error {
	own, list := r.problems.Err(), r.listed
	if r.list != nil {
		list = r.list.Err()
	}
	if own != nil && list != nil {
		return errors.Join(own, list)
	}
	if own != nil {
		return own
	}
	return list
}

type note struct {
	line int
	text string
}

func (r *reader) whole(root *document.Node) {
	f := root.Map("title", "date", "currency", "rates", "objective", "assurance", "catalog", "prices", "site", "equipment", "equipment costing", "interest", "stock", "storage limits", "accept", "exclude", "lots", "invented")
	j := r.job
	j.Invented = f.Get("invented").Bool()
	j.Title = r.orWord(f.Get("title"), "title", "Drying plan", r.label)
	j.Currency = r.orWord(f.Get("currency"), "currency", "EUR", r.currency)
	if !f.Has("currency") {
		r.byDefault = " (by default; \"currency\" is not given)"
	}
	j.Date = f.Get("date").Date()
	r.rates(f.Get("rates"))
	j.Objective = r.orWord(f.Get("objective"), "objective", "cost", r.objective)
	j.Assurance = 0.9
	if n := f.Get("assurance"); n != nil {
		j.Assurance, _ = r.measure(n, quantity.Share, between(0.5, 0.999, "50 % to 99.9 %"))
	} else {
		r.assume("assurance", "90 %")
	}
	r.ownCatalogs(f.Get("catalog"))
	r.site(f.Get("site"))
	r.prices(f.Get("prices"))
	r.equipment(f.Get("equipment"))
	r.writeOff(f)
	r.stock(f.Get("stock"))
	r.storage(f.Get("storage limits"))
	r.accept(f.Get("accept"))
	r.exclude(f.Get("exclude"))
	r.lots(f.Need("lots"))
	r.warnDangerous(f.Get("accept"))
}

// limits are the values that make sense, with the text that says so. The ends
// are allowed, within rounding.
type limits struct {
	low, high float64
	text      string
}

func between(low, high float64, text string) limits { return limits{low, high, text} }

func (l limits) hold(x float64) bool {
	const rounding = 1e-12
	return x >= l.low-rounding*abs(l.low) && x <= l.high+rounding*abs(l.high)
}

func abs(x float64) float64 { return max(x, -x) }

// measure reads a quantity within limits. ok is false where there is none.
func (r *reader) measure(n *document.Node, d quantity.Dimension, l limits) (si float64, ok bool) {
	reading, ok := n.Quantity(d)
	if !ok {
		return 0, false
	}
	if !l.hold(reading.SI) {
		n.Fail("%s is not possible here; allowed: %s", quantity.Quote(n.Text()), l.text)
		return 0, false
	}
	if reading.Note != "" {
		r.note(n, "%s", reading.Note)
	}
	return reading.SI, true
}

// orPractice is measure with a default from the catalog's practice.
func (r *reader) orPractice(n *document.Node, key, practice string, d quantity.Dimension, l limits) float64 {
	if n != nil {
		si, _ := r.measure(n, d, l)
		return si
	}
	v, ok := r.cat.Practice[practice]
	if !ok {
		r.problems.Add(0, "%s is not given, and the catalog has no practice value %q", key, practice)
		return 0
	}
	confidence := string(v.Confidence)
	if v.Own {
		confidence += ", own data"
	}
	r.job.Defaults = append(r.job.Defaults, Default{Key: key, Text: v.Text, Source: v.Source, Confidence: confidence, Date: r.cat.Date})
	return v.SI
}

// orWord reads a word, or takes the program's own default.
func (r *reader) orWord(n *document.Node, key, otherwise string, read func(*document.Node) string) string {
	if n != nil {
		return read(n)
	}
	r.assume(key, otherwise)
	return otherwise
}

// assume records a default that rests on nothing but the program's choice.
func (r *reader) assume(key, text string) {
	r.job.Defaults = append(r.job.Defaults, Default{Key: key, Text: text, Source: assumption, Confidence: assumption, Date: r.cat.Date})
}

// note records how a value was understood.
func (r *reader) note(n *document.Node, format string, args ...any) {
	order := n.Line()
	if n.Problems() != r.problems { // of the price list: after those of the job
		order += 1 << 20
	}
	r.notes = append(r.notes, note{order, n.Where() + ": " + fmt.Sprintf(format, args...)})
}

func (r *reader) sortedNotes() []string {
	sort.SliceStable(r.notes, func(i, j int) bool { return r.notes[i].line < r.notes[j].line })
	var texts []string
	for _, n := range r.notes {
		texts = append(texts, n.text)
	}
	return texts
}

const longestLabel = 80

// label reads a title or a name: it goes into headings and sheets as it is.
func (r *reader) label(n *document.Node) string {
	text := n.Text()
	switch {
	case text == "":
		return ""
	case utf8.RuneCountInString(text) > longestLabel:
		n.Fail("%s has %d characters; at most %d", quantity.Quote(text), utf8.RuneCountInString(text), longestLabel)
	case strings.ContainsFunc(text, func(c rune) bool { return !unicode.IsPrint(c) }):
		n.Fail("%s contains a line break or a character that cannot be printed", quantity.Quote(text))
	case strings.ContainsRune("=+-@", []rune(text)[0]):
		n.Fail("%s begins with %q; in a sheet that would be taken for a formula. Begin with a letter or a digit", quantity.Quote(text), text[:1])
	default:
		return text
	}
	return ""
}
