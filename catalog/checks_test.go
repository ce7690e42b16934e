package catalog_test

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/thermo"
)

const zeroCelsiusK = 273.15

func checks(t testing.TB) *catalog.Checks {
	t.Helper()
	c, err := catalog.LoadChecks()
	if err != nil {
		t.Fatalf("the built-in checks have problems:\n%v", err)
	}
	return c
}

func mixture(cat *catalog.Catalog, key string) *thermo.Mixture {
	s := cat.Solvents[key]
	return &thermo.Mixture{Water: &cat.Solvents["water"].Pure, Solvent: &s.Pure, NRTL: s.Water.NRTL}
}

// compute returns what the catalog gives for a check, in the unit of its value.
func compute(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	switch group, _, _ := strings.Cut(c.Quantity, "-"); group {
	case "azeotrope":
		return azeotrope(cat, c)
	case "water", "solvent":
		return solubility(cat, c)
	case "gamma":
		return activity(cat, c)
	case "ternary":
		return ternaryAzeotrope(cat, c)
	case "loading":
		return 100 * cat.Agents[c.Subject].Isotherm.LoadingKgPerKg(c.PressurePa, c.TempK), nil
	case "share":
		return 100 * cat.Agents[c.Subject].Claim.Removed.SI, nil
	case "hydrate":
		for _, h := range cat.Agents[c.Subject].Hydrates {
			if h.Pair == c.Partner {
				return h.Activity.SI, nil
			}
		}
		return math.NaN(), fmt.Errorf("no pair %q", c.Partner)
	}
	return pure(cat, c)
}

func pure(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	p := &cat.Solvents[c.Subject].Pure
	switch c.Quantity {
	case "boiling-point":
		tK, err := thermo.Boil(p, c.PressurePa)
		return tK - zeroCelsiusK, err
	case "vapour-pressure":
		return p.VapourPressurePa.At(c.TempK), nil
	case "density":
		return p.DensityKgPerM3.At(c.TempK), nil
	case "heat-of-vaporization":
		return p.HeatOfVaporizationJ.At(c.TempK) / 1e3, nil
	case "heat-capacity":
		return p.HeatCapacityJPerMolK.At(c.TempK), nil
	case "viscosity":
		return p.ViscosityPaS.At(c.TempK) * 1e3, nil
	}
	return math.NaN(), fmt.Errorf("nothing computes %q", c.Quantity)
}

func solubility(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m := mixture(cat, c.Subject)
	s, err := m.SplitAt(c.TempK)
	switch {
	case err != nil:
		return math.NaN(), err
	case !s.Exists:
		return math.NaN(), nil
	case c.Quantity == "solvent-solubility":
		return 100 * (1 - m.MassFraction(s.XAqueous)), nil
	}
	return 100 * m.MassFraction(s.XOrganic), nil
}

func azeotrope(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m := mixture(cat, c.Subject)
	a, err := m.FindAzeotrope(c.PressurePa)
	switch {
	case err != nil:
		return math.NaN(), err
	case c.Quantity == "azeotrope-absent" && a.Kind == thermo.NoAzeotrope:
		return 0, nil
	case c.Quantity == "azeotrope-absent":
		return 1, nil
	case a.Kind == thermo.NoAzeotrope:
		return math.NaN(), nil
	case c.Quantity == "azeotrope-water":
		return 100 * m.MassFraction(a.YWater), nil
	}
	return a.TempK - zeroCelsiusK, nil
}

func activity(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	if c.Quantity == "gamma-water" {
		return mixture(cat, c.Subject).GammaInfinite(c.TempK), nil
	}
	pair := cat.Pairs[[2]string{c.Subject, c.Partner}]
	if pair == nil {
		return math.NaN(), fmt.Errorf("no set for %s + %s", c.Subject, c.Partner)
	}
	if c.Quantity == "gamma-solvent-in-carrier" {
		ln, _ := pair.NRTL.Pair(0, c.TempK)
		return math.Exp(ln), nil
	}
	_, ln := pair.NRTL.Pair(1, c.TempK)
	return math.Exp(ln), nil
}

// ternaryOf joins the sets of a solvent and a carrier: the ternary set where there
// is one, the three pairs elsewhere.
func ternaryOf(cat *catalog.Catalog, solvent, carrier string) (*thermo.Ternary, error) {
	key := [2]string{solvent, carrier}
	m := &thermo.Ternary{Pure: [thermo.MaxComponents]*thermo.Pure{&cat.Solvents["water"].Pure, &cat.Solvents[solvent].Pure, &cat.Solvents[carrier].Pure}}
	if set := cat.Ternaries[key]; set != nil {
		m.NRTL, m.Extra = set.NRTL, set.Extra
		return m, nil
	}
	pair := cat.Pairs[key]
	if pair == nil {
		return nil, nil
	}
	m.NRTL = thermo.JoinPairs(cat.Solvents[solvent].Water.NRTL, cat.Solvents[carrier].Water.NRTL, pair.NRTL)
	return m, nil
}

