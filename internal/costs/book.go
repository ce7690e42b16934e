package costs

import (
	"errors"
	"fmt"
	"maps"
	"slices"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/job"
)

// OwnSource is the source id of a price that the job gives.
const OwnSource = "job"

// NewBook returns the prices of the catalog overlaid by those of the job. The
// catalog's prices are indicative and stand at par in the currency of the job:
// no rate of exchange is applied, and the note of such a price says so. All
// prices that cannot be used are reported at once.
func NewBook(cat *catalog.Catalog, j *job.Job) (Book, error) {
	book := make(Book, len(cat.Prices)+len(j.Prices))
	var problems []error
	for _, item := range slices.Sorted(maps.Keys(cat.Prices)) {
		price, err := defaultPrice(cat, cat.Prices[item], j.Currency)
		if err != nil {
			problems = append(problems, err)
			continue
		}
		book[item] = price
	}
	for _, own := range j.Prices {
		if own.PerUnit.IsNegative() {
			problems = append(problems, fmt.Errorf("price of %s is negative: %s", own.Item, own.PerUnit))
			continue
		}
		book[own.Item] = ownPrice(cat, own, j.Invented)
	}
	return book, errors.Join(problems...)
}

func defaultPrice(cat *catalog.Catalog, p catalog.Price, currency string) (Price, error) {
	perUnit, err := decimal.NewFromString(p.Amount)
	if err != nil || perUnit.IsNegative() {
		return Price{}, fmt.Errorf("price of %s in the catalog is not an amount: %q", p.Item, p.Amount)
	}
	note := p.Note
	if p.Currency != "" && p.Currency != currency {
		note = join(note, fmt.Sprintf("published in %s, used at par in %s", p.Currency, currency))
	}
	return Price{
		Item:       p.Item,
		Label:      p.Label,
		Unit:       p.Unit,
		PerUnit:    perUnit,
		Date:       p.Date,
		Source:     p.Source,
		SourceText: cat.Sources[p.Source].Reference,
		Confidence: string(p.Confidence),
		Indicative: true,
		Note:       note,
	}, nil
}

func ownPrice(cat *catalog.Catalog, p job.Price, invented bool) Price {
	price := Price{
		Item:       p.Item,
		Label:      label(cat, p.Item),
		Unit:       p.Unit,
		PerUnit:    p.PerUnit,
		Own:        true,
		Date:       p.Date,
		Source:     OwnSource,
		SourceText: "the job file",
		Confidence: "own",
	}
	if p.PackSize > 0 {
		price.Note = fmt.Sprintf("from a pack of %g %s", p.PackSize, p.Unit)
	}
	if invented {
		price.Confidence = string(catalog.Invented)
		price.Note = join(price.Note, "invented for demonstration")
	}
	return price
}

// label names an item for the reader.
func label(cat *catalog.Catalog, item string) string {
	if p, ok := cat.Prices[item]; ok && p.Label != "" {
		return p.Label
	}
	if a, ok := cat.Agents[item]; ok {
		return a.Name
	}
	if a, ok := cat.Apparatus[item]; ok {
		return a.Name
	}
	if s, ok := cat.Solvents[item]; ok {
		return s.Name
	}
	return item
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}
