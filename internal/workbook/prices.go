package workbook

import (
	"fmt"

	"parch/catalog"
	"parch/internal/costs"
)

var priceColumns = []column{{name: "Item"}, {name: "What it is"}, {"Price", "1"}, {name: "Unit"}, {name: "Source or note"},
	{"Price in the run", "1"}, {name: "When edited"}, {name: "State"}, {name: "Own or default"}, {name: "Date"}, {name: "Confidence"}, {name: "Mark"}}

const mostMoney = 1e7

func (l *layout) priceList() *grid {
	g := newGrid(sheetPrices, "What things cost. Edit a blue cell and every cost, total and rank follows. Prices are dated; check them before a decision.",
		tabInput, checkCell(), 20, 27, 13.2, 10, 46, 13.2, 14, 15, 9, 11, 12, 17)
	first := g.table(frameRows+2, "Prices, "+l.currency(), priceColumns)
	g.frozenRows = first - 1
	format := l.priceFormat()
	for i, p := range l.prices {
		l.priceRow(g, first+i, p, format)
	}
	l.priceRows = rows{first, first + len(l.prices) - 1}
	l.changedRow(g)
	if l.priceRows.empty() {
		g.put(1, first, text(words, "no prices"))
		return g
	}
	g.boldRows, g.boldColumns = l.priceRows, len(priceColumns)
	unit := l.currency()
	g.limits = append(g.limits, limit{place: fmt.Sprintf("C%d:C%d", first, l.priceRows.last), low: 0, high: mostMoney,
		prompt: "Price per unit, in " + unit + ". Costs, totals and ranks follow.",
		refuse: fmt.Sprintf("A price from 0 to %.0f, in %s per unit.", mostMoney, unit)})
	g.flags = append(g.flags,
		flag{fmt.Sprintf("H%d:H%d", first, l.priceRows.last), fmt.Sprintf("LEN($H%d)>0", first), warn},
		flag{fmt.Sprintf("L%d:L%d", first, l.priceRows.last), fmt.Sprintf("LEN($L%d)>0", first), warn})
	return g
}

func (l *layout) priceRow(g *grid, row int, p costs.Price, format string) {
	unit := l.money(p.Unit)
	value := number(float(p.PerUnit), unit).shown(format)
	g.putRow(row, text(words, p.Item), text(words, p.Label), value.as(input), text(plain, unit), text(words, priceSource(p)),
		value, text(plain, follows),
		cell{look: formula, formula: fmt.Sprintf(`IF(%s=%s,"",%s)`, at(colValue, row), at(colRun, row), at(colAfter, row)), value: ""},
		text(plain, ownOrDefault(p)), text(plain, p.Date), text(words, p.Confidence), text(words, priceMark(p)))
	l.name(priceName(p.Item, p.Unit), sheetPrices, colValue, row)
}

func priceSource(p costs.Price) string {
	source := p.SourceText
	if source == "" {
		source = p.Source
	}
	if p.Note != "" {
		source += "; " + p.Note
	}
	return source
}

func ownOrDefault(p costs.Price) string {
	if p.Own {
		return "own"
	}
	return "default"
}

// priceMark says what must be known before the price is relied upon.
func priceMark(p costs.Price) string {
	switch {
	case p.Confidence == string(catalog.Invented) && p.Flag != costs.NoFlag:
		return "invented, " + string(p.Flag) + ": not a market price"
	case p.Confidence == string(catalog.Invented):
		return "invented: not a market price"
	case p.Indicative:
		return "indicative: check before use"
	case p.Flag != costs.NoFlag:
		return string(p.Flag) + ": check before use"
	}
	return ""
}

func (l *layout) priceFormat() string {
	if l.pricesShown == "" {
		l.pricesShown = exactFormat(each(l.prices, func(p costs.Price) float64 { return float(p.PerUnit) }))
	}
	return l.pricesShown
}

// changedRow counts the inputs and prices that differ from the run, for the
// sheets that hold results of the run.
func (l *layout) changedRow(g *grid) {
	differ := func(sheet string, r rows) string {
		if r.empty() {
			return "0"
		}
		value, run := on(sheet, r.column(colValue)), on(sheet, r.column(colRun))
		return fmt.Sprintf(`SUMPRODUCT((%s<>%s)*(%s<>""))`, value, run, run)
	}
	row := max(l.priceRows.last, l.priceRows.first) + 2
	put := func(row int, name, label string, c cell) {
		g.put(colName, row, text(plain, name))
		g.put(colLabel, row, text(words, label))
		g.put(colValue, row, c)
	}
	put(row, "", "Inputs that differ from the run", whole(differ(sheetInputs, l.inputRows), 0))
	put(row+2, changedName, "Inputs and prices that differ from the run", whole(at(colValue, row)+"+"+differ(sheetPrices, l.priceRows), 0))
	l.name(changedName, sheetPrices, colValue, row+2)
}
