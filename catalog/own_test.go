package catalog_test

import (
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

// ownFile reads an own catalog of testdata.
func ownFile(t *testing.T, name string) catalog.File {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return catalog.File{Name: name, Data: data}
}

// A solvent of which only a boiling point, a density, a heat of vaporization and
// the solubility of water are known. The sample is o-xylene under another name, so
// that the built-in one shows how good the estimates are.
func TestSolventFromFourNumbers(t *testing.T) {
	cat, err := catalog.LoadWith(ownFile(t, "four-numbers.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	own, full := cat.Solvents["bench-xylene"], cat.Solvents["o-xylene"]
	if own == nil || !own.Own || !own.BoilingPoint.Own || !own.Water.Own || own.Water.Quality != "D" {
		t.Fatalf("not marked as the user's own: %+v", own)
	}
	if full.Own || full.BoilingPoint.Own || load(t).Solvents["bench-xylene"] != nil {
		t.Error("the built-in catalog was touched")
	}
	if p, d, h := own.Water.Confidence, own.Density.Confidence, own.HeatOfVaporization.Confidence; p != catalog.Assumption || d != catalog.Derived || h != catalog.Derived {
		t.Errorf("what is made of one published value is called %s (pair), %s (density), %s (heat)", p, d, h)
	}
	if len(own.Estimates) < 6 || own.Hazards.PeroxideClass == "none" || own.Water.SolubilityBand <= 1.2 {
		t.Errorf("what was estimated is not said: %q, peroxides %q, band %v", own.Estimates, own.Hazards.PeroxideClass, own.Water.SolubilityBand)
	}
	for _, c := range []struct {
		what      string
		got, want float64
		within    float64 // as a factor
	}{
		{"molar mass", own.MolarMass.SI, full.MolarMass.SI, 1.0005},
		{"vapour pressure at 100 °C", own.VapourPressure.At(373.15), full.VapourPressure.At(373.15), 1.1},
		{"vapour pressure at 25 °C", own.VapourPressure.At(298.15), full.VapourPressure.At(298.15), 2},
		{"density at 60 °C", own.Density.At(333.15), full.Density.At(333.15), 1.02},
		{"heat of vaporization at 60 °C", own.HeatOfVaporization.At(333.15), full.HeatOfVaporization.At(333.15), 1.05},
		{"heat capacity at 25 °C", own.HeatCapacity.At(298.15), full.HeatCapacity.At(298.15), 1.3},
		{"viscosity at 25 °C", own.Viscosity.At(298.15), full.Viscosity.At(298.15), 2},
		{"water held at 25 °C", held(t, cat, "bench-xylene", 298.15), 441e-6, 1.001},
		{"water held at 60 °C", held(t, cat, "bench-xylene", 333.15), held(t, cat, "o-xylene", 333.15), own.Water.SolubilityBand},
	} {
		if ratio := c.got / c.want; !(ratio < c.within && ratio > 1/c.within) {
			t.Errorf("%s: %.4g, the full entry has %.4g; within a factor of %v is expected", c.what, c.got, c.want, c.within)
		}
	}
	floor := func(key string) float64 {
		f, err := mixture.Pair(cat, cat.Solvents[key]).TrapFloor(298.15, 101325)
		if err != nil {
			t.Fatal(err)
		}
		return f.Water
	}
	if ratio := floor("bench-xylene") / floor("o-xylene"); !(ratio < 2 && ratio > 0.5) {
		t.Errorf("the floor of a trap is %.2f times that of the full entry; within a factor of 2 is expected", ratio)
	}
}

func held(t *testing.T, cat *catalog.Catalog, key string, tK float64) float64 {
	t.Helper()
	water, ok, err := mixture.Pair(cat, cat.Solvents[key]).Solubility(tK)
	if err != nil || !ok {
		t.Fatalf("%s at %.1f K: %v", key, tK, err)
	}
	return water
}

// Entries of all kinds, added and replaced.
func TestOwnEntries(t *testing.T) {
	cat, err := catalog.LoadWith(ownFile(t, "own.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	if p := cat.Prices["toluene"]; p.Amount != "5.9" || !p.Own || p.Currency != "EUR" {
		t.Errorf("price of toluene: %+v", p)
	}
	if p := cat.Prices["acetone"]; p.Own || p.Amount != "14" {
		t.Errorf("price of acetone: %+v", p)
	}
	if v := cat.Practice["heat-share"]; v.SI != 0.6 || !v.Own {
		t.Errorf("heat share: %+v", v)
	}
	if v, ok := cat.Verdict(cat.Solvents["toluene"], "sieve-3a-pilot"); !ok || v.Word != "ok" || !v.Own {
		t.Errorf("verdict on the own sieve: %+v, %v", v, ok)
	}
	a := cat.Agents["sieve-3a-pilot"]
	if a == nil || !a.Own || !a.Isotherm.Own || a.Isotherm.LoadingKgPerKg(10, 298.15) <= 0 {
		t.Errorf("own sieve: %+v", a)
	}
	if still := cat.Apparatus["still-100l"]; still == nil || !still.Own || still.Volume.SI != 0.1 {
		t.Errorf("own still: %+v", still)
	}
	if s := cat.Sources["pilot-hall"]; !s.Own || s.Reference == "" {
		t.Errorf("own source: %+v", s)
	}
	if !slices.ContainsFunc(cat.Histories, func(h catalog.History) bool { return h.Key == "pilot-oven" && h.ResidualKgPerKg.Own }) {
		t.Error("no own history")
	}
	if !slices.Equal(cat.Own, []string{"own.yaml"}) {
		t.Errorf("own files: %q", cat.Own)
	}
	if without, _ := catalog.Load(); without.Prices["toluene"].Own || without.Agents["sieve-3a-pilot"] != nil {
		t.Error("the built-in catalog was touched")
	}
}

// A later file goes before an earlier one; none gives the built-in catalog.
func TestOwnFilesInOrder(t *testing.T) {
	price := func(name, amount string) catalog.File {
		return catalog.File{Name: name, Data: []byte("prices:\n  kept under: 2026-11-01\n  common: {source: memory, confidence: memory}\n  items:\n    toluene: {price: " + amount + " EUR/litre}\n")}
	}
	cat, err := catalog.LoadWith(price("a.yaml", "5"), price("b.yaml", "6"))
	if err != nil || cat.Prices["toluene"].Amount != "6" {
		t.Errorf("price %q (%v), want that of the later file", cat.Prices["toluene"].Amount, err)
	}
	if cat, err := catalog.LoadWith(); err != nil || cat != load(t) {
		t.Errorf("no own file: %v", err)
	}
	if _, err := catalog.LoadWith(price("a.yaml", "5"), price("a.yaml", "6")); err == nil || !strings.Contains(err.Error(), "a.yaml: the file is named twice") {
		t.Errorf("the same file twice: %v", err)
	}
}

// A service keeps its name when only its price is the user's own.
func TestOwnPriceOfAService(t *testing.T) {
	const text = "prices:\n  kept under: 2026-11-01\n  common: {source: memory, confidence: memory}\n  items:\n    technician: {price: 61 EUR/hour}\n"
	cat, err := catalog.LoadWith(catalog.File{Name: "a.yaml", Data: []byte(text)})
	if err != nil {
		t.Fatal(err)
	}
	if p := cat.Prices["technician"]; p.Label != load(t).Prices["technician"].Label || p.Amount != "61" || !p.Own {
		t.Errorf("got %+v", p)
	}
}

// An exposure limit that is set for a short time only is a limit too (Ontario
// Regulation 833, ethanol).
func TestShortTermLimitOfEthanol(t *testing.T) {
	if got := load(t).Solvents["ethanol"].Hazards.ExposureLimit; got != "1000 ppm short term" {
		t.Errorf("exposure limit %q", got)
	}
}

// Liquids that take up much water can be added with one solubility too, and hold
// that much (handbook values, from memory).
func TestOneSolubilityOfLiquidsThatTakeUpMuch(t *testing.T) {
	four := string(ownFile(t, "four-numbers.yaml").Data)
	for _, c := range []struct {
		name, formula, class, boils, density, heat, water string
		share                                             float64
	}{
		{"propyl acetate", "C5H10O2", "ester", "101.5", "0.888", "33.9", "2.9 % m/m", 0.029},
		{"2-pentanone", "C5H10O", "ketone", "102.3", "0.802", "33.4", "3.3 % m/m", 0.033},
		{"1-octanol", "C8H18O", "alcohol", "195", "0.825", "49", "4.7 % m/m", 0.047},
		{"1-pentanol", "C5H12O", "alcohol", "138", "0.811", "44.4", "9.2 % m/m", 0.092},
		{"cyclohexanone", "C6H10O", "ketone", "155.6", "0.942", "38.1", "8 % m/m", 0.08},
	} {
		text := strings.NewReplacer("C8H10", c.formula, "class: aromatic", "class: "+c.class, "144.4", c.boils, "0.875", c.density, "36.24", c.heat, "441 mg/kg", c.water).Replace(four)
		cat, err := catalog.LoadWith(catalog.File{Name: "mine.yaml", Data: []byte(text)})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if got := held(t, cat, "bench-xylene", 298.15); math.Abs(got/c.share-1) > 0.001 {
			t.Errorf("%s holds %.4g at 25 °C, %.4g was given", c.name, got, c.share)
		}
		if cold, warm := held(t, cat, "bench-xylene", 288.15), held(t, cat, "bench-xylene", 353.15); cold >= warm {
			t.Errorf("%s holds %.4g at 15 and %.4g at 80 °C", c.name, cold, warm)
		}
	}
}

func TestOwnFilesWithProblems(t *testing.T) {
	four := string(ownFile(t, "four-numbers.yaml").Data)
	own := string(ownFile(t, "own.yaml").Data)
	for _, c := range []struct{ name, text, before, after, want string }{
		{"key mistyped", four, "boiling point:", "boilling point:", `unknown key "boilling point"; did you mean "boiling point" or "melting point"?`},
		{"boiling point left out", four, "boiling point:", "melting point:", `"boiling point" is missing`},
		{"unit left out", four, "144.4 °C", "144.4", `boiling point.value: "144.4" has no unit; write "144.4 °C"`},
		{"heat per mass", four, "36.24 kJ/mol", "341 kJ/kg", `heat of vaporization.value: "341 kJ/kg"`},
		{"heat too large by a factor of two", four, "36.24 kJ/mol", "72.48 kJ/mol", `heat of vaporization: is 174 J/mol/K at the boiling point; 55 to 125 is usual (Trouton's rule: 88)`},
		{"heat in kilocalories", four, "36.24 kJ/mol", "8.66 kJ/mol", `heat of vaporization: is 20.7 J/mol/K at the boiling point`},
		{"outside its range", four, "0.875 kg/L", "875 kg/L", `density.value: "875 kg/L" is outside 100 to 5000 kg/m3`},
		{"source missing", four, ", source: bench-book, confidence: published, note: at its boiling point", ", confidence: published", `heat of vaporization: "source" is missing`},
		{"source unknown", four, "source: bench-book, confidence: published, note: at its boiling point", "source: bench-boook, confidence: published", `"bench-boook" is not in sources.yaml or the own files; did you mean "bench-book"?`},
		{"source in a circle", four, "bench-book: ", "other: bench-book\n  bench-book: other #", `"other" is only the id of another source; write the reference out`},
		{"class unknown", four, "class: aromatic", "class: aromatics", `bench-xylene: nothing is said of bench-xylene (class "aromatics") with alumina, calcium-chloride, calcium-hydride, calcium-oxide, calcium-sulfate, magnesium, magnesium-sulfate, phosphorus-pentoxide, potassium-carbonate, potassium-hydroxide, sieve-13x, sieve-3a, sieve-4a, sieve-5a, silica-gel, sodium, sodium-sulfate; did you mean "aromatic"?`},
		{"class of no kin", four, "class: aromatic", "class: silicone", `; classes: acid, alcohol, alkane, amide, amine, aromatic, aryl-chloride, carbonate-ester, chlorinated, ester, ether, ketone, nitrile, small-alcohol, sulfoxide; a class of your own needs its verdicts under "matrix"`},
		{"agent without verdicts", own, "sieve-3a-pilot: {ok: as sieve 3A}", "sieve-3a: {ok: as sieve 3A}", `sieve-3a-pilot: nothing is said of sieve-3a-pilot with the classes aromatic; give a verdict for each under "matrix"`},
		{"formula", four, "C8H10", "C8H10(OH)", `formula: "C8H10(OH)" is not a formula that can be read`},
		{"molar mass beside the formula", four, "boiling point:", "molar mass: {value: 92 g/mol, source: bench-book, confidence: published}\n    boiling point:", `molar mass: C8H10 weighs 106.168 g/mol, not 92.000`},
		{"too much water", four, "441 mg/kg", "30 % m/m", `water solubility: "30 % m/m" is a mole fraction of 0.72; one solubility describes a water-immiscible solvent up to 0.35 only`},
		{"a pair that a set of three was not fitted with", strings.Replace(four, "C8H10", "C7H8", 1), "bench-xylene:", "toluene:", `toluene: its water pair is not the one that the set of three of ternary.csv:2 was fitted with`},
		{"no pair at all", four, "water solubility:", "water pear:", `"water pair" or "water solubility" is missing`},
		{"key twice", own, "sieve-3a-pilot: {ok: as sieve 3A}", "sieve-3a-pilot: {ok: as sieve 3A}\n      sieve-3a-pilot: {caution: x}", `"sieve-3a-pilot" stands twice`},
		{"kind unknown", own, "apparatus:", "aparatus:", `unknown key "aparatus"; did you mean "apparatus"?`},
		{"coefficient", own, "capacity: 15.3593 g/100 g", "capacity: 153.593 g/100 g", `isotherm: holds `},
		{"isotherm like itself", own, "sites:\n", "like: sieve-3a-pilot\n      capacity factor: {value: 1, source: pilot-hall, confidence: assumption}\n      affinity factor: {value: 1, source: pilot-hall, confidence: assumption}\n      other:\n", `"sieve-3a-pilot" has no isotherm of its own sites to be scaled`},
		{"price in the wrong unit", own, "5.90 EUR/litre", "5.90 EUR/kg", `"5.90 EUR/kg" is not per litre`},
		{"not a document", "\x00\x01", "", "", "this is not a text file: it contains a zero byte"},
		{"agent nobody may meet", own, "matrix:", "cautions: []\nmatrix:", ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			if c.before != "" && !strings.Contains(c.text, c.before) {
				t.Fatalf("%q is not in the text", c.before)
			}
			text := strings.Replace(c.text, c.before, c.after, 1)
			if c.name == "not a document" {
				text = c.text
			}
			cat, err := catalog.LoadWith(catalog.File{Name: "mine.yaml", Data: []byte(text)})
			if c.want == "" {
				if err != nil {
					t.Errorf("got %v", err)
				}
				return
			}
			if err == nil || cat != nil {
				t.Fatal("no problem was found, or a catalog came with it")
			}
			for _, line := range strings.Split(err.Error(), "\n") {
				if strings.HasPrefix(line, "mine.yaml:") && strings.Contains(line, c.want) {
					return
				}
			}
			t.Errorf("want a line of mine.yaml with\n  %s\ngot\n%v", c.want, err)
		})
	}
}

// Ten megabytes of anything are refused by their size, at once.
func TestOwnFileTooLarge(t *testing.T) {
	data := []byte(strings.Repeat("solvents: {a: [", 10<<20/15))
	started := time.Now()
	_, err := catalog.LoadWith(catalog.File{Name: "huge.yaml", Data: data})
	if took := time.Since(started); took > 2*time.Second {
		t.Errorf("took %v", took)
	}
	if err == nil || !strings.Contains(err.Error(), "huge.yaml: the file is larger than 1 MiB") {
		t.Errorf("got %v", err)
	}
}

// The one-parameter model goes through its one point and has one gap everywhere.
func TestOnePointModel(t *testing.T) {
	cat, err := catalog.LoadWith(ownFile(t, "four-numbers.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	m := mixture.Pair(cat, cat.Solvents["bench-xylene"])
	for tK := 278.15; tK <= 383.15; tK += 15 {
		if n := m.NRTL.CountGaps(tK); n != 1 {
			t.Errorf("%d gaps at %.0f K", n, tK)
		}
	}
	a, err := m.FindAzeotrope(101325)
	if err != nil || a.Kind != thermo.Heterogeneous || math.Abs(a.TempK-zeroCelsiusK-93.5) > 1.5 {
		t.Errorf("azeotrope %+v (%v), want heterogeneous near 93.5 °C (from memory)", a, err)
	}
}
