package listing

import (
	"fmt"
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

func solvent(key string, s *catalog.Solvent) Entry {
	var f facts
	own := catalog.Origin{Own: s.Own}
	f.say("CAS number", s.CAS, own)
	f.say("formula", s.Formula, own)
	f.say("class", s.Class, own)
	f.say("also called", strings.Join(s.Aliases, ", "), own)
	f.value("molar mass", &s.MolarMass)
	f.value("boiling point", &s.BoilingPoint)
	f.value("melting point", &s.MeltingPoint)
	f.value("critical temperature", &s.CriticalTemperature)
	f.value("flash point", s.FlashPoint)
	f.value("hottest pot", s.HottestPot)
	f.value("autoignition", s.Autoignition)
	f.curve(s, "vapour pressure", s.VapourPressure, "Pa")
	f.curve(s, "heat of vaporization", s.HeatOfVaporization, "J/mol")
	f.curve(s, "heat capacity", s.HeatCapacity, "J/(mol K)")
	f.curve(s, "density", s.Density, "kg/m3")
	f.curve(s, "viscosity", s.Viscosity, "Pa s")
	f.say("known miss", s.KnownMiss, own)
	f.waterPair(s.Water)
	if s.Water != nil {
		f.value("mixing rate of a still bottle", &s.StillRate)
	}
	f.hazards(s.Hazards)
	for _, e := range s.Estimates {
		f.say("estimated", e, catalog.Origin{Source: "assumption", Confidence: catalog.Assumption, Own: s.Own})
	}
	return Entry{Key: key, Title: title(s), Own: s.Own, Facts: f}
}

func title(s *catalog.Solvent) string {
	words := []string{s.Name}
	for _, word := range []string{s.Formula, s.CAS} {
		if word != "" {
			words = append(words, word)
		}
	}
	return strings.Join(words, ", ")
}

const ambientK = 298.15

// curve adds a correlation as the source prints it and what it gives at 25 °C.
func (f *facts) curve(s *catalog.Solvent, what string, c catalog.Curve, siUnit string) {
	used := len(c.C)
	for used > 0 && c.C[used-1] == 0 {
		used--
	}
	numbers := make([]string, used)
	for i := range numbers {
		numbers[i] = plain(c.C[i])
	}
	one := fact(what, fmt.Sprintf("%s: %s", c.Equation, strings.Join(numbers, ", ")), c.Unit, c.Origin)
	if c.TMaxK > 0 {
		one.Range = fmt.Sprintf("%s to %s K", plain(c.TMinK), plain(c.TMaxK))
	}
	*f = append(*f, one)
	if s.MeltingPoint.SI < ambientK && !c.Extrapolated(ambientK) {
		*f = append(*f, Fact{
			What: what + " at 25 °C", Value: quantity.Significant(c.At(ambientK), 4), Unit: siUnit,
			Source: c.Source, Confidence: catalog.Derived, Note: "from the curve", Own: c.Own,
		})
	}
}

func (f *facts) waterPair(w *catalog.WaterPair) {
	if w == nil {
		return
	}
	model := fmt.Sprintf("a12 %s, b12 %s K, a21 %s, b21 %s K, alpha %s", plain(w.A12), plain(w.B12), plain(w.A21), plain(w.B21), plain(w.Alpha))
	one := fact("water pair, NRTL, 1 is water", model, "", w.Origin)
	one.Range = span(w.TMinK, w.TMaxK)
	*f = append(*f, one)
	f.say("quality of the water pair", w.Quality, w.Origin)
	f.say("water pair fitted to", w.FittedTo, w.Origin)
	if w.SolubilityBand > 1 {
		f.say("band of the solubility, factor", plain(w.SolubilityBand), w.BandOrigin)
	}
	f.say("known miss of the water pair", w.KnownMiss, w.Origin)
	for _, l := range w.Limits {
		var bounds []string
		if l.LowestK > 0 {
			bounds = append(bounds, "not below "+quantity.FormatTemperature(l.LowestK))
		}
		if l.HighestK > 0 {
			bounds = append(bounds, "not above "+quantity.FormatTemperature(l.HighestK))
		}
		if l.LowestPa > 0 {
			bounds = append(bounds, "not below "+quantity.FormatPressure(l.LowestPa))
		}
		if l.HighestPa > 0 {
			bounds = append(bounds, "not above "+quantity.FormatPressure(l.HighestPa))
		}
		f.say("limit of the water pair", strings.Join(bounds, ", ")+": "+l.Reason, w.Origin)
	}
}

func (f *facts) hazards(h catalog.Hazards) {
	if len(h.Facts) == 0 {
		f.say("peroxides", h.PeroxideClass, h.Origin)
		f.say("flammability", h.Flammability, h.Origin)
	}
	for _, one := range h.Facts {
		f.say(one.What, one.Text, one.Origin)
	}
	if h.Halogenated {
		f.say("halogenated", "yes", h.Origin)
	}
}
