package catalog_test

import (
	"math"
	"strings"
	"testing"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

// The whole shelf: every solvent can be priced, burnt, bought dry and met by every
// agent, and every agent with an isotherm has what a soak asks for.
func TestShelfIsComplete(t *testing.T) {
	cat := load(t)
	if len(cat.Solvents) != 50 || len(cat.Agents) != 17 || len(cat.Pairs) != 210 || len(cat.Ternaries) != 18 || len(cat.Layers) != 42 {
		t.Errorf("%d solvents with water, %d agents, %d carrier pairs, %d ternary sets, %d organic layers", len(cat.Solvents), len(cat.Agents), len(cat.Pairs), len(cat.Ternaries), len(cat.Layers))
	}
	for key, s := range cat.Solvents {
		if key == "water" {
			continue
		}
		for _, item := range []string{key, key + "-dry"} {
			if p := cat.Prices[item]; p.Unit != "litre" || p.Amount == "" || p.Label == "" {
				t.Errorf("price of %s: %+v", item, p)
			}
		}
		if cat.Prices[key+"-dry"].WaterMax == nil || cat.Emissions["making/"+key].SI <= 0 || cat.Emissions["burning/"+key].SI <= 0 {
			t.Errorf("%s: no water limit of the dry grade, or no emissions", key)
		}
		if s.Water == nil || s.StillRate.SI <= 0 || s.Hazards.PeroxideClass == "" || s.Hazards.Flammability == "" || s.Own {
			t.Errorf("%s is not complete", key)
		}
		for agent := range cat.Agents {
			if v, ok := cat.Verdict(s, agent); !ok || v.Reason == "" {
				t.Errorf("nothing is said of %s with %s", key, agent)
			}
		}
	}
	for key, a := range cat.Agents {
		if _, ok := cat.Prices[key]; !ok {
			t.Errorf("no price of %s", key)
		}
		if a.Isotherm != nil && (a.BeadDiameter == nil || a.BeadDensity == nil || a.BeadPorosity == nil || a.BeadTortuosity == nil || a.HoldUp == nil || a.MaxDose == nil || a.Lives == nil || a.Fade == nil) {
			t.Errorf("%s: the beads are not complete", key)
		}
		if (a.Kind == "salt") != (len(a.Hydrates) > 0 && a.Claim != nil) || (a.Kind == "reactive") != (a.Reaction != nil) {
			t.Errorf("%s, %s: %d hydrates, claim %v, reaction %v", key, a.Kind, len(a.Hydrates), a.Claim, a.Reaction)
		}
	}
	for key, a := range cat.Apparatus {
		if _, ok := cat.Prices[key]; !ok || a.Life == nil {
			t.Errorf("%s: no price or no life", key)
		}
	}
}

// Carbon dioxide of complete combustion, kg/kg: arithmetic on the formula, as in
// the cost figures that the project was given.
func TestBurning(t *testing.T) {
	cat := load(t)
	for key, want := range map[string]float64{
		"toluene": 3.34, "n-hexane": 3.06, "2-methyltetrahydrofuran": 2.55, "mtbe": 2.50, "tetrahydrofuran": 2.44, "diethyl-ether": 2.38,
		"acetone": 2.27, "acetonitrile": 2.14, "ethyl-acetate": 2.00, "ethanol": 1.91, "n-n-dimethylformamide": 1.81, "methanol": 1.37,
		"dimethyl-sulfoxide": 1.13, "dichloromethane": 0.52,
	} {
		if got := cat.Emissions["burning/"+key].SI; math.Abs(got-want) > 0.006 {
			t.Errorf("%s: %.3f kg/kg, want %.2f", key, got, want)
		}
	}
}

// The harmful four carry water only where a job names them.
func TestCarriersByName(t *testing.T) {
	cat := load(t)
	for key, c := range cat.Carriers {
		harmful := key == "benzene" || key == "chloroform" || key == "carbon-tetrachloride" || key == "1-2-dichloroethane"
		if c.ByName != harmful || c.Reason == "" {
			t.Errorf("%s: by name %v, because %q", key, c.ByName, c.Reason)
		}
	}
	for _, key := range []string{"benzene", "chloroform", "carbon-tetrachloride", "1-2-dichloroethane", "toluene", "cyclohexane"} {
		if cat.Carriers[key] == nil {
			t.Errorf("nothing is said of %s as a carrier", key)
		}
	}
}

// One stable gap or none for every pair from 5 to 110 °C, by the convex hull: some
// sets have a metastable island inside the gap, which must not count.
func TestGaps(t *testing.T) {
	cat := load(t)
	for key, want := range map[string]int{"toluene": 1, "n-heptane": 1, "cyclohexane": 1, "n-butyl-acetate": 1, "ethanol": 0, "tetrahydrofuran": 0, "acetone": 0} {
		if n := mixture.Pair(cat, cat.Solvents[key]).NRTL.CountGaps(298.15); n != want {
			t.Errorf("%s: %d gaps, want %d", key, n, want)
		}
	}
	spoilt := *cat.Solvents["ethanol"]
	pair := *spoilt.Water
	pair.NRTL = thermo.BinaryNRTL(2*pair.A12, pair.B12, 4, pair.B21, 0.2)
	spoilt.Water = &pair
	other := *cat
	other.Solvents = map[string]*catalog.Solvent{"water": cat.Solvents["water"], "ethanol": &spoilt}
	if n := mixture.Pair(&other, &spoilt).NRTL.CountGaps(298.15); n != 1 {
		t.Errorf("a spoilt set has %d gaps; the count sees none", n)
	}
}

// Stoichiometry of the reactive agents and capacities of the hydrates, against
// figures of the trade: 1.14, 0.52 and 0.99 L of hydrogen per gram at 20 °C, 1.17 g
// of calcium hydride per gram of water, 0.066 g/g for calcium sulfate (Robertson,
// Laboratory Practice of Organic Chemistry, 3rd ed. (1954), secondary
// copy; the others from memory).
func TestChemistry(t *testing.T) {
	cat := load(t)
	for _, c := range []struct {
		what      string
		got, want float64
	}{
		{"hydrogen of calcium hydride, m3/kg", cat.Agents["calcium-hydride"].Reaction.GasM3.SI, 1.14},
		{"hydrogen of sodium, m3/kg", cat.Agents["sodium"].Reaction.GasM3.SI, 0.52},
		{"hydrogen of magnesium, m3/kg", cat.Agents["magnesium"].Reaction.GasM3.SI, 0.99},
		{"need of calcium hydride, kg/kg", cat.Agents["calcium-hydride"].Reaction.Need.SI, 1.17},
		{"capacity of calcium sulfate, kg/kg", cat.Agents["calcium-sulfate"].Hydrates[0].Capacity.SI, 0.066},
	} {
		if math.Abs(c.got/c.want-1) > 0.01 {
			t.Errorf("%s: %.4g, want %.4g", c.what, c.got, c.want)
		}
	}
	if v := cat.Agents["sodium-sulfate"].Claim.Except["acetonitrile"]; v.SI != 0 || v.Text == "" {
		t.Errorf("sodium sulfate in acetonitrile: %+v, want none removed", v)
	}
}

func TestCheckProblems(t *testing.T) {
	cat := load(t)
	fsys := shelfCopy(t)
	for _, name := range []string{"pure.csv", "azeotropes.csv", "solubility.csv", "activity.csv", "ternary-azeotropes.csv", "agents.csv", "dryings.csv", "tie-lines.csv"} {
		fsys[name] = fsys["checks/"+name]
	}
	if _, err := catalog.ParseChecks(fsys, cat); err != nil {
		t.Fatal(err)
	}
	spoil(t, fsys, "azeotropes.csv", "azeotrope-water,o-xylene,,,101.325,49.9,% m/m,1.5,% m/m,memory,memory,above", "azeotrope-water,o-xylene,,,101.325,49.9,% m/m,1.5,% m/m,memory,memory,,above")
	if _, err := catalog.ParseChecks(fsys, cat); err == nil || !strings.Contains(err.Error(), "azeotropes.csv:") {
		t.Errorf("a row with a cell too many: %v", err)
	}
}

// A heteroazeotrope with more water than its activity allows must say why it is kept.
func TestImpossibleAzeotrope(t *testing.T) {
	cat := load(t)
	fsys := shelfCopy(t)
	for name, f := range fsys {
		fsys[strings.TrimPrefix(name, "checks/")] = f
	}
	line := spoil(t, fsys, "azeotropes.csv", "49.9,% m/m,1.5,% m/m,memory,memory,above the activity of water: at most 38.8 % m/m at that temperature,", "49.9,% m/m,1.5,% m/m,memory,memory,,")
	_, err := catalog.ParseChecks(fsys, cat)
	want := "azeotrope-water: 49.9 % m/m of water at 93.5 °C is 1.29 times what the activity of water allows"
	if err == nil || !strings.Contains(err.Error(), want) || line == 0 {
		t.Errorf("got %v, want %q", err, want)
	}
}
