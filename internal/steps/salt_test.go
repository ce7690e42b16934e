package steps_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"parch/internal/steps"
)

var claims = steps.SaltRules{LowestOutlet: 50e-6, LowestTarget: 100e-6, ClaimTimeS: 900, ClaimDoseKgPerM3: 100}

// Shares removed in 15 min at 10 % m/v: a published comparison in wet diethyl
// ether, from a secondary page; none by sodium sulfate from acetonitrile (J. Food
// Hyg. Soc. Japan, abstract).
func salt(key string) steps.SaltAgent {
	s := steps.SaltAgent{Key: key, HoldUpM3PerKg: 1.2e-3, MaxDoseKgPerM3: 200}
	switch key {
	case "magnesium-sulfate":
		s.MolarMassKgPerMol, s.ShareRemoved = 0.12037, 0.80
		s.Pairs = []steps.HydratePair{{Name: "MgSO4/MgSO4.H2O", Activity: 0.02, WaterMolPerMol: 1}, {Name: "MgSO4.H2O/MgSO4.6H2O", Activity: 0.495, WaterMolPerMol: 5, HeatJPerMolWater: 9.3e3}, {Name: "MgSO4.6H2O/MgSO4.7H2O", Activity: 0.522, WaterMolPerMol: 1, HeatJPerMolWater: 15.6e3}}
	case "sodium-sulfate":
		s.MolarMassKgPerMol, s.ShareRemoved, s.UselessAboveK = 0.14204, 0.20, 305.55
		s.Pairs = []steps.HydratePair{{Name: "Na2SO4/Na2SO4.10H2O", Activity: 0.80, WaterMolPerMol: 10, HeatJPerMolWater: 8.2e3}}
	case "calcium-chloride":
		s.MolarMassKgPerMol, s.ShareRemoved = 0.11098, 0.85
		s.Pairs = []steps.HydratePair{{Name: "CaCl2/CaCl2.2H2O", Activity: 0.012, WaterMolPerMol: 2, HeatJPerMolWater: 17.7e3}, {Name: "CaCl2.2H2O/CaCl2.4H2O", Activity: 0.050, WaterMolPerMol: 2, HeatJPerMolWater: 17.5e3}, {Name: "CaCl2.4H2O/CaCl2.6H2O", Activity: 0.197, WaterMolPerMol: 2, HeatJPerMolWater: 13.3e3}}
	case "calcium-sulfate":
		s.MolarMassKgPerMol, s.ShareRemoved = 0.13614, 0.22
		s.Pairs = []steps.HydratePair{{Name: "CaSO4/CaSO4.0.5H2O", Activity: 1.4e-3, WaterMolPerMol: 0.5, HeatJPerMolWater: 21.9e3}}
	case "potassium-carbonate":
		s.MolarMassKgPerMol, s.ShareRemoved = 0.13821, 0.20
		s.Pairs = []steps.HydratePair{{Name: "K2CO3/K2CO3.1.5H2O", Activity: 0.027, WaterMolPerMol: 1.5, HeatJPerMolWater: 19.6e3}}
	}
	return s
}

var salts = []string{"magnesium-sulfate", "sodium-sulfate", "calcium-chloride", "calcium-sulfate", "potassium-carbonate"}

func flask() steps.SaltRig {
	return steps.SaltRig{TempK: 293.15, TimeS: 900, AttendedS: 1800}
}

