package thermo_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"parch/internal/thermo"
)

// Each form as it is printed, evaluated once at 320 K by another program (numpy).
func TestPrintedForms(t *testing.T) {
	for _, r := range []struct {
		equation thermo.Equation
		c        [7]float64
		want     float64
	}{
		{thermo.DIPPR101, [7]float64{20.5, -5000, 1.5, 2e-06, 2}, 920140.351797},
		{thermo.DIPPR101, [7]float64{20.5, -5000, 1.5, -3e-17, 6}, 725973.824661},
		{thermo.DIPPR101, [7]float64{20.5, -5000, 1.5, -0.003, 1}, 287070.036242},
		{thermo.DIPPR101, [7]float64{20.5, -5000, 1.5, 0.25, 0}, 962684.960745},
		{thermo.DIPPR101, [7]float64{20.5, -5000, 1.5, -7e-06, 1.7}, 660311.571977},
		{thermo.Antoine10, [7]float64{8, 1700, -40}, 84.8342898244},
		{thermo.AntoineLn, [7]float64{18, 3900, -42}, 53.0493717073},
		{thermo.Wagner25, [7]float64{-7.5, 2.1, -2.4, -3.1, 600, 4e6}, 8923.49321579},
		{thermo.Wagner36, [7]float64{-7.5, 2.1, -2.4, -3.1, 600, 4e6}, 11815.744183},
		{thermo.DIPPR106, [7]float64{50000, 0.3, 0.2, -0.15, 600, 0.07}, 37581.4532352},
		{thermo.PPDS12, [7]float64{6, 11, -9, 4, 2, 600}, 39728.6277124},
		{thermo.Watson, [7]float64{33000, 350, 0.38, 590}, 34510.5514019},
		{thermo.DIPPR100, [7]float64{100, 0.3, -0.002, 5e-06, -3e-09}, 123.58272},
		{thermo.DIPPR114, [7]float64{60, 20000, 10, -12, 647}, 26699.0220643},
		{thermo.CubicR, [7]float64{3, 2.5, -0.4, 0.07}, 76.4744316893},
		{thermo.Linear298, [7]float64{900, -0.9}, 880.335},
		{thermo.DIPPR105, [7]float64{0.9, 0.27, 590, 0.29}, 9.46620366563},
		{thermo.VDI106, [7]float64{700, 200, -150, 90, 600, 290}, 909.011539713},
		{thermo.QuadRho, [7]float64{1100, -0.5, -0.0008}, 858.08},
		{thermo.PPDS9, [7]float64{1.3, 0.9, 600, 20, 3e-05}, 0.000242874309903},
		{thermo.VN3, [7]float64{-2, -300, 70}, 0.000158489319246},
		{thermo.Andrade, [7]float64{-11, 1100}, 0.000519574682155},
	} {
		c := thermo.Correlation{Equation: r.equation, C: r.c, Scale: 2}
		if got := c.At(320) / 2; !(math.Abs(got/r.want-1) < 1e-10) {
			t.Errorf("%s%v = %.12g, want %.12g", r.equation, r.c, got, r.want)
		}
		if err := c.Check(); err != nil {
			t.Error(err)
		}
	}
}

// Constants from memory, believed Reid, Prausnitz & Poling, The Properties of Gases
// and Liquids, 4th ed. (1987): water boils at 100 °C under 1 atm, toluene at 110.6 °C.
func TestWagnerAndAntoineAtTheBoilingPoint(t *testing.T) {
	for _, r := range []struct {
		what  string
		c     thermo.Correlation
		boilK float64
	}{
		{"water, Antoine in mmHg", thermo.Correlation{Equation: thermo.Antoine10, C: [7]float64{8.07131, 1730.63, 233.426 - 273.15}, Scale: 133.322}, 373.15},
		{"water, Wagner in bar", thermo.Correlation{Equation: thermo.Wagner36, C: [7]float64{-7.76451, 1.45838, -2.77580, -1.23303, 647.3, 221.2}, Scale: 1e5}, 373.15},
		{"toluene, Wagner in bar", thermo.Correlation{Equation: thermo.Wagner36, C: [7]float64{-7.28607, 1.38091, -2.83433, -2.79168, 591.8, 41}, Scale: 1e5}, 383.78},
	} {
		if got := r.c.At(r.boilK); math.Abs(got/atmospherePa-1) > 0.004 {
			t.Errorf("%s: %.0f Pa at its boiling point", r.what, got)
		}
	}
}