func ternaryAzeotrope(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m, err := ternaryOf(cat, c.Subject, c.Partner)
	if m == nil || err != nil {
		return math.NaN(), err
	}
	a, err := m.FindAzeotrope(c.PressurePa)
	if err != nil {
		return math.NaN(), err
	}
	mass := m.Mass(a.Y)
	switch c.Quantity {
	case "ternary-azeotrope-water":
		return 100 * mass[thermo.InWater], nil
	case "ternary-azeotrope-solvent":
		return 100 * mass[thermo.InSolvent], nil
	}
	return a.TempK - zeroCelsiusK, nil
}

// Published rows must hold or say why not; rows from memory decide nothing.
func TestChecks(t *testing.T) {
	cat, all := load(t), checks(t)
	type tally struct{ rows, held, excused int }
	counts := map[catalog.CheckKind]*tally{}
	for i := range all.Rows {
		c := &all.Rows[i]
		n := counts[c.Kind]
		if n == nil {
			n = &tally{}
			counts[c.Kind] = n
		}
		n.rows++
		computed, err := compute(cat, c)
		switch {
		case err == nil && c.Holds(computed):
			n.held++
			if c.Excuse != "" && c.Quantity != "azeotrope-water" { // there it may also excuse the activity
				t.Errorf("%s:%d: %s of %s holds (%.5g); its excuse is stale", c.File, c.Line, c.Quantity, c.Subject, computed)
			}
		case c.Excuse != "":
			n.excused++
		case c.Kind == catalog.Recalled:
			t.Logf("%s:%d: %s of %s %s: %.5g, recalled %.5g %s (%v)", c.File, c.Line, c.Quantity, c.Subject, c.Partner, computed, c.Value, c.Unit, err)
		default:
			t.Errorf("%s:%d: %s of %s %s at %.1f °C: %.5g, %s says %.5g %s; off by %.3g, limit %.3g %s (%v)", c.File, c.Line, c.Quantity, c.Subject, c.Partner,
				c.TempK-zeroCelsiusK, computed, c.Source, c.Value, c.Unit, c.Deviation(computed), c.Limit, c.LimitUnit, err)
		}
	}
	excused := 0
	for kind, n := range counts {
		t.Logf("%s: %d rows, %d hold, %d excused", kind, n.rows, n.held, n.excused)
		excused += n.excused
	}
	if share := float64(excused) / float64(len(all.Rows)); share > 0.06 || len(all.Rows) < 900 {
		t.Errorf("%.1f %% of %d rows are excused; at most 6 %% of at least 900 is wanted", 100*share, len(all.Rows))
	}
}

// isoactivity is how far the activities of water and of the alcohol differ between
// the layers of a tie-line, as ln ratios; NaN where there is no ternary set.
func isoactivity(cat *catalog.Catalog, l catalog.TieLine) (water, alcohol float64) {
	set := cat.Ternaries[[2]string{l.Alcohol, l.Carrier}]
	if set == nil {
		return math.NaN(), math.NaN()
	}
	m, _ := ternaryOf(cat, l.Alcohol, l.Carrier)
	organic, aqueous := m.Mole(l.Organic), m.Mole(l.Aqueous)
	a, b := m.LnGamma(organic, l.TempK), m.LnGamma(aqueous, l.TempK)
	ratio := func(i int) float64 { return math.Log(organic[i]/aqueous[i]) + a[i] - b[i] }
	return ratio(thermo.InWater), ratio(thermo.InSolvent)
}

// The two layers of a published tie-line have the same activities, within what
// each set states. Source: IUPAC-NIST Solubility Data Series, volume 69, with each
// row.
func TestTieLines(t *testing.T) {
	cat := load(t)
	for key, miss := range tieLineMisses(cat, checks(t)) {
		set := cat.Ternaries[key]
		t.Logf("%s + %s: median %.3f in ln a of water (%.2f stated), %.3f of the alcohol (%.2f), over %d lines", key[0], key[1], miss.water, set.MissWater, miss.alcohol, set.MissAlcohol, miss.lines)
		if !miss.within(set) {
			t.Errorf("%s + %s: the layers differ by %.3f (water) and %.3f (alcohol) in ln a; %.2f and %.2f are stated", key[0], key[1], miss.water, miss.alcohol, set.MissWater, set.MissAlcohol)
		}
	}
}

func (m tieLineMiss) within(set *catalog.TernarySet) bool {
	return m.water <= set.MissWater && m.alcohol <= set.MissAlcohol
}

type tieLineMiss struct {
	water, alcohol float64
	lines          int
}