// Gibbs energies of formation, kJ/mol at 25 °C: NBS Tables (1982) from memory,
// magnesium sulfate hydrates of Grevel & Majzlan, Geochim. Cosmochim. Acta 73
// (2009) 6805. The activities are those tabulated with them.
func TestPairActivities(t *testing.T) {
	for _, c := range []struct {
		pair                      string
		dry, hydrate, mol, a, tol float64
	}{
		{"MgSO4/1", -1170.6, -1437.92, 1, 5.14e-6, 0.05},
		{"MgSO4.1/4", -1437.92, -2153.8, 3, 0.547, 0.05},
		{"MgSO4.1/6", -1437.92, -2632.28, 5, 0.495, 0.05},
		{"MgSO4.6/7", -2632.28, -2871.02, 1, 0.522, 0.05},
		{"MgSO4/7", -1170.6, -2871.02, 7, 0.0968, 0.05},
		{"Na2SO4/10", -1270.16, -3646.85, 10, 0.804, 0.05},
		{"K2CO3/1.5", -1063.5, -1432.5, 1.5, 0.0279, 0.05},
		{"CaSO4/0.5, soluble alpha", -1313.42, -1436.74, 0.5, 0.0216, 0.05},
		{"CaSO4/0.5, soluble beta", -1309.05, -1435.78, 0.5, 0.00138, 0.05},
		{"CaSO4/0.5, insoluble", -1321.79, -1436.74, 0.5, 18.5, 0.05},
		{"CaSO4.0.5/2", -1436.74, -1797.28, 1.5, 0.272, 0.05},
		{"CuSO4/1", -661.8, -918.11, 1, 0.000436, 0.05},
		{"CuSO4.1/3", -918.11, -1399.96, 2, 0.216, 0.05},
		{"CuSO4.3/5", -1399.96, -1879.745, 2, 0.328, 0.05},
		{"LiCl/1", -384.37, -631.8, 1, 0.0157, 0.05},
		{"KOH/1", -379.08, -645.1, 1, 8.68e-6, 0.05},
		{"KOH.1/2", -645.1, -887.3, 1, 0.129, 0.05},
		{"NaOH/1", -379.494, -629.338, 1, 0.00592, 0.05},
	} {
		near(t, c.pair, steps.PairActivity(c.dry*1e3, c.hydrate*1e3, c.mol), c.a, c.tol)
	}
}

// Independent routes to the same activities: solubility products kept by
// geochemical codes (log K of both solids; Na2SO4 -0.300 and -1.238, CaCl2 11.79
// and 7.95): a = 10^((K_hydrate - K_dry)/n).
func TestPairActivitiesFromSolubilityProducts(t *testing.T) {
	near(t, "Na2SO4/10", steps.PairActivity(-1270.16e3, -3646.85e3, 10), math.Pow(10, (-1.238+0.300)/10), 0.01)
	near(t, "CaCl2/2", salt("calcium-chloride").Pairs[0].Activity, math.Pow(10, (7.95-11.79)/2), 0.01)
	near(t, "MgSO4.1/6", steps.PairActivity(-1437.92e3, -2632.28e3, 5), math.Pow(10, (-1.635+0.123)/5), 0.05)
}

// The Gibbs-Helmholtz slope: sodium sulfate gives its water up at 32.4 °C, where
// the activity of the pair meets that of the saturated solution, about 0.87 (from
// memory). The heat of 8.2 kJ/mol carries 0.804 up to 0.87 there.
func TestPairActivityWithTemperature(t *testing.T) {
	near(t, "Na2SO4 at 32.4 °C", salt("sodium-sulfate").Pairs[0].At(305.55), 0.87, 0.02)
	for _, key := range salts {
		for _, p := range salt(key).Pairs {
			near(t, p.Name, p.At(298.15), p.Activity, 1e-12)
			if p.At(313.15) < p.Activity {
				t.Errorf("%s dries better when warm", p.Name)
			}
		}
	}
}

// Taken alone the equilibrium of calcium chloride in toluene is 6 mg/kg (its
// activity of 0.012 times the solubility), which nobody sees and nobody may claim.
func TestClaimsAreLimited(t *testing.T) {
	m := mixture(t, "toluene")
	warm := flask()
	warm.TempK = 298.15
	o, err := steps.RunSalt(m, litres(m, 5, 400e-6), 100, salt("calcium-chloride"), claims, warm)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "equilibrium at 25 °C", o.Figure("equilibrium of the salt"), 6, 0.1)
	near(t, "claim", o.Out.Water(), 0.15*400e-6, 1e-9)
	if o.Why != steps.AtTime {
		t.Errorf("stops for %q: %s", o.Why, o.WhyText)
	}
	o, err = steps.RunSalt(m, litres(m, 5, 200e-6), 100, salt("calcium-chloride"), claims, flask())
	if err != nil {
		t.Fatal(err)
	}
	near(t, "lowest claim", o.Out.Water(), 50e-6, 1e-9)
	if o.Why != steps.AtPractice {
		t.Errorf("stops for %q: %s", o.Why, o.WhyText)
	}
	if claims.MayEnd(99e-6) || !claims.MayEnd(100e-6) {
		t.Error("a salt may end a job with a target of 100 mg/kg and no lower")
	}
}

