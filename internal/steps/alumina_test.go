package steps_test

import (
	"math"
	"testing"

	"parch/internal/steps"
)

// aluminaLoading is a two-term isotherm of activated alumina drawn through
// digitised vapour data at 25 and 30 °C, about 40 % either way:
//
//	q = 0.04 300a/(1 + 300a) + 0.20 a^1.2,  a = p/3169.8 Pa, 48 kJ/mol
func aluminaLoading(partialPressurePa, tK float64) float64 {
	a := partialPressurePa * math.Exp(48e3/8.314462618*(1/tK-1/298.15)) / 3169.8
	return 0.04*300*a/(1+300*a) + 0.20*math.Pow(a, 1.2)
}

// Why alumina is refused in alcohols. Surface excess of water on activated alumina
// in ethanol at 303 K, digitised from figure 3 of doi:10.1007/s10450-017-9914-1.
// From vapour data alone the loading comes out two to seventy times too high: the
// alcohol takes the surface, most of all from traces of water. Leaving 40 % of it
// to water mends the wet rows. It does not mend the dry one, which is near zero by
// the way an excess is counted: there are no data where drying ends.
func TestAluminaInEthanolCannotBeComputed(t *testing.T) {
	m := fromPerry(t, "ethanol")
	miss := func(share float64) (worst float64) {
		for _, c := range []struct{ water, excess float64 }{{140.8e-6, 0.00013}, {7465.1e-6, 0.01686}, {118978.3e-6, 0.06279}, {140763.2e-6, 0.06173}} {
			pressure := m.Activity(c.water, 303.15) * m.Water.VapourPressurePa.At(303.15)
			ratio := share * aluminaLoading(pressure, 303.15) / c.excess
			t.Logf("%.0f mg/kg, %.0f %% of the surface: %.3g g/100 g, measured excess %.3g: ratio %.2f", 1e6*c.water, 100*share, 100*share*aluminaLoading(pressure, 303.15), 100*c.excess, ratio)
			worst = math.Max(worst, math.Max(ratio, 1/ratio))
		}
		return worst
	}
	for _, share := range []float64{1, 0.4} {
		if worst := miss(share); worst < 2 {
			t.Errorf("with %.0f %% of the surface all rows lie within a factor %.2f: alumina need not be refused", 100*share, worst)
		}
	}
}

// Activated neutral alumina left 5 to 6 mg/kg in tetrahydrofuran of 107 mg/kg
// (Williams & Lawton 2010, secondary page; the dose of 100 g/L from memory), so in
// an ether its isotherm may be used. The equilibrium is only a lower bound to a
// short contact: 0.1 to 0.5 g/100 g of residual loading would explain it.
func TestAluminaInTetrahydrofuranIsPrinted(t *testing.T) {
	m := mixture(t, "tetrahydrofuran")
	alumina := sieve3A(t, 0)
	alumina.Key, alumina.Loading = "alumina", aluminaLoading
	for _, residual := range []float64{0, 0.001, 0.005} {
		alumina.ResidualKgPerKg = residual
		o, err := steps.SoakOver(m, litres(m, 1, 107e-6), 100, 30*86400, alumina, stirred(t, "tetrahydrofuran"))
		if err != nil {
			t.Logf("residual %.2g g/100 g: %v", 100*residual, err)
			continue
		}
		t.Logf("residual %.2g g/100 g: %.3g mg/kg, published 5.9", 100*residual, o.Out.Water()*1e6)
	}
}
