package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// SoakFor stands a lot over the sorbent dose that reaches goal (kg/kg) in timeS,
// or over the largest practical dose where none does.
func SoakFor(m *thermo.Mixture, feed Lot, goal, timeS float64, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, dose, err := choose(m, lot, goal, timeS, sorbent, rig)
		if err != nil {
			return Outcome{}, err
		}
		return b.run(goal, timeS, dose)
	})
}

// SoakOver stands a lot over a given dose (kg per m3 of solvent) for timeS.
func SoakOver(m *thermo.Mixture, feed Lot, doseKgPerM3, timeS float64, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newBath(m, lot, sorbent, rig)
		if err := errors.Join(err, checkDose(doseKgPerM3), checkTime(timeS)); err != nil {
			return Outcome{}, err
		}
		return b.run(math.NaN(), timeS, SoakDose{Capacity: math.NaN(), Speed: math.NaN(), Dose: doseKgPerM3, Enough: true})
	})
}

const soakPoints = 25

func (b *bath) run(goal, timeS float64, dose SoakDose) (Outcome, error) {
	eq, err := dose.eq, error(nil)
	if eq == 0 {
		if eq, err = b.over(dose.Dose); err != nil {
			return Outcome{}, err
		}
	}
	decanted := b.decanted(eq, dose.Dose, timeS)
	doseKg := dose.Dose * b.volumeM3
	out := b.course(eq, dose.Dose, timeS)

	vessels := float64(b.rig.Vessels)
	heldKg := b.feed.SolventKg - decanted.SolventKg
	ratio := out / (1 - out)
	o := Outcome{
		Kind: Soak, Agent: b.sorbent.Key, In: b.feed,
		Out:           decanted,
		HoursTotal:    timeS/secondsPerHour + vessels*b.rig.AttendedS/secondsPerHour,
		HoursAttended: vessels * b.rig.AttendedS / secondsPerHour,
		AgentKg:       doseKg,
		Losses:        []Loss{{"held by the drained beads", heldKg}},
	}
	o.account(b.m.Solvent, b.tempK)
	takenKg := b.feed.WaterKg - b.feed.SolventKg*ratio
	if b.rig.CondensationPerS > 0 {
		dried := out - b.made(dose.Dose, timeS)
		o.Balance.WaterMadeKg = b.feed.SolventKg * (ratio - dried/(1-dried))
		takenKg += o.Balance.WaterMadeKg
	}
	o.Balance.WaterRemovedKg = takenKg + heldKg*ratio
	if !b.rig.Outline {
		err = b.tell(&o, goal, eq, timeS, takenKg, dose)
	}
	return o, err
}

// tell enters what is to be said of a soak that came to eq, kg/kg, in the end.
func (b *bath) tell(o *Outcome, goal, eq, timeS, takenKg float64, dose SoakDose) (err error) {
	if o.Floor, err = b.floor(); err != nil {
		return err
	}
	o.Course = make([]Point, soakPoints)
	for i := range o.Course {
		t := timeS * float64(i) / (soakPoints - 1)
		o.Course[i] = Point{Hours: t / secondsPerHour, Water: b.course(eq, dose.Dose, t)}
	}
	o.Why, o.WhyText = b.reason(goal, o.Course[soakPoints-1].Water, o.Floor, timeS, dose)
	if b.rig.Lots > 1 {
		o.WhyText += fmt.Sprintf(", with the last of %d lots over one charge", b.rig.Lots)
		o.Warnings = append(o.Warnings, fmt.Sprintf("%d lots go over one charge as it is: the outlet is that of the last, the beads stay wet and shut between them and serve this solvent only; regenerate or replace them before lot %d", b.rig.Lots, b.rig.Lots+1))
	}
	o.Figures = b.figures(dose, eq, takenKg, o.AgentKg)
	return b.remark(o, eq, timeS, dose.Dose, takenKg)
}

