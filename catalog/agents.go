package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

var agentKinds = []string{"sieve", "salt", "reactive", "oxide"}

func (s *shelf) readAgents() {
	s.cat.Agents = map[string]*Agent{}
	scaled := map[*Agent]document.Fields{}
	entries := map[string]document.Fields{}
	s.each(agentsFile, func(n *document.Node) {
		for _, e := range n.Entries() {
			s.checkKey(e)
			entries[e.Key], s.agentTops[e.Key] = e.Node.Map(agentKeys...), e.Node
			s.cat.Agents[e.Key] = s.agent(e.Key, e.Node, entries[e.Key], scaled)
		}
	})
	// A scaled isotherm may stand before the one it is scaled from.
	for _, key := range keysOf(s.cat.Agents) {
		if f, ok := scaled[s.cat.Agents[key]]; ok {
			s.scale(s.cat.Agents[key], f)
			if len(s.cat.Agents[key].Isotherm.Sites) > 0 {
				checkUptake(entries[key], s.cat.Agents[key])
			}
		}
	}
}

var agentKeys = []string{
	"name", "aliases", "kind", "formula", "isotherm", "loading band", "hydrates", "claim", "reaction", "residuals", "pore space", "window", "useless above",
	"bulk density", "bead diameter", "bead density", "bead porosity", "bead tortuosity", "hold-up", "lives", "fade", "largest dose",
	"heat of uptake", "heat capacity",
}

func (s *shelf) agent(key string, n *document.Node, f document.Fields, scaled map[*Agent]document.Fields) *Agent {
	a := &Agent{
		Key: key, Name: f.Need("name").Text(), Kind: f.Need("kind").OneOf(agentKinds...), Formula: f.Get("formula").Text(), Aliases: f.Get("aliases").Texts(), Own: s.owning,
		UselessAbove:   s.optional(f.Get("useless above"), quantity.Temperature),
		Window:         s.optional(f.Get("window"), quantity.Length),
		BulkDensity:    s.optional(f.Get("bulk density"), quantity.Density),
		BeadDiameter:   s.optional(f.Get("bead diameter"), quantity.Length),
		BeadDensity:    s.optional(f.Get("bead density"), quantity.Density),
		BeadPorosity:   s.optional(f.Get("bead porosity"), quantity.Share),
		BeadTortuosity: s.optional(f.Get("bead tortuosity"), quantity.Number),
		HoldUp:         s.optional(f.Get("hold-up"), quantity.HoldUp),
		Lives:          s.optional(f.Get("lives"), quantity.Number),
		Fade:           s.optional(f.Get("fade"), quantity.Share),
		MaxDose:        s.optional(f.Get("largest dose"), quantity.MassConcentration),
		HeatOfUptake:   s.optional(f.Get("heat of uptake"), quantity.HeatPerMole),
		HeatCapacity:   s.optional(f.Get("heat capacity"), quantity.HeatCapacity),
		PoreSpace:      s.bySolvent(f.Get("pore space"), quantity.Share),
		LoadingBand:    1,
	}
	if band := s.optional(f.Get("loading band"), quantity.Number); band != nil {
		a.BandOrigin = band.Origin
		if a.LoadingBand = band.SI; a.LoadingBand < 1 || a.LoadingBand > 10 {
			f.Get("loading band").Fail("the factor %v is outside 1 to 10", a.LoadingBand)
		}
	}
	s.readIsotherm(a, f.Get("isotherm"), scaled)
	s.readChemistry(a, f)
	s.checkAgent(n, f, a)
	return a
}

// bySolvent reads values that hold for named solvents.
func (s *shelf) bySolvent(n *document.Node, d quantity.Dimension) map[string]Value {
	if n == nil {
		return nil
	}
	values := map[string]Value{}
	for _, e := range n.Entries() {
		if s.cat.Solvents[e.Key] == nil {
			e.Node.Fail("%q is not a solvent known here%s", e.Key, e.Node.Offer(e.Key, keysOf(s.cat.Solvents)))
		}
		values[e.Key] = s.value(e.Node, d)
	}
	return values
}

// beadKeys are what a soak asks of an agent with an isotherm.
var beadKeys = []string{"bead diameter", "bead density", "bead porosity", "bead tortuosity", "hold-up", "lives", "fade", "largest dose"}

// checkAgent asks for what the steps need of a kind of agent.
func (s *shelf) checkAgent(n *document.Node, f document.Fields, a *Agent) {
	if a.Isotherm != nil {
		for _, key := range beadKeys {
			f.Need(key)
		}
		if a.Lives != nil && a.Lives.SI < 1 {
			f.Get("lives").Fail("%q is less than one use", a.Lives.Text)
		}
		checkBead(f, a)
		if a.Isotherm.Toth != nil || a.Isotherm.Terms != nil || len(a.Isotherm.Sites) > 0 {
			checkUptake(f, a) // of a scaled one when it is scaled
		}
	}
	switch a.Kind {
	case "sieve", "oxide":
		f.Need("isotherm")
	case "salt":
		f.Need("hydrates")
		f.Need("claim")
		f.Need("hold-up")
	case "reactive":
		f.Need("reaction")
	}
}

// checkBead compares a bed with its beads: packed spheres fill 55 to 70 % of it.
func checkBead(f document.Fields, a *Agent) {
	if a.BulkDensity == nil || a.BeadDensity == nil || a.BeadDensity.SI == 0 {
		return
	}
	const least, most = 0.5, 0.7
	if filled := a.BulkDensity.SI / a.BeadDensity.SI; filled < least || filled > most {
		f.Get("bead density").Fail("the bulk density is %.2f of it; packed beads fill %.2f to %.2f of a bed", filled, least, most)
	}
}

func (s *shelf) readHistories() {
	seen := map[string]int{}
	s.each(historiesFile, func(list *document.Node) {
		for _, n := range list.Items() {
			h := s.history(n)
			if at, ok := seen[h.Key]; ok && !s.owning {
				n.Fail("%q stands twice", h.Key)
			} else if ok {
				s.cat.Histories[at] = h
				continue
			}
			seen[h.Key] = len(s.cat.Histories)
			s.cat.Histories = append(s.cat.Histories, h)
		}
	})
}

func (s *shelf) history(n *document.Node) History {
	f := n.Map(with("key", "text", "temperature", "residual", "band")...)
	h := History{Key: f.Need("key").Text(), Text: f.Need("text").Text()}
	if t := f.Get("temperature"); t != nil {
		reading, _ := t.Quantity(quantity.Temperature)
		h.TemperatureK = reading.SI
	}
	h.ResidualKgPerKg = Value{Text: f.Need("residual").Text(), Origin: s.origin(f)}
	if reading, ok := f.Get("residual").Quantity(quantity.MassRatio); ok {
		h.ResidualKgPerKg.SI = reading.SI
		if reading.SI < 0 || reading.SI > 0.25 {
			f.Get("residual").Fail("%q is outside 0 to 25 g/100 g", h.ResidualKgPerKg.Text)
		}
	}
	if band := f.Get("band"); band != nil {
		h.ResidualKgPerKg.Low, h.ResidualKgPerKg.High = span(band, quantity.MassRatio)
		if r := h.ResidualKgPerKg; r.SI < r.Low || r.SI > r.High {
			band.Fail("%q does not hold the value, %q", band.Text(), r.Text)
		}
	}
	return h
}
