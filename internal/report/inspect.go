package report

import (
	"fmt"
	"io"
	"math"
	"strings"

	"parch/catalog"
	"parch/internal/inspect"
	"parch/internal/quantity"
	"parch/internal/thermo"
)

type sheetOut struct {
	Solvent       string          `json:"solvent"`
	PressureKPa   number          `json:"pressure_kpa"`
	BoilingPointC number          `json:"boiling_point_c"`
	Azeotrope     azeotropeOut    `json:"azeotrope"`
	Solubility    []solubilityOut `json:"water_solubility"`
	GammaInfinite number          `json:"gamma_water_inf_25c"`
	ReceiverC     number          `json:"receiver_c"`
	Returns       thermo.Returns  `json:"returns"`
	TrapFloor     number          `json:"trap_floor_mg_per_kg"`
	Quality       string          `json:"quality"`
	Sources       []string        `json:"sources"`
}

type azeotropeOut struct {
	Kind        thermo.AzeotropeKind `json:"kind"`
	Temperature number               `json:"temperature_c"`
	WaterMass   number               `json:"water_mass_percent"`
}

type solubilityOut struct {
	Temperature number `json:"temperature_c"`
	MgPerKg     number `json:"mg_per_kg"`
}

func celsius(tK float64) number { return number(quantity.In(tK, quantity.Temperature, "°C")) }

// SheetJSON writes the sheet of a solvent as one JSON document.
func SheetJSON(w io.Writer, s *inspect.Sheet) error {
	out := sheetOut{
		Solvent:       s.Solvent.Key,
		PressureKPa:   number(s.PressurePa / 1000),
		BoilingPointC: celsius(s.BoilingK),
		Azeotrope:     azeotropeOut{Kind: thermo.NoAzeotrope, Temperature: number(math.NaN()), WaterMass: number(math.NaN())},
		Solubility:    make([]solubilityOut, len(s.Solubility)),
		GammaInfinite: number(s.GammaInfinite),
		ReceiverC:     celsius(s.ReceiverK),
		Returns:       s.Floor.Return,
		TrapFloor:     number(math.NaN()),
		Quality:       s.Solvent.Water.Quality,
		Sources:       make([]string, len(s.Sources)),
	}
	if s.Azeotrope.Kind != thermo.NoAzeotrope {
		out.Azeotrope = azeotropeOut{s.Azeotrope.Kind, celsius(s.Azeotrope.TempK), number(100 * s.AzeotropeMass)}
	}
	if s.Floor.Return != thermo.None {
		out.TrapFloor = number(s.Floor.Water * mgPerKg)
	}
	for i, row := range s.Solubility {
		out.Solubility[i] = solubilityOut{celsius(row.TempK), number(row.Water * mgPerKg)}
	}
	for i, source := range s.Sources {
		out.Sources[i] = source.ID + ": " + source.Reference
	}
	return writeJSON(w, out)
}

// SheetText prints the sheet of a solvent for a terminal.
func SheetText(w io.Writer, s *inspect.Sheet) error {
	p := &page{w: w}
	p.say(0, 2, "%s (%s, %s) and water at %s", s.Solvent.Name, s.Solvent.Formula, s.Solvent.CAS, quantity.FormatPressure(s.PressurePa))
	p.line("")
	p.say(3, 4, "Boils at %s [%s, %s]; melts at %s [%s, %s].", quantity.FormatTemperature(s.BoilingK), s.Solvent.VapourPressure.Source,
		s.Solvent.VapourPressure.Confidence, s.Solvent.MeltingPoint.Text, s.Solvent.MeltingPoint.Source, s.Solvent.MeltingPoint.Confidence)
	p.say(3, 4, "%s", azeotropeText(s))
	p.say(3, 4, "%s", floorText(s))
	p.say(3, 4, "Activity coefficient of a trace of water at 25 °C: %s.", quantity.Significant(s.GammaInfinite, 3))
	pair := s.Solvent.Water
	p.say(3, 4, "Model of the pair: NRTL of quality %s, %.0f to %.0f °C [%s, %s].", pair.Quality,
		float64(celsius(pair.TMinK)), float64(celsius(pair.TMaxK)), pair.Source, pair.Confidence)
	p.solubility(s)
	p.hazards(s.Solvent)
	p.pairs(s.Pairs)
	p.notes("Notes", s.Notes)
	p.heading("Sources:")
	for _, source := range s.Sources {
		p.say(5, 4, "%s: %s", source.ID, source.Reference)
	}
	return p.close()
}