func TestCorrelationsThatCannotBeUsed(t *testing.T) {
	for want, c := range map[string]thermo.Correlation{
		"is not known": {Equation: "NONE", Scale: 1}, "has no unit": {Equation: thermo.Andrade},
	} {
		if err := c.Check(); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%+v: %v, want %q", c, err, want)
		}
	}
	c := thermo.Correlation{TMinK: 280, TMaxK: 380}
	for tK, want := range map[float64]bool{279.9: true, 280: false, 300: false, 380: false, 380.1: true} {
		if c.Extrapolated(tK) != want {
			t.Errorf("%g K: extrapolated %v", tK, !want)
		}
	}
	if (thermo.Correlation{}).Extrapolated(1) {
		t.Error("a range that is not stated is passed")
	}
}

// Brent's method takes about 8 to 10 evaluations on a smooth function where halving
// takes 45 (Brent, chapter 4, says superlinear; the counts here are of this program,
// with room for a few).
func TestBrentIsQuick(t *testing.T) {
	for _, c := range []struct {
		name   string
		f      func(float64) float64
		lo, hi float64
		root   float64
		most   int
	}{
		{"square", func(x float64) float64 { return x*x - 2 }, 0, 2, math.Sqrt2, 11},
		{"cosine", func(x float64) float64 { return math.Cos(x) - x }, 0, 1, 0.7390851332151607, 9},
		{"cube", func(x float64) float64 { return x*x*x - 8 }, -1, 9, 2, 16},
		{"exponential", func(x float64) float64 { return math.Exp(x) - 5 }, -4, 6, math.Log(5), 14},
		{"logarithm", func(x float64) float64 { return math.Log(x) - 1 }, 0.01, 100, math.E, 16},
		{"falling", func(x float64) float64 { return 1/x - 0.2 }, 0.1, 50, 5, 22},
		{"flat", func(x float64) float64 { return math.Pow(x-1, 9) }, -3, 8, 1, 160},
	} {
		calls := 0
		got, err := thermo.Brent(func(x float64) float64 { calls++; return c.f(x) }, c.lo, c.hi, 1e-12)
		if err != nil || math.Abs(got-c.root) > 1e-11 && c.name != "flat" || math.Abs(got-c.root) > 0.1 {
			t.Errorf("%s: %.15g, %v; want %.15g", c.name, got, err, c.root)
		}
		if calls > c.most {
			t.Errorf("%s: %d evaluations, at most %d are wanted", c.name, calls, c.most)
		}
		t.Logf("%s: %d evaluations", c.name, calls)
	}
	for _, ends := range [][2]float64{{2, 5}, {-1, 2}} { // a root at an end
		if got, err := thermo.Brent(func(x float64) float64 { return x - 2 }, ends[0], ends[1], 1e-9); err != nil || got != 2 {
			t.Errorf("%v: %g, %v", ends, got, err)
		}
	}
	if _, err := thermo.Brent(func(float64) float64 { return math.NaN() }, 0, 1, 1e-9); !errors.Is(err, thermo.ErrNoBracket) {
		t.Errorf("NaN: %v", err)
	}
	swings := 0
	if _, err := thermo.Brent(func(x float64) float64 { // no root to find: it jumps wherever one looks
		swings++
		if swings%2 == 0 {
			return 1
		}
		return -1
	}, 0, 1, 0); err == nil {
		t.Log("the jumping function closed its bracket")
	}
	if swings > 300 {
		t.Errorf("%d evaluations: not bounded", swings)
	}
}

// 18.015 g of water in 92.138 g of toluene are one mole in two.
func TestFractionsOfAPair(t *testing.T) {
	m := mixture(t, "toluene")
	w, s := m.Water.MolarMassKgPerMol, m.Solvent.MolarMassKgPerMol
	if math.Abs(w-0.018015) > 2e-6 || math.Abs(s-0.09214) > 1e-5 { // IUPAC atomic weights
		t.Fatalf("%g and %g kg/mol", w, s)
	}
	half := w / (w + s)
	if got := m.MoleFraction(half); math.Abs(got-0.5) > 1e-15 {
		t.Errorf("x = %.16g", got)
	}
	if got := m.MassFraction(0.5); math.Abs(got-half) > 1e-15 {
		t.Errorf("w = %.16g", got)
	}
	const tK = 298.15
	x := 0.001
	lnW, _ := m.NRTL.Pair(x, tK)
	if got, want := m.Activity(m.MassFraction(x), tK), x*math.Exp(lnW); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("activity %g, want %g", got, want)
	}
	// 25 °C, CRC Handbook: water 997.05, toluene 862.2 kg/m3; the catalog's densities are
	// held to 1 %.
	for _, c := range []struct{ x, want float64 }{{1, 0.018015 / 997.05}, {0, 0.09214 / 862.2}, {0.5, 0.5*0.018015/997.05 + 0.5*0.09214/862.2}} {
		if got := m.MolarVolume(c.x, tK); math.Abs(got/c.want-1) > 0.01 {
			t.Errorf("x = %g: %.5g m3/mol, want %.5g", c.x, got, c.want)
		}
	}
	if got := m.GammaInfinite(tK); math.Abs(math.Log(got)-first(m.NRTL.Pair(0, tK))) > 1e-12 {
		t.Errorf("gamma %g", got)
	}
}

