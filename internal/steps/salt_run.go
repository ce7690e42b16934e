package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

const saltPoints = 13

func (b *saltBath) run(doseKgPerM3, goal float64) Outcome {
	water, h := b.claimOf(doseKgPerM3)
	doseKg := doseKgPerM3 * b.volumeM3
	ratio := water / (1 - water)
	takenKg := b.feed.WaterKg - b.feed.SolventKg*ratio
	if takenKg < 1e-12*b.feed.WaterKg {
		takenKg = 0 // what is left is rounding
	}
	density := b.m.Solvent.DensityKgPerM3.At(b.rig.TempK)
	heldKg := math.Min((doseKg+takenKg)*b.salt.HoldUpM3PerKg*density, b.feed.SolventKg)
	rinse := b.rinse(heldKg, density)

	kept := Lot{SolventKg: b.feed.SolventKg - heldKg + rinse.addedKg, TempK: b.rig.TempK}
	kept.WaterKg = (kept.SolventKg-rinse.throughKg)*ratio + rinse.throughKg*rinse.ratio
	kept.WaterKg = math.Max(kept.WaterKg, kept.SolventKg*math.Min(ratio, b.rules.LowestOutlet/(1-b.rules.LowestOutlet)))

	portions := orOne(float64(b.rig.Portions))
	hours := (b.rig.TimeS + b.rig.AttendedS) * portions / secondsPerHour
	o := Outcome{
		Kind: Salt, Agent: b.salt.Key, In: b.feed, Out: kept,
		Floor:         h.water,
		HoursTotal:    hours,
		HoursAttended: b.rig.AttendedS * portions / secondsPerHour,
		AgentKg:       doseKg,
		Losses:        []Loss{{"held by the filtered cake", heldKg}},
		Discards:      []Discard{{WetSolidWaste, "solvent-wet salt cake", doseKg + takenKg + heldKg*(1+ratio)}},
	}
	o.account(b.m.Solvent, b.rig.TempK)
	o.Balance.SolventAddedKg, o.Balance.WaterAddedKg = rinse.addedKg, rinse.addedKg*rinse.ratio
	o.Balance.WaterRemovedKg = b.feed.WaterKg + o.Balance.WaterAddedKg - kept.WaterKg
	for i := range saltPoints {
		t := b.rig.TimeS * float64(i) / (saltPoints - 1)
		o.Course = append(o.Course, Point{Hours: t / secondsPerHour, Water: b.claim(h, doseKgPerM3, t)})
	}
	o.Why, o.WhyText = b.reason(goal, water, doseKgPerM3, h)
	o.RuledBy = b.ruledBy(water, h)
	if takenKg == 0 && doseKg > 0 {
		o.Warnings = append(o.Warnings, b.takesNothing(heldKg/density))
	}
	o.Warnings = append(o.Warnings, b.scaled(doseKgPerM3)...)
	o.Figures = b.figures(doseKgPerM3, takenKg, heldKg/density, rinse.throughKgDried/density, h)
	if rinse.addedKg > 0 {
		o.Warnings = append(o.Warnings, fmt.Sprintf("the rinse takes %.3g L of dried solvent off the cake and leaves as much fresh solvent on it: the volume lost stays the same", rinse.throughKgDried/density*litrePerM3))
	}
	return o
}

// ruledBy names what the outlet turns on: the larger of equilibrium, published removal
// and lowest claim.
func (b *saltBath) ruledBy(water float64, h hydration) string {
	switch {
	case b.tooDry():
		return fmt.Sprintf("equilibrium: from a lot drier than %s the salt takes nothing up", quantity.FormatWater(b.leaves[0]))
	case water == h.water && h.spent && h.pair == len(b.salt.Pairs)-1:
		return "capacity: the salt is all in its highest hydrate"
	case water == h.water:
		return fmt.Sprintf("equilibrium: the activity of water over the salt, which leaves %s; the published removal alone would leave less", quantity.FormatWater(water))
	case water == b.rules.LowestOutlet:
		return "claim: no salt is held to less than the lowest outlet claimed, whatever its equilibrium"
	}
	return "claim: a salt is held to its published removal, not to its equilibrium"
}

// tooDry is a lot from which not even the first hydrate forms.
func (b *saltBath) tooDry() bool { return len(b.leaves) > 0 && b.feed.Water() <= b.leaves[0] }

// takesNothing is said of a lot that leaves the salt as wet as it came.
func (b *saltBath) takesNothing(heldM3 float64) string {
	feed, held := quantity.FormatWater(b.feed.Water()), quantity.FormatVolume(heldM3)
	if b.tooDry() {
		return fmt.Sprintf("%s takes nothing up: the lot, at %s, is drier than this salt can make it (%s), and %s of solvent stay on its cake for nothing",
			b.salt.called(), feed, quantity.FormatWater(b.leaves[0]), held)
	}
	return fmt.Sprintf("%s is not claimed to take anything up from this lot, at %s; %s of solvent stay on its cake for nothing", b.salt.called(), feed, held)
}

// scaled says that a claim was scaled down from the dose and the time of its figure.
func (b *saltBath) scaled(doseKgPerM3 float64) []string {
	r := b.rules
	if doseKgPerM3 == 0 || doseKgPerM3 >= r.ClaimDoseKgPerM3*(1-1e-9) && b.rig.TimeS >= r.ClaimTimeS*(1-1e-9) {
		return nil
	}
	return []string{fmt.Sprintf("the share that %s removes is published for %s in %.3g min; that less salt or less time removes less of it, as a first order in both, is an assumption",
		b.salt.called(), quantity.FormatConcentration(r.ClaimDoseKgPerM3), r.ClaimTimeS/60)}
}

func (b *saltBath) figures(doseKgPerM3, takenKg, heldM3, recoveredM3 float64, h hydration) []Figure {
	return []Figure{
		{"dose", "g/L", doseKgPerM3},
		{"water taken up", "g", takenKg * 1e3},
		{"equilibrium of the salt", "mg/kg", h.water * mgPerKg},
		{"share of the dissolved water claimed", "%", 100 * b.share(doseKgPerM3, b.rig.TimeS)},
		{"stirred or stood", "min", b.rig.TimeS / 60},
		{"solvent kept by the cake", "L", heldM3 * litrePerM3},
		{"rinse", "L", b.rig.RinseM3 * litrePerM3},
		{"dried solvent the rinse recovers", "L", recoveredM3 * litrePerM3},
	}
}

// washing is what a rinse does to a cake that stays as wet as it was.
type washing struct {
	addedKg        float64 // fresh solvent, dry basis
	throughKg      float64 // of it, into the product
	throughKgDried float64 // dried solvent that it drives off the cake
	ratio          float64 // kg water per kg solvent of the fresh solvent
}

// rinse washes the cake as one mixed volume:
//
//	recovered = held (1 - exp(-rinse/held))
func (b *saltBath) rinse(heldKg, kgPerM3 float64) washing {
	w := washing{ratio: b.rig.RinseWater / (1 - b.rig.RinseWater), addedKg: b.rig.RinseM3 * kgPerM3}
	if heldKg > 0 && w.addedKg > 0 {
		w.throughKgDried = heldKg * -math.Expm1(-w.addedKg/heldKg)
	}
	w.throughKg = w.addedKg - w.throughKgDried
	return w
}
