package steps_test

import (
	"math"
	"strings"
	"testing"

	"parch/internal/steps"
)

// An ideal mixture in a simple still has a closed form (Rayleigh 1902): with the
// relative volatility a of water,
//
//	ln(N0/N) = (ln(x0/x) - a ln((1 - x0)/(1 - x)))/(a - 1)
//
// and n stages at total reflux raise a to a^(n+1) (Fenske, Ind. Eng. Chem. 24
// (1932) 482). Needs no data.
func TestIdealForerun(t *testing.T) {
	for _, c := range []struct {
		volatility, x0, x float64
		stages            int
	}{{2.5, 0.2, 0.02, 0}, {4, 0.01, 1e-4, 0}, {1.3, 0.1, 0.08, 0}, {1.5, 0.1, 0.001, 3}, {1.1, 0.3, 0.1, 10}, {1.2, 0.02, 1e-4, 20}} {
		m := ideal(c.volatility)
		a := math.Pow(c.volatility, float64(c.stages+1))
		want := math.Exp(-(math.Log(c.x0/c.x) - a*math.Log((1-c.x0)/(1-c.x))) / (a - 1))
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), molar(m, c.x0), m.MassFraction(c.x), still(c.stages), drawingRules)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		got := (o.Out.SolventKg/m.Solvent.MolarMassKgPerMol + o.Out.WaterKg/m.Water.MolarMassKgPerMol) / 1e3
		if o.Why != steps.AtTarget {
			t.Errorf("%+v: stopped for %s", c, o.Why)
		}
		near(t, "moles left", got, want, 0.001)
	}
}

// The first drop off a column of n stages at total reflux, with a constant
// volatility a (Fenske, Ind. Eng. Chem. 24 (1932) 482). Needs no data.
//
//	y/(1 - y) = a^(n+1) x/(1 - x)
func TestFirstDropFollowsFenske(t *testing.T) {
	for _, c := range []struct {
		volatility, x float64
		stages        int
	}{{2.5, 0.2, 0}, {1.5, 0.1, 1}, {1.5, 0.01, 4}, {1.1, 0.3, 10}, {1.2, 1e-4, 20}, {3, 1e-6, 7}} {
		m := ideal(c.volatility)
		want := math.Pow(c.volatility, float64(c.stages+1)) * c.x / (1 - c.x)
		rules := drawingRules
		rules.HeelShare = 1 - 1e-4*c.x*(1+want)/want // of the water, a ten-thousandth is drawn
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), molar(m, c.x), 1e-9, still(c.stages), rules)
		if err != nil {
			t.Errorf("%+v: %v", c, err)
			continue
		}
		drop := m.MoleFraction(o.Figure("water in what is drawn off") / 100)
		near(t, "ratio in the first drop", drop/(1-drop), want, 0.001)
	}
}

// The distillate of an ideal mixture whose water is the heavy one, by the same form.
// The wet heel is lighter by the mole than the charge, so a tenth of the mass is left
// before a tenth of the moles:
//
//	m/m0 = N/N0 (x M_w + (1 - x) M_s)/(x0 M_w + (1 - x0) M_s)
func TestIdealProductOverhead(t *testing.T) {
	for _, c := range []struct {
		volatility, x0, goal float64
	}{{1 / 3.0, 0.02, 0}, {1 / 3.0, 0.02, 0.9}, {1 / 3.0, 0.3, 0}, {1 / 8.0, 0.05, 0}, {1 / 1.5, 0.6, 0}} {
		m := ideal(c.volatility)
		molar0 := c.x0*m.Water.MolarMassKgPerMol + (1-c.x0)*m.Solvent.MolarMassKgPerMol
		left := func(x float64) float64 {
			return math.Exp((math.Log(x/c.x0) + c.volatility*math.Log((1-c.x0)/(1-x))) / (c.volatility - 1))
		}
		ofMass := func(x float64) float64 {
			return left(x) * (x*m.Water.MolarMassKgPerMol + (1-x)*m.Solvent.MolarMassKgPerMol) / molar0
		}
		lo, hi := c.x0, 1-1e-12
		for range 200 {
			if x := (lo + hi) / 2; ofMass(x) > steps.LeastHeel {
				lo = x
			} else {
				hi = x
			}
		}
		water := (c.x0 - left(lo)*lo) / (1 - left(lo))
		feed := molar(m, c.x0)
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), feed, c.goal, still(0), drawingRules)
		if err != nil {
			t.Fatal(err)
		}
		if o.Why != steps.AtHeel || !strings.Contains(o.WhyText, "10 % of the charge stays in the pot") {
			t.Errorf("%+v: stopped for %s: %s", c, o.Why, o.WhyText)
		}
		near(t, "water of the distillate", m.MoleFraction(o.Out.Water()), water, 0.001)
		near(t, "product", o.Out.MassKg(), 0.9*feed.MassKg(), 1e-6)
	}
}

// Of an ideal mixture over enough stages the distillate is dry until the pot is
// water: all the solvent comes over, and all the water stays (a limit that needs no
// data). The goal is not what ends it.
func TestOnlyWaterIsLeft(t *testing.T) {
	m := ideal(1 / 8.0)
	feed := molar(m, 0.6) // 27.3 % of its mass; a thousandth of solvent is 0.1 % more
	for _, goal := range []float64{0, 0.01} {
		o, err := steps.RunForerun(boiler(t, m, atmospherePa), feed, goal, still(12), drawingRules)
		if err != nil {
			t.Fatal(err)
		}
		if o.Why != steps.AtWater || !strings.Contains(o.WhyText, "27.4 % of the charge") {
			t.Errorf("to %g: stopped for %s: %s", goal, o.Why, o.WhyText)
		}
		near(t, "product", o.Out.SolventKg, feed.SolventKg, 0.005)
		if o.Out.Water() > 1e-6 || o.Losses[0].SolventKg > 0.005*feed.SolventKg {
			t.Errorf("to %g: the product holds %g water, the heel %g kg of solvent", goal, o.Out.Water(), o.Losses[0].SolventKg)
		}
	}
}
