package catalog_test

import (
	"fmt"
	"io/fs"
	"os"
	"strings"
	"testing"
	"testing/fstest"

	"parch/catalog"
)

// shelfCopy is the built-in catalog in memory, to be spoiled.
func shelfCopy(t *testing.T) fstest.MapFS {
	t.Helper()
	copied := fstest.MapFS{}
	source := os.DirFS(".")
	for _, pattern := range []string{"*.yaml", "*.csv", "solvents/*.yaml", "checks/*.csv"} {
		names, err := fs.Glob(source, pattern)
		if err != nil {
			t.Fatal(err)
		}
		for _, name := range names {
			data, err := fs.ReadFile(source, name)
			if err != nil {
				t.Fatal(err)
			}
			copied[name] = &fstest.MapFile{Data: data}
		}
	}
	return copied
}

// spoil replaces text that stands once in a file and returns the line of its start.
func spoil(t *testing.T, fsys fstest.MapFS, name, before, after string) (line int) {
	t.Helper()
	text := string(fsys[name].Data)
	if n := strings.Count(text, before); n != 1 {
		t.Fatalf("%s: %q stands %d times", name, before, n)
	}
	fsys[name] = &fstest.MapFile{Data: []byte(strings.Replace(text, before, after, 1))}
	return 1 + strings.Count(text[:strings.Index(text, before)], "\n")
}

