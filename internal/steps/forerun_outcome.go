package steps

import (
	"fmt"
	"math"

	"parch/internal/thermo"
)

// wastefulShare is the share of the solvent drawn off above which a forerun is
// called wasteful (assumption).
const wastefulShare = 0.25

// outcome turns one charge into the whole lot's account.
func (d *drawing) outcome(feed Lot) Outcome {
	n := float64(d.rig.Charges)
	heatUpS, drawS := d.heatUpJ/d.netW(), d.boilUpJ/d.netW()
	settleS := 0.0
	if d.rig.Stages > 0 {
		settleS = d.rules.SettleColumnS
	}
	hotS := heatUpS + settleS + drawS
	o := Outcome{
		Kind: Forerun, In: feed, Floor: math.NaN(),
		Why: d.why, WhyText: d.reached(feed),
		HoursTotal:    (d.rules.SetUpS + n*(hotS+d.rules.ShutDownS)) / secondsPerHour,
		HoursAttended: (d.rules.SetUpS + n*(hotS*d.rules.AttendedShare+d.rules.ShutDownS)) / secondsPerHour,
		EnergyKWh:     n * d.rig.HeaterW * hotS / joulePerKWh,
		Condenser:     condense(d.rig.HeaterW, d.rig.HeatShare, d.rules.CoolingFlowM3S, d.rules.CoolingRiseK),
		Course:        d.course, Overhead: d.overhead,
	}
	o.CoolingWaterL = n * o.Condenser.RunM3PerS * (settleS + drawS) * litrePerM3
	if d.overhead {
		o.Floor = d.m.MassFraction(d.firstY)
	}
	d.share(&o, n, (settleS+drawS)/secondsPerDay*d.rules.VapourLossPerDay)
	o.account(d.m.Solvent, d.rig.RoomK)
	o.Balance.HeatInJ = n * d.netW() * hotS
	water, solvent := d.pot()
	o.Balance.HeatUsedJ = n * (d.m.WarmJ(water, solvent, d.tempK, d.at.potK) + d.carriedJ + d.netW()*settleS)
	d.figures(&o, feed, heatUpS, settleS+drawS)
	return o
}

// share parts the charge into product, what is drawn off or left behind, and
// vapour past the condenser, which is taken as wet as the product.
func (d *drawing) share(o *Outcome, n, vapourShare float64) {
	drawn := d.drawn()
	water0 := d.mol0 * d.x0 * d.m.Water.MolarMassKgPerMol
	solvent0 := d.mol0 * (1 - d.x0) * d.m.Solvent.MolarMassKgPerMol
	pot := drawnOff{water0 - drawn.waterKg, solvent0 - drawn.solventKg}
	product, rest, what, cause := pot, drawn, "forerun", "drawn off with the water"
	if d.overhead {
		product, rest, what, cause = drawn, pot, "heel", "left in the heel"
	}
	vapourWaterKg, vapourKg := product.waterKg*vapourShare, product.solventKg*vapourShare
	o.Out = Lot{SolventKg: n * (product.solventKg - vapourKg), TempK: d.rig.RoomK}
	waterKg := product.waterKg - vapourWaterKg
	claimed := math.Min(d.rules.LowestOutlet, o.In.Water()) // no lot is claimed to come out wetter than it was
	claimedKg := (product.solventKg - vapourKg) * claimed / (1 - claimed)
	o.Out.WaterKg = n * math.Max(waterKg, claimedKg)
	o.Losses = []Loss{{cause, n * rest.solventKg}, {"vapour past the condenser", n * vapourKg}}
	class := SolventWaste
	if rest.water() > 0.5 {
		class = AqueousWaste
	}
	o.Discards = []Discard{{class, what, n * (rest.waterKg + rest.solventKg)}}
	o.Balance.WaterRemovedKg = n * (rest.waterKg + vapourWaterKg - math.Max(0, claimedKg-waterKg))
	if o.In.Water() <= d.rules.LowestOutlet {
		o.Warnings = append(o.Warnings, "nothing is gained: the lot is as dry as drawing off can make it")
	}
	if lost := rest.solventKg / solvent0; lost > wastefulShare && !d.overhead {
		o.Warnings = append(o.Warnings, fmt.Sprintf("%.0f %% of the solvent is drawn off with the water", 100*lost))
	}
	if d.overhead && d.why == AtTarget && rest.solventKg > wastefulShare*solvent0 {
		o.Warnings = append(o.Warnings, fmt.Sprintf("%.0f %% of the solvent stays in the heel, or the distillate would be too wet", 100*rest.solventKg/solvent0))
	}
}

func (d *drawing) figures(o *Outcome, feed Lot, heatUpS, drawS float64) {
	drawn := d.drawn()
	o.Figures = []Figure{
		{"still charges", "", float64(d.rig.Charges)},
		{"equilibrium stages of the column", "", float64(d.rig.Stages)},
		{"boiling temperature at the start", "°C", d.startK - 273.15},
		{"boiling temperature at the end", "°C", d.at.potK - 273.15},
		{"heat-up, each charge", "h", heatUpS / secondsPerHour},
		{"drawing off, each charge", "h", drawS / secondsPerHour},
		{"volume drawn off, each charge", "L", d.drawnM3() * litrePerM3},
		{"water in what is drawn off", "%", 100 * drawn.water()},
		{"drawn off, as a share of the charge", "%", 100 * (drawn.waterKg + drawn.solventKg) * float64(d.rig.Charges) / feed.MassKg()},
	}
}

// RunTrapThenForerun boils a lot under a trap down to handOver (kg/kg), then
// draws the rest of the water off from the same hot pot: no cooling down and no
// second heat-up between the two. The set-up of the rules for drawing is what it
// takes to turn the trap off and let the condensate run out.
func RunTrapThenForerun(eq *TrapEquilibrium, feed Lot, handOver, goal float64, rig TrapRig, rules TrapRules, still ForerunRig, drawing ForerunRules) (trap, forerun Outcome, err error) {
	rules.ShutDownS = 0
	if trap, err = RunTrap(eq, feed, handOver, rig, rules); err != nil {
		return trap, forerun, err
	}
	trap.Out.TempK = trap.Course[len(trap.Course)-1].PotK
	boiling := &ForerunEquilibrium{Mixture: eq.Mixture, PressurePa: eq.PressurePa, Azeotrope: eq.Azeotrope}
	if boiling.DryK, err = thermo.Boil(eq.Mixture.Solvent, eq.PressurePa); err != nil {
		return trap, forerun, err
	}
	still.Charges = rig.Charges
	forerun, err = RunForerun(boiling, trap.Out, goal, still, drawing)
	return trap, forerun, err
}
