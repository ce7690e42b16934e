package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

func (s *shelf) readAgents() {
	s.cat.Agents = map[string]*Agent{}
	entries := s.root(agentsFile).Entries()
	scaled := map[*Agent]document.Fields{}
	for _, e := range entries {
		s.cat.Agents[e.Key] = s.agent(e.Key, e.Node, scaled)
	}
	// A scaled isotherm may stand before the one it is scaled from.
	for _, e := range entries {
		if f, ok := scaled[s.cat.Agents[e.Key]]; ok {
			s.scale(s.cat.Agents[e.Key], f)
		}
	}
}

func (s *shelf) agent(key string, n *document.Node, scaled map[*Agent]document.Fields) *Agent {
	f := n.Map("name", "kind", "isotherm", "loading band", "bulk density", "bead diameter", "bead density",
		"bead porosity", "bead tortuosity", "hold-up", "lives", "fade", "largest dose")
	a := &Agent{
		Key: key, Name: f.Need("name").Text(), Kind: f.Need("kind").OneOf("sieve", "oxide", "salt", "reactive"),
		BulkDensity:    s.optional(f.Get("bulk density"), quantity.Density),
		BeadDiameter:   s.optional(f.Get("bead diameter"), quantity.Length),
		BeadDensity:    s.optional(f.Get("bead density"), quantity.Density),
		BeadPorosity:   s.optional(f.Get("bead porosity"), quantity.Share),
		BeadTortuosity: s.optional(f.Get("bead tortuosity"), quantity.Number),
		HoldUp:         s.optional(f.Get("hold-up"), quantity.HoldUp),
		Lives:          s.optional(f.Get("lives"), quantity.Number),
		Fade:           s.optional(f.Get("fade"), quantity.Share),
		MaxDose:        s.optional(f.Get("largest dose"), quantity.MassConcentration),
		LoadingBand:    1,
	}
	if band := s.optional(f.Get("loading band"), quantity.Number); band != nil {
		if a.LoadingBand = band.SI; a.LoadingBand < 1 {
			f.Get("loading band").Fail("the factor %v is below 1", a.LoadingBand)
		}
	}
	if isotherm := f.Get("isotherm"); isotherm != nil {
		i := isotherm.Map(with("sites", "like", "capacity factor", "affinity factor")...)
		a.Isotherm = &Isotherm{Origin: s.origin(i)}
		if i.Has("like") {
			scaled[a] = i
		} else {
			a.Isotherm.Sites = sites(i.Need("sites"))
		}
	}
	return a
}

func sites(n *document.Node) (list []Site) {
	for _, item := range n.Items() {
		f := item.Map("capacity", "b0", "heat")
		read := func(key string, d quantity.Dimension) float64 {
			number := f.Need(key)
			reading, ok := number.Quantity(d)
			if ok {
				checkRange(number, reading.SI, d)
			}
			return reading.SI
		}
		list = append(list, Site{
			CapacityKgPerKg: read("capacity", quantity.MassRatio),
			B0PerPa:         read("b0", quantity.InversePressure),
			HeatJPerMol:     read("heat", quantity.HeatPerMole),
		})
	}
	return list
}

// scale makes an isotherm from that of another agent.
func (s *shelf) scale(a *Agent, f document.Fields) {
	capacity := s.value(f.Need("capacity factor"), quantity.Number)
	affinity := s.value(f.Need("affinity factor"), quantity.Number)
	other := s.cat.Agents[f.Get("like").Text()]
	if other == nil || other.Isotherm == nil || len(other.Isotherm.Sites) == 0 {
		f.Get("like").Fail("%q has no isotherm of its own", f.Get("like").Text())
		return
	}
	for _, site := range other.Isotherm.Sites {
		site.CapacityKgPerKg *= capacity.SI
		site.B0PerPa *= affinity.SI
		a.Isotherm.Sites = append(a.Isotherm.Sites, site)
	}
}

func (s *shelf) readHistories() {
	seen := map[string]bool{}
	for _, n := range s.root(historiesFile).Items() {
		f := n.Map(with("key", "text", "temperature", "residual", "band")...)
		h := History{Key: f.Need("key").Text(), Text: f.Need("text").Text()}
		if seen[h.Key] {
			f.Get("key").Fail("%q stands twice", h.Key)
		}
		seen[h.Key] = true
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
		}
		s.cat.Histories = append(s.cat.Histories, h)
	}
}
