package listing_test

import (
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/listing"
)

func kinds(t *testing.T) (*catalog.Catalog, []listing.Kind) {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return cat, listing.Of(cat)
}

// Every number stands with a source that is known and a grade of confidence.
func TestEveryNumberHasASource(t *testing.T) {
	cat, all := kinds(t)
	for _, k := range all {
		if len(k.Entries) == 0 {
			t.Errorf("no %s", k.Name)
		}
		for _, e := range k.Entries {
			if len(e.Facts) == 0 {
				t.Errorf("%s %s says nothing", k.Name, e.Key)
			}
			for _, f := range e.Facts {
				_, notNumber := strconv.ParseFloat(f.Value, 64)
				if notNumber != nil {
					continue
				}
				if _, known := cat.Sources[f.Source]; !known || f.Confidence == "" {
					t.Errorf("%s %s: %s %s %s rests on %q, %q", k.Name, e.Key, f.What, f.Value, f.Unit, f.Source, f.Confidence)
				}
			}
		}
	}
}

// The bands are in the unit of the value: 35 to 70 %, not 0.35 to 0.7.
func TestBandsAreInTheUnitOfTheValue(t *testing.T) {
	_, all := kinds(t)
	banded := 0
	for _, k := range all {
		for _, e := range k.Entries {
			for _, f := range e.Facts {
				if f.Low == "" || f.High == "" {
					continue
				}
				banded++
				value, err1 := strconv.ParseFloat(f.Value, 64)
				low, err2 := strconv.ParseFloat(f.Low, 64)
				high, err3 := strconv.ParseFloat(f.High, 64)
				const rounding = 1e-3
				if err1 != nil || err2 != nil || err3 != nil || !(low <= value*(1+rounding) && high >= value*(1-rounding) && low < high) {
					t.Errorf("%s %s: %s %s to %s does not hold %s %s", k.Name, e.Key, f.What, f.Low, f.High, f.Value, f.Unit)
				}
			}
		}
	}
	if banded < 100 {
		t.Errorf("%d bands only", banded)
	}
}

// What a curve gives at 25 °C. Water: IAPWS-95; toluene boils at 110.6 °C and its
// density is 862.2 kg/m3 (CRC Handbook, 95th ed.).
func TestCurvesAtRoomTemperature(t *testing.T) {
	_, all := kinds(t)
	solvents, _ := listing.Find(all, "solvents")
	for _, c := range []struct {
		key, what string
		want      float64
		within    float64
	}{
		{"water", "vapour pressure at 25 °C", 3169.9, 0.01},
		{"water", "density at 25 °C", 997.0, 0.01},
		{"toluene", "density at 25 °C", 862.2, 0.01},
	} {
		e, _ := solvents.Find(c.key)
		i := slices.IndexFunc(e.Facts, func(f listing.Fact) bool { return f.What == c.what })
		if i < 0 {
			t.Errorf("%s: no %s", c.key, c.what)
			continue
		}
		if got, err := strconv.ParseFloat(e.Facts[i].Value, 64); err != nil || math.Abs(got/c.want-1) > c.within {
			t.Errorf("%s: %s is %s, want %g", c.key, c.what, e.Facts[i].Value, c.want)
		}
	}
}

func TestOwnDataAreMarked(t *testing.T) {
	data, err := os.ReadFile("../../catalog/testdata/own.yaml")
	if err != nil {
		t.Fatal(err)
	}
	cat, err := catalog.LoadWith(catalog.File{Name: "own.yaml", Data: data})
	if err != nil {
		t.Fatal(err)
	}
	all := listing.Of(cat)
	for kind, keys := range map[string][]string{
		"agents": {"sieve-3a-pilot"}, "apparatus": {"still-100l"}, "prices": {"sieve-3a-pilot", "still-100l", "toluene"},
		"practice": {"heat-share"}, "histories": {"pilot-oven"}, "sources": {"pilot-hall"}, "emissions": {"making/sieve-3a-pilot"}, "solvents": nil,
	} {
		k, _ := listing.Find(all, kind)
		var own []string
		for _, e := range k.Entries {
			if e.Own {
				own = append(own, e.Key)
			}
		}
		if !slices.Equal(own, keys) {
			t.Errorf("own %s: %q, want %q", kind, own, keys)
		}
	}
	if said := listing.Own(cat); !strings.Contains(said, "own.yaml") || !strings.Contains(said, "prices sieve-3a-pilot, still-100l, toluene") {
		t.Errorf("said: %s", said)
	}
	if plain, _ := catalog.Load(); listing.Own(plain) != "" {
		t.Errorf("the built-in catalog has own data: %s", listing.Own(plain))
	}
}