func TestProblemsAreFound(t *testing.T) {
	const toluene = "solvents/toluene.yaml"
	for _, c := range []struct {
		name, file, before, after string
		down                      int    // lines below the place of the change
		want                      string // after "file:line: "
	}{
		{"key mistyped", toluene, "boiling point:", "boilling point:", 0, `unknown key "boilling point"; did you mean "boiling point" or "melting point"?`},
		{"larger pack dearer", "prices.yaml", "{size: 125 kg, price: 4 USD/kg", "{size: 125 kg, price: 14 USD/kg, band: 2.5 to 17 USD/kg}, {size: 150 kg, price: 4 USD/kg", 0, `items.sieve-3a.packs: "sieve-3a": a pack of 25 at 10 and one of 125 at 14; larger packs come later and cost less per kg`},
		{"pack without the price", "prices.yaml", "{size: 100 g, price: 600 USD/kg, band: 350 to 1000 USD/kg}, {size: 1 kg}", "{size: 100 g, price: 600 USD/kg, band: 350 to 1000 USD/kg}", 0, `items.calcium-hydride.packs: "calcium-hydride": no pack has the price of the item, 300`},
		{"pack in litres", "prices.yaml", "packs: [{size: 250 g}]", "packs: [{size: 250 mL}]", 0, `items.sodium.packs[0].size: "250 mL" is a volume, but a mass is wanted here; allowed: kg, g, mg, ug, t, lb`},
		{"unit missing", toluene, "110.6 °C", "110.6", 0, `boiling point.value: "110.6" has no unit; write "110.6 °C"`},
		{"unit of something else", toluene, "110.6 °C", "110.6 kPa", 0, `boiling point.value: "110.6 kPa" is a pressure, but a temperature is wanted here; allowed: °C, K, °F`},
		{"outside the physical range", toluene, "92.141 g/mol", "92.141 kg/mol", 0, `molar mass.value: "92.141 kg/mol" is outside 10 to 500 g/mol`},
		{"not finite", toluene, "-3.35758", "NaN", 0, `water pair.parameters.a21: "NaN" is not a finite number`},
		{"coefficient mistyped", toluene, "[879.2,", "[8792,", 0, `density: gives `},
		{"coefficient left out", toluene, "[140140, -152.3, 0.695, 0, 0]", "[140140]", 0, `heat capacity.coefficients: DIPPR100 takes 2 to 5 coefficients, not 1`},
		{"sign lost", toluene, "[76.945, -6729.8", "[76.945, 6729.8", 0, `vapour pressure: gives `},
		{"boiling point does not fit", toluene, "110.6 °C", "112.6 °C", 6, `vapour pressure: gives a boiling point of 383.83 K, -1.92 K from the one stated; within 0.5 K is wanted`},
		{"heat of vaporization does not fit", toluene, "[49507,", "[40507,", 0, `heat of vaporization: the slope of the vapour pressure at the boiling point gives `},
		{"equation unknown", toluene, "DIPPR105", "DIPPR99", 0, `density.equation: "DIPPR99" is not an equation known here; allowed: `},
		{"registry number mistyped", toluene, "108-88-3", "108-88-4", 0, `cas: "108-88-4" is mistyped: with these digits a CAS number ends in 3`},
		{"not a registry number", toluene, "108-88-3", "108883", 0, `cas: "108883" is not a CAS number; write it like "108-88-3"`},
		{"coefficient of a fixed form left out", toluene, "[76.945, -6729.8,", "[-6729.8,", 0, `vapour pressure.coefficients: DIPPR101 takes 5 coefficients, not 4`},
		{"unit of a curve", toluene, "unit: J/mol,", "unit: J/kg,", 0, `heat of vaporization.unit: "J/kg" is not allowed here; allowed: J/mol`},
		{"key twice", toluene, "formula: ", "cas: 1\nformula: ", 0, `"cas" stands twice; it is already on line 3`},
		{"source unknown", toluene, "perry-8e-2-150", "perry-8e-2-151", 0, `heat of vaporization.source: "perry-8e-2-151" is not in sources.yaml; did you mean `},
		{"source missing", toluene, "110.6 °C, source: crc-95", "110.6 °C", 0, `boiling point: "source" is missing`},
		{"grade unknown", toluene, "source: iupac-critical}", "source: iupac-critical, confidence: certain}", 0, `critical temperature.confidence: "certain" is not allowed here; allowed: published, fitted, derived, assumption, common practice, memory, invented`},
		{"gap that closes when warm", "solvents/ethanol.yaml", "b12: -15.0743 K", "b12: 400 K", 0, `water pair: water and ethanol have stable miscibility gaps: 0 at 50 °C and 1 at 5 °C; exactly one at all temperatures from 5 to 110 °C is allowed, or none`},
		{"two gaps", toluene, "alpha: 0.28", "alpha: 0.5", 0, `water pair: water and toluene have stable miscibility gaps: 2 at 5 °C; exactly one at all temperatures`},
		{"alias taken", toluene, "toluol", "THF", -5, `"THF" also names tetrahydrofuran`},
		{"file and key differ", toluene, "key:                  toluene", "key: benzene", 0, `key "benzene" does not match the name of the file, "toluene"`},
		{"class without verdicts", toluene, "aromatic", "aromatics", 0, ""},
		{"range that falls", toluene, "178.18 to 500 K", "500 to 178.18 K", 0, `heat capacity.range: "500 to 178.18 K" does not rise`},
		{"source nobody uses", "sources.yaml", "yaws:", "spare: a reference\nyaws:", 0, `spare: no number rests on this source; cite it or remove it`},
		{"agent mistyped", "matrix.yaml", "    alumina:              {unsuitable: acid takes the surface}", "    alumna: {unsuitable: acid takes the surface}", 0, `classes.acid.alumna: "alumna" is not an agent known here; did you mean "alumina"?`},
		{"verdict mistyped", "matrix.yaml", "{unsuitable: too slow with higher alcohols}", "{unsuited: too slow with higher alcohols}", 0, `classes.alcohol.magnesium: unknown key "unsuited"; allowed: ok, caution, unsuitable, dangerous, source, confidence, note`},
		{"practice left out", "practice.yaml", "heat-share:", "heat-shares:", 0, `unknown key "heat-shares"; did you mean "heat-share"?`},
		{"band beside the value", "practice.yaml", "band: 35 to 70 %", "band: 55 to 70 %", 0, `heat-share.band: "55 to 70 %" does not hold the value, "50 %"`},
		{"price per the wrong unit", "prices.yaml", "50 EUR/hour", "50 EUR/day", 0, `items.technician.price: "50 EUR/day" is not per hour; write it like "50 EUR/hour"`},
		{"price of nothing known", "prices.yaml", "  sieve-3a:", "  sieve-3b:", 0, `items.sieve-3b: "sieve-3b" is nothing that is priced here; did you mean `},
		{"kind unknown", "agents.yaml", "name: sodium metal\n  kind: reactive", "name: sodium metal\n  kind: metal", 1, `sodium.kind: "metal" is not allowed here; allowed: sieve, salt, reactive, oxide`},
		{"caution of an unknown step", "cautions.yaml", "steps: [salt]", "steps: [salting]", 0, `[11].steps[0]: "salting" is not known here; did you mean "salt"?`},
		{"anchor", "catalog.yaml", "date: 2026-12-01", "date: &a 2026-12-01", 0, `date: anchors (&name) are not used here; write the value out where it is needed`},
	} {
		t.Run(c.name, func(t *testing.T) {
			fsys := shelfCopy(t)
			line := spoil(t, fsys, c.file, c.before, c.after)
			_, err := catalog.Parse(fsys)
			if err == nil {
				t.Fatal("no problem was found")
			}
			want := fmt.Sprintf("%s:%d: %s", c.file, line+c.down, c.want)
			if c.want == "" { // reported where the missing rows should be
				want = "matrix.yaml:5: nothing is said of toluene with sieve-3a (class \"aromatics\")"
			}
			if !strings.Contains("\n"+err.Error(), "\n"+want) {
				t.Errorf("want a line that begins\n  %s\ngot\n%v", want, err)
			}
		})
	}
}