// What the outlet turns on is what holds it up: in toluene the equilibrium of sodium
// sulfate (activity 0.8) lies above what 20 % of 400 mg/kg leave; calcium chloride
// is held to its published 85 %; magnesium sulfate from 100 mg/kg to the lowest claim.
// A lot drier than the salt can make it is told so.
func TestWhatASaltTurnsOn(t *testing.T) {
	m := mixture(t, "toluene")
	for _, f := range []struct {
		agent, begins string
		water         float64
		nothing       bool
	}{
		{"sodium-sulfate", "equilibrium: ", 400e-6, false}, {"calcium-chloride", "claim: a salt is held to its published removal", 400e-6, false},
		{"magnesium-sulfate", "claim: no salt", 100e-6, false}, {"sodium-sulfate", "", 200e-6, true}, {"magnesium-sulfate", "", 40e-6, true},
	} {
		o, err := steps.RunSalt(m, litres(m, 5, f.water), 100, salt(f.agent), claims, flask())
		if err != nil {
			t.Fatal(err)
		}
		if !strings.HasPrefix(o.RuledBy, f.begins) {
			t.Errorf("%s at %g: turns on %q", f.agent, f.water, o.RuledBy)
		}
		if told := hasWord(o.Warnings, "for nothing"); told != f.nothing || told != (o.Figure("water taken up") == 0) {
			t.Errorf("%s at %g: %g g taken up, %q", f.agent, f.water, o.Figure("water taken up"), o.Warnings)
		}
	}
}

// Published: magnesium sulfate took 80 % and sodium sulfate 18 to 20 % of the
// water in 15 min at 10 % m/v; sodium sulfate took none from acetonitrile.
func TestPublishedRemovals(t *testing.T) {
	ester, nitrile := mixture(t, "ethyl-acetate"), mixture(t, "acetonitrile")
	for key, left := range map[string]float64{"magnesium-sulfate": 0.20, "sodium-sulfate": 0.80} {
		o, err := steps.RunSalt(ester, litres(ester, 1, 0.03), 100, salt(key), claims, flask())
		if err != nil {
			t.Fatal(err)
		}
		if got := o.Out.Water() / 0.03; got < left*(1-1e-9) {
			t.Errorf("%s leaves %.3g of the water, published %.3g", key, got, left)
		}
	}
	none := salt("sodium-sulfate")
	none.ShareRemoved = 0
	o, err := steps.RunSalt(nitrile, litres(nitrile, 1, 0.003), 100, none, claims, flask())
	if err != nil || math.Abs(o.Out.Water()/o.In.Water()-1) > 1e-12 || !strings.Contains(o.WhyText, "suspended") {
		t.Errorf("acetonitrile: %g after %g, %q, %v", o.Out.Water(), o.In.Water(), o.WhyText, err)
	}
}

// Pairs are used in turn: by hand, 1 g of MgSO4 is 8.31 mmol. In a saturated
// ester it takes 0.150 g of water at the monohydrate, 1.048 g at the heptahydrate.
func TestPairsWorkInTurn(t *testing.T) {
	m := mixture(t, "ethyl-acetate")
	fast := salt("magnesium-sulfate")
	fast.ShareRemoved = 1
	taken := func(water, dose float64) *steps.Outcome {
		o, err := steps.RunSalt(m, litres(m, 1, water), dose, fast, claims, flask())
		if err != nil {
			t.Fatal(err)
		}
		return &o
	}
	// 5 g on 900 g of ester with 26 g of water: all pairs fill up
	near(t, "to the heptahydrate", taken(0.029, 5).Figure("water taken up"), 5*1.0477, 0.002)
	// far below the second pair's activity only the monohydrate forms
	near(t, "to the monohydrate", taken(0.008, 5).Figure("water taken up"), 5*0.1497, 0.002)
	if o := taken(0.008, 5); o.Why != steps.AtFloor && o.Why != steps.AtCapacity {
		t.Errorf("stops for %q", o.Why)
	}
}

func TestSaltRefusals(t *testing.T) {
	m := mixture(t, "toluene")
	warm := flask()
	warm.TempK = 308.15
	if _, err := steps.RunSalt(m, litres(m, 1, 400e-6), 100, salt("sodium-sulfate"), claims, warm); !errors.Is(err, steps.ErrSaltTooWarm) {
		t.Errorf("sodium sulfate at 35 °C: %v", err)
	}
	for _, dose := range []float64{-1, math.Inf(1), math.NaN()} {
		if _, err := steps.RunSalt(m, litres(m, 1, 400e-6), dose, salt("sodium-sulfate"), claims, flask()); !errors.Is(err, steps.ErrNoSense) {
			t.Errorf("a dose of %g: %v", dose, err)
		}
	}
}

