package catalog

import (
	"fmt"
	"math"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// What stands in for the numbers that an own solvent leaves out. Each is an
// assumption and is listed with the solvent.
const (
	guldbergRatio      = 2.0 / 3      // boiling over critical temperature, K/K (Guldberg's rule)
	watsonExponent     = 0.38         // usual exponent of the heat of vaporization
	usualHeatJPerKgK   = 2000.0       // heat capacity of an organic liquid, 1.6 to 2.2 kJ/kg/K
	usualViscosityPaS  = 0.6e-3       // at 25 °C
	usualAndradeK      = 1000.0       // its slope with 1/T
	usualExpansionPerK = 1.1e-3       // volume of an organic liquid
	assumedMeltingK    = 273.15       // liquid above 0 °C
	ambientK           = 298.15       // where a number is taken to hold if it does not say
	oneSolubilityBand  = 2.0          // factor on solubilities away from the one given
	largestSolubilityX = 0.35         // mole fraction of water above which a solvent is not immiscible
	oneSolubilityK     = 20.0         // how far from that temperature the model is called fitted
	estimate           = "assumption" // source id
)

func (s *shelf) readOwnSolvents(n *document.Node) {
	for _, e := range n.Entries() {
		f := e.Node.Map(ownSolventKeys...)
		if f.Has("key") && f.Get("key").Text() != e.Key {
			f.Get("key").Fail("%q does not match the key of the entry, %q", f.Get("key").Text(), e.Key)
		}
		own := s.ownSolvent(e, f)
		if built := s.cat.Solvents[e.Key]; built != nil && built.Class != own.Class {
			f.Get("class").Fail("%s is of class %q in the built-in catalog; own data cannot move it to %q, since the class decides which agents may meet it", e.Key, built.Class, own.Class)
		}
		s.cat.Solvents[e.Key] = own
	}
}

// ownSolvent reads an entry that may leave out all but the boiling point, the
// density, the heat of vaporization and the solubility of water.
func (s *shelf) ownSolvent(e document.Entry, f document.Fields) *Solvent {
	v := &Solvent{
		Key: e.Key, Name: f.Need("name").Text(), CAS: casNumber(f.Get("cas")), Formula: f.Need("formula").Text(),
		Class: f.Need("class").Text(), Aliases: f.Get("aliases").Texts(), Own: true,
		BoilingPoint: s.value(f.Need("boiling point"), quantity.Temperature),
		FlashPoint:   s.optional(f.Get("flash point"), quantity.Temperature),
		HottestPot:   s.optional(f.Get("hottest pot"), quantity.Temperature),
		Autoignition: s.optional(f.Get("autoignition"), quantity.Temperature),
	}
	s.checkKey(e)
	s.cited[estimate], s.cited[stoichiometry] = true, true
	s.ownConstants(f, v)
	s.ownCurves(f, v)
	v.HBond = "strong"
	if n := f.Get("hydrogen bonds"); n != nil {
		v.HBond = n.OneOf("weak", "strong")
	} else {
		v.guess("the mixing rate of a still vessel is the slower of the two known")
	}
	s.ownHazards(f, v)
	s.finish(e.Node, f, v)
	v.Water = s.ownPair(e.Node, f, v)
	return v
}

// guess records that something was filled in.
func (v *Solvent) guess(format string, args ...any) {
	v.Estimates = append(v.Estimates, fmt.Sprintf(format, args...))
}

func assumed(si float64, text, note string) Value {
	return Value{SI: si, Text: text, Origin: Origin{Source: estimate, Confidence: Assumption, Note: note, Own: true}}
}

// ownConstants takes the molar mass from the formula and estimates the rest.
func (s *shelf) ownConstants(f document.Fields, v *Solvent) {
	if n := f.Get("molar mass"); n != nil {
		v.MolarMass = s.value(n, quantity.MolarMass)
	} else if atoms, err := parseFormula(v.Formula); err == nil {
		v.MolarMass = Value{SI: atoms.kgPerMol(), Text: quantity.Format(atoms.kgPerMol(), quantity.MolarMass, "g/mol", 5), Origin: Origin{
			Source: stoichiometry, Confidence: Derived, Note: "from the formula", Own: true}}
	}
	if n := f.Get("melting point"); n != nil {
		v.MeltingPoint = s.value(n, quantity.Temperature)
	} else {
		v.MeltingPoint = assumed(assumedMeltingK, "0 °C", "not given; taken to be liquid above 0 °C")
		v.guess("the melting point: taken to be liquid above 0 °C")
	}
	if n := f.Get("critical temperature"); n != nil {
		v.CriticalTemperature = s.value(n, quantity.Temperature)
	} else if v.BoilingPoint.SI > 0 {
		v.CriticalTemperature = assumed(v.BoilingPoint.SI/guldbergRatio, quantity.Format(v.BoilingPoint.SI/guldbergRatio, quantity.Temperature, "K", 4),
			"not given; the boiling point is two thirds of it (Guldberg's rule)")
		v.guess("the critical temperature: 1.5 times the boiling point in kelvin (Guldberg's rule)")
	}
}

// ownCurves reads full curves where they are given and makes simple ones of
// single values or of nothing.
func (s *shelf) ownCurves(f document.Fields, v *Solvent) {
	for _, p := range properties {
		n := f.Get(p.key)
		switch {
		case n != nil && hasKey(n, "equation"):
			*p.of(v) = s.curve(n, p, v.MolarMass.SI)
		case p.key == "density":
			v.Density = s.straightDensity(f.Need(p.key), v)
		case p.key == "heat of vaporization":
			v.HeatOfVaporization = s.watsonHeat(f.Need(p.key), v)
		case n != nil:
			n.Fail(`gives no "equation"; a single value is taken for the density and the heat of vaporization only`)
		}
	}
	if !f.Has("vapour pressure") && v.HeatOfVaporization.Scale != 0 {
		v.VapourPressure = clapeyronCurve(v)
		v.guess("the vapour pressure: Clausius-Clapeyron through the boiling point with the heat of vaporization")
	}
	if !f.Has("heat capacity") {
		v.HeatCapacity = estimated(thermo.Linear298, "J/(mol K)", usualHeatJPerKgK*v.MolarMass.SI, 0)
		v.guess("the heat capacity: 2.0 kJ/kg/K, as of most organic liquids")
	}
	if !f.Has("viscosity") {
		v.Viscosity = estimated(thermo.Andrade, "Pa s", math.Log(usualViscosityPaS)-usualAndradeK/ambientK, usualAndradeK)
		v.guess("the viscosity: 0.6 mPa s at 25 °C, as of a thin liquid")
	}
}

// straightDensity is rho = rho0 (1 - 1.1e-3 (T - T0)).
func (s *shelf) straightDensity(n *document.Node, v *Solvent) Curve {
	value, tK := s.valueAt(n, quantity.Density)
	if value.SI == 0 {
		return Curve{}
	}
	slope := usualExpansionPerK * value.SI
	c := estimated(thermo.QuadRho, "kg/m3", value.SI+slope*tK, -slope)
	c.Origin = madeOf(value)
	c.Note = join(c.Note, "one value; expansion 1.1e-3 per kelvin assumed")
	v.guess("the density away from %s: expansion of 1.1e-3 per kelvin", quantity.FormatTemperature(tK))
	return c
}

// watsonHeat carries the heat of vaporization at the boiling point to other temperatures.
func (s *shelf) watsonHeat(n *document.Node, v *Solvent) Curve {
	value := s.value(n, quantity.HeatPerMole)
	if value.SI == 0 || v.BoilingPoint.SI == 0 {
		return Curve{}
	}
	c := estimated(thermo.Watson, "J/mol", value.SI, v.BoilingPoint.SI, watsonExponent, v.CriticalTemperature.SI)
	c.Origin = madeOf(value)
	c.Note = join(c.Note, "one value, taken to hold at the boiling point; usual exponent 0.38")
	v.guess("the heat of vaporization away from the boiling point: exponent 0.38")
	return c
}

// clapeyronCurve integrates d ln P/dT = H/(R T^2) from the boiling point, with the
// heat H + h (T - Tb) that the curve of the heat of vaporization has there:
//
//	ln P = ln P0 + (H - h Tb)/R (1/Tb - 1/T) + h/R ln(T/Tb)
//
// The vapour is taken as ideal: at 25 °C the result may be up to a factor of 2 off.
func clapeyronCurve(v *Solvent) Curve {
	tb, heat := v.BoilingPoint.SI, v.HeatOfVaporization
	h := (heat.At(tb+1) - heat.At(tb-1)) / 2
	slopeK := (heat.At(tb) - h*tb) / thermo.GasConstant
	power := h / thermo.GasConstant
	return estimated(thermo.DIPPR101, "Pa", math.Log(standardPa)+slopeK/tb-power*math.Log(tb), -slopeK, power, 0, 1)
}

// madeOf is the origin of a curve that is made of one value: no better than derived.
func madeOf(value Value) Origin {
	o := value.Origin
	if o.Confidence == Published || o.Confidence == Fitted {
		o.Confidence = Derived
	}
	return o
}

// estimated is a curve that rests on an assumption; the unit is SI already.
func estimated(equation thermo.Equation, unit string, coefficients ...float64) Curve {
	c := Curve{Unit: unit, Origin: Origin{Source: estimate, Confidence: Assumption, Note: "not given; estimated", Own: true}}
	c.Equation, c.Scale = equation, 1
	copy(c.C[:], coefficients)
	return c
}

// valueAt is value with the temperature at which it holds, 25 °C where none is given.
func (s *shelf) valueAt(n *document.Node, d quantity.Dimension) (v Value, tK float64) {
	if n == nil {
		return Value{}, ambientK
	}
	f := n.Map(with("value", "at")...)
	v = Value{Origin: s.origin(f)}
	number := f.Need("value")
	if reading, ok := number.Quantity(d); ok {
		v.SI, v.Text = reading.SI, number.Text()
		checkRange(number, v.SI, d)
	}
	tK = ambientK
	if at := f.Get("at"); at != nil {
		reading, ok := at.Quantity(quantity.Temperature)
		if ok {
			tK = reading.SI
			checkRange(at, tK, quantity.Temperature)
		}
	}
	return v, tK
}

// ownHazards reads the hazards; what is not said is taken from the side of caution.
func (s *shelf) ownHazards(f document.Fields, v *Solvent) {
	if n := f.Get("hazards"); n != nil {
		v.Hazards = s.hazards(n)
		return
	}
	atoms, _ := parseFormula(v.Formula)
	v.Hazards = Hazards{
		PeroxideClass: "unknown", PeroxideNote: "not stated; held to form peroxides until the entry says otherwise",
		Halogenated: atoms.halogenated(), Flammability: "not stated; held to be highly flammable", AlkaliNote: "not stated",
		Origin: Origin{Source: estimate, Confidence: Assumption, Note: "no hazards are stated", Own: true},
	}
	v.guess("the hazards: none are stated, so it is held to be highly flammable and to form peroxides")
}

func hasKey(n *document.Node, key string) bool {
	if !n.IsMap() {
		return false
	}
	for _, e := range n.Entries() {
		if e.Key == key {
			return true
		}
	}
	return false
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}
