package thermo_test

import (
	"encoding/csv"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/catalog"
	"parch/internal/thermo"
)

// row is one line of a table in testdata, by column name.
type row map[string]string

func (r row) number(t testing.TB, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("%v: %s: %v", r, column, err)
	}
	return v
}

func table(t testing.TB, name string) (rows []row) {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	reader := csv.NewReader(f)
	reader.Comment = '#'
	lines, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, line := range lines[1:] {
		r := row{}
		for i, column := range lines[0] {
			r[column] = line[i]
		}
		rows = append(rows, r)
	}
	return rows
}

// three is water, a solvent and a carrier of the catalog with the NRTL set and
// the term given.
func three(t testing.TB, solvent, carrier string, set thermo.NRTL, extra thermo.TernaryTerm) *thermo.Ternary {
	t.Helper()
	c := load(t)
	return &thermo.Ternary{
		Pure: [3]*thermo.Pure{&c.Solvents["water"].Pure, &c.Solvents[solvent].Pure, &c.Solvents[carrier].Pure},
		NRTL: set, Extra: extra,
	}
}

func load(t testing.TB) *catalog.Catalog {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// fromPairs are all mixtures of a solvent and a carrier, from binary sets alone.
func fromPairs(t testing.TB) map[[2]string]*thermo.Ternary {
	c := load(t)
	all := map[[2]string]*thermo.Ternary{}
	for k, p := range c.Pairs {
		set := thermo.JoinPairs(c.Solvents[k[0]].Water.NRTL, c.Solvents[k[1]].Water.NRTL, p.NRTL)
		all[k] = three(t, k[0], k[1], set, thermo.TernaryTerm{})
	}
	return all
}

// fittedTogether are the mixtures whose sets were fitted to tie-lines of all three.
func fittedTogether(t testing.TB) map[[2]string]*thermo.Ternary {
	all := map[[2]string]*thermo.Ternary{}
	for k, s := range load(t).Ternaries {
		all[k] = three(t, k[0], k[1], s.NRTL, s.Extra)
	}
	return all
}

func sorted(all map[[2]string]*thermo.Ternary) (keys [][2]string) {
	for k := range all {
		keys = append(keys, k)
	}
	slices.SortFunc(keys, func(a, b [2]string) int { return strings.Compare(a[0]+" "+a[1], b[0]+" "+b[1]) })
	return keys
}

// Vectors computed beforehand from the same parameters by another program.
func TestTernaryActivityCoefficients(t *testing.T) {
	mixtures := fittedTogether(t)
	vectors := table(t, "ternary_vectors.csv")
	if len(vectors) != 54 {
		t.Fatalf("%d vectors", len(vectors))
	}
	for _, r := range vectors {
		x := thermo.Fractions{r.number(t, "x_water"), r.number(t, "x_alcohol"), r.number(t, "x_carrier")}
		got := mixtures[[2]string{r["alcohol"], r["carrier"]}].LnGamma(x, r.number(t, "T_K"))
		for i, column := range []string{"ln_gamma_water", "ln_gamma_alcohol", "ln_gamma_carrier"} {
			if want := r.number(t, column); math.Abs(got[i]-want) > 1e-5 {
				t.Errorf("%s, %s: %s = %.6f, want %.6f", r["alcohol"], r["carrier"], column, got[i], want)
			}
		}
	}
}

// Gibbs and Duhem: sum x_i dln gamma_i = 0 along any direction. Needs no data.
func TestTernaryTermIsConsistent(t *testing.T) {
	mixtures := fittedTogether(t)
	rapid.Check(t, func(rt *rapid.T) {
		m := mixtures[[2]string{"ethanol", "benzene"}]
		x := drawFractions(rt, 0.05)
		tK := rapid.Float64Range(280, 360).Draw(rt, "T")
		from, to := rapid.IntRange(0, 2).Draw(rt, "from"), rapid.IntRange(0, 2).Draw(rt, "to")
		const h = 1e-5
		up, down := x, x
		up[from], up[to] = up[from]-h, up[to]+h
		down[from], down[to] = down[from]+h, down[to]-h
		a, b := m.LnGamma(up, tK), m.LnGamma(down, tK)
		var sum float64
		for i := range x {
			sum += x[i] * (a[i] - b[i]) / (2 * h)
		}
		if math.Abs(sum) > 1e-6 {
			rt.Fatalf("x = %v: sum x dln gamma = %g", x, sum)
		}
	})
}

func drawFractions(t *rapid.T, least float64) (x thermo.Fractions) {
	var sum float64
	for i := range x {
		x[i] = math.Exp(rapid.Float64Range(math.Log(least), 0).Draw(t, "x"))
		sum += x[i]
	}
	for i := range x {
		x[i] /= sum
	}
	return x
}

// Every split closes its balance and has equal activities in both layers.
func TestFlashConditions(t *testing.T) {
	mixtures := fromPairs(t)
	for k, m := range fittedTogether(t) {
		mixtures[[2]string{k[0], k[1] + " with term"}] = m
	}
	keys := sorted(mixtures)
	splits := 0
	rapid.Check(t, func(rt *rapid.T) {
		m := mixtures[rapid.SampledFrom(keys).Draw(rt, "mixture")]
		z := drawFractions(rt, 1e-6)
		tK := rapid.Float64Range(275, 350).Draw(rt, "T")
		s, err := m.Flash(z, tK)
		if err != nil {
			rt.Fatal(err)
		}
		if !s.Exists {
			return
		}
		splits++
		a, b := m.LnGamma(s.Organic, tK), m.LnGamma(s.Aqueous, tK)
		for i := range z {
			if back := (1-s.AqueousShare)*s.Organic[i] + s.AqueousShare*s.Aqueous[i]; math.Abs(back-z[i]) > 1e-9 {
				rt.Fatalf("component %d: %g of %g", i, back, z[i])
			}
			if d := math.Log(s.Organic[i]/s.Aqueous[i]) + a[i] - b[i]; math.Abs(d) > 1e-8 {
				rt.Fatalf("component %d: ln activities differ by %g", i, d)
			}
		}
		if !(s.Organic[0] < s.Aqueous[0] && s.AqueousShare > 0 && s.AqueousShare < 1) {
			rt.Fatalf("%+v", s)
		}
	})
	if splits == 0 {
		t.Error("no liquid split")
	}
}

// Where no third component is present the flash finds the layers of the pair.
func TestFlashAgainstPair(t *testing.T) {
	m := fromPairs(t)[[2]string{"ethanol", "cyclohexane"}]
	two := &thermo.Mixture{Water: m.Pure[0], Solvent: m.Pure[2], NRTL: load(t).Solvents["cyclohexane"].Water.NRTL}
	for _, tK := range []float64{280, 298.15, 340} {
		want, err := two.SplitAt(tK)
		if err != nil {
			t.Fatal(err)
		}
		got, err := m.Flash(thermo.Fractions{0.4, 0, 0.6}, tK)
		if err != nil || !got.Exists {
			t.Fatal(got, err)
		}
		if math.Abs(got.Organic[0]/want.XOrganic-1) > 1e-8 || math.Abs(got.Aqueous[0]-want.XAqueous) > 1e-10 {
			t.Errorf("%g K: %v and %v, want %+v", tK, got.Organic, got.Aqueous, want)
		}
	}
}

// The flash decides as a search of the whole triangle for the lowest Gibbs
// energy does: another method, same model.
func TestStabilityAgainstGridSearch(t *testing.T) {
	const n, each = 30, 20
	mixtures := fromPairs(t)
	random := rand.New(rand.NewPCG(1, 2))
	for _, k := range sorted(mixtures) {
		m := mixtures[k]
		for range each {
			z := thermo.Fractions{math.Pow(random.Float64(), 2) + 1e-3, random.Float64() + 1e-3, random.Float64() + 1e-3}
			sum := z[0] + z[1] + z[2]
			for i := range z {
				z[i] /= sum
			}
			tK := 280 + 70*random.Float64()
			s, err := m.Flash(z, tK)
			if err != nil {
				t.Error(err)
				continue
			}
			if lowest := lowestOnGrid(m, z, tK, n); lowest < -1e-5 && !s.Exists {
				t.Errorf("%v, z = %v, %.1f K: one liquid, yet a liquid %g below its tangent plane exists", k, z, tK, lowest)
			}
		}
	}
}

// lowestOnGrid is the least distance of a grid of liquids from the tangent plane of z.
func lowestOnGrid(m *thermo.Ternary, z thermo.Fractions, tK float64, n int) (lowest float64) {
	plane := m.LnGamma(z, tK)
	for i := 1; i < n; i++ {
		for j := 1; i+j < n; j++ {
			y := thermo.Fractions{float64(i) / float64(n), float64(j) / float64(n), float64(n-i-j) / float64(n)}
			ln := m.LnGamma(y, tK)
			var distance float64
			for c := range y {
				distance += y[c] * (math.Log(y[c]) + ln[c] - math.Log(z[c]) - plane[c])
			}
			lowest = math.Min(lowest, distance)
		}
	}
	return lowest
}

// Ternary azeotropes whose pairs are all in the model: 1.2 K, 6 wt% for 8 of 9.
func TestTernaryAzeotropes(t *testing.T) {
	const withinK, withinPercent = 1.2, 6.0
	mixtures := fromPairs(t)
	good := 0
	rows := table(t, "ternary_azeotropes.csv")
	for _, r := range rows {
		m := mixtures[[2]string{r["solvent"], r["carrier"]}]
		a, err := m.FindAzeotrope(atmospherePa)
		if err != nil {
			t.Errorf("%s, %s: %v", r["solvent"], r["carrier"], err)
			continue
		}
		w := m.Mass(a.Y)
		dT := a.TempK - 273.15 - r.number(t, "t_c")
		worst := 0.0
		for i, column := range []string{"wt_pct_water", "wt_pct_solvent", "wt_pct_carrier"} {
			worst = math.Max(worst, math.Abs(100*w[i]-r.number(t, column)))
		}
		t.Logf("%s, %s: %s %.2f °C (%+.2f K), %.1f/%.1f/%.1f wt%%, worst %.1f", r["solvent"], r["carrier"], a.Kind, a.TempK-273.15, dT, 100*w[0], 100*w[1], 100*w[2], worst)
		if math.Abs(dT) <= withinK && worst <= withinPercent {
			good++
		}
	}
	if len(rows) != 9 || good < 8 {
		t.Errorf("%d of %d within %g K and %g wt%%", good, len(rows), withinK, withinPercent)
	}
}

// A boiling liquid fulfils its conditions, and does not depend on where the
// search came from.
func TestBoilConditions(t *testing.T) {
	mixtures := fromPairs(t)
	keys := sorted(mixtures)
	rapid.Check(t, func(rt *rapid.T) {
		m := mixtures[rapid.SampledFrom(keys).Draw(rt, "mixture")]
		x := drawFractions(rt, 1e-6)
		pressurePa := rapid.Float64Range(5e3, 110e3).Draw(rt, "P")
		b, err := m.Boil(x, pressurePa, thermo.Boiling{})
		if err != nil {
			rt.Fatal(err)
		}
		layers := []thermo.Fractions{x}
		if b.Split.Exists {
			layers = []thermo.Fractions{b.Split.Organic, b.Split.Aqueous}
		}
		for _, layer := range layers {
			ln := m.LnGamma(layer, b.TempK)
			for i, xi := range layer {
				partial := xi * math.Exp(ln[i]) * m.Pure[i].VapourPressurePa.At(b.TempK)
				if math.Abs(partial/pressurePa-b.Y[i]) > 1e-6*(1e-3+b.Y[i]) {
					rt.Fatalf("component %d: partial pressure %g, vapour %g", i, partial/pressurePa, b.Y[i])
				}
			}
		}
		wetter := x
		wetter[0] *= 1.02
		near, err := m.Boil(wetter, pressurePa, thermo.Boiling{})
		if err != nil {
			rt.Fatal(err)
		}
		warm, err := m.Boil(x, pressurePa, near)
		if err != nil {
			rt.Fatal(err)
		}
		if math.Abs(warm.TempK-b.TempK) > 1e-4 {
			rt.Fatalf("%g K from nothing, %g K from a neighbour", b.TempK, warm.TempK)
		}
	})
}

func TestSettleByDensity(t *testing.T) {
	mixtures := fromPairs(t)
	for _, c := range []struct {
		pair    [2]string
		returns thermo.Returns
	}{
		{[2]string{"ethanol", "cyclohexane"}, thermo.Light},
		{[2]string{"acetonitrile", "dichloromethane"}, thermo.Heavy},
		{[2]string{"tert-butanol", "chloroform"}, thermo.Heavy},
	} {
		m := mixtures[c.pair]
		s, err := m.Flash(m.Mole(thermo.Fractions{0.3, 0.1, 0.6}), 293.15)
		if err != nil || !s.Exists {
			t.Fatal(c.pair, s, err)
		}
		if l := m.Settle(s, 293.15); l.Return != c.returns {
			t.Errorf("%v: %s return, organic %.0f, aqueous %.0f kg/m3", c.pair, l.Return, l.OrganicKgPerM3, l.AqueousKgPerM3)
		}
	}
	m := mixtures[[2]string{"methanol", "toluene"}]
	m.SpuriousGapBelowK = 288.15
	if _, err := m.Flash(thermo.Fractions{0.2, 0.4, 0.4}, 283.15); err == nil {
		t.Error("a false gap is flashed")
	}
	if l := m.Settle(thermo.TernarySplit{}, 293.15); l.Return != thermo.None || l.Reason == "" {
		t.Errorf("one liquid: %+v", l)
	}
}

func BenchmarkBoil(b *testing.B) {
	m := fromPairs(b)[[2]string{"ethanol", "cyclohexane"}]
	near := thermo.Boiling{}
	for b.Loop() {
		var err error
		if near, err = m.Boil(thermo.Fractions{0.02, 0.8, 0.18}, atmospherePa, near); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkFlash(b *testing.B) {
	m := fromPairs(b)[[2]string{"ethanol", "cyclohexane"}]
	for b.Loop() {
		if _, err := m.Flash(thermo.Fractions{0.13, 0.3, 0.57}, 293.15); err != nil {
			b.Fatal(err)
		}
	}
}
