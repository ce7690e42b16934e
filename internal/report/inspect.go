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
	Notes         []string        `json:"notes"`
}

type azeotropeOut struct {
	Kind        *string `json:"kind"` // null where the model does not reach
	Temperature number  `json:"temperature_c"`
	WaterMass   number  `json:"water_mass_percent"`
}

// sheetWithCarrierOut is the sheet where a carrier was asked for.
type sheetWithCarrierOut struct {
	sheetOut
	Ternary *ternaryOut `json:"ternary_azeotrope"`
}

type ternaryOut struct {
	Temperature number `json:"temperature_c"`
	WaterMass   number `json:"water_mass_percent"`
	SolventMass number `json:"solvent_mass_percent"`
	CarrierMass number `json:"carrier_mass_percent"`
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
		Azeotrope:     showAzeotrope(s),
		Solubility:    make([]solubilityOut, len(s.Solubility)),
		GammaInfinite: number(s.GammaInfinite),
		ReceiverC:     celsius(s.ReceiverK),
		Returns:       s.Floor.Return,
		TrapFloor:     number(math.NaN()),
		Quality:       s.Solvent.Water.Quality,
		Sources:       make([]string, len(s.Sources)),
	}
	if s.Floor.Return != thermo.None {
		out.TrapFloor = number(s.Floor.Water * mgPerKg)
	}
	for i, row := range s.Solubility {
		out.Solubility[i] = solubilityOut{celsius(row.TempK), number(row.Water * mgPerKg)}
	}
	for i, source := range s.Sources {
		out.Sources[i] = asOwn(source.ID+": "+source.Reference, source.Own)
	}
	out.Notes = append([]string{}, s.Notes...)
	if s.Carrier == nil {
		return writeJSON(w, out)
	}
	return writeJSON(w, sheetWithCarrierOut{out, showTernary(s.Carrier)})
}

func showAzeotrope(s *inspect.Sheet) azeotropeOut {
	out := azeotropeOut{Temperature: number(math.NaN()), WaterMass: number(math.NaN())}
	if s.AzeotropeTrouble != "" {
		return out
	}
	out.Kind = known(string(s.Azeotrope.Kind))
	if s.Azeotrope.Kind != thermo.NoAzeotrope {
		out.Temperature, out.WaterMass = celsius(s.Azeotrope.TempK), number(100*s.AzeotropeMass)
	}
	return out
}

func showTernary(k *inspect.Carrier) *ternaryOut {
	if k.Azeotrope.Kind == thermo.NoAzeotrope {
		return nil
	}
	return &ternaryOut{celsius(k.Azeotrope.TempK), number(100 * k.Mass[thermo.InWater]), number(100 * k.Mass[thermo.InSolvent]), number(100 * k.Mass[thermo.InCarrier])}
}

// SheetText prints the sheet of a solvent for a terminal.
func SheetText(w io.Writer, s *inspect.Sheet) error {
	p := &page{w: w}
	p.say(0, 2, "%s and water at %s", sheetTitle(s.Solvent), quantity.FormatPressure(s.PressurePa))
	p.line("")
	p.say(3, 4, "Boils at %s%s; melts at %s%s.", quantity.FormatTemperature(s.BoilingK), citeOrigin(s.Solvent.VapourPressure.Origin),
		s.Solvent.MeltingPoint.Text, citeOrigin(s.Solvent.MeltingPoint.Origin))
	p.say(3, 4, "%s", azeotropeText(s))
	p.say(3, 4, "%s", floorText(s))
	if s.Carrier != nil {
		p.say(3, 4, "%s", carrierText(s))
	}
	p.say(3, 4, "Activity coefficient of a trace of water at 25 °C: %s.", quantity.Significant(s.GammaInfinite, 3))
	pair := s.Solvent.Water
	p.say(3, 4, "Model of the pair: NRTL of quality %s, %.0f to %.0f °C%s.", pair.Quality, float64(celsius(pair.TMinK)), float64(celsius(pair.TMaxK)), citeOrigin(pair.Origin))
	p.solubility(s)
	p.hazards(s.Solvent)
	p.pairs(s.Pairs)
	p.notes("Notes", s.Notes)
	p.heading("Sources:")
	for _, source := range s.Sources {
		p.say(5, 4, "%s", asOwn(source.ID+": "+source.Reference, source.Own))
	}
	return p.close()
}

func sheetTitle(s *catalog.Solvent) string {
	title := s.Name + " (" + s.Formula
	if s.CAS != "" {
		title += ", " + s.CAS
	}
	return asOwn(title+")", s.Own)
}

// citeOrigin is the source and the confidence of a number, in brackets.
func citeOrigin(o catalog.Origin) string {
	text := o.Source + ", " + string(o.Confidence)
	if o.Own {
		text += ", " + ownMark
	}
	return " [" + text + "]"
}

func carrierText(s *inspect.Sheet) string {
	k := s.Carrier
	if k.Azeotrope.Kind == thermo.NoAzeotrope {
		return fmt.Sprintf("With %s: no ternary azeotrope is given; see the notes.", k.Name)
	}
	text := fmt.Sprintf("With %s: %s ternary azeotrope at %s, by mass %s %% water, %s %% %s, %s %% %s (%s).", k.Name, k.Azeotrope.Kind,
		quantity.FormatTemperature(k.Azeotrope.TempK), quantity.Significant(100*k.Mass[thermo.InWater], 3), quantity.Significant(100*k.Mass[thermo.InSolvent], 3), s.Solvent.Name,
		quantity.Significant(100*k.Mass[thermo.InCarrier], 3), k.Name, k.Model)
	receiver := quantity.FormatTemperature(s.ReceiverK)
	if k.Layers.Return == thermo.None {
		return text + fmt.Sprintf(" Its condensate is not parted at %s: %s.", receiver, k.Layers.Reason)
	}
	return text + fmt.Sprintf(" Its condensate splits at %s and the %s layer goes back.", receiver, k.Layers.Return)
}

func azeotropeText(s *inspect.Sheet) string {
	if s.AzeotropeTrouble != "" {
		return "Azeotrope with water: outside the model; see the notes."
	}
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
		if row.Outside != "" {
			holds, mixes = "outside the model", false
		} else if !math.IsNaN(row.Water) {
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
	return v.Text + citeOrigin(v.Origin)
}

// pairs lists the drying agents, with the reason of each that is refused, that
// wants caution or whose verdict is the user's own.
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
		if (pair.Word != "ok" || pair.Own) && pair.Reason != "" {
			p.say(5, 4, "%s: %s%s", pair.Agent, asOwn(pair.Reason, pair.Own), cite(pair.Source))
		}
	}
}
