package catalog

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// property is a curve that every solvent has.
type property struct {
	key       string
	of        func(*Solvent) *Curve
	units     map[string]float64 // factor to SI; 0: times the molar mass
	low, high float64            // what the curve may give, SI
	text      string             // the same for people
}

var properties = []property{
	{"vapour pressure", func(s *Solvent) *Curve { return &s.VapourPressure }, map[string]float64{"Pa": 1}, 1e-9, 1e8, "1e-9 to 1e8 Pa"},
	{"heat of vaporization", func(s *Solvent) *Curve { return &s.HeatOfVaporization }, map[string]float64{"J/mol": 1}, 1e3, 2e5, "1 to 200 kJ/mol"},
	{"heat capacity", func(s *Solvent) *Curve { return &s.HeatCapacity }, map[string]float64{"J/(mol K)": 1, "J/(kmol K)": 1e-3}, 30, 2000, "30 to 2000 J/(mol K)"},
	{"density", func(s *Solvent) *Curve { return &s.Density }, map[string]float64{"kg/m3": 1, "mol/m3": 0}, 200, 3000, "200 to 3000 kg/m3"},
	{"viscosity", func(s *Solvent) *Curve { return &s.Viscosity }, map[string]float64{"Pa s": 1}, 1e-5, 1e3, "1e-5 to 1000 Pa s"},
}

// coefficients is how many numbers an equation takes: at least, at most.
var coefficients = map[thermo.Equation][2]int{
	thermo.DIPPR101: {5, 5}, thermo.Antoine10: {3, 3}, thermo.AntoineLn: {3, 3}, thermo.Wagner25: {6, 6}, thermo.Wagner36: {6, 6},
	thermo.DIPPR106: {5, 6}, thermo.PPDS12: {6, 6}, thermo.Watson: {4, 4}, thermo.DIPPR100: {2, 5}, thermo.DIPPR114: {5, 5},
	thermo.CubicR: {4, 4}, thermo.Linear298: {2, 2}, thermo.DIPPR105: {4, 4}, thermo.VDI106: {6, 6}, thermo.QuadRho: {3, 3},
	thermo.PPDS9: {5, 5}, thermo.VN3: {3, 3}, thermo.Andrade: {2, 2},
}

func (s *shelf) curve(n *document.Node, p property, molarMassKgPerMol float64) Curve {
	if n == nil {
		return Curve{}
	}
	f := n.Map(with("equation", "coefficients", "unit", "range")...)
	c := Curve{Origin: s.origin(f)}
	c.Equation = thermo.Equation(f.Need("equation").Text())
	if c.Equation != "" && !c.Equation.Known() {
		var known []string
		for e := range coefficients {
			known = append(known, string(e))
		}
		slices.Sort(known)
		f.Get("equation").Fail("%q is not an equation known here; allowed: %s", c.Equation, strings.Join(known, ", "))
	}
	readCoefficients(f.Need("coefficients"), &c)
	c.Unit = f.Need("unit").OneOf(keysOf(p.units)...)
	if c.Scale = p.units[c.Unit]; c.Scale == 0 && c.Unit != "" {
		c.Scale = molarMassKgPerMol
	}
	if r := f.Get("range"); r != nil {
		c.TMinK, c.TMaxK = span(r, quantity.Temperature)
	}
	return c
}

func readCoefficients(n *document.Node, c *Curve) {
	items := n.Items()
	want, ok := coefficients[c.Equation]
	if n == nil || !ok {
		return
	}
	if len(items) < want[0] || len(items) > want[1] {
		takes := strconv.Itoa(want[1])
		if want[0] < want[1] {
			takes = fmt.Sprintf("%d to %d", want[0], want[1])
		}
		n.Fail("%s takes %s coefficients, not %d", c.Equation, takes, len(items))
		return
	}
	for i, item := range items {
		c.C[i] = item.Number()
	}
}

// checkCurve evaluates a curve over its range, or from the melting point to the
// critical one where the source prints none. Near the critical point several
// forms go to zero or infinity by design.
func checkCurve(n *document.Node, p property, v *Solvent) {
	c := p.of(v)
	if n == nil || c.Check() != nil || v.CriticalTemperature.SI == 0 {
		return // said already
	}
	lo, hi := c.TMinK, c.TMaxK
	if hi == 0 {
		lo, hi = v.MeltingPoint.SI, 0.9*v.CriticalTemperature.SI
	}
	hi = math.Min(hi, 0.98*v.CriticalTemperature.SI)
	const steps = 16
	for i := range steps + 1 {
		t := lo + (hi-lo)*float64(i)/steps
		if y := c.At(t); !(y >= p.low && y <= p.high) {
			n.Fail("gives %.4g in SI units at %.4g K; %s is expected", y, t, p.text)
			return
		}
	}
}
