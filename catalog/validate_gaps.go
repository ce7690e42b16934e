package catalog

import (
	"fmt"

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
			count := fmt.Sprintf("%d at %.0f °C", got, tK-zeroCelsiusK)
			if got != first {
				count += fmt.Sprintf(" and %d at %.0f °C", first, gapsFromK-zeroCelsiusK)
			}
			n.Fail("water and %s have stable miscibility gaps: %s; exactly one at all temperatures from %.0f to %.0f °C is allowed, or none",
				name, count, gapsFromK-zeroCelsiusK, gapsToK-zeroCelsiusK)
			return
		}
	}
}

// mixture is water and a solvent in the activity model of the pair.
func (c *Catalog) mixture(v *Solvent) *thermo.Mixture {
	return &thermo.Mixture{Water: &c.Solvents[waterKey].Pure, Solvent: &v.Pure, NRTL: v.Water.NRTL}
}
