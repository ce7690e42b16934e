package catalog

import "math"

// heteroWithin is how far the water of a heteroazeotrope may lie from what the
// activity allows, as a share.
const heteroWithin = 0.10

// nearlyImmiscible is the mole fraction of either in the other below which the
// water of a heteroazeotrope is known from below as well.
const nearlyImmiscible = 0.01

// checkAzeotropes compares the published heteroazeotropes with the activity of
// water: the vapour over two layers holds at most y = Pw(T)/P of water, and nearly
// as much where the two hardly mix. A row that lies more than 10 % off must say
// why it is kept.
func checkAzeotropes(t *table, rows []Check, cat *Catalog) {
	for i := range rows {
		water, temperature := &rows[i], (*Check)(nil)
		if water.Quantity != "azeotrope-water" || i == 0 {
			continue
		}
		if temperature = &rows[i-1]; temperature.Quantity != "azeotrope-temperature" || temperature.Source != water.Source || temperature.Subject != water.Subject {
			continue
		}
		v := cat.Solvents[water.Subject]
		if v == nil || v.Water == nil || water.Excuse != "" || water.PressurePa == 0 {
			continue
		}
		most, both := heteroBound(cat, v, temperature.Value+zeroCelsiusK, water.PressurePa)
		if !both || most >= 1 {
			continue
		}
		ratio := water.Value / 100 / massFraction(most, v)
		if ratio > 1+heteroWithin || ratio < 1-heteroWithin && hardlyMix(cat, v, temperature.Value+zeroCelsiusK) {
			t.fail(water.Line, "azeotrope-water: %.4g %% m/m of water at %.4g °C is %.2f times what the activity of water allows; give the excuse or correct the row", water.Value, temperature.Value, ratio)
		}
	}
}

// heteroBound is the mole fraction of water in the vapour over two layers at most;
// ok is false where the pair has no gap.
func heteroBound(cat *Catalog, v *Solvent, tK, pressurePa float64) (most float64, ok bool) {
	s, err := cat.mixture(v).SplitAt(tK)
	if err != nil || !s.Exists {
		return math.NaN(), false
	}
	return cat.Solvents[waterKey].Pure.VapourPressurePa.At(tK) / pressurePa, true
}

func hardlyMix(cat *Catalog, v *Solvent, tK float64) bool {
	s, err := cat.mixture(v).SplitAt(tK)
	return err == nil && s.Exists && s.XOrganic < nearlyImmiscible && 1-s.XAqueous < nearlyImmiscible
}

// massFraction of water in a mixture with the mole fraction x of water.
func massFraction(x float64, v *Solvent) float64 {
	water := x * waterKgPerMol
	return water / (water + (1-x)*v.MolarMass.SI)
}
