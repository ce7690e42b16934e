package assay

import (
	"math"
	"strings"
	"testing"
)

// Repeatability 7 mg/kg and detection limit 8 mg/kg: interlaboratory study of
// ASTM D1533-00 (abstract). The 11.4 mg/kg follows by hand: 7/2.77 = 2.527,
// 2 x 2.527/sqrt(2) = 3.574, 15 - 3.574 = 11.43.
var coulometric = Method{"coulometric", 7e-6, 8e-6, 2}

func TestAcceptGuardsTheTarget(t *testing.T) {
	l := Accept(15e-6, coulometric)
	if math.Abs(l.Uncertainty*1e6-3.574) > 0.001 || math.Abs(l.AcceptAt*1e6-11.426) > 0.001 || l.CannotShow != "" {
		t.Errorf("Accept(15 mg/kg) = %+v, want U 3.574 and 11.426", l)
	}
}

func TestBelowTheDetectionLimitNothingCanBeShown(t *testing.T) {
	for _, target := range []float64{1e-6, 5e-6, 11.5e-6} {
		l := Accept(target, coulometric)
		if !math.IsNaN(l.AcceptAt) || !strings.Contains(l.CannotShow, "cannot be shown") {
			t.Errorf("Accept(%g) = %+v, want nothing to be shown", target, l)
		}
	}
	if l := Accept(11.6e-6, coulometric); l.CannotShow != "" {
		t.Errorf("11.6 - 3.574 is above the detection limit, yet: %s", l.CannotShow)
	}
}

func TestMoreInjectionsNarrowTheGuard(t *testing.T) {
	four := coulometric
	four.Injections = 8
	if got, want := Accept(15e-6, four).Uncertainty, Accept(15e-6, coulometric).Uncertainty/2; math.Abs(got-want) > 1e-15 {
		t.Errorf("eight injections: U %g, want half of that of two, %g", got, want)
	}
}
