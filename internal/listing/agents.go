package listing

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

func agent(key string, a *catalog.Agent) Entry {
	var f facts
	own := catalog.Origin{Own: a.Own}
	f.say("kind", a.Kind, own)
	f.say("formula", a.Formula, own)
	f.say("also called", strings.Join(a.Aliases, ", "), own)
	f.isotherm(a.Isotherm)
	if a.LoadingBand > 1 {
		f.say("band of the loading, factor", plain(a.LoadingBand), a.BandOrigin)
	}
	for _, h := range a.Hydrates {
		f.value(h.Pair+", capacity", &h.Capacity)
		f.value(h.Pair+", activity of water", &h.Activity)
		f.value(h.Pair+", heat", &h.Heat)
	}
	f.claim(a.Claim)
	f.reaction(a.Reaction)
	for _, r := range a.Residuals {
		f.value(fmt.Sprintf("left in %s, %s", r.Solvent, r.How), &r.Water)
	}
	f.bySolvent("pore space left in ", a.PoreSpace)
	for _, v := range []struct {
		what  string
		value *catalog.Value
	}{
		{"useless above", a.UselessAbove}, {"pore opening", a.Window}, {"bulk density", a.BulkDensity}, {"bead diameter", a.BeadDiameter},
		{"bead density", a.BeadDensity}, {"bead porosity", a.BeadPorosity}, {"bead tortuosity", a.BeadTortuosity}, {"solvent kept when drained", a.HoldUp},
		{"uses before discard", a.Lives}, {"capacity lost per regeneration", a.Fade}, {"largest practical dose", a.MaxDose},
		{"heat of uptake", a.HeatOfUptake}, {"heat capacity", a.HeatCapacity},
	} {
		f.value(v.what, v.value)
	}
	return Entry{Key: key, Title: a.Name, Own: a.Own, Facts: f}
}

func (f *facts) isotherm(i *catalog.Isotherm) {
	if i == nil {
		return
	}
	var forms []Fact
	add := func(what, format string, args ...any) {
		forms = append(forms, fact(what, fmt.Sprintf(format, args...), "", i.Origin))
	}
	for n, s := range i.Sites {
		add(fmt.Sprintf("isotherm, Langmuir site %d", n+1), "capacity %s kg/kg, b0 %s 1/Pa, heat %s J/mol", plain(s.CapacityKgPerKg), plain(s.B0PerPa), plain(s.HeatJPerMol))
	}
	if t := i.Toth; t != nil {
		add("isotherm, Toth", "ws %s kg/kg, b0 %s 1/Pa, Qs %s K, n0 %s, c %s K", plain(t.CapacityKgPerKg), plain(t.B0PerPa), plain(t.HeatK), plain(t.N0), plain(t.CK))
	}
	if t := i.Terms; t != nil {
		add("isotherm, two terms", "q1 %s kg/kg, k %s, q2 %s kg/kg, m %s, heat %s J/mol, p0 %s Pa",
			plain(t.FirstKgPerKg), plain(t.Affinity), plain(t.SecondKgPerKg), plain(t.Exponent), plain(t.HeatJPerMol), plain(t.ReferencePa))
	}
	for n := range forms {
		forms[n].Range = span(i.TMinK, i.TMaxK)
		if i.HighestPa > 0 {
			forms[n].Range += fmt.Sprintf(", %s to %s Pa", plain(i.LowestPa), plain(i.HighestPa))
		}
	}
	*f = append(*f, forms...)
	*f = append(*f, Fact{
		What: "loading at 25 °C over 10 Pa of water", Value: quantity.Significant(100*i.LoadingKgPerKg(10, ambientK), 3), Unit: "g/100 g",
		Source: i.Source, Confidence: catalog.Derived, Note: "from the isotherm", Own: i.Own,
	})
}

func (f *facts) claim(c *catalog.Claim) {
	if c == nil {
		return
	}
	f.value("share of the dissolved water removed in 15 min", &c.Removed)
	f.bySolvent("the same in ", c.Except)
	f.value("dose to which that belongs", &c.Dose)
	f.value("lowest outlet claimed", &c.Least)
	f.value("lowest target as the last step", &c.Target)
}

func (f *facts) reaction(r *catalog.Reaction) {
	if r == nil {
		return
	}
	f.say("reaction", r.Equation, r.Need.Origin)
	f.value("agent needed per water", &r.Need)
	f.value("hydrogen per agent at 20 °C", &r.GasM3)
	f.value("surplus charged", &r.Surplus)
	f.value("activity of water where nothing was measured", &r.Activity)
	f.value("wettest feed", &r.Feed)
	f.say("waste", r.Waste, catalog.Origin{Own: r.Need.Own})
}

func (f *facts) bySolvent(what string, values map[string]catalog.Value) {
	for _, key := range slices.Sorted(maps.Keys(values)) {
		v := values[key]
		f.value(what+key, &v)
	}
}
