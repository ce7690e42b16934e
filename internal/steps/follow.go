package steps

import (
	"math"

	"parch/internal/thermo"
)

// FloorMargin is how close to its floor a trap is run.
const FloorMargin = floorMargin

// CoolantJPerM3 is the heat that a volume of cooling water takes up as it warms
// by riseK.
func CoolantJPerM3(riseK float64) float64 { return coolantHeatCapacity * coolantDensity * riseK }

// BeadRate is the rate of film and bead in series, 1/s for a dose of 1 kg/m3.
func BeadRate(m *thermo.Mixture, feed Lot, sorbent Sorbent, rig SoakRig) (float64, error) {
	b, err := newBath(m, feed, sorbent, rig)
	if err != nil {
		return math.NaN(), err
	}
	return b.beadPerS, nil
}

// Bed is what a column is whatever the lot.
type Bed struct {
	AreaM2, KgPerM3 float64 // of the tube; of the packed sorbent
	TransferUnitM   float64 // height of a transfer unit
}

// BedOf gives it for a solvent, a sorbent and a rig.
func BedOf(m *thermo.Mixture, sorbent Sorbent, rig ColumnRig) Bed {
	b := &bed{sorption: newSorption(m, Lot{}, sorbent, rig.TempK), rig: rig}
	b.stream = streamOf(m.Solvent, rig.TempK, rig.WaterMolarM3, rig.Association)
	b.transfer()
	return Bed{b.areaM2, b.bulk(), b.htuM}
}

// ForerunNode is the state of a pot from which vapour is drawn off over a column,
// for one mole of a pot of the wettest node.
type ForerunNode struct {
	Water                    float64 // kg/kg in the pot
	LnLeft                   float64 // ln of the moles left
	HeatJ                    float64 // boiled up from the wettest node to here
	WarmWaterJ, WarmSolventJ float64 // to warm a mole from the room to the pot
}

// ForerunTable tabulates the drawing off of water over some water contents
// (kg/kg), the driest first: one Rayleigh integral for all lots. ok is false where
// the vapour is not wetter than the pot all the way, so that the dry solvent is no
// residue.
func ForerunTable(eq *ForerunEquilibrium, rig ForerunRig, waters []float64) (nodes []ForerunNode, ok bool) {
	nodes = make([]ForerunNode, len(waters))
	for i := len(waters) - 1; i >= 0; i-- {
		d := drawing{eq: eq, m: eq.Mixture, rig: rig, mol0: 1, x0: eq.Mixture.MoleFraction(waters[i])}
		d.allowedError = defaultDrawingError / CurveAccuracy
		var err error
		if d.at, err = d.sample(logit(d.x0)); err != nil || d.at.y <= d.x0*(1+1e-6) {
			return nil, false
		}
		n := &nodes[i]
		n.Water = waters[i]
		n.WarmWaterJ = d.m.Water.WarmJPerMol(rig.RoomK, d.at.potK)
		n.WarmSolventJ = d.m.Solvent.WarmJPerMol(rig.RoomK, d.at.potK)
		if i == len(waters)-1 {
			continue
		}
		from := nodes[i+1]
		d.mol0, d.x0 = math.Exp(from.LnLeft), eq.Mixture.MoleFraction(from.Water)
		end := d.at.logit
		if d.at, err = d.sample(logit(d.x0)); err != nil {
			return nil, false
		}
		if err := d.march(end, func() float64 { return math.Inf(-1) }); err != nil {
			return nil, false
		}
		n.LnLeft, n.HeatJ = from.LnLeft+d.lnLeft, from.HeatJ+d.boilUpJ
	}
	return nodes, true
}

// CurveAccuracy is by how much finer a table is computed than a single run.
const CurveAccuracy = 10
