package study

import (
	"maps"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/steps"
)

// provenance lists the references that the report cites and the numbers that
// rest on memory, common practice or an assumption.
func provenance(r *Report, c *catalog.Catalog) ([]catalog.Source, []Weak) {
	p := gather(r, c)
	return p.sources(), p.sorted()
}

// Behind are the inputs from the catalog that a route of a lot rests on, each with
// its source and confidence, and the sources themselves.
func (r *Report) Behind(l *Lot, route *Route) (inputs []Weak, sources []catalog.Source) {
	one, lot := *r, *l
	lot.Routes, lot.Excluded = []Route{*route}, nil
	one.Lots = []Lot{lot}
	one.Book = usedPrices(&one)
	p := gather(&one, r.catalog)
	for _, what := range slices.Sorted(maps.Keys(p.every)) {
		inputs = append(inputs, p.every[what])
	}
	return inputs, p.sources()
}

func gather(r *Report, c *catalog.Catalog) *shelf {
	p := &shelf{catalog: c, cited: map[string]bool{}, weak: map[string]Weak{}, every: map[string]Weak{}}
	kinds := map[steps.Kind]bool{}
	for _, l := range r.Lots {
		p.solvent(l.Solvent)
		for _, e := range l.Excluded {
			p.cite(e.Source)
		}
		for _, route := range l.Routes {
			for _, caution := range route.Cautions {
				p.cite(caution.Source)
			}
			for _, s := range route.Run.Route {
				kinds[s.Kind] = true
				if s.Agent != "" {
					p.agent(c.Agents[s.Agent])
				}
				p.carrier(l.Solvent.Key, s.Carrier)
			}
		}
		p.history(&l.Job)
		if h := l.Solvent.Hazards; l.Job.Peroxide != nil && h.FormsPeroxides() {
			p.value("peroxide reading of class "+h.PeroxideClass+" counts for", c.PeroxideReading(h.PeroxideClass))
		}
	}
	for _, key := range slices.Sorted(maps.Keys(c.Practice)) {
		if appliesTo(key, kinds) {
			p.value("practice: "+key, c.Practice[key])
		}
	}
	for _, key := range slices.Sorted(maps.Keys(c.Assays)) {
		if key == r.Job.Site.KarlFischer {
			a := c.Assays[key]
			p.value(key+" Karl Fischer: repeatability", a.Repeatability)
			p.value(key+" Karl Fischer: detection limit", a.DetectionLimit)
		}
	}
	p.prices(r)
	p.apparatus(r)
	p.emissions(r)
	return p
}

// appliesTo reports whether an operating fact enters a route with these steps.
func appliesTo(key string, kinds map[steps.Kind]bool) bool {
	owners := map[string]steps.Kind{
		"trap-": steps.Trap, "heat-": steps.Trap, "draining-": steps.Trap, "cooling-": steps.Trap, "vapour-": steps.Trap,
		"forerun-": steps.Forerun, "carrier-": steps.Forerun, "settle-": steps.Settle, "soak-": steps.Soak, "oven-": steps.Soak, "flush-": steps.Soak, "dose-": steps.Soak, "buy-": steps.Buy,
	}
	for prefix, kind := range owners {
		if strings.HasPrefix(key, prefix) {
			return kinds[kind]
		}
	}
	if strings.HasPrefix(key, "still-fill") || strings.HasPrefix(key, "water-molar") {
		return kinds[steps.Trap] || kinds[steps.Soak]
	}
	return strings.HasPrefix(key, "karl-fischer") || strings.HasPrefix(key, "still-rate") && kinds[steps.Soak]
}

type shelf struct {
	catalog *catalog.Catalog
	cited   map[string]bool
	weak    map[string]Weak
	every   map[string]Weak // number, weak or not
}

// carrier cites what a carrier of the solvent rests on.
func (p *shelf) carrier(solvent, key string) {
	if key == "" {
		return
	}
	pair := [2]string{solvent, key}
	p.solvent(p.catalog.Solvents[key])
	if set := p.catalog.Pairs[pair]; set != nil {
		p.cite(set.Source)
	}
	if set := p.catalog.Ternaries[pair]; set != nil {
		p.cite(set.Source)
	}
	if layer := p.catalog.Layers[pair]; layer != nil {
		p.cite(layer.Source)
	}
}

func (p *shelf) cite(id string) {
	if _, ok := p.catalog.Sources[id]; ok {
		p.cited[id] = true
	}
}

func (p *shelf) value(what string, v catalog.Value) { p.note(what, v.Text, v.Origin) }

func (p *shelf) note(what, text string, o catalog.Origin) {
	p.cite(o.Source)
	confidence := string(o.Confidence)
	if o.Own {
		confidence = "own data, " + confidence
	}
	p.every[what] = Weak{What: what, Value: text, Confidence: confidence, Source: o.Source, Note: o.Note}
	if o.Own || o.Confidence.Weak() {
		p.weak[what] = p.every[what]
	}
}

