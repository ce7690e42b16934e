package catalog_test

import (
	"encoding/csv"
	"math"
	"os"
	"slices"
	"strconv"
	"testing"

	"parch/catalog"
	"parch/internal/thermo"
)

func load(t testing.TB) *catalog.Catalog {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatalf("the built-in catalog has problems:\n%v", err)
	}
	return cat
}

// table reads a CSV file into rows by heading.
func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open(name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	records, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, record := range records[1:] {
		row := map[string]string{}
		for i, heading := range records[0] {
			row[heading] = record[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

var dried = []string{"acetonitrile", "cyclohexane", "dichloromethane", "ethyl-acetate", "tetrahydrofuran", "toluene"}

func TestLoadHoldsWhatTheStepsAskFor(t *testing.T) {
	cat := load(t)
	if cat.Solvents["water"] == nil || cat.Date == "" {
		t.Error("no water or no date")
	}
	for _, key := range dried {
		s := cat.Solvents[key]
		if s == nil || s.Water == nil || s.StillRate.SI <= 0 || s.Hazards.PeroxideClass == "" {
			t.Errorf("%s is not complete: %+v", key, s)
		}
		for _, item := range []string{key, key + "-dry"} {
			if p := cat.Prices[item]; p.Unit != "litre" || p.Amount == "" {
				t.Errorf("price of %s: %+v", item, p)
			}
		}
		if w := cat.Prices[key+"-dry"].WaterMax; w == nil || math.Abs(w.SI-50e-6) > 1e-12 {
			t.Errorf("%s-dry: water limit %v, want 50 mg/kg", key, w)
		}
		for _, kind := range []string{"making/", "burning/"} {
			if cat.Emissions[kind+key].SI <= 0 {
				t.Errorf("no emissions for %s%s", kind, key)
			}
		}
	}
	for _, key := range []string{"sieve-3a", "sieve-4a"} {
		a := cat.Agents[key]
		if len(a.Isotherm.Sites) != 3 || a.HoldUp == nil || a.Lives == nil || a.Fade == nil || a.MaxDose == nil || cat.Prices[key].Unit != "kg" {
			t.Errorf("%s is not complete: %+v", key, a)
		}
	}
	for _, key := range []string{"still-20l", "receiver-light", "receiver-heavy", "receiver-assembled", "jar-5l", "drum-25l", "oven-50l"} {
		if cat.Apparatus[key] == nil || cat.Prices[key].Unit != "each" {
			t.Errorf("%s: no apparatus or no price", key)
		}
	}
}

// Values in SI, as the steps read them.
func TestUnits(t *testing.T) {
	cat := load(t)
	toluene := cat.Solvents["toluene"]
	for _, c := range []struct {
		what      string
		got, want float64
	}{
		{"technician, EUR/h", number(t, cat.Prices["technician"].Amount), 50},
		{"heat share", cat.Practice["heat-share"].SI, 0.5},
		{"heat share, high", cat.Practice["heat-share"].High, 0.7},
		{"outlet minimum, kg/kg", cat.Practice["trap-outlet-minimum"].SI, 20e-6},
		{"set-up, s", cat.Practice["trap-setup"].SI, 2700},
		{"cooling flow, m3/s", cat.Practice["cooling-flow"].SI, 2e-3 / 60},
		{"molar volume of water, m3/mol", cat.Practice["water-molar-volume"].SI, 18.9e-6},
		{"peroxide limit, kg/m3", cat.Practice["site-peroxide-limit"].SI, 5e-3},
		{"still power, W", cat.Apparatus["still-20l"].Power.SI, 1800},
		{"oven run, J", cat.Apparatus["oven-50l"].Energy.SI, 7 * 3.6e6},
		{"hold-up, m3/kg", cat.Agents["sieve-3a"].HoldUp.SI, 0.25e-3},
		{"electricity, kg/kWh", cat.Emissions["electricity"].SI, 0.481},
		{"still rate of toluene, 1/s", toluene.StillRate.SI, 0.22 / 3600},
		{"still rate of tetrahydrofuran, 1/s", cat.Solvents["tetrahydrofuran"].StillRate.SI, 0.06 / 3600},
		{"molar mass, kg/mol", toluene.MolarMass.SI, 92.141e-3},
		{"boiling point, K", toluene.BoilingPoint.SI, 383.75},
		{"lowest temperature of the pair, K", toluene.Water.TMinK, 273.15},
		{"repeatability, kg/kg", cat.Assays["coulometric"].Repeatability.SI, 7e-6},
		{"repeatability, kg/kg", cat.Assays["volumetric"].Repeatability.SI, 150e-6},
		{"residual of an opened tin, kg/kg", history(t, cat, "opened-tin").ResidualKgPerKg.SI, 0.075},
		{"scaled capacity of 4A, kg/kg", cat.Agents["sieve-4a"].Isotherm.Sites[1].CapacityKgPerKg, 1.12 * 0.153593},
	} {
		if math.Abs(c.got-c.want) > 1e-9*math.Abs(c.want) {
			t.Errorf("%s: %.10g, want %.10g", c.what, c.got, c.want)
		}
	}
}

func history(t *testing.T, cat *catalog.Catalog, key string) catalog.History {
	t.Helper()
	at := slices.IndexFunc(cat.Histories, func(h catalog.History) bool { return h.Key == key })
	if at < 0 {
		t.Fatalf("no history %q", key)
	}
	return cat.Histories[at]
}

// Pairs of the agent matrix that hurt people if they are wrong. Sources: the
// reference named with each pair in the catalog.
func TestVerdicts(t *testing.T) {
	cat := load(t)
	if len(cat.Matrix) != 260 {
		t.Errorf("%d rows, want 260: 15 classes by 17 agents and 5 solvents of their own", len(cat.Matrix))
	}
	for _, c := range []struct{ solvent, agent, word, source string }{
		{"dichloromethane", "sodium", "dangerous", "prudent-practices-103"},
		{"dichloromethane", "potassium-hydroxide", "dangerous", "purification-handbooks"},
		{"tetrahydrofuran", "potassium-hydroxide", "dangerous", "organic-syntheses"},
		{"acetonitrile", "sodium", "dangerous", "purification-handbooks"},
		{"acetonitrile", "sieve-4a", "unsuitable", "purification-handbooks"},
		{"ethyl-acetate", "calcium-hydride", "unsuitable", "purification-handbooks"},
		{"toluene", "sieve-3a", "ok", "purification-handbooks"},
		{"toluene", "sodium", "caution", "reactive-metal-stills"},
	} {
		v, ok := cat.Verdict(cat.Solvents[c.solvent], c.agent)
		if !ok || v.Word != c.word || v.Source != c.source || v.Reason == "" {
			t.Errorf("%s with %s: %+v, want %s from %s", c.solvent, c.agent, v, c.word, c.source)
		}
	}
	own := catalog.Solvent{Key: "chloroform", Class: "chlorinated"}
	if v, _ := cat.Verdict(&own, "calcium-hydride"); v.Word != "dangerous" {
		t.Errorf("chloroform with calcium hydride: %q; its own row must win over its class", v.Word)
	}
	if _, ok := cat.Verdict(&catalog.Solvent{Key: "x", Class: "unheard-of"}, "sieve-3a"); ok {
		t.Error("a class without data was allowed")
	}
}

// The rows of testdata/checks.csv are figures from other references than those
// of the curves; each names its source. The limits are those of the data set.
func TestPureAgainstIndependentFigures(t *testing.T) {
	limits := map[string]float64{"vapor_pressure": 0.05, "density": 0.01, "hvap": 0.03, "cp": 0.05, "viscosity": 0.15}
	cat := load(t)
	worst := map[string]float64{}
	for _, row := range table(t, "testdata/checks.csv") {
		p := &cat.Solvents[row["solvent"]].Pure
		want := number(t, row["value"])
		if row["property"] == "tb" {
			got, err := thermo.Boil(p, 101325)
			if err != nil || math.Abs(got-want) > 0.5 {
				t.Errorf("%s boils at %.2f K (%v), %s says %.2f", p.Key, got, err, row["source"], want)
			}
			continue
		}
		tK := number(t, row["t_k"])
		got := map[string]float64{
			"vapor_pressure": p.VapourPressurePa.At(tK), "density": p.DensityKgPerM3.At(tK), "hvap": p.HeatOfVaporizationJ.At(tK) / 1e3,
			"cp": p.HeatCapacityJPerMolK.At(tK), "viscosity": p.ViscosityPaS.At(tK) * 1e3,
		}[row["property"]]
		diff := math.Abs(got/want - 1)
		worst[row["property"]] = max(worst[row["property"]], diff)
		if !(diff <= limits[row["property"]]) {
			t.Errorf("%s %s at %.2f K: %.5g, %s says %.5g %s", p.Key, row["property"], tK, got, row["source"], want, row["unit"])
		}
	}
	t.Logf("largest deviations: %.3v", worst)
}

func TestEveryNumberSaysWhatItRestsOn(t *testing.T) {
	cat := load(t)
	for key, v := range cat.Practice {
		if v.Source == "" || v.Confidence == "" || v.Text == "" {
			t.Errorf("practice %s: %+v", key, v)
		}
	}
	for _, grade := range []catalog.Confidence{catalog.Memory, catalog.CommonPractice, catalog.Assumption, catalog.Invented} {
		if !grade.Weak() {
			t.Errorf("%s is not marked as weak", grade)
		}
	}
}

func TestLoadIsRepeatable(t *testing.T) {
	first, _ := catalog.Load()
	second, _ := catalog.Load()
	if first != second {
		t.Error("the catalog was read twice")
	}
}

func BenchmarkLoad(b *testing.B) {
	for b.Loop() {
		if _, err := catalog.Parse(catalog.BuiltIn()); err != nil {
			b.Fatal(err)
		}
	}
}
