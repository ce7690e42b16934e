package doubt

import (
	"maps"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/routes"
)

// Draw is draw i as a whole: what the full model takes to run a plan in it. Inputs
// that no plan has asked for yet stay as planned.
func (l *Lot) Draw(i int) (routes.Drawn, costs.Book) {
	d := l.Case.Planned()
	read := func(name string, into *float64) {
		if c, ok := l.columns[name]; ok {
			*into = c[i]
		}
	}
	read(l.pair().Name, &d.PairFactor)
	read(l.trend().Name, &d.PairTrend)
	read(l.water().Name, &d.Water)
	read(l.residual().Name, &d.ResidualKgPerKg)
	read(nameStill, &d.StillRate)
	read(nameStirred, &d.StirredRate)
	read(nameColumn, &d.ColumnRate)
	read(nameSalt, &d.SaltLeft)
	d.Loading, d.Reactive, d.Practice = map[string]float64{}, map[string]float64{}, map[string]float64{}
	for key, a := range l.Case.Catalog.Agents {
		for name, into := range map[string]map[string]float64{nameLoading + a.Name: d.Loading, nameReactive(a.Name): d.Reactive} {
			if c, ok := l.columns[name]; ok {
				into[key] = c[i]
			}
		}
	}
	for key, words := range practiceWords {
		if c := l.Column(words); c != nil {
			d.Practice[key] = c[i]
		}
	}
	book := maps.Clone(l.Book)
	for item, p := range book {
		if c := l.Column(namePrice + p.Label); c != nil {
			p.PerUnit = p.PerUnit.Mul(decimal.NewFromFloat(c[i]))
			book[item] = p
		}
	}
	return d, book
}