func tieLineMisses(cat *catalog.Catalog, all *catalog.Checks) map[[2]string]tieLineMiss {
	water, alcohol := map[[2]string][]float64{}, map[[2]string][]float64{}
	for _, l := range all.TieLines {
		w, a := isoactivity(cat, l)
		if math.IsNaN(w) && cat.Ternaries[[2]string{l.Alcohol, l.Carrier}] == nil {
			continue
		}
		key := [2]string{l.Alcohol, l.Carrier}
		water[key], alcohol[key] = append(water[key], math.Abs(w)), append(alcohol[key], math.Abs(a))
	}
	out := map[[2]string]tieLineMiss{}
	for key := range water {
		out[key] = tieLineMiss{median(water[key]), median(alcohol[key]), len(water[key])}
	}
	return out
}

// median counts NaN as the worst.
func median(values []float64) float64 {
	sorted := slices.Clone(values)
	slices.SortFunc(sorted, func(a, b float64) int {
		switch {
		case math.IsNaN(a):
			return 1
		case math.IsNaN(b):
			return -1
		}
		return cmp.Compare(a, b)
	})
	return sorted[len(sorted)/2]
}

// The organic layers of published tie-lines hold the water, and the alcohol, that
// the correlations give, within their stated factors; and without alcohol they hold
// the water of the carrier.
func TestOrganicLayers(t *testing.T) {
	cat := load(t)
	for key, miss := range layerMisses(cat, checks(t)) {
		l := cat.Layers[key]
		t.Logf("%s + %s: water x %.2f (%.2f stated), alcohol x %.2f (%.2f), carrier alone x %.3f", key[0], key[1], math.Exp(miss.water), l.Factor, math.Exp(miss.share), l.DistributionFactor, math.Exp(miss.alone))
		if !miss.within(l) {
			t.Errorf("%s + %s: %+v in ln, beyond what is stated", key[0], key[1], miss)
		}
	}
}

// layerMiss holds logarithms of computed over published: the median of either half
// of the lines, those with little and those with much alcohol, whichever is worse;
// and the water of the carrier alone.
type layerMiss struct{ water, share, alone float64 }

func (m layerMiss) within(l *catalog.OrganicLayer) bool {
	const reading, alone = 0.02, 0.05
	ok := m.water <= math.Log(l.Factor)+reading && math.Abs(m.alone) <= alone
	return ok && (!l.Distribution || m.share <= math.Log(l.DistributionFactor)+reading)
}

func layerMisses(cat *catalog.Catalog, all *catalog.Checks) map[[2]string]layerMiss {
	water, share := map[[2]string][][2]float64{}, map[[2]string][][2]float64{}
	for _, line := range all.TieLines {
		key := [2]string{line.Alcohol, line.Carrier}
		l := cat.Layers[key]
		if l == nil || line.Organic[0] <= 0 {
			continue
		}
		r := line.Organic[1] / (line.Organic[1] + line.Organic[2])
		w, ok := l.Water(r, line.TempK)
		if ok {
			water[key] = append(water[key], [2]float64{r, math.Log(w / line.Organic[0])})
		}
		s := line.Aqueous[1] / (line.Aqueous[1] + line.Aqueous[0])
		if ok && l.Distribution && s >= l.SMin && s <= l.SMax {
			share[key] = append(share[key], [2]float64{s, math.Log(l.Share(s) / r)})
		}
	}
	out := map[[2]string]layerMiss{}
	for key, l := range cat.Layers {
		alone, _, err := mixture(cat, key[1]).Solubility(298.15)
		if err != nil {
			alone = math.NaN()
		}
		out[key] = layerMiss{lean(water[key]), lean(share[key]), math.Log(l.W0 / alone)}
	}
	return out
}

// lean is the worse of the medians of the two halves of (x, y), sorted by x.
func lean(points [][2]float64) float64 {
	if len(points) == 0 {
		return 0
	}
	slices.SortFunc(points, func(a, b [2]float64) int { return cmp.Compare(a[0], b[0]) })
	half := func(part [][2]float64) float64 {
		var ys []float64
		for _, p := range part {
			ys = append(ys, p[1])
		}
		return math.Abs(median(ys))
	}
	middle := len(points) / 2
	if middle == 0 {
		return half(points)
	}
	return math.Max(half(points[:middle]), half(points[middle:]))
}

// The residuals that the reactive agents and salts carry are those of the dryings
// as published, each with its source there.
func TestResiduals(t *testing.T) {
	cat := load(t)
	for _, problem := range strayResiduals(cat, checks(t)) {
		t.Error(problem)
	}
}

func strayResiduals(cat *catalog.Catalog, all *catalog.Checks) (problems []string) {
	for key, a := range cat.Agents {
		for _, r := range a.Residuals {
			if !slices.ContainsFunc(all.Dryings, func(d catalog.Drying) bool {
				return d.Agent == key && d.Solvent == r.Solvent && math.Abs(d.Left/r.Water.SI-1) < 0.01
			}) {
				problems = append(problems, fmt.Sprintf("no drying of %s over %s left %s", r.Solvent, key, r.Water.Text))
			}
		}
	}
	return problems
}