func azeotropeText(s *inspect.Sheet) string {
	if s.Azeotrope.Kind == thermo.NoAzeotrope {
		return "No azeotrope with water at this pressure."
	}
	layers := map[thermo.AzeotropeKind]string{thermo.Heterogeneous: "two layers boil", thermo.Homogeneous: "one layer boils"}
	return fmt.Sprintf("%s azeotrope with water (%s) at %s, %s %% water by mass.", sentence(string(s.Azeotrope.Kind)),
		layers[s.Azeotrope.Kind], quantity.FormatTemperature(s.Azeotrope.TempK), quantity.Significant(100*s.AzeotropeMass, 3))
}

func floorText(s *inspect.Sheet) string {
	if s.Floor.Return == thermo.None {
		return fmt.Sprintf("A trap with its receiver at %s returns nothing: %s.", quantity.FormatTemperature(s.ReceiverK), s.Floor.Reason)
	}
	return fmt.Sprintf("A trap with its receiver at %s returns the %s layer; it cannot dry the pot below %s, and droplets and moist air keep its outlet higher.",
		quantity.FormatTemperature(s.ReceiverK), s.Floor.Return, quantity.FormatWater(s.Floor.Water))
}

func (p *page) solubility(s *inspect.Sheet) {
	mixes := true
	rows := make([][]string, len(s.Solubility))
	for i, row := range s.Solubility {
		holds := "mixes"
		if !math.IsNaN(row.Water) {
			holds, mixes = mgKg(row.Water), false
		}
		rows[i] = []string{quantity.Significant(float64(celsius(row.TempK)), 3), holds}
	}
	switch {
	case len(rows) == 0:
		p.line("")
		p.say(3, 4, "It is not liquid between 0 and 80 °C at this pressure.")
		return
	case mixes:
		p.line("")
		p.say(3, 4, "Water and %s mix in all proportions from 0 to 80 °C.", s.Solvent.Name)
		return
	}
	p.heading("Water that it holds:")
	p.table([]column{{"°C", true, 0}, {"mg/kg", true, 0}}, rows)
}

func (p *page) hazards(s *catalog.Solvent) {
	h := s.Hazards
	p.heading("Hazards (the safety data sheet and local rules decide):")
	for _, x := range []struct{ name, text string }{
		{"peroxides", peroxides(h)},
		{"flammability", h.Flammability},
		{"flash point", valueText(s.FlashPoint)},
		{"autoignition", valueText(s.Autoignition)},
		{"halogenated", map[bool]string{true: "yes: never with alkali metals"}[h.Halogenated]},
		{"alkali metals", h.AlkaliNote},
		{"toxicity", h.Toxicity},
		{"IARC group", h.IARC},
		{"exposure limit", h.ExposureLimit},
	} {
		if x.text != "" {
			p.say(5, 4, "%s: %s", x.name, x.text)
		}
	}
}

func peroxides(h catalog.Hazards) string {
	if h.PeroxideClass == "none" {
		return "none known"
	}
	return strings.TrimSuffix(fmt.Sprintf("class %s, test before heating; %s", h.PeroxideClass, h.PeroxideNote), "; ")
}

func valueText(v *catalog.Value) string {
	if v == nil {
		return ""
	}
	return fmt.Sprintf("%s [%s, %s]", v.Text, v.Source, v.Confidence)
}

// pairs lists the drying agents, those that are refused with the reason.
func (p *page) pairs(pairs []inspect.Pair) {
	if len(pairs) == 0 {
		return
	}
	p.heading("Drying agents:")
	for _, word := range []string{"ok", "caution", "unsuitable", "dangerous", inspect.NoData} {
		var names []string
		for _, pair := range pairs {
			if pair.Word == word {
				names = append(names, pair.Agent)
			}
		}
		if len(names) > 0 {
			p.say(5, 4, "%s: %s", word, strings.Join(names, ", "))
		}
	}
	for _, pair := range pairs {
		if !pair.Allowed() && pair.Reason != "" {
			p.say(5, 4, "%s: %s%s", pair.Agent, pair.Reason, cite(pair.Source))
		}
	}
}
