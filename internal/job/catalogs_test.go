package job

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"parch/catalog"
)

const ownPrice = `prices:
  kept under: 2026-10-01
  common: {source: memory, confidence: memory}
  items: {toluene: {price: 6.10 EUR/litre}}
`

const ownSolvent = `sources:
  bench-book: "bench book 7, page 12 (invented)"
solvents:
  bench-xylene:
    name: bench xylene
    formula: C8H10
    class: aromatic
    boiling point:        {value: 144.4 °C, source: bench-book, confidence: invented}
    density:              {value: 0.875 kg/L, source: bench-book, confidence: invented}
    heat of vaporization: {value: 36.24 kJ/mol, source: bench-book, confidence: invented}
    water solubility:     {value: 441 mg/kg, source: bench-book, confidence: invented}
`

const ownLots = "lots: [{name: a lot, solvent: bench-xylene, batch: 18 L, water: 300 mg/kg, target: 50 mg/kg}]\n"

func folder(files map[string]string) func(string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		if text, ok := files[name]; ok {
			return []byte(text), nil
		}
		return nil, errors.New("no such file or directory")
	}
}

// A solvent that only the own file knows is known to the job.
func TestJobRestsOnItsOwnCatalog(t *testing.T) {
	data := []byte("catalog: [mine.yaml]\n" + ownLots)
	files := folder(map[string]string{"mine.yaml": ownSolvent})
	over := []catalog.File{{Name: "prices.yaml", Data: []byte(ownPrice)}}
	cat, err := Catalog("plans/job.yaml", data, over, files)
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(cat.Own, []string{"prices.yaml", "plans/mine.yaml"}) {
		t.Errorf("own files %q", cat.Own)
	}
	j, err := ReadWith("plans/job.yaml", data, cat, files)
	if err != nil {
		t.Fatal(err)
	}
	if j.Lots[0].Solvent != "bench-xylene" || !strings.HasPrefix(j.Warnings[0], "own data of prices.yaml, plans/mine.yaml go before the built-in catalog: ") {
		t.Errorf("%q, %q", j.Lots[0].Solvent, j.Warnings)
	}
	for _, w := range j.Warnings {
		if strings.Contains(w, "not read here") {
			t.Errorf("%s", w)
		}
	}
}

// A file that the command line names as well is read once.
func TestFileNamedTwiceIsReadOnce(t *testing.T) {
	over := []catalog.File{{Name: "./plans/mine.yaml", Data: []byte(ownSolvent)}}
	cat, err := Catalog("plans/job.yaml", []byte("catalog: mine.yaml\n"+ownLots), over, folder(nil))
	if err != nil || len(cat.Own) != 1 {
		t.Errorf("%v, %v", cat, err)
	}
}

func TestOwnCatalogsThatCannotBeUsed(t *testing.T) {
	files := folder(map[string]string{"bad.yaml": "prices:\n  items: {toluene: 5}\n"})
	for _, c := range []struct{ text, want string }{
		{"catalog: [gone.yaml, lost.yaml]\n", `job.yaml:1: catalog[0]: "gone.yaml" cannot be read: no such file or directory`},
		{"catalog: [gone.yaml, lost.yaml]\n", `job.yaml:1: catalog[1]: "lost.yaml" cannot be read: no such file or directory`},
		{"catalog: bad.yaml\n", "bad.yaml:2: "},
	} {
		cat, err := Catalog("job.yaml", []byte(c.text+ownLots), nil, files)
		if cat != nil || err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%q: %v, want %s", c.text, err, c.want)
		}
	}
	// What is wrong with the job itself is said by Read, and no file is looked for.
	for _, text := range []string{"catalog: {a: b}\n", "catalog:\n", "- 1\n", "lots: [", "\x00", "catalog: [[a]]\n"} {
		if cat, err := Catalog("job.yaml", []byte(text), nil, nil); cat == nil && err == nil {
			t.Errorf("%q: neither a catalog nor an error", text)
		}
	}
}