func first(a, _ float64) float64 { return a }

// IUPAC-NIST Solubility Data Series: toluene holds 0.0303 to 0.033 mol % x 10, about
// 540 mg/kg, at 25 °C; a solvent that mixes with water has no solubility to tell.
func TestSolubilityOfAPair(t *testing.T) {
	if w, ok, err := mixture(t, "toluene").Solubility(298.15); err != nil || !ok || math.Abs(w/540e-6-1) > 0.05 {
		t.Errorf("toluene: %.4g mg/kg, %v, %v", 1e6*w, ok, err)
	}
	if w, ok, err := mixture(t, "acetonitrile").Solubility(298.15); err != nil || ok || !math.IsNaN(w) {
		t.Errorf("acetonitrile: %g, %v, %v", w, ok, err)
	}
}

// The pair at one temperature gives what the pair gives, shifted or not, and its
// inverse leads back.
func TestIsothermalIsThePair(t *testing.T) {
	for _, solvent := range []string{"toluene", "tetrahydrofuran", "ethyl-acetate"} {
		for _, tK := range []float64{293.15, 330} {
			m := mixture(t, solvent)
			quick := m.At(tK)
			for _, shift := range []float64{0, 0.2, -0.3} {
				shifted := *m
				shifted.NRTL.Shift = thermo.Shift{Ln25: shift}
				for _, w := range []float64{1e-9, 1e-6, 2e-4, 3e-3, 0.1, 0.6} {
					lnRatio := math.Log(w / (1 - w))
					got, slope := quick.LnActivity(lnRatio, shift)
					if want := math.Log(shifted.Activity(w, tK)); math.Abs(got-want) > 1e-10 {
						t.Errorf("%s, %g K, %g: ln a = %.12g, want %.12g", solvent, tK, w, got, want)
					}
					const step = 1e-5
					above, _ := quick.LnActivity(lnRatio+step, shift)
					below, _ := quick.LnActivity(lnRatio-step, shift)
					if want := (above - below) / (2 * step); math.Abs(slope-want) > 1e-9 {
						t.Errorf("%s, %g K, %g: slope %.12g, want %.12g", solvent, tK, w, slope, want)
					}
					if w > 0.01 { // beyond what is looked for there
						continue
					}
					back, ok := quick.LnRatioAt(got, shift, 0.01)
					if !ok || math.Abs(back-lnRatio) > 1e-7 {
						t.Errorf("%s, %g K, %g: back to %.10g, want %.10g (%v)", solvent, tK, w, back, lnRatio, ok)
					}
				}
				if _, ok := quick.LnRatioAt(2, shift, 1e-3); ok && solvent == "toluene" {
					t.Error("an activity above one is reached below saturation")
				}
			}
		}
	}
}

// A shift moves water at dilution by its factor, and by another one when hot.
func TestShiftAtItsTemperatures(t *testing.T) {
	s := thermo.Shift{Ln25: math.Log(1.1), LnTrend: math.Log(1.2)}
	for tK, want := range map[float64]float64{298.15: 1.1, 373.15: 1.1 * 1.2} {
		if got := math.Exp(s.At(tK)); math.Abs(got-want) > 1e-12 {
			t.Errorf("%g K: a factor of %.12g, want %g", tK, got, want)
		}
	}
}

func TestRefusalsSayWhy(t *testing.T) {
	m := mixture(t, "toluene")
	var warm *thermo.WarmReceiver
	if _, err := m.TrapFloor(359, atmospherePa); !errors.As(err, &warm) || !strings.Contains(err.Error(), "where wet toluene boils at 101.3 kPa") {
		t.Errorf("a receiver at 86 °C: %v", err) // the azeotrope boils at 84.1 °C
	}
	if _, err := m.TrapFloor(356, atmospherePa); err != nil {
		t.Errorf("a receiver at 83 °C: %v", err)
	}
	if err := (&thermo.NotConverged{What: "the split", Iterations: 7, Residual: 0.25}).Error(); err != "the split did not converge: residual 0.25 after 7 iterations" {
		t.Error(err)
	}
	for pressurePa, fine := range map[float64]bool{999: false, 1e3: true, 101325: true, 110e3: true, 110001: false, math.NaN(): false} {
		if err := thermo.CheckPressure(pressurePa); (err == nil) != fine {
			t.Errorf("%g Pa: %v", pressurePa, err)
		}
	}
	m.Limits = []thermo.Limit{{LowestK: 290, HighestK: 350, LowestPa: 5e3, HighestPa: 50e3, Reason: "as tried"}}
	for tK, fine := range map[float64]bool{289.9: false, 290: true, 350: true, 350.1: false} {
		err := m.CheckTemperature(tK)
		if (err == nil) != fine || err != nil && !strings.HasSuffix(err.Error(), ": as tried") {
			t.Errorf("%g K: %v", tK, err)
		}
	}
	for pressurePa, fine := range map[float64]bool{4.9e3: false, 5e3: true, 50e3: true, 50.1e3: false, 500: false} {
		var outside *thermo.OutsideModel
		err := m.CheckPressure(pressurePa)
		if (err == nil) != fine || err != nil && pressurePa > 1e3 && !errors.As(err, &outside) {
			t.Errorf("%g Pa: %v", pressurePa, err)
		}
	}
	if _, err := m.Bubble(1.01, 10e3); err == nil {
		t.Error("a mole fraction above one is taken")
	}
}

