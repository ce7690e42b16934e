package catalog

import (
	"maps"
	"math"
	"runtime"
	"sync"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// waterKey is the solvent that all others are dried of.
const waterKey = "water"

var solventKeys = []string{
	"key", "name", "cas", "formula", "class", "aliases", "hydrogen bonds",
	"molar mass", "boiling point", "melting point", "critical temperature", "flash point", "autoignition", "hottest pot",
	"vapour pressure", "heat of vaporization", "heat capacity", "density", "viscosity", "known miss", "water pair", "hazards",
}

// ownSolventKeys may stand in an own file besides.
var ownSolventKeys = append([]string{"water solubility"}, solventKeys...)

func (s *shelf) readSolvents() {
	s.cat.Solvents = map[string]*Solvent{}
	keys, roots := s.solventFiles()
	for i, solvent := range s.solvents(roots) {
		if solvent == nil {
			continue
		}
		if solvent.Key != "" && solvent.Key != keys[i] {
			roots[i].Fail("key %q does not match the name of the file, %q", solvent.Key, keys[i])
		}
		s.cat.Solvents[keys[i]] = solvent
	}
	if len(roots) > 0 && s.cat.Solvents[waterKey] == nil {
		s.root(sourcesFile).Fail("solvents/%s.yaml is missing", waterKey)
	}
	s.each("solvents", s.readOwnSolvents)
}

// solvents reads the files of the solvents, as many at a time as there are
// processors. Each reader keeps its own notes of what was cited.
func (s *shelf) solvents(roots []*document.Node) []*Solvent {
	list := make([]*Solvent, len(roots))
	readers := min(runtime.GOMAXPROCS(0), max(len(roots), 1))
	notes := make([]*shelf, readers)
	var group sync.WaitGroup
	for w := range readers {
		notes[w] = &shelf{cat: s.cat, cited: map[string]bool{}, tops: map[string]*document.Node{}}
		group.Go(func() {
			for i := w; i < len(roots); i += readers {
				if roots[i] != nil {
					list[i] = notes[w].solvent(roots[i], roots[i].Map(solventKeys...))
				}
			}
		})
	}
	group.Wait()
	for _, n := range notes {
		maps.Copy(s.cited, n.cited)
		maps.Copy(s.tops, n.tops)
	}
	return list
}

// solvent reads a full entry.
func (s *shelf) solvent(root *document.Node, f document.Fields) *Solvent {
	v := &Solvent{
		Key: f.Need("key").Text(), Name: f.Need("name").Text(), CAS: casNumber(f.Need("cas")),
		Formula: f.Need("formula").Text(), Class: f.Need("class").Text(), Aliases: f.Get("aliases").Texts(), Own: s.owning,

		MolarMass:           s.value(f.Need("molar mass"), quantity.MolarMass),
		BoilingPoint:        s.value(f.Need("boiling point"), quantity.Temperature),
		MeltingPoint:        s.value(f.Need("melting point"), quantity.Temperature),
		CriticalTemperature: s.value(f.Need("critical temperature"), quantity.Temperature),
		FlashPoint:          s.optional(f.Get("flash point"), quantity.Temperature),
		Autoignition:        s.optional(f.Get("autoignition"), quantity.Temperature),
		HottestPot:          s.optional(f.Get("hottest pot"), quantity.Temperature),
		Hazards:             s.hazards(f.Need("hazards")),
	}
	for _, p := range properties {
		*p.of(v) = s.curve(f.Need(p.key), p, v.MolarMass.SI)
	}
	if v.Key != waterKey {
		v.Water = s.waterPair(f.Need("water pair"), v.Name)
		v.HBond = f.Need("hydrogen bonds").OneOf("weak", "strong")
	}
	s.finish(root, f, v)
	return v
}

// finish fills in what follows from an entry and checks it.
func (s *shelf) finish(root *document.Node, f document.Fields, v *Solvent) {
	v.Pure = thermo.Pure{
		Key: v.Key, Name: v.Name, MolarMassKgPerMol: v.MolarMass.SI, MeltingK: v.MeltingPoint.SI, CriticalK: v.CriticalTemperature.SI,
		VapourPressurePa: v.VapourPressure.Correlation, HeatOfVaporizationJ: v.HeatOfVaporization.Correlation,
		HeatCapacityJPerMolK: v.HeatCapacity.Correlation, DensityKgPerM3: v.Density.Correlation, ViscosityPaS: v.Viscosity.Correlation,
	}
	if v.HBond != "" {
		v.StillRate = s.cat.Practice["still-rate-"+v.HBond]
	}
	s.checkSolvent(root, f, v)
}

// waterPair reads the NRTL set of water and the named solvent, with water as
// component 1 of the published order.
func (s *shelf) waterPair(n *document.Node, name string) *WaterPair {
	if n == nil {
		return nil
	}
	f := n.Map("parameters", "range", "quality", "fitted to", "solubility band", "known miss", "limits")
	p := f.Need("parameters").Map(with("a12", "b12", "a21", "b21", "alpha")...)
	w := &WaterPair{
		A12: p.Need("a12").Number(), B12: kelvin(p.Need("b12")),
		A21: p.Need("a21").Number(), B21: kelvin(p.Need("b21")), Alpha: p.Need("alpha").Number(),
		Quality: f.Need("quality").OneOf("A", "B", "C"), FittedTo: f.Need("fitted to").Text(),
		Origin: s.origin(p), SolubilityBand: 1, KnownMiss: f.Get("known miss").Text(),
	}
	if w.Alpha < 0.1 || w.Alpha > 0.6 {
		p.Get("alpha").Fail("%v is outside 0.1 to 0.6", w.Alpha)
	}
	if most := max(math.Abs(w.B12), math.Abs(w.B21)); most > 1e4 {
		n.Fail("b12 and b21 must be within 10000 K either way; %v K is not", most)
	}
	if r := f.Need("range"); r != nil {
		w.TMinK, w.TMaxK = span(r, quantity.Temperature)
	}
	if band := f.Get("solubility band"); band != nil {
		b := band.Map(with("factor")...)
		w.BandOrigin = s.origin(b)
		if w.SolubilityBand = b.Need("factor").Number(); w.SolubilityBand < 1 || w.SolubilityBand > 10 {
			band.Fail("factor %v is outside 1 to 10", w.SolubilityBand)
		}
	}
	for _, item := range items(f.Get("limits")) {
		w.Limits = append(w.Limits, modelLimit(item))
	}
	w.NRTL = thermo.BinaryNRTL(w.A12, w.B12, w.A21, w.B21, w.Alpha)
	checkGaps(n, w, name)
	return w
}

// modelLimit reads {not below: 20 °C, reason: ...} or {pressure not below: 90 kPa, reason: ...}.
func modelLimit(n *document.Node) (l thermo.Limit) {
	f := n.Map("not below", "not above", "pressure not below", "pressure not above", "reason")
	read := func(key string, d quantity.Dimension) float64 {
		if f.Get(key) == nil {
			return 0
		}
		reading, _ := f.Get(key).Quantity(d)
		return reading.SI
	}
	l.LowestK, l.HighestK, l.Reason = read("not below", quantity.Temperature), read("not above", quantity.Temperature), f.Need("reason").Text()
	l.LowestPa, l.HighestPa = read("pressure not below", quantity.Pressure), read("pressure not above", quantity.Pressure)
	if l.LowestK == 0 && l.HighestK == 0 && l.LowestPa == 0 && l.HighestPa == 0 {
		n.Fail(`gives neither "not below" nor "not above", of a temperature or of the pressure`)
	}
	return l
}

// kelvin reads a parameter in kelvin that is no temperature and may be negative.
func kelvin(n *document.Node) float64 {
	reading, _ := n.Quantity(quantity.TemperatureDifference)
	if n != nil && reading.Unit != "K" && reading.Unit != "" {
		n.Fail("%q must be in K", n.Text())
	}
	return reading.SI
}

func (s *shelf) hazards(n *document.Node) Hazards {
	f := n.Map("peroxides", "halogenated", "alkali metals", "flammability", "explosive range", "iarc", "toxicity", "exposure limit")
	h := Hazards{Halogenated: f.Need("halogenated").Bool()}
	for _, fact := range []struct {
		key  string
		need bool
		into *string
	}{
		{"peroxides", true, &h.PeroxideClass}, {"alkali metals", true, &h.AlkaliNote}, {"flammability", true, &h.Flammability},
		{"explosive range", false, &h.ExplosiveRange}, {"iarc", false, &h.IARC}, {"toxicity", false, &h.Toxicity}, {"exposure limit", false, &h.ExposureLimit},
	} {
		entry := f.Get(fact.key)
		if fact.need {
			entry = f.Need(fact.key)
		}
		if entry == nil {
			continue
		}
		e := entry.Map(with("text")...)
		*fact.into = e.Need("text").Text()
		h.Facts = append(h.Facts, Fact{What: fact.key, Text: *fact.into, Origin: s.origin(e)})
		if fact.key == "peroxides" {
			e.Get("text").OneOf("A", "B", "C", "D", "none")
			h.PeroxideNote, h.Origin = e.Get("note").Text(), s.origin(e)
		}
	}
	return h
}