// A rinse brings dried solvent back into the product, and leaves the volume lost
// as it was. By hand: a rinse as large as the hold-up recovers 1 - 1/e of it.
func TestRinseRecoversProductNotVolume(t *testing.T) {
	m := mixture(t, "toluene")
	rig := flask()
	plain, err := steps.RunSalt(m, litres(m, 5, 400e-6), 100, salt("magnesium-sulfate"), claims, rig)
	if err != nil {
		t.Fatal(err)
	}
	rig.RinseM3, rig.RinseWater = plain.Figure("solvent kept by the cake")*1e-3, 300e-6
	rinsed, err := steps.RunSalt(m, litres(m, 5, 400e-6), 100, salt("magnesium-sulfate"), claims, rig)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "volume lost", rinsed.SolventLostL, plain.SolventLostL, 1e-12)
	near(t, "recovered", rinsed.Figure("dried solvent the rinse recovers"), plain.SolventLostL*(1-1/math.E), 1e-3)
	near(t, "product", rinsed.Out.SolventKg, plain.Out.SolventKg+rinsed.Balance.SolventAddedKg, 1e-12)
	if rinsed.Out.Water() <= plain.Out.Water() {
		t.Error("a rinse with wetter solvent cannot leave the product as dry")
	}
}

// No salt leaves less than 50 mg/kg or makes a lot wetter; more salt and more
// time are never wetter; balances close to 1e-10.
func TestSaltBounds(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom([]string{"toluene", "dichloromethane", "tetrahydrofuran", "ethyl-acetate", "acetonitrile", "cyclohexane"}).Draw(rt, "solvent")
		m := mixture(t, solvent)
		agent := salt(rapid.SampledFrom(salts).Draw(rt, "salt"))
		water := math.Exp(rapid.Float64Range(math.Log(5e-6), math.Log(0.05)).Draw(rt, "ln w"))
		dose := rapid.Float64Range(0, 200).Draw(rt, "dose")
		rig := flask()
		rig.TempK = rapid.Float64Range(280, 305).Draw(rt, "T")
		rig.TimeS = rapid.Float64Range(0, 7200).Draw(rt, "time")
		feed := litres(m, 5, water)
		run := func(dose float64, rig steps.SaltRig) steps.Outcome {
			o, err := steps.RunSalt(m, feed, dose, agent, claims, rig)
			if err != nil {
				rt.Fatal(err)
			}
			return o
		}
		o := run(dose, rig)
		closesTightly(rt, o.Balance)
		if w := o.Out.Water(); w < math.Min(water, 50e-6)*(1-1e-9) || w > water*(1+1e-9) || w < o.Floor*(1-1e-9) {
			rt.Fatalf("out %g, in %g, floor %g", w, water, o.Floor)
		}
		longer := rig
		longer.TimeS *= 1.5
		for name, better := range map[string]steps.Outcome{"more salt": run(math.Min(1000, dose*1.3+1), rig), "more time": run(dose, longer)} {
			if better.Out.Water() > o.Out.Water()*(1+1e-9) {
				rt.Fatalf("%s: %g after %g", name, better.Out.Water(), o.Out.Water())
			}
		}
		rig.RinseM3, rig.RinseWater = 0.5e-3, rapid.Float64Range(0, 1e-3).Draw(rt, "rinse water")
		rinsed := run(dose, rig)
		closesTightly(rt, rinsed.Balance)
		if rinsed.Out.Water() < math.Min(water, 50e-6)*(1-1e-9) {
			rt.Fatalf("a rinse brings it to %g", rinsed.Out.Water())
		}
	})
}

func TestSaltForFindsTheDose(t *testing.T) {
	m := mixture(t, "toluene")
	feed := litres(m, 5, 400e-6)
	o, err := steps.SaltFor(m, feed, 120e-6, salt("magnesium-sulfate"), claims, flask())
	if err != nil {
		t.Fatal(err)
	}
	near(t, "claim", o.Out.Water(), 120e-6, 1e-6)
	if o.Why != steps.AtTarget || !(o.Figure("dose") < 100) {
		t.Errorf("%q at %.3g g/L", o.Why, o.Figure("dose"))
	}
	o, err = steps.SaltFor(m, feed, 10e-6, salt("magnesium-sulfate"), claims, flask())
	if err != nil || o.Why == steps.AtTarget || o.Out.Water() < 50e-6 {
		t.Errorf("10 mg/kg by a salt: %q, %g, %v", o.Why, o.Out.Water(), err)
	}
}

