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

// NewBook returns the prices of the catalog overlaid by those of the job; of
// several packs the smallest order counts until Justified is asked. A price of
// the catalog is indicative. It is converted at the job's dated rate where there
// is one; else it stands at par, which its note says, or is left out where the
// job's currency is none of job.Currencies. All prices that cannot be used are
// reported at once.
func NewBook(cat *catalog.Catalog, j *job.Job) (Book, error) {
	book := make(Book, len(cat.Prices)+len(j.Prices))
	var problems []error
	for _, item := range slices.Sorted(maps.Keys(cat.Prices)) {
		price, ok, err := defaultPrice(cat, cat.Prices[item], j)
		if err != nil {
			problems = append(problems, err)
		} else if ok {
			book[item] = price
		}
	}
	reference := ReferenceDate(cat, j)
	own := byItem(j.Prices)
	for _, item := range slices.Sorted(maps.Keys(own)) {
		offers := own[item]
		for _, own := range offers {
			if own.PerUnit.IsNegative() {
				problems = append(problems, fmt.Errorf("price of %s is negative: %s", own.Item, own.PerUnit))
			}
		}
		book[item] = ownPrice(cat, offers, j, reference)
	}
	return book, errors.Join(problems...)
}

func byItem(prices []job.Price) map[string][]job.Price {
	offers := map[string][]job.Price{}
	for _, p := range prices {
		offers[p.Item] = append(offers[p.Item], p)
	}
	return offers
}

func defaultPrice(cat *catalog.Catalog, p catalog.Price, j *job.Job) (price Price, ok bool, err error) {
	into, note, ok := intoCurrency(p, j)
	if !ok {
		return Price{}, false, checkAmount(p)
	}
	packs, err := defaultPacks(p, into, note)
	if err != nil {
		return Price{}, false, err
	}
	price = Price{
		Item:       p.Item,
		Label:      p.Label,
		Unit:       p.Unit,
		Source:     p.Source,
		SourceText: cat.Sources[p.Source].Reference,
		Confidence: string(p.Confidence),
		Indicative: true,
	}
	if p.Own { // as good as a price of the job
		price.Own, price.Indicative = true, false
		price.SourceText = "own data: " + price.SourceText
		for i := range packs {
			packs[i].Flag = age(p.Date, "", ReferenceDate(cat, j))
		}
	}
	price.Packs = packs
	return price.from(chosenPack(packs, decimal.Zero)), true, nil
}

// defaultPacks are the sizes that the catalog knows for an item, or any amount.
func defaultPacks(p catalog.Price, into decimal.Decimal, note string) ([]Pack, error) {
	sizes := p.Packs
	if len(sizes) == 0 {
		sizes = []catalog.PackSize{{Size: "0", Amount: p.Amount, Low: p.Low, High: p.High}}
	}
	packs := make([]Pack, len(sizes))
	for i, one := range sizes {
		size, err := decimal.NewFromString(one.Size)
		if err != nil || size.IsNegative() {
			return nil, fmt.Errorf("a pack of %s in the catalog has no size: %q", p.Item, one.Size)
		}
		perUnit, err := decimal.NewFromString(one.Amount)
		if err != nil || perUnit.IsNegative() {
			return nil, fmt.Errorf("price of %s in the catalog is not an amount: %q", p.Item, one.Amount)
		}
		perUnit = perUnit.Mul(into)
		packs[i] = Pack{Size: size, PerUnit: perUnit, Price: perUnit.Mul(size), Low: bound(one.Low, into), High: bound(one.High, into),
			Date: p.Date, Minimum: 1, LeadDays: -1, Flag: Indicative, Note: note}
		if packs[i].AnyAmount() {
			packs[i].Price = perUnit
		}
	}
	return packs, nil
}

func checkAmount(p catalog.Price) error {
	if d, err := decimal.NewFromString(p.Amount); err != nil || d.IsNegative() {
		return fmt.Errorf("price of %s in the catalog is not an amount: %q", p.Item, p.Amount)
	}
	return nil
}

// bound is an end of a band, zero where there is none.
func bound(amount string, into decimal.Decimal) decimal.Decimal {
	d, err := decimal.NewFromString(amount)
	if err != nil {
		return decimal.Zero
	}
	return d.Mul(into)
}

// intoCurrency is the factor that brings a price of the catalog into the currency
// of the job.
func intoCurrency(p catalog.Price, j *job.Job) (factor decimal.Decimal, note string, ok bool) {
	one := decimal.NewFromInt(1)
	if p.Currency == "" || p.Currency == j.Currency {
		return one, p.Note, true
	}
	for _, rate := range j.Rates {
		if rate.From == p.Currency {
			return rate.PerUnit, join(p.Note, fmt.Sprintf("published in %s, at %s %s of %s", p.Currency, rate.PerUnit, j.Currency, rate.Date)), true
		}
	}
	if slices.Contains(job.Currencies, j.Currency) && slices.Contains(job.Currencies, p.Currency) {
		return one, join(p.Note, fmt.Sprintf("published in %s, used at par in %s", p.Currency, j.Currency)), true
	}
	return one, "", false
}

func ownPrice(cat *catalog.Catalog, offers []job.Price, j *job.Job, reference string) Price {
	first := offers[0]
	price := Price{
		Item:       first.Item,
		Label:      label(cat, first.Item),
		Unit:       first.Unit,
		Own:        true,
		Source:     OwnSource,
		SourceText: "the job file",
		Confidence: "own",
	}
	if j.PriceFile != "" && !isRate(first) {
		price.SourceText = j.PriceFile
	}
	if j.Invented {
		price.Confidence = string(catalog.Invented)
	}
	for _, own := range offers {
		price.Packs = append(price.Packs, ownPack(own, reference))
	}
	slices.SortStableFunc(price.Packs, bySmallestOrder)
	price = price.from(chosenPack(price.Packs, decimal.Zero))
	if isRate(first) && price.Flag == Undated {
		price.Flag = NoFlag // a rate of the site is as new as the job
	}
	return price
}

// isRate tells the rates of the site from what is bought in packs.
func isRate(p job.Price) bool {
	return p.PackSize.IsZero() && p.Date == "" && slices.Contains([]string{"technician", "electricity", "cooling-water", "loop-cooling"}, p.Item)
}

var extraLabels = map[string]string{
	"waste-container": "waste container with its collection", "waste-minimum": "least charge of a waste collection",
	"loop-cooling": "heat taken by the cooling loop", "chiller": "chiller",
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
	if text, ok := extraLabels[item]; ok {
		return text
	}
	return item
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}
