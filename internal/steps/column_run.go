package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

const columnPoints = 25

func (b *bed) run(goal, lengthM float64) Outcome {
	bedKg := lengthM * b.areaM2 * b.bulk()
	recycled := b.recycledM3(lengthM)
	pumped := b.volumeM3 + recycled
	pumpS := pumped / b.rig.FlowM3S
	out := b.collected(lengthM, recycled, pumped)
	heldKg := math.Min(bedKg*b.sorbent.HoldUpM3PerKg*b.stream.kgPerM3, b.feed.SolventKg)
	keptKg := b.feed.SolventKg - heldKg
	ratio := out / (1 - out)
	attendedS := b.rig.SetUpS + b.rig.AttendedShare*pumpS
	o := Outcome{
		Kind: Column, Agent: b.sorbent.Key, In: b.feed,
		Out:           Lot{SolventKg: keptKg, WaterKg: keptKg * ratio, TempK: b.tempK},
		Floor:         b.floorWater,
		HoursTotal:    (b.rig.SetUpS + pumpS) / secondsPerHour,
		HoursAttended: attendedS / secondsPerHour,
		EnergyKWh:     b.rig.PumpW * pumpS / joulePerKWh,
		AgentKg:       bedKg,
		Losses:        []Loss{{"held by the drained bed", heldKg}},
	}
	for i := range columnPoints {
		v := pumped * float64(i) / (columnPoints - 1)
		o.Course = append(o.Course, Point{Hours: v / b.rig.FlowM3S / secondsPerHour, Water: b.outlet(lengthM, v)})
	}
	o.account(b.m.Solvent, b.tempK)
	takenKg := b.feed.WaterKg - b.feed.SolventKg*ratio
	o.Balance.WaterRemovedKg = takenKg + heldKg*ratio
	o.Why, o.WhyText = b.reason(goal, lengthM, out)
	o.Figures = b.figures(goal, lengthM, recycled, pumpS, takenKg)
	o.Warnings = b.warnings(lengthM, recycled)
	o.RuledBy = b.ruledBy(lengthM, pumped)
	return o
}

func (b *bed) figures(goal, lengthM, recycledM3, pumpS, takenKg float64) []Figure {
	bedM3 := lengthM * b.areaM2
	bedKg := bedM3 * b.bulk()
	loading := b.sorbent.ResidualKgPerKg
	if bedKg > 0 {
		loading += takenKg / bedKg
	}
	filled := b.rig.VoidShare + (1-b.rig.VoidShare)*b.sorbent.Porosity
	return []Figure{
		{"bed", "g", bedKg * 1e3},
		{"bed length", "m", lengthM},
		{"bed volume", "L", bedM3 * litrePerM3},
		{"superficial velocity", "mm/s", b.velocityMS * 1e3},
		{"contact time, empty bed", "min", bedM3 / b.rig.FlowM3S / 60},
		{"height of a transfer unit", "m", b.htuM},
		{"length of unused bed", "m", b.unused(goal)},
		{"volume to breakthrough", "L", b.breakthroughM3(lengthM, goal) * litrePerM3},
		{"first runnings to return", "L", recycledM3 * litrePerM3},
		{"outlet as the lot ends", "mg/kg", b.outlet(lengthM, b.volumeM3+recycledM3) * mgPerKg},
		{"pump time", "h", pumpS / secondsPerHour},
		{"pressure drop", "kPa", b.dropPa(lengthM) / 1e3},
		{"solvent in the filled bed", "L", filled * bedM3 * litrePerM3},
		{"share of the resistance in the film", "%", 100 * b.insideMS / (b.filmMS + b.insideMS)},
		{"water taken up", "g", takenKg * 1e3},
		{"loading before", "g/100 g", b.sorbent.ResidualKgPerKg * 100},
		{"loading after", "g/100 g", loading * 100},
	}
}

func (b *bed) dropPa(lengthM float64) float64 {
	return lengthM * pressureDropPaPerM(b.stream, b.velocityMS, b.rig.VoidShare, b.sorbent.BeadDiameterM)
}

func (b *bed) reason(goal, lengthM, out float64) (Stop, string) {
	end := b.outlet(lengthM, b.volumeM3+b.recycledM3(lengthM))
	switch {
	case math.IsNaN(goal):
		return AtCapacity, fmt.Sprintf("%s on average, %s as the lot ends", quantity.FormatWater(out), quantity.FormatWater(end))
	case goal >= b.feed.Water() || end <= goal*(1+1e-9):
		return AtTarget, fmt.Sprintf("%s not passed until the lot is through; %s on average", quantity.FormatWater(goal), quantity.FormatWater(out))
	case goal <= b.floorWater:
		return AtFloor, fmt.Sprintf("floor: a sieve that still holds %.2g g/100 g leaves %s, however long the bed", b.sorbent.ResidualKgPerKg*100, quantity.FormatWater(b.floorWater))
	case out <= goal:
		return AtTarget, fmt.Sprintf("%s on average; the bed breaks through before the lot ends, at %s", quantity.FormatWater(out), quantity.FormatVolume(b.breakthroughM3(lengthM, goal)))
	case lengthM <= b.unused(goal):
		return AtTime, fmt.Sprintf("contact: %.3g m of bed lie under the %.3g m that water needs to be taken up; pump slower or take a wider tube", lengthM, b.unused(goal))
	}
	return AtCapacity, fmt.Sprintf("capacity: the bed breaks through at %s; it would have to be %.3g m long", quantity.FormatVolume(b.breakthroughM3(lengthM, goal)), b.needed(goal))
}

func (b *bed) warnings(lengthM, recycledM3 float64) []string {
	var w []string
	if re := b.reynolds(); re < packedLowestReynolds {
		w = append(w, fmt.Sprintf("film correlation used below its range (Re %.2g, stated for 3 and more); the film is %.0f %% of the resistance", re, 100*b.insideMS/(b.filmMS+b.insideMS)))
	}
	if drop := b.dropPa(lengthM); b.rig.HighestPa > 0 && drop > b.rig.HighestPa {
		w = append(w, fmt.Sprintf("pressure drop of %.3g kPa is more than the %.3g kPa allowed: pump slower", drop/1e3, b.rig.HighestPa/1e3))
	}
	if recycledM3 >= b.volumeM3 {
		w = append(w, "the first runnings to return are as much as the lot: the bed is too large for it")
	}
	return w
}

// ruledBy names what the outlet turns on: the floor of the sieve's history, or
// the diffusion into the beads.
func (b *bed) ruledBy(lengthM, pumpedM3 float64) string {
	if b.outlet(lengthM, pumpedM3) < 2*b.floorWater {
		return fmt.Sprintf("residual loading: %.2g g/100 g at the start leave %s", 100*b.sorbent.ResidualKgPerKg, quantity.FormatWater(b.floorWater))
	}
	return "rate: the height of a transfer unit, set by diffusion into the beads, which may be overstated by up to two"
}
