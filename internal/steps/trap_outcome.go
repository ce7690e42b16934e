package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

const (
	secondsPerHour = 3600.0
	secondsPerDay  = 86400.0
	joulePerKWh    = 3.6e6
	litrePerM3     = 1e3
	mgPerKg        = 1e6 // mg/kg in one kg/kg
)

// outcome turns one charge into the whole lot's account.
func (b *boiling) outcome(feed Lot, goal float64, why Stop) Outcome {
	n := float64(b.rig.Charges)
	heatUpS := b.heatUpJ / b.netW()
	boilS := b.boilUpJ / b.netW()
	refluxS := math.Max(boilS, b.rules.ShortestRefluxS)
	aqueousM3 := b.aqueousM3()
	drainings := math.Max(1, math.Ceil(aqueousM3/b.rig.UsableVolumeM3-1e-9))
	hotS := heatUpS + refluxS

	lost := b.losses(refluxS)
	solventOutKg := b.solvent*b.m.Solvent.MolarMassKgPerMol - lost.vapourKg
	waterOutKg, regainedKg := b.waterOut(solventOutKg, lost.vapourWaterKg)
	o := Outcome{
		Kind: Trap, In: feed,
		Out:           Lot{SolventKg: n * solventOutKg, WaterKg: n * waterOutKg, TempK: b.rig.RoomK},
		Floor:         b.eq.Floor.Water,
		Why:           why,
		WhyText:       b.reason(goal, why),
		HoursTotal:    (b.rules.SetUpS + n*(hotS+b.rules.ShutDownS+drainings*b.rules.DrainingS)) / secondsPerHour,
		HoursAttended: (b.rules.SetUpS + n*(hotS*b.rules.AttendedShare+b.rules.ShutDownS+drainings*b.rules.DrainingS)) / secondsPerHour,
		EnergyKWh:     n * b.rig.HeaterW * hotS / joulePerKWh,
		Condenser:     condense(b.rig.HeaterW, b.rig.HeatShare, b.rules.CoolingFlowM3S, b.rules.CoolingRiseK),
		Course:        b.course,
		Returns:       string(b.eq.Floor.Return),
	}
	o.CoolingWaterL = n * o.Condenser.RunM3PerS * refluxS * litrePerM3
	o.Losses = []Loss{
		{"dissolved in the aqueous layer", n * lost.aqueousSolventKg},
		{"organic layer left in the receiver", n * lost.heldSolventKg},
		{"vapour past the condenser", n * lost.vapourKg},
	}
	o.Discards = []Discard{
		{AqueousWaste, "aqueous layer", n * (lost.aqueousSolventKg + lost.aqueousWaterKg)},
		{SolventWaste, "organic layer left in the receiver", n * (lost.heldSolventKg + lost.heldWaterKg)},
	}
	o.account(b.m.Solvent, b.rig.RoomK)
	o.Balance.WaterRemovedKg = n * (lost.aqueousWaterKg + lost.heldWaterKg + lost.vapourWaterKg - regainedKg)
	o.Balance.HeatInJ = n * b.netW() * hotS
	o.Balance.HeatUsedJ = n * (b.condensedJ + b.netW()*(refluxS-boilS) + b.storedJ(feed, n))
	o.Figures = []Figure{
		{"still charges", "", n},
		{"boiling temperature at the start", "°C", b.startK - 273.15},
		{"heat-up, each charge", "h", heatUpS / secondsPerHour},
		{"reflux, each charge", "h", refluxS / secondsPerHour},
		{"vapour boiled up, each charge", "kg", b.boiledKg},
		{"vapour as a share of the charge", "%", 100 * b.boiledKg * n / feed.MassKg()},
		{"aqueous layer, each charge", "mL", aqueousM3 * 1e6},
		{"drainings, each charge", "", drainings},
		{holdsOfWater, "mL", b.rig.UsableVolumeM3 * 1e6},
		{"floor of the pot", "mg/kg", b.eq.Floor.Water * mgPerKg},
	}
	b.nothingGained(&o)
	o.Warnings = append(o.Warnings, oftenDrained(drainings, "let free water settle first, or take a larger receiver")...)
	return o
}

// storedJ is what the liquids of a charge hold more than the lot did in the room: the
// boiling pot, and what is left in the receiver.
func (b *boiling) storedJ(feed Lot, charges float64) float64 {
	water := feed.WaterKg/charges/b.m.Water.MolarMassKgPerMol - b.water
	return b.m.WarmJ(b.water, b.solvent, b.rig.RoomK, b.potK) + b.m.WarmJ(water, b.charged-b.solvent, b.rig.RoomK, b.eq.ReceiverK)
}