// 80 % go in 15 min, as a first order: 70 % go in 15 ln 0.3/ln 0.2 = 11.22 min, by
// hand; the time found leads to the goal, and half the dose takes twice the time.
func TestSaltUntil(t *testing.T) {
	m := mixture(t, "toluene")
	feed := litres(m, 1, 400e-6)
	minutes := func(goal, dose float64) float64 {
		o, err := steps.SaltUntil(m, feed, goal, dose, salt("magnesium-sulfate"), claims, flask())
		if err != nil {
			t.Fatal(err)
		}
		if reached := o.Out.Water() <= goal*(1+1e-6); reached != (o.Why == steps.AtTarget) {
			t.Errorf("%g: %g, %s", goal, o.Out.Water(), o.WhyText)
		}
		return o.Figure("stirred or stood")
	}
	near(t, "minutes", minutes(120e-6, 100), 11.22, 1e-3)
	near(t, "a fifth gone, half the dose", minutes(320e-6, 50), 2*minutes(320e-6, 100), 1e-6)
	near(t, "never", minutes(60e-6, 100), 15, 1e-9)
}

// Pairs of hydrates of the catalog whose activity at 25 °C stands both in free energies
// of formation (kJ/mol: NBS Tables 1982, from memory; Grevel & Majzlan 2009) and in the
// catalog: the two agree within 5 %.
var pairsOfBoth = map[string]struct{ dry, hydrate, mol float64 }{
	"MgSO4.H2O / MgSO4.6H2O":    {-1437.92, -2632.28, 5},
	"MgSO4.6H2O / MgSO4.7H2O":   {-2632.28, -2871.02, 1},
	"Na2SO4 / Na2SO4.10H2O":     {-1270.16, -3646.85, 10},
	"K2CO3 / K2CO3.1.5H2O":      {-1063.5, -1432.5, 1.5},
	"CaSO4.0.5H2O / CaSO4.2H2O": {-1436.74, -1797.28, 1.5},
}

// The others, why they are not held to 5 %, and what the free energies give (0: there
// are none). Each is off by more than 5 %, or would belong to the pairs above.
var pairsOfOne = map[string]struct {
	reason            string
	dry, hydrate, mol float64
	fromLogK          [2]float64 // of the pair, where solubility constants have it
}{
	"CaCl2 / CaCl2.2H2O":      {"no free energies of the hydrates; solubility constants and gas tests (0.006 to 0.016) agree", 0, 0, 2, [2]float64{11.79, 7.95}},
	"CaCl2.2H2O / CaCl2.4H2O": {"no free energies of the hydrates; solubility constants", 0, 0, 2, [2]float64{7.95, 5.35}},
	"CaCl2.4H2O / CaCl2.6H2O": {"no free energies of the hydrates; solubility constants", 0, 0, 2, [2]float64{5.35, 3.94}},
	"CaSO4 / CaSO4.0.5H2O":    {"what dries is soluble anhydrite, 1.4e-3 by free energies of its beta form and 2e-4 by gas tests: a middle is used, with both as its band", -1309.05, -1435.78, 0.5, [2]float64{}},
	"MgSO4 / MgSO4.H2O":       {"the crystalline monohydrate of the free energies forms too slowly: gas tests give 0.043, and an effective figure is used", -1170.6, -1437.92, 1, [2]float64{}},
}

func TestHydratePairsAgreeWithTheirThermochemistry(t *testing.T) {
	for key, agent := range shelf(t).Agents {
		for _, p := range agent.Hydrates {
			both, ok := pairsOfBoth[p.Pair]
			one, listed := pairsOfOne[p.Pair]
			if ok == listed {
				t.Errorf("%s: %s is to be in one of the lists", key, p.Pair)
				continue
			}
			if ok {
				near(t, p.Pair, p.Activity.SI, steps.PairActivity(both.dry*1e3, both.hydrate*1e3, both.mol), 0.05)
				continue
			}
			if one.fromLogK != [2]float64{} {
				near(t, p.Pair, p.Activity.SI, math.Pow(10, (one.fromLogK[1]-one.fromLogK[0])/one.mol), 0.05)
				continue
			}
			free := steps.PairActivity(one.dry*1e3, one.hydrate*1e3, one.mol)
			t.Logf("%s: %.3g, by free energies %.3g: %s", p.Pair, p.Activity.SI, free, one.reason)
			if math.Abs(p.Activity.SI/free-1) < 0.05 {
				t.Errorf("%s agrees with its free energies: it belongs to the pairs that are held to it", p.Pair)
			}
			if !p.Activity.Banded() {
				t.Errorf("%s has no band although its sources differ", p.Pair)
			}
		}
	}
}
