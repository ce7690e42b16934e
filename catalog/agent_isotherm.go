package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

// readIsotherm reads one of the forms: sites (Langmuir), toth, terms (alumina), or
// like (another agent's sites, scaled).
func (s *shelf) readIsotherm(a *Agent, n *document.Node, scaled map[*Agent]document.Fields) {
	if n == nil {
		return
	}
	f := n.Map(with("sites", "toth", "terms", "like", "capacity factor", "affinity factor", "range", "pressure")...)
	a.Isotherm = &Isotherm{Origin: s.origin(f)}
	forms := 0
	for _, form := range []string{"sites", "toth", "terms", "like"} {
		if f.Has(form) {
			forms++
		}
	}
	if forms != 1 {
		n.Fail("gives %d forms; one of sites, toth, terms and like is wanted", forms)
		return
	}
	if r := f.Get("range"); r != nil {
		a.Isotherm.TMinK, a.Isotherm.TMaxK = span(r, quantity.Temperature)
	}
	if p := f.Get("pressure"); p != nil {
		a.Isotherm.LowestPa, a.Isotherm.HighestPa = span(p, quantity.Pressure)
	}
	switch {
	case f.Has("like"):
		scaled[a] = f
		return
	case f.Has("sites"):
		a.Isotherm.Sites = sites(f.Get("sites"))
	case f.Has("toth"):
		a.Isotherm.Toth = toth(f.Get("toth"))
	case f.Has("terms"):
		a.Isotherm.Terms = terms(f.Get("terms"))
	}
	checkIsotherm(n, a.Isotherm)
}

// positive reads a constant that must be above zero.
func positive(f document.Fields, key string, d quantity.Dimension) float64 {
	n := f.Need(key)
	reading, ok := n.Quantity(d)
	if ok && !(reading.SI > 0) {
		n.Fail("%q is not above zero", n.Text())
	}
	return reading.SI
}

func sites(n *document.Node) (list []Site) {
	for _, item := range n.Items() {
		f := item.Map("capacity", "b0", "heat")
		list = append(list, Site{
			CapacityKgPerKg: positive(f, "capacity", quantity.MassRatio),
			B0PerPa:         positive(f, "b0", quantity.InversePressure),
			HeatJPerMol:     positive(f, "heat", quantity.HeatPerMole),
		})
	}
	return list
}

func toth(n *document.Node) *Toth {
	f := n.Map("capacity", "b0", "heat", "n0", "c")
	return &Toth{
		CapacityKgPerKg: positive(f, "capacity", quantity.MassRatio),
		B0PerPa:         positive(f, "b0", quantity.InversePressure),
		HeatK:           kelvin(f.Need("heat")),
		N0:              f.Need("n0").Number(),
		CK:              kelvin(f.Need("c")),
	}
}

func terms(n *document.Node) *Terms {
	f := n.Map("first", "affinity", "second", "exponent", "heat", "reference")
	return &Terms{
		FirstKgPerKg:  positive(f, "first", quantity.MassRatio),
		Affinity:      positive(f, "affinity", quantity.Number),
		SecondKgPerKg: positive(f, "second", quantity.MassRatio),
		Exponent:      positive(f, "exponent", quantity.Number),
		HeatJPerMol:   positive(f, "heat", quantity.HeatPerMole),
		ReferencePa:   positive(f, "reference", quantity.Pressure),
	}
}

// scale makes an isotherm from the sites of another agent. An agent that is like
// itself, or like another scaled one, has none of its own.
func (s *shelf) scale(a *Agent, f document.Fields) {
	capacity := s.value(f.Need("capacity factor"), quantity.Number)
	affinity := s.value(f.Need("affinity factor"), quantity.Number)
	other := s.cat.Agents[f.Get("like").Text()]
	if other == nil || other.Isotherm == nil || len(other.Isotherm.Sites) == 0 || other == a {
		f.Get("like").Fail("%q has no isotherm of its own sites to be scaled", f.Get("like").Text())
		return
	}
	for _, site := range other.Isotherm.Sites {
		site.CapacityKgPerKg *= capacity.SI
		site.B0PerPa *= affinity.SI
		a.Isotherm.Sites = append(a.Isotherm.Sites, site)
	}
	checkIsotherm(f.Get("like"), a.Isotherm)
}

// What a sorbent of the trade can hold, kg/kg at 25 °C. Over 10 % humidity a
// sorbent holds 2 to 30 g/100 g, at saturation 15 to 60; sources: the isotherms of
// the catalog and common practice.
const (
	dryAirPa       = 0.1 * 3169.9
	saturatedPa    = 3169.9
	leastInDryAir  = 0.02
	mostInDryAir   = 0.30
	leastSaturated = 0.15
	mostSaturated  = 0.60
)

// checkIsotherm asks what holds for water on any sorbent: more with pressure, less
// with temperature, and no more than beads have pores for.
func checkIsotherm(n *document.Node, i *Isotherm) {
	const ambient, hot = 298.15, 338.15
	if q := i.LoadingKgPerKg(dryAirPa, ambient); !(q >= leastInDryAir && q <= mostInDryAir) {
		n.Fail("holds %.3g g/100 g at 25 °C and 10 %% humidity; %g to %g is expected", 100*q, 100*leastInDryAir, 100*mostInDryAir)
	}
	if q := i.LoadingKgPerKg(saturatedPa, ambient); !(q >= leastSaturated && q <= mostSaturated) {
		n.Fail("holds %.3g g/100 g at 25 °C in saturated air; %g to %g is expected", 100*q, 100*leastSaturated, 100*mostSaturated)
	}
	for _, p := range []float64{0.1, 1, 10, 100, 1000} {
		q := i.LoadingKgPerKg(p, ambient)
		if !(i.LoadingKgPerKg(2*p, ambient) > q) {
			n.Fail("does not rise with pressure at %g Pa", p)
		}
		if !(i.LoadingKgPerKg(p, hot) < q) {
			n.Fail("does not fall with temperature at %g Pa", p)
		}
	}
}
