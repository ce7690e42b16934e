package workbook

import (
	"testing"

	"parch/internal/study"
)

// Jobs for what neither the demonstration nor the worked jobs show: carriers; four lots
// with odd names, one of them dry and one out of reach; a currency in which nothing has
// a price; no route at all.
var kindsOfJobs = map[string]string{
	"carriers": `
title: Carriers
exclude: {steps: [buy, soak, column]}
lots:
  - {name: wet spirit, solvent: ethanol, batch: 10 L, batches: 20 /yr, water: 5 %, target: 300 mg/kg}
`,
	"no prices": `
title: No prices
currency: JPY
exclude: {steps: [buy, trap, forerun]}
lots:
  - {name: wet spirit, solvent: ethanol, batch: 10 L, batches: 20 /yr, water: 5 %, target: 300 mg/kg}
`,
	"four lots": `
title: "Four 'lots' & others"
lots:
  - {name: "1+1 <b>\"&P\"", solvent: toluene, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, target: 15 mg/kg}
  - {name: "dry \"already\"", solvent: toluene, batch: 18 L, batches: 4 /yr, water: 10 mg/kg, target: 200 mg/kg}
  - {name: "out of reach", solvent: toluene, batch: 18 L, batches: 4 /yr, water: 480 mg/kg, target: 0.5 mg/kg}
  - {name: "حمض 🧪", solvent: tetrahydrofuran, batch: 10 L, batches: 24 /yr, water: 300 mg/kg, target: 20 mg/kg}
`,
	"two currencies": `
title: Two currencies
date: 2026-12-01
rates: [{from: USD, rate: 0.92, date: 2026-11-01}]
exclude: {steps: [forerun]}
prices:
  - {item: sieve-3a, pack: 25 kg, price: 250 USD, date: 2026-10-01}
  - {item: toluene, pack: 20 L, price: 118 EUR, date: 2026-10-01}
lots:
  - {name: kept open, solvent: toluene, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, target: 30 mg/kg, sieve history: "300 °C, left open 1 h"}
`,
	"nothing left": `
title: Nothing left
exclude: {steps: [soak, column, salt, reactive, buy, trap, forerun, settle]}
lots:
  - {name: refused, solvent: acetone, batch: 10 L, batches: 20 /yr, water: 1 %, target: 300 mg/kg}
`,
}

// kind is a workbook that the rules are held against.
type kind struct {
	name   string
	report *study.Report
	layout *layout
	book   *book
}

var kinds []kind // once they are made; tests of this package run one after the other

// everyKind are workbooks of all kinds: the demonstration, the worked jobs, those above
// and reports made up by hand, of few lots and of many.
func everyKind(t *testing.T) []kind {
	t.Helper()
	if len(kinds) > 0 {
		return kinds
	}
	var list []kind
	add := func(name string, all *study.Report) {
		r := all.Priced() // as the command writes it
		m, err := newModel(r)
		if err != nil {
			t.Fatal(err)
		}
		list = append(list, kind{name, r, lay(m), readBook(t, written(t, r))})
	}
	add("demonstration", demo(t))
	add("made up", synthetic())
	if !testing.Short() {
		for _, name := range aliveJobs {
			add(name, jobReport(t, name))
		}
		for _, name := range sortedKeys(kindsOfJobs) {
			r, err := runJob(name+".yaml", []byte(kindsOfJobs[name]), nil, study.Options{Draws: 200, Seed: 1})
			if err != nil {
				t.Fatal(err)
			}
			add(name, r)
		}
		add("many lots", many(12, 8))
	}
	kinds = list
	return list
}
