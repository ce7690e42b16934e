package catalog

import (
	"parch/internal/document"
	"parch/internal/thermo"
)

// Where gaps are counted.
const (
	gapsFromK, gapsToK, gapStepK = 278.15, 383.15, 15.0
)

// checkGaps checks the activity model of a pair: one stable gap at every temperature
// from 5 to 110 °C where the two are partly miscible, and none where they are not.
func checkGaps(n *document.Node, w *WaterPair, name string) {
	if w == nil || n == nil {
		return // said already
	}
	first := w.NRTL.CountGaps(gapsFromK)
	for tK := gapsFromK; tK <= gapsToK; tK += gapStepK {
		if got := w.NRTL.CountGaps(tK); got > 1 || got != first {
			n.Fail("water and %s have %d stable miscibility gaps at %.0f °C; one at all temperatures from %.0f to %.0f °C or none is allowed, and at %.0f °C there is %d",
				name, got, tK-zeroCelsiusK, gapsFromK-zeroCelsiusK, gapsToK-zeroCelsiusK, gapsFromK-zeroCelsiusK, first)
			return
		}
	}
}

// mixture is water and a solvent in the activity model of the pair.
func (c *Catalog) mixture(v *Solvent) *thermo.Mixture {
	return &thermo.Mixture{Water: &c.Solvents[waterKey].Pure, Solvent: &v.Pure, NRTL: v.Water.NRTL}
}
