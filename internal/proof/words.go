package proof

import (
	"strings"

	"parch/catalog"
	"parch/internal/quantity"
)

// howDried is the drying in words: "from 107 mg/kg, 200 g/L, 48 h, still".
func howDried(d catalog.Drying) string {
	var parts []string
	if d.From > 0 {
		parts = append(parts, "from "+quantity.FormatWater(d.From))
	}
	if d.DoseKgPerM3 > 0 {
		parts = append(parts, quantity.FormatConcentration(d.DoseKgPerM3))
	}
	if d.TimeS > 0 {
		parts = append(parts, quantity.FormatHours(d.TimeS))
	}
	return strings.Join(append(parts, d.How), ", ")
}

// alcoholIn is the alcohol of the organic layer.
func alcoholIn(l catalog.TieLine) string {
	return quantity.Significant(100*l.Organic[1], 3) + " % m/m alcohol"
}
