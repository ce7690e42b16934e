package mixture_test

import (
	"math"
	"testing"

	"parch/internal/mixture"
	"parch/internal/thermo"
)

// Ethanol and water at 20 °C, kg/m3 at % m/m of ethanol: OIML R 22 (1975), from memory.
func TestDensityOfAlcoholAndWater(t *testing.T) {
	m, err := mixture.Ternary(shelf(t), "ethanol", "toluene")
	if err != nil {
		t.Fatal(err)
	}
	for ethanol, want := range map[float64]float64{0: 998.2, 0.30: 953.8, 0.50: 913.8, 0.70: 867.6, 1: 789.2} {
		if got := m.Density(m.Mole(thermo.Fractions{1 - ethanol, ethanol, 0}), 293.15); math.Abs(got/want-1) > 0.008 {
			t.Errorf("%.0f %% of ethanol: %.1f kg/m3, %.1f published", 100*ethanol, got, want)
		}
	}
}

// Of ethanol, water and toluene the layer with the toluene floats, also where the
// other holds so much ethanol that additive volumes would let it float instead.
// Toluene (867 kg/m3) and the layer of half ethanol (914) are handbook values.
func TestTolueneFloatsOnAlcoholAndWater(t *testing.T) {
	m, err := mixture.Ternary(shelf(t), "ethanol", "toluene")
	if err != nil {
		t.Fatal(err)
	}
	const tK = 298.15
	split := 0
	for ethanol := 0.02; ethanol < 0.5; ethanol += 0.04 {
		s, err := m.Flash(m.Mole(thermo.Fractions{0.5 * (1 - ethanol), ethanol, 0.5 * (1 - ethanol)}), tK)
		if err != nil {
			t.Fatal(err)
		}
		if !s.Exists {
			continue
		}
		split++
		if l := m.Settle(s, tK); l.Return == thermo.Heavy {
			t.Errorf("%.0f %% of ethanol: organic %.0f, aqueous %.0f kg/m3", 100*ethanol, l.OrganicKgPerM3, l.AqueousKgPerM3)
		}
		t.Logf("%.0f %%: %+.1f %%", 100*ethanol, 100*(m.Density(s.Aqueous, tK)/m.Density(s.Organic, tK)-1))
	}
	if split < 6 {
		t.Errorf("%d splits", split)
	}
}