// over is the water in equilibrium with a dose, kg/kg; that of the lot where it is none.
func (b *bath) over(doseKgPerM3 float64) (float64, error) {
	if doseKgPerM3 == 0 {
		return b.feed.Water(), nil
	}
	return b.equilibrium(doseKgPerM3 * b.volumeM3)
}

// decanted is what comes off the beads after timeS on the way to eq, kg/kg.
func (b *bath) decanted(eq, doseKgPerM3, timeS float64) Lot {
	doseKg := doseKgPerM3 * b.volumeM3
	w := b.course(eq, doseKgPerM3, timeS)
	heldKg := math.Min(doseKg*b.sorbent.HoldUpM3PerKg*b.m.Solvent.DensityKgPerM3.At(b.tempK), b.feed.SolventKg) / b.lots()
	keptKg := b.feed.SolventKg - heldKg
	return Lot{SolventKg: keptKg, WaterKg: keptKg * w / (1 - w), TempK: b.tempK}
}

func (b *bath) figures(dose SoakDose, eq, takenKg, doseKg float64) []Figure {
	before, after := b.sorbent.ResidualKgPerKg, b.sorbent.ResidualKgPerKg
	if doseKg > 0 {
		before += b.beforeKg() / doseKg
		after = before + takenKg/doseKg
	}
	figures := []Figure{
		{"dose", "g/L", dose.Dose},
		{"dose for capacity", "g/L", dose.Capacity},
		{"dose for speed", "g/L", dose.Speed},
		{"vessels", "", float64(b.rig.Vessels)},
		{"liquid height", "m", b.rig.DepthM},
		{"rate constant K", "1/h", b.rate(dose.Dose) * secondsPerHour},
		{"equilibrium at this dose", "mg/kg", eq * mgPerKg},
		{"water taken up", "g", takenKg * 1e3},
		{"loading before", "g/100 g", before * 100},
		{"loading after", "g/100 g", after * 100},
	}
	if b.rig.Lots > 1 {
		figures = append(figures, Figure{LotsServed, "", b.lots()}, Figure{"water taken up by then, at most", "g", (b.beforeKg() + takenKg) * 1e3})
	}
	return figures
}

// LotsServed is the figure that says how many lots go over a charge before it is
// taken out; a charge for one lot has none.
const LotsServed = "lots over one charge"

func (b *bath) reason(goal, out, floor, timeS float64, dose SoakDose) (Stop, string) {
	hours := quantity.Significant(timeS/secondsPerHour, 3)
	switch {
	case math.IsNaN(goal):
		return AtTime, fmt.Sprintf("%s after %s h", quantity.FormatWater(out), hours)
	case dose.Enough:
		return AtTarget, fmt.Sprintf("%s in %s h; %s rules", quantity.FormatWater(out), hours, dose.Ruling())
	case goal <= floor:
		return AtFloor, fmt.Sprintf("floor: a sieve that still holds %.2g g/100 g leaves %s, whatever the dose", b.sorbent.ResidualKgPerKg*100, quantity.FormatWater(floor))
	case b.rig.CondensationPerS > 0:
		return AtPractice, fmt.Sprintf("%s makes water on the sorbent: no dose reaches %s in %s h", b.m.Solvent.Called(), quantity.FormatWater(goal), hours)
	}
	eq, err := b.equilibrium(dose.Dose * b.volumeM3)
	if err != nil || eq >= goal {
		return AtCapacity, fmt.Sprintf("capacity: %.3g g/L, the largest practical dose, holds too little; several charges, one after the other, hold more", dose.Dose)
	}
	wait := math.Ceil(math.Log((b.feed.Water()-eq)/(goal-eq)) / b.rate(dose.Dose) / secondsPerHour)
	if b.rig.Stirred {
		return AtTime, fmt.Sprintf("time: no dose up to %.3g g/L reaches %s in %s h stirred; wait %.0f h", dose.Dose, quantity.FormatWater(goal), hours, wait)
	}
	return AtTime, fmt.Sprintf("time: no dose reaches %s in %s h in a still vessel; stir, or wait %.0f h", quantity.FormatWater(goal), hours, wait)
}