func TestAllProblemsAtOnce(t *testing.T) {
	fsys := shelfCopy(t)
	var want []string
	for _, c := range [][3]string{
		{"apparatus.yaml", "kind:   oven", "kind:   stove"},
		{"practice.yaml", "trap-setup:            {value: 0.75 h", "trap-setup:            {value: 0.75"},
		{"prices.yaml", "0.20 EUR/kwh", "0,20 EUR/kwh"},
		{"solvents/toluene.yaml", "110.6 °C", "110.6 m"},
		{"solvents/water.yaml", "99.974 °C", "99.974"},
	} {
		want = append(want, fmt.Sprintf("%s:%d: ", c[0], spoil(t, fsys, c[0], c[1], c[2])))
	}
	delete(fsys, "emissions.yaml")
	_, err := catalog.Parse(fsys)
	if err == nil {
		t.Fatal("no problem was found")
	}
	for _, w := range append(want, "emissions.yaml: file does not exist") {
		if !strings.Contains("\n"+err.Error(), "\n"+w) && !strings.Contains(err.Error(), w) {
			t.Errorf("nothing reported at %s", w)
		}
	}
	if t.Failed() {
		t.Log(err)
	}
}

func TestEmptyFolder(t *testing.T) {
	if _, err := catalog.Parse(fstest.MapFS{}); err == nil || !strings.Contains(err.Error(), "sources.yaml") {
		t.Errorf("got %v, want the missing files named", err)
	}
}

// A solvent whose curves are known to be off is taken with the reason, not silently.
func TestKnownMiss(t *testing.T) {
	fsys := shelfCopy(t)
	spoil(t, fsys, "solvents/toluene.yaml", "110.6 °C", "111.8 °C")
	spoil(t, fsys, "solvents/toluene.yaml", "hazards:", "known miss: {boiling point: 1.2 K, why: the curve boils 1.1 K low}\nhazards:")
	cat, err := catalog.Parse(fsys)
	if err != nil {
		t.Fatal(err)
	}
	if why := cat.Solvents["toluene"].KnownMiss; why != "the curve boils 1.1 K low" {
		t.Errorf("the reason is %q", why)
	}
	spoil(t, fsys, "solvents/toluene.yaml", ", why: the curve boils 1.1 K low", "")
	if _, err := catalog.Parse(fsys); err == nil || !strings.Contains(err.Error(), `known miss: "why" is missing`) {
		t.Errorf("got %v, want the missing reason", err)
	}
}
