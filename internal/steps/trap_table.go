package steps

import (
	"math"
	"slices"

	"parch/internal/thermo"
)

// TrapNode is the state of a pot that boils under a full receiver. Amounts are for
// one mole of what stays in the pot whatever leaves as aqueous layer: the solvent
// less the part of it that its water takes along,
//
//	rest = N_solvent - N_water (1 - x_aq)/x_aq
//
// which is the same at the start and at the end of a reflux. All pots of a solvent
// at one pressure and one receiver temperature share the table.
type TrapNode struct {
	Water        float64 // kg/kg in the pot
	BoiledMol    float64 // vapour boiled up from the wettest node to here, mol/mol
	HeatJ        float64 // for that vapour, the layer that returns and the pot that warms, J/mol
	LnLeftM3     float64 // ln of the volume left, at the receiver's temperature, when vapour is drawn off without return, from the wettest node to here
	YWater       float64 // of the vapour, mole fraction
	LatentJ      float64 // of a mole of vapour
	PotK         float64
	WarmWaterJ   float64 // to warm a mole of water from the room to the pot
	WarmSolventJ float64
}

// TrapTable tabulates a trap over some water contents (kg/kg), the driest first.
// What is boiled up between two of them is the difference of the nodes times the
// rest of the charge. The water contents lie above floorMargin times the floor and
// below that of the aqueous layer of the azeotrope.
func TrapTable(eq *TrapEquilibrium, rules TrapRules, roomK float64, waters []float64) ([]TrapNode, error) {
	b := boiling{eq: eq, m: eq.Mixture, rules: rules}
	b.startK = eq.Azeotrope.TempK
	nodes := make([]TrapNode, len(waters))
	for i := len(waters) - 1; i >= 0; i-- {
		n := &nodes[i]
		v, err := b.vapour(b.m.MoleFraction(waters[i]))
		if err != nil {
			return nil, err
		}
		n.Water, n.YWater, n.LatentJ, n.PotK = waters[i], v.YWater, b.latent(v), v.TempK
		n.WarmWaterJ = b.m.Water.WarmJPerMol(roomK, v.TempK)
		n.WarmSolventJ = b.m.Solvent.WarmJPerMol(roomK, v.TempK)
		if i == len(waters)-1 {
			continue
		}
		from := nodes[i+1]
		lnLeftMol, err := b.drawnOff(from.Water, n.Water)
		if err != nil {
			return nil, err
		}
		n.LnLeftM3 = from.LnLeftM3 + lnLeftMol + math.Log(b.potM3PerMol(n.Water)/b.potM3PerMol(from.Water))
		b.setRest(from.Water)
		b.potK, b.boiledMol, b.boilUpJ = from.PotK, 0, 0
		if err := b.segment(b.m.MoleFraction(n.Water)); err != nil {
			return nil, err
		}
		n.BoiledMol, n.HeatJ = from.BoiledMol+b.boiledMol, from.HeatJ+b.boilUpJ
	}
	return nodes, nil
}

// setRest makes the pot hold one mole of rest at a water content (kg/kg).
func (b *boiling) setRest(water float64) {
	x := b.m.MoleFraction(water)
	solventPerWater := (1 - b.eq.Floor.Layers.XAqueous) / b.eq.Floor.Layers.XAqueous
	b.water = x / (1 - x*(1+solventPerWater))
	b.solvent = 1 + solventPerWater*b.water
}

// potM3PerMol is the molar volume of a pot with a water content (kg/kg), at the
// receiver's temperature.
func (b *boiling) potM3PerMol(water float64) float64 {
	return b.m.MolarVolume(b.m.MoleFraction(water), b.eq.ReceiverK)
}

// drawnOff is ln of the share of the moles in a pot that is left when vapour is drawn off
// without return between two water contents:
//
//	d ln N/d ln x = x/(y - x)
func (b *boiling) drawnOff(from, to float64) (float64, error) {
	var failed error
	lnLeft, _, _ := integrate3(func(lnX float64) (float64, float64, float64) {
		x := math.Exp(lnX)
		v, err := b.vapour(x)
		if err != nil {
			failed = err
		}
		return x / (v.YWater - x), 0, 0
	}, math.Log(b.m.MoleFraction(from)), math.Log(b.m.MoleFraction(to)))
	return lnLeft, failed
}

// TrapWaters are water contents for a TrapTable from just above the driest that a
// trap is run to up to the wettest, closer where the vapour needed grows fast, and
// the given ones among them.
func TrapWaters(eq *TrapEquilibrium, rules TrapRules, wettest float64, count int, among ...float64) []float64 {
	driest := math.Max(rules.LowestOutlet, floorMargin*eq.Floor.Water)
	offset := eq.Floor.Water * 0.9
	if driest >= wettest {
		return nil
	}
	all := SpacedWaters(driest-offset, wettest-offset, count)
	for i := range all {
		all[i] += offset
	}
	among = append(among, rules.EfficiencyBelow)
	if az := eq.Azeotrope; az.Kind == thermo.Heterogeneous {
		among = append(among, eq.Mixture.MassFraction(az.Layers.XOrganic))
	}
	return WithNodes(all, among...)
}

// SpacedWaters are count water contents, evenly spaced in the logarithm.
func SpacedWaters(low, high float64, count int) []float64 {
	all := make([]float64, count)
	for i := range all {
		all[i] = low * math.Pow(high/low, float64(i)/float64(count-1))
	}
	return all
}

// WetterWaters are count water contents, closer together at the wet end.
func WetterWaters(low, high float64, count int) []float64 {
	all := make([]float64, count)
	a, b := math.Sqrt(math.Sqrt(low)), math.Sqrt(math.Sqrt(high))
	for i := range all {
		root := a + (b-a)*float64(i)/float64(count-1)
		all[i] = root * root * root * root
	}
	all[0], all[count-1] = low, high
	return all
}

// WithNodes puts water contents among others that stay in order. One that all but
// equals another takes its place; one outside is left out.
func WithNodes(all []float64, among ...float64) []float64 {
	first, last := all[0], all[len(all)-1]
	for _, w := range among {
		if !(w >= first && w <= last) {
			continue
		}
		i, _ := slices.BinarySearch(all, w)
		switch {
		case i < len(all) && all[i] < w*(1+nodeShare):
			all[i] = w
		case i > 0 && all[i-1] > w*(1-nodeShare):
			all[i-1] = w
		default:
			all = slices.Insert(all, i, w)
		}
	}
	return all
}

// nodeShare is how close two nodes may lie.
const nodeShare = 1e-4