// Methanol and cyclohexane mix above 45 °C only (published upper critical solution
// temperature, from memory 45.6 °C); ethanol and toluene do at any temperature of a
// receiver.
func TestMixingOfSolventAndCarrier(t *testing.T) {
	all := fromPairs(t)
	for _, c := range []struct {
		solvent, carrier string
		low, high        float64
	}{{"methanol", "cyclohexane", 300, 345}, {"ethanol", "toluene", 255, 288.15}} {
		m := all[[2]string{c.solvent, c.carrier}]
		if m == nil {
			t.Logf("no set of %s and %s", c.solvent, c.carrier)
			continue
		}
		m.FindMixing()
		if m.MixAboveK < c.low || m.MixAboveK > c.high {
			t.Errorf("%s and %s mix above %.1f K, want %g to %g", c.solvent, c.carrier, m.MixAboveK, c.low, c.high)
		}
	}
}

// The receiver of a carrier distillation: water freezes at 0 °C, cyclohexane at 6.7 °C.
func TestReceiverOfACarrier(t *testing.T) {
	m := fromPairs(t)[[2]string{"ethanol", "cyclohexane"}]
	m.SpuriousGapBelowK = 288.15
	for celsius, want := range map[float64]string{-1: "water freezes", 5: "cyclohexane freezes", 10: "which mix", 16: ""} {
		err := m.CheckReceiver(celsius + 273.15)
		if (err == nil) != (want == "") || err != nil && !strings.Contains(err.Error(), want) {
			t.Errorf("%g °C: %v, want %q", celsius, err, want)
		}
	}
	l := thermo.TernaryLayers{OrganicKgPerM3: 780, AqueousKgPerM3: 975}
	if got := l.DensityDifference(); math.Abs(got-0.2) > 1e-15 {
		t.Errorf("difference %g", got)
	}
}

// Mass and mole fractions of water, ethanol and cyclohexane, one mole of each.
func TestFractionsOfThree(t *testing.T) {
	m := fromPairs(t)[[2]string{"ethanol", "cyclohexane"}]
	third := thermo.Fractions{1. / 3, 1. / 3, 1. / 3}
	mass := m.Mass(third)
	total := 0.0180153 + 0.0460684 + 0.0841595 // kg/mol, IUPAC atomic weights
	for i, kg := range []float64{0.0180153, 0.0460684, 0.0841595} {
		if math.Abs(mass[i]-kg/total) > 1e-5 {
			t.Errorf("mass fraction %d is %.6f, want %.6f", i, mass[i], kg/total)
		}
	}
	if got := m.MolarMass(third); math.Abs(got-total/3) > 1e-6 {
		t.Errorf("%g kg/mol", got)
	}
	back := m.Mole(mass)
	for i := range back {
		if math.Abs(back[i]-1./3) > 1e-14 {
			t.Errorf("mole fraction %d is %.16g", i, back[i])
		}
	}
	const tK = 298.15
	volume := m.MolarVolume(third, tK)
	if want := (0.0180153/997.05 + 0.0460684/785.1 + 0.0841595/773.9) / 3; math.Abs(volume/want-1) > 0.01 { // CRC Handbook densities at 25 °C
		t.Errorf("%.5g m3/mol, want %.5g", volume, want)
	}
	m.ContractionM3PerMol = 1e-6
	if got, want := m.Density(third, tK), m.MolarMass(third)/(volume-1e-6/9); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("density %g, want %g", got, want)
	}
}

// BenchmarkProperty evaluates five properties of a liquid.
func BenchmarkProperty(b *testing.B) {
	p := mixture(b, "toluene").Solvent
	sum := 0.0
	for b.Loop() {
		sum += p.VapourPressurePa.At(330) + p.HeatOfVaporizationJ.At(330) + p.HeatCapacityJPerMolK.At(330) + p.DensityKgPerM3.At(330) + p.ViscosityPaS.At(330)
	}
	if math.IsNaN(sum) {
		b.Fatal(sum)
	}
}
