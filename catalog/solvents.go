package catalog

import (
	"math"

	"parch/internal/document"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

// waterKey is the solvent that all others are dried of.
const waterKey = "water"

func (s *shelf) readSolvents() {
	s.cat.Solvents = map[string]*Solvent{}
	keys, roots := s.solventFiles()
	for i, root := range roots {
		if root == nil {
			continue
		}
		solvent := s.solvent(root)
		if solvent.Key != "" && solvent.Key != keys[i] {
			root.Fail("key %q does not match the name of the file, %q", solvent.Key, keys[i])
		}
		s.cat.Solvents[keys[i]] = solvent
	}
	if len(roots) > 0 && s.cat.Solvents[waterKey] == nil {
		s.root(sourcesFile).Fail("solvents/%s.yaml is missing", waterKey)
	}
}

func (s *shelf) solvent(root *document.Node) *Solvent {
	f := root.Map("key", "name", "cas", "formula", "class", "aliases", "hydrogen bonds",
		"molar mass", "boiling point", "melting point", "critical temperature", "flash point", "autoignition",
		"vapour pressure", "heat of vaporization", "heat capacity", "density", "viscosity", "known miss", "water pair", "hazards")
	v := &Solvent{
		Key: f.Need("key").Text(), Name: f.Need("name").Text(), CAS: f.Need("cas").Text(),
		Formula: f.Need("formula").Text(), Class: f.Need("class").Text(), Aliases: f.Get("aliases").Texts(),

		MolarMass:           s.value(f.Need("molar mass"), quantity.MolarMass),
		BoilingPoint:        s.value(f.Need("boiling point"), quantity.Temperature),
		MeltingPoint:        s.value(f.Need("melting point"), quantity.Temperature),
		CriticalTemperature: s.value(f.Need("critical temperature"), quantity.Temperature),
		FlashPoint:          s.optional(f.Get("flash point"), quantity.Temperature),
		Autoignition:        s.optional(f.Get("autoignition"), quantity.Temperature),
		Hazards:             s.hazards(f.Need("hazards")),
	}
	for _, p := range properties {
		*p.of(v) = s.curve(f.Need(p.key), p, v.MolarMass.SI)
	}
	v.Pure = thermo.Pure{
		Key: v.Key, MolarMassKgPerMol: v.MolarMass.SI, MeltingK: v.MeltingPoint.SI, CriticalK: v.CriticalTemperature.SI,
		VapourPressurePa: v.VapourPressure.Correlation, HeatOfVaporizationJ: v.HeatOfVaporization.Correlation,
		HeatCapacityJPerMolK: v.HeatCapacity.Correlation, DensityKgPerM3: v.Density.Correlation, ViscosityPaS: v.Viscosity.Correlation,
	}
	if v.Key != waterKey {
		v.Water = s.waterPair(f.Need("water pair"))
		v.HBond = f.Need("hydrogen bonds").OneOf("weak", "strong")
		v.StillRate = s.cat.Practice["still-rate-"+v.HBond]
	}
	s.checkSolvent(root, f, v)
	return v
}

// waterPair reads the NRTL set with water as component 1 of the published order.
func (s *shelf) waterPair(n *document.Node) *WaterPair {
	if n == nil {
		return nil
	}
	f := n.Map("parameters", "range", "quality", "fitted to", "solubility band")
	p := f.Need("parameters").Map(with("a12", "b12", "a21", "b21", "alpha")...)
	w := &WaterPair{
		A12: p.Need("a12").Number(), B12: kelvin(p.Need("b12")),
		A21: p.Need("a21").Number(), B21: kelvin(p.Need("b21")), Alpha: p.Need("alpha").Number(),
		Quality: f.Need("quality").OneOf("A", "B", "C"), FittedTo: f.Need("fitted to").Text(),
		Origin: s.origin(p), SolubilityBand: 1,
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
	w.NRTL = thermo.BinaryNRTL(w.A12, w.B12, w.A21, w.B21, w.Alpha)
	return w
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
	f := n.Map("peroxides", "halogenated", "alkali metals", "flammability", "iarc", "toxicity", "exposure limit")
	h := Hazards{Halogenated: f.Need("halogenated").Bool()}
	for _, fact := range []struct {
		key  string
		need bool
		into *string
	}{
		{"peroxides", true, &h.PeroxideClass}, {"alkali metals", true, &h.AlkaliNote}, {"flammability", true, &h.Flammability},
		{"iarc", false, &h.IARC}, {"toxicity", false, &h.Toxicity}, {"exposure limit", false, &h.ExposureLimit},
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
