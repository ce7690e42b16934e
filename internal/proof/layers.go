package proof

import (
	"math"

	"parch/catalog"
)

// leastLayerLimit is the factor within which a published tie-line may always lie:
// the lines of two laboratories differ by as much.
const leastLayerLimit = 1.15

// layerRow compares the water of the organic layer of a published tie-line with
// the correlation of the pair. ok is false where the correlation claims nothing:
// another pair, hot layers, too little or too much alcohol. The correlation's
// stated factor is a root mean square, so that two of them is the limit of a line.
func layerRow(cat *catalog.Catalog, l catalog.TieLine, why reasons) (row Row, ok bool) {
	layer := cat.Layers[[2]string{l.Alcohol, l.Carrier}]
	if layer == nil || l.Organic[0] <= 0 {
		return Row{}, false
	}
	water, ok := layer.Water(l.Organic[1]/(l.Organic[1]+l.Organic[2]), l.TempK)
	if !ok {
		return Row{}, false
	}
	row = Row{
		Quantity: "organic-layer-water", Subject: l.Alcohol, Partner: l.Carrier, TempK: l.TempK,
		Condition: alcoholIn(l), Published: 100 * l.Organic[0], Computed: 100 * water, Unit: "% m/m",
		Limit: math.Max(leastLayerLimit, layer.Factor*layer.Factor), LimitUnit: "factor",
		Kind: l.Kind, Confidence: catalog.Published, Source: l.Source,
	}
	return why.excuse(row.judge(nil)), true
}
