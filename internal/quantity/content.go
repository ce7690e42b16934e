package quantity

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

const (
	waterGramsPerMol = 18.015
	// waterKgPerM3 turns a volume share of water into mass: water at 20 °C.
	waterKgPerM3 = 998.2
)

// Solution is what a water content refers to where it is not given by mass.
type Solution struct {
	KgPerM3      float64 // density of the wet solvent; 0: not known
	ReagentMol   float64 // of the reagent that a mol % is counted against; 0: not stated
	SolventKg    float64 // that the reagent is used in
	ReagentLabel string  // for the note; "": "reagent"
	NoReagent    bool    // where the content is read, none can be stated
}

// content is one way to write a water content that is not by mass.
type content struct {
	symbol string
	ratio  func(s Solution) float64 // kg/kg for 1 of the unit
	needs  string
}

// Volumes and amounts are for the wet solvent.
var contents = []content{
	{"mg/L", func(s Solution) float64 { return 1e-3 / s.KgPerM3 }, densityWanted},
	{"g/L", func(s Solution) float64 { return 1 / s.KgPerM3 }, densityWanted},
	{"ug/mL", func(s Solution) float64 { return 1e-3 / s.KgPerM3 }, densityWanted},
	{"mmol/L", func(s Solution) float64 { return waterGramsPerMol * 1e-3 / s.KgPerM3 }, densityWanted},
	{"mol/L", func(s Solution) float64 { return waterGramsPerMol / s.KgPerM3 }, densityWanted},
	{"% m/V", func(s Solution) float64 { return 10 / s.KgPerM3 }, densityWanted},
	{"% V/V", func(s Solution) float64 { return 0.01 * waterKgPerM3 / s.KgPerM3 }, densityWanted},
	{"mol %", func(s Solution) float64 { return 0.01 * s.ReagentMol * waterGramsPerMol * 1e-3 / s.SolventKg }, reagentWanted},
}

const (
	densityWanted = "the density of the wet solvent"
	reagentWanted = "the amount of the reagent and of the solvent it is used in"
)

var contentSpellings = map[string]string{
	"mg/l": "mg/L", "g/l": "g/L", "mmol/l": "mmol/L", "mM": "mmol/L", "mol/l": "mol/L", "M": "mol/L", "µg/mL": "ug/mL", "μg/mL": "ug/mL",
	"% w/v": "% m/V", "% m/v": "% m/V", "%m/V": "% m/V", "%w/v": "% m/V",
	"% v/v": "% V/V", "vol%": "% V/V", "vol %": "% V/V", "%V/V": "% V/V", "%v/v": "% V/V",
	"mol%": "mol %",
}

// ParseContent reads a water content as Parse does and, beside that, by volume of
// wet solvent (mg/L, g/L, mmol/L, mol/L, % m/V, % V/V) where its density is known,
// and in mol % of a stated reagent. The note says how it was turned into mass.
func ParseContent(text string, s Solution) (Reading, error) {
	value, symbol, err := split(text, WaterContent)
	if err != nil {
		return Reading{}, err
	}
	c, ok := findContent(symbol)
	if !ok {
		r, err := Parse(text, WaterContent)
		if err != nil && symbol != "" {
			return r, fmt.Errorf("%w; %s", err, s.opens())
		}
		return r, err
	}
	if s.NoReagent && c.needs == reagentWanted {
		return Parse(text, WaterContent) // which says why not
	}
	if err := s.has(c.needs, text, c.symbol); err != nil {
		return Reading{}, err
	}
	si := value * c.ratio(s)
	if math.IsInf(si, 0) || math.IsNaN(si) {
		return Reading{}, fmt.Errorf("%s is too large", Quote(text))
	}
	if si >= 1 {
		return Reading{}, fmt.Errorf("%s is more water than solution: %s", Quote(text), Format(si, WaterContent, "% m/m", 4))
	}
	return Reading{SI: si, Unit: symbol, Note: s.note(text, c, si)}, nil
}

func findContent(symbol string) (content, bool) {
	if full, ok := contentSpellings[symbol]; ok {
		symbol = full
	}
	i := slices.IndexFunc(contents, func(c content) bool { return c.symbol == symbol })
	if i < 0 {
		return content{}, false
	}
	return contents[i], true
}

// opens tells which units there are beside those by mass.
func (s Solution) opens() string {
	text := "with a density also " + strings.Join(contentUnits(), ", ")
	if s.NoReagent {
		return text
	}
	return text + "; with a reagent also mol %"
}

// contentUnits lists what a density opens up.
func contentUnits() []string {
	var list []string
	for _, c := range contents {
		if c.needs == densityWanted {
			list = append(list, c.symbol)
		}
	}
	return list
}

func (s Solution) has(needs, text, symbol string) error {
	known := s.KgPerM3 > 0
	if needs == reagentWanted {
		known = s.ReagentMol > 0 && s.SolventKg > 0
	}
	if known {
		return nil
	}
	return fmt.Errorf("%s: %q is not clear without %s; give that, or the water by mass (mg/kg)", Quote(text), symbol, needs)
}

func (s Solution) note(text string, c content, si float64) string {
	against := fmt.Sprintf("with %s kg/m3", Significant(s.KgPerM3, 4))
	switch {
	case c.needs == reagentWanted:
		label := s.ReagentLabel
		if label == "" {
			label = "reagent"
		}
		against = fmt.Sprintf("of %s mol of %s in %s", Significant(s.ReagentMol, 4), label, Format(s.SolventKg, Mass, "kg", 4))
	case c.symbol == "% V/V":
		against += fmt.Sprintf(" of wet solvent and %s of water", Significant(waterKgPerM3, 4))
	}
	return fmt.Sprintf("%s read as %s by mass, %s", Quote(strings.TrimSpace(text)), Format(si, WaterContent, "mg/kg", 4), against)
}

// MillimolePerLitre is a water content as mmol in a litre of wet solvent.
func MillimolePerLitre(kgPerKg, kgPerM3 float64) float64 {
	return kgPerKg * kgPerM3 / waterGramsPerMol * 1e3
}

// FormatMolar prints a water content as mmol/L.
func FormatMolar(kgPerKg, kgPerM3 float64) string {
	return withUnit(MillimolePerLitre(kgPerKg, kgPerM3), "mmol/L")
}

// FormatByVolume prints a water content as mg/L of wet solvent.
func FormatByVolume(kgPerKg, kgPerM3 float64) string {
	return withUnit(kgPerKg*kgPerM3*1e3, "mg/L")
}

// FormatOfReagent prints the water in the solvent as mol % of the reagent.
func FormatOfReagent(kgPerKg float64, s Solution) string {
	return withUnit(100*kgPerKg*s.SolventKg/(waterGramsPerMol*1e-3)/s.ReagentMol, "mol %")
}

func withUnit(x float64, symbol string) string {
	text := Significant(x, 3)
	if text == Unknown {
		return text
	}
	return text + " " + symbol
}
