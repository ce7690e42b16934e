package mixture_test

import (
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

func shelf(t *testing.T) *catalog.Catalog {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return cat
}

// The limits of the catalog reach the model: triethylamine and water are not
// modelled below 20 °C, nor 2-butanone below 10 °C.
func TestLimitsReachTheModel(t *testing.T) {
	cat := shelf(t)
	for solvent, lowestK := range map[string]float64{"triethylamine": 293.15, "2-butanone": 283.15} {
		m := mixture.Pair(cat, cat.Solvents[solvent])
		if m.CheckTemperature(lowestK-1) == nil || m.CheckTemperature(lowestK+1) != nil {
			t.Errorf("%s: the limit at %.0f K does not hold", solvent, lowestK)
		}
	}
}

// A set fitted to the three goes before their pairs, and a triple without a model
// is refused.
func TestTernary(t *testing.T) {
	cat := shelf(t)
	for key, set := range cat.Ternaries {
		m, err := mixture.Ternary(cat, key[0], key[1])
		if err != nil || m.Extra != set.Extra || m.NRTL != set.NRTL {
			t.Errorf("%v: not the set fitted to the three (%v)", key, err)
		}
	}
	for key, pair := range cat.Pairs {
		m, err := mixture.Ternary(cat, key[0], key[1])
		if err != nil || m.SpuriousGapBelowK != pair.SpuriousGapBelowK {
			t.Errorf("%v: %v", key, err)
			continue
		}
		if cat.Ternaries[key] == nil && m.NRTL.A[thermo.InSolvent][thermo.InCarrier] != pair.NRTL.A[0][1] {
			t.Errorf("%v: the pair is not in its place", key)
		}
	}
	for _, key := range [][2]string{{"toluene", "cyclohexane"}, {"toluene", "nothing"}, {"water", "toluene"}} {
		if _, err := mixture.Ternary(cat, key[0], key[1]); err == nil || !strings.Contains(err.Error(), key[0]) {
			t.Errorf("%v: %v", key, err)
		}
	}
}
