package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

// remark adds what a soak rests on and what to look out for.
func (b *bath) remark(o *Outcome, eq, timeS, doseKgPerM3, takenKg float64) error {
	if doseKgPerM3 == 0 {
		return nil
	}
	empty, err := b.equilibriumFrom(doseKgPerM3*b.volumeM3, 0)
	if err != nil {
		return err
	}
	o.Figures = append(o.Figures, Figure{"equilibrium if the sorbent were empty", "mg/kg", empty * mgPerKg})
	o.RuledBy = b.ruledBy(o, eq, empty, timeS, doseKgPerM3)
	if rise := b.riseK(o, takenKg); !math.IsNaN(rise) {
		o.Figures = append(o.Figures, Figure{"temperature rise if no heat is lost", "K", rise})
		if rise > cautionRiseK {
			o.Warnings = append(o.Warnings, fmt.Sprintf("taking up %s of water warms the vessel by up to %.0f K: add the sorbent in portions, vessel vented", quantity.FormatMass(takenKg), rise))
		}
	}
	if b.sorbent.DispersionPerS > 0 && !b.rig.Stirred {
		o.Warnings = append(o.Warnings, "the powder settles: mixing in the still vessel rules, and its layer is taken to be reached no better than beads (assumption); stir it, or take beads")
	}
	if b.rig.CondensationPerS > 0 {
		b.remarkCondensation(o, eq, timeS, doseKgPerM3)
	}
	if p := b.sorbent.DataFromPa; p > 0 && b.pressure(eq) < p {
		o.Warnings = append(o.Warnings, fmt.Sprintf("the equilibrium lies below the data of the isotherm (%.2g Pa of water): extrapolated", p))
	}
	return nil
}

// ruledBy names the assumption on which the result turns: the rate while the
// lot is still on its way, then what the sorbent held at the start, then the
// isotherm itself.
func (b *bath) ruledBy(o *Outcome, eq, empty, timeS, doseKgPerM3 float64) string {
	away := (b.feed.Water() - eq) * math.Exp(-b.rate(doseKgPerM3)*timeS)
	made := b.made(doseKgPerM3, timeS)
	standing := fmt.Sprintf("an equilibrium of %s at this dose", quantity.FormatWater(eq))
	if q := b.sorbent.ResidualKgPerKg; q > 0 {
		standing = fmt.Sprintf("residual loading: %.2g g/100 g at the start%s leave %s at this dose, an empty sorbent %s",
			100*q, b.withLotsBefore(), quantity.FormatWater(eq), quantity.FormatWater(empty))
	}
	switch {
	case made > away && made > eq:
		return fmt.Sprintf("water made by condensation: %s of %s", quantity.FormatWater(made), quantity.FormatWater(o.Out.Water()))
	case away > eq:
		return fmt.Sprintf("rate: K of %.2g 1/h, %s, leaves %s still to be taken up. At the end %s", b.rate(doseKgPerM3)*secondsPerHour, b.slowest(doseKgPerM3), quantity.FormatWater(away), standing)
	case b.sorbent.ResidualKgPerKg > 0 && eq > 2*empty:
		return standing
	}
	return fmt.Sprintf("isotherm: %s", standing)
}

func (b *bath) withLotsBefore() string {
	if b.rig.Lots > 1 {
		return fmt.Sprintf(" and the water of %d lots", b.rig.Lots-1)
	}
	return ""
}

// slowest names the larger resistance.
func (b *bath) slowest(doseKgPerM3 float64) string {
	switch {
	case b.asBeadsPerS*doseKgPerM3 >= b.rate(doseKgPerM3): // 0 where it is no stirred powder
		return "that of beads stirred the same way, below which a powder is not taken"
	case b.mixPerS > b.beadPerS*doseKgPerM3:
		return "set by diffusion into the beads"
	case b.rig.Stirred:
		return "set by how well the powder is kept suspended"
	}
	return "set by mixing in the still vessel"
}

// cautionRiseK is where a rise in temperature is worth a caution.
const cautionRiseK = 10

// riseK is the warming of solvent and sorbent if no heat is lost. Water that
// comes from the liquid releases its heat of sorption less its heat of
// vaporization. NaN where the heat is not known.
func (b *bath) riseK(o *Outcome, takenKg float64) float64 {
	if b.sorbent.HeatOfSorptionJPerMol == 0 {
		return math.NaN()
	}
	fromLiquidJPerMol := b.sorbent.HeatOfSorptionJPerMol - b.m.Water.HeatOfVaporizationJ.At(b.tempK)
	heatJ := takenKg / b.m.Water.MolarMassKgPerMol * fromLiquidJPerMol
	solvent := b.feed.SolventKg / b.m.Solvent.MolarMassKgPerMol * b.m.Solvent.HeatCapacityJPerMolK.At(b.tempK)
	return heatJ / (solvent + o.AgentKg*b.sorbent.HeatCapacityJPerKgK)
}

// remarkCondensation says when a solvent that makes water is at its driest:
//
//	dw/dt = 0 at t = ln(K (w_0 - w_eq)/s)/K
func (b *bath) remarkCondensation(o *Outcome, eq, timeS, doseKgPerM3 float64) {
	k, perS := b.rate(doseKgPerM3), b.made(doseKgPerM3, 1)
	bestS := math.Max(0, math.Log(k*(b.feed.Water()-eq)/perS)/k)
	o.Figures = append(o.Figures,
		Figure{"water made by condensation", "g", o.Balance.WaterMadeKg * 1e3},
		Figure{"driest after", "h", bestS / secondsPerHour})
	if timeS > bestS {
		o.Warnings = append(o.Warnings, fmt.Sprintf("%s condenses on the sorbent and makes water: driest, at %s, after %.2g h; decant then",
			b.m.Solvent.Called(), quantity.FormatWater(b.course(eq, doseKgPerM3, bestS)), bestS/secondsPerHour))
	}
}