// nothingGained says so of a lot that no trap makes drier.
func (b *boiling) nothingGained(o *Outcome) {
	holds, dry := "the lot holds "+quantity.FormatWater(o.In.Water()), floorMargin*b.eq.Floor.Water
	switch {
	case o.In.Water() <= dry:
		o.Why, o.WhyText = AtFloor, fmt.Sprintf("floor: %s, and this trap takes no water out of less than %s", holds, quantity.FormatWater(dry))
	case o.In.Water() <= b.rules.LowestOutlet:
		o.Why, o.WhyText = AtPractice, fmt.Sprintf("practical limit: %s, and droplets and moist air keep a trap's outlet at %s or more", holds, quantity.FormatWater(b.rules.LowestOutlet))
	default:
		return
	}
	o.Warnings = append(o.Warnings, "nothing is gained: the lot is as dry as this trap can make it")
}

// mostDrainings of one charge before a larger receiver is worth a thought (common
// practice, no source).
const mostDrainings = 12

func oftenDrained(drainings float64, advice string) []string {
	if drainings <= mostDrainings {
		return nil
	}
	return []string{fmt.Sprintf("the receiver is drained %.0f times in a charge: %s", drainings, advice)}
}

// waterOut is the water in the product. Filling the receiver can take a small
// charge below what a trap can claim; droplets and moist air bring it back.
func (b *boiling) waterOut(solventOutKg, lostKg float64) (waterKg, regainedKg float64) {
	waterKg = b.water*b.m.Water.MolarMassKgPerMol - lostKg
	claimedKg := solventOutKg * b.lowest / (1 - b.lowest)
	return math.Max(waterKg, claimedKg), math.Max(0, claimedKg-waterKg)
}

type trapLosses struct {
	aqueousSolventKg, aqueousWaterKg float64
	heldSolventKg, heldWaterKg       float64
	vapourKg, vapourWaterKg          float64 // past the condenser, taken as wet as the pot
}

func (b *boiling) losses(refluxS float64) trapLosses {
	l := b.eq.Floor.Layers
	water, solvent := b.m.Water.MolarMassKgPerMol, b.m.Solvent.MolarMassKgPerMol
	vapourShare := b.rules.VapourLossPerDay * refluxS / secondsPerDay
	return trapLosses{
		aqueousSolventKg: b.aqueousMol * (1 - l.XAqueous) * solvent,
		aqueousWaterKg:   b.aqueousMol * l.XAqueous * water,
		heldSolventKg:    b.heldSolventMol * solvent,
		heldWaterKg:      b.heldWaterMol * water,
		vapourKg:         b.solvent * solvent * vapourShare,
		vapourWaterKg:    b.water * water * vapourShare,
	}
}

func (b *boiling) reason(goal float64, why Stop) string {
	switch why {
	case AtFloor:
		return fmt.Sprintf("floor: the condensate of a pot at %s no longer splits at %.0f °C; run to %.0f %% above it",
			quantity.FormatWater(b.eq.Floor.Water), b.eq.ReceiverK-273.15, 100*(floorMargin-1))
	case AtTime:
		return fmt.Sprintf("time: %.3g h of reflux leave %s in the pot", b.rules.LongestRefluxS/secondsPerHour, quantity.FormatWater(b.m.MassFraction(b.fraction())))
	case AtPractice:
		return fmt.Sprintf("practical limit: droplets and moist air keep a trap's outlet at %s or more, whatever its floor of %s",
			quantity.FormatWater(b.rules.LowestOutlet), quantity.FormatWater(b.eq.Floor.Water))
	default:
		if b.m.MassFraction(b.fraction()) < goal*(1-1e-3) {
			return fmt.Sprintf("hand-over at %s passed while the receiver was filled from the pot", quantity.FormatWater(goal))
		}
		return fmt.Sprintf("hand-over at %s reached", quantity.FormatWater(goal))
	}
}

// account fills in the sums that follow from lots, losses and discards.
func (o *Outcome) account(solvent *thermo.Pure, roomK float64) {
	density := solvent.DensityKgPerM3.At(roomK)
	var lostKg float64
	for _, l := range o.Losses {
		lostKg += l.SolventKg
	}
	o.SolventLostL = lostKg / density * litrePerM3
	for _, d := range o.Discards {
		o.WasteKg += d.Kg
	}
	o.Balance.WaterInKg, o.Balance.WaterOutKg = o.In.WaterKg, o.Out.WaterKg
	o.Balance.SolventInKg, o.Balance.SolventOutKg = o.In.SolventKg, o.Out.SolventKg
	o.Balance.SolventRemovedKg = lostKg
}