func (p *shelf) solvent(s *catalog.Solvent) {
	for _, one := range []*catalog.Solvent{s, p.catalog.Solvents["water"]} {
		for _, curve := range []struct {
			what string
			c    catalog.Curve
		}{
			{"vapour pressure", one.VapourPressure}, {"heat of vaporization", one.HeatOfVaporization},
			{"heat capacity", one.HeatCapacity}, {"density", one.Density}, {"viscosity", one.Viscosity},
		} {
			p.note(one.Name+": "+curve.what, string(curve.c.Equation), curve.c.Origin)
		}
	}
	if s.Own {
		p.value(s.Name+": molar mass", s.MolarMass)
		p.value(s.Name+": boiling point", s.BoilingPoint)
		p.value(s.Name+": melting point", s.MeltingPoint)
		p.value(s.Name+": critical temperature", s.CriticalTemperature)
	}
	if s.Water != nil {
		p.note("water + "+s.Name+": activity model", "quality "+s.Water.Quality, s.Water.Origin)
	}
	if s.HottestPot != nil {
		p.value(s.Name+": hottest pot", *s.HottestPot)
	}
	p.value(s.Name+": mixing rate of a still vessel", s.StillRate)
	p.note(s.Name+": hazards", s.Hazards.PeroxideNote, s.Hazards.Origin)
}

func (p *shelf) agent(a *catalog.Agent) {
	if a.Isotherm != nil {
		p.note(a.Name+": isotherm", "", a.Isotherm.Origin)
	}
	for _, f := range []struct {
		what string
		v    *catalog.Value
	}{
		{"solvent kept on drained beads", a.HoldUp}, {"lives", a.Lives}, {"capacity lost per regeneration", a.Fade},
		{"bead diameter", a.BeadDiameter}, {"bead density", a.BeadDensity}, {"bead porosity", a.BeadPorosity},
		{"bead tortuosity", a.BeadTortuosity}, {"largest practical dose", a.MaxDose},
	} {
		if f.v != nil {
			p.value(a.Name+": "+f.what, *f.v)
		}
	}
}

func (p *shelf) history(lot *job.Lot) {
	if lot.SieveTreatment != "" {
		p.note("sieve history "+lot.SieveTreatment+": residual loading of 3A, others by their isotherms", quantity.Format(lot.ResidualLoading, quantity.MassRatio, "g/100 g", 3),
			catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Note: "handling and standing are assumed"})
		return
	}
	key := lot.SieveHistory
	for _, h := range p.catalog.Histories {
		if h.Key == key || key == "" {
			p.value("sieve history "+h.Text+": residual loading", h.ResidualKgPerKg)
		}
	}
}

// apparatus that some bill wears out or fills.
func (p *shelf) apparatus(r *Report) {
	for _, item := range slices.Sorted(maps.Keys(p.catalog.Apparatus)) {
		if _, used := r.Book[item]; !used {
			continue
		}
		a := p.catalog.Apparatus[item]
		for _, f := range []struct {
			what string
			v    *catalog.Value
		}{
			{"volume", a.Volume}, {"fill volume", a.FillVolume}, {"largest fill", a.Fill}, {"power", a.Power},
			{"load", a.Load}, {"energy of a run", a.Energy}, {"life", a.Life}, {"breakage", a.Breakage}, {"set-up", a.SetUp},
		} {
			if f.v != nil {
				p.value(a.Name+": "+f.what, *f.v)
			}
		}
	}
}

// emissions that enter the CO2e of some route.
func (p *shelf) emissions(r *Report) {
	keys := map[string]bool{"electricity": true}
	for _, l := range r.Lots {
		keys["making/"+l.Solvent.Key], keys["burning/"+l.Solvent.Key] = true, true
		for _, route := range l.Routes {
			for agent := range route.Run.AgentKg {
				keys["making/"+agent] = true
			}
		}
	}
	for _, key := range slices.Sorted(maps.Keys(keys)) {
		if v, ok := p.catalog.Emissions[key]; ok {
			p.value("emission factor of "+strings.Replace(key, "/", " ", 1), v)
		}
	}
}

func (p *shelf) prices(r *Report) {
	for _, item := range slices.Sorted(maps.Keys(r.Book)) {
		price := r.Book[item]
		p.note("price of "+price.Label, price.PerUnit.String()+" "+r.Job.Currency+" per "+unitWord(price.Unit),
			catalog.Origin{Source: price.Source, Confidence: catalog.Confidence(price.Confidence), Note: price.Note, Own: price.Own && price.Source != costs.OwnSource})
	}
}

func (p *shelf) sources() []catalog.Source {
	var out []catalog.Source
	for _, id := range slices.Sorted(maps.Keys(p.cited)) {
		source := p.catalog.Sources[id]
		if source.Own {
			source.Reference = "own data: " + source.Reference
		}
		out = append(out, source)
	}
	return out
}

func (p *shelf) sorted() []Weak {
	var out []Weak
	for _, what := range slices.Sorted(maps.Keys(p.weak)) {
		out = append(out, p.weak[what])
	}
	return out
}

// unitWord is the unit of a price as it is read.
func unitWord(unit string) string {
	switch unit {
	case "kwh":
		return "kWh"
	case "m3":
		return "m³"
	case "each":
		return "piece"
	}
	return unit
}
