package catalog_test

import (
	"math"
	"testing"

	"parch/catalog"
)

// The loadings in testdata/isotherms.csv were computed by the maker of the
// recommended sets (see sieve-3a-fit in sources.yaml), so this finds slips in
// copying the constants and in the equation.
func TestIsothermLoadings(t *testing.T) {
	cat := load(t)
	for _, row := range table(t, "testdata/isotherms.csv") {
		got := 100 * cat.Agents[row["agent"]].Isotherm.LoadingKgPerKg(number(t, row["p_pa"]), number(t, row["t_k"]))
		want := number(t, row["g_per_100g"])
		if math.Abs(got/want-1) > 0.02 {
			t.Errorf("%s at %s K, %s Pa: %.4g g/100 g, want %.4g within 2 %%", row["agent"], row["t_k"], row["p_pa"], got, want)
		}
	}
}

// publishedLoading is the four-site model of water on 3A beads in g/100 g: data
// Lin et al., Ind. Eng. Chem. Res. 53 (2014) 16015, equation Ladshaw et al. 2015.
//
//	q = qmax/m sum n K_n x^n/(1 + sum K_n x^n),  x = p/100 kPa,  ln K_n = -dH_n/(R T) + dS_n/R
func publishedLoading(pPa, tK float64) float64 {
	const (
		r        = 8.314462618
		qmax     = 11.67 // mol/kg
		sites    = 4
		molarKg  = 18.015e-3
		per100   = 100
		standard = 1e5
	)
	enthalpyJ := [sites]float64{-46597.5, -125024, -193619, -272228}
	entropyJPerK := [sites]float64{-53.6994, -221.073, -356.728, -567.459}
	above, below := 0.0, 1.0
	for i := range sites {
		term := math.Exp(-enthalpyJ[i]/(r*tK)+entropyJPerK[i]/r) * math.Pow(pPa/standard, float64(i+1))
		above += float64(i+1) * term
		below += term
	}
	return qmax / sites * above / below * molarKg * per100
}

// The 3A set is a refit to that model between 25 and 80 °C and 0.16 Pa and
// 1.95 kPa, together with data at 200 to 300 °C; its maker states an rms of 0.106
// in ln q over the points used. The grid here is a different one.
func TestIsothermAgainstPublishedModel(t *testing.T) {
	isotherm := load(t).Agents["sieve-3a"].Isotherm
	var sum, worst float64
	var count int
	for tK := 298.15; tK <= 353.2; tK += 11 {
		for lnP := math.Log(0.16); lnP <= math.Log(1950); lnP += 0.5 {
			p := math.Exp(lnP)
			diff := math.Log(100 * isotherm.LoadingKgPerKg(p, tK) / publishedLoading(p, tK))
			sum, worst, count = sum+diff*diff, max(worst, math.Abs(diff)), count+1
		}
	}
	rms := math.Sqrt(sum / float64(count))
	t.Logf("rms %.3f, worst %.3f in ln q over %d points", rms, worst, count)
	if rms > 0.15 || worst > 0.5 {
		t.Errorf("rms %.3f (at most 0.15), worst %.3f (at most 0.5) in ln q", rms, worst)
	}
}

// 4A is 3A scaled by assumption. Points digitised from DOI 10.1021/jp805923k
// (NIST/ARPA-E isotherm collection) at 298 K below 100 Pa; the series of that
// figure differ by a factor of 1.5 among themselves, and the one with a step at
// 50 to 130 Pa, taken for a model curve, is left out.
func TestSieve4AWithinItsBand(t *testing.T) {
	agent := load(t).Agents["sieve-4a"]
	for _, point := range []struct{ pPa, gPer100g float64 }{
		{16.278, 12.842}, {48.835, 16.05}, {81.391, 19.259},
		{16.278, 8.347}, {24.417, 9.952}, {48.835, 12.198}, {81.391, 14.283},
	} {
		got := 100 * agent.Isotherm.LoadingKgPerKg(point.pPa, 298)
		ratio := got / point.gPer100g
		t.Logf("%.4g Pa: %.3g g/100 g computed, %.3g digitised, ratio %.2f", point.pPa, got, point.gPer100g, ratio)
		if ratio > agent.LoadingBand || ratio < 1/agent.LoadingBand {
			t.Errorf("%.4g Pa: ratio %.2f is outside the stated band of %v", point.pPa, ratio, agent.LoadingBand)
		}
	}
}

func TestIsothermLimits(t *testing.T) {
	i := catalog.Isotherm{Sites: []catalog.Site{{CapacityKgPerKg: 0.2, B0PerPa: 1e-12, HeatJPerMol: 65000}}}
	if q := i.LoadingKgPerKg(0, 300); q != 0 {
		t.Errorf("loading without water vapour is %g", q)
	}
	if q := i.LoadingKgPerKg(1e12, 300); math.Abs(q-0.2) > 1e-9 {
		t.Errorf("loading at saturation is %g, want the capacity 0.2", q)
	}
	henry := i.LoadingKgPerKg(2e-6, 300) / i.LoadingKgPerKg(1e-6, 300)
	if math.Abs(henry-2) > 1e-6 {
		t.Errorf("loading is not proportional to a small pressure: %g", henry)
	}
}
