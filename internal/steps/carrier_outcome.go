package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

// outcome turns one charge into the whole lot's account.
func (r *refluxing) outcome(feed Lot) Outcome {
	n := float64(r.rig.Charges)
	heatUpS := r.heatUpJ / r.netW()
	trapS := r.trappedJ / r.netW()
	refluxS := math.Max(trapS, r.rules.ShortestRefluxS)
	stripS := (r.spentJ - r.trappedJ) / r.netW()
	drainings := math.Max(1, math.Ceil(r.aqueousM3()/r.rig.UsableVolumeM3-1e-9))
	shutDownS, outK := r.rules.ShutDownS, r.rig.RoomK
	kind, why, told := Trap, r.why, r.reached()
	switch r.half {
	case trapOnly:
		shutDownS, outK = 0, r.potK // the pot goes on hot
	case stripOnly:
		kind, why, told, drainings, refluxS = Forerun, r.stripWhy, r.stripped(), 0, 0
	}
	hotS := heatUpS + refluxS + stripS
	o := Outcome{
		Kind: kind, In: feed, Floor: math.NaN(),
		Carrier: r.m.Pure[inCarrier].Key, CarrierKg: r.plan.DoseKg,
		Why: why, WhyText: told,
		HoursTotal:    (r.rules.SetUpS + n*(hotS+shutDownS+drainings*r.rules.DrainingS)) / secondsPerHour,
		HoursAttended: (r.rules.SetUpS + n*(hotS*r.rules.AttendedShare+shutDownS+drainings*r.rules.DrainingS)) / secondsPerHour,
		EnergyKWh:     n * r.rig.HeaterW * hotS / joulePerKWh,
		Condenser:     condense(r.rig.HeaterW, r.rig.HeatShare, r.rules.CoolingFlowM3S, r.rules.CoolingRiseK),
		Course:        r.course, Warnings: r.warnings, Returns: string(r.returns),
	}
	for i := r.trappedAt; i < len(o.Course); i++ { // stripping begins when the reflux is over, however soon the trap was done
		o.Course[i].Hours += (refluxS - trapS) / secondsPerHour
	}
	o.CoolingWaterL = n * o.Condenser.RunM3PerS * (refluxS + stripS) * litrePerM3
	wetter := r.share(&o, n, (refluxS+stripS)/secondsPerDay*r.rules.VapourLossPerDay)
	if r.why == AtFloor && r.half != stripOnly {
		r.floor(&o, wetter)
	}
	o.Out.TempK = outK
	o.account(r.m.Pure[inSolvent], r.rig.RoomK)
	o.Balance.CarrierAddedKg, o.Balance.CarrierOutKg = r.plan.DoseKg+feed.CarrierKg, o.Out.CarrierKg
	o.Balance.HeatInJ = n * r.netW() * hotS
	o.Balance.HeatUsedJ = n * (r.usedJ() + r.netW()*(refluxS-trapS))
	r.figures(&o, heatUpS, refluxS, stripS, drainings)
	o.Warnings = append(o.Warnings, oftenDrained(drainings, "take a larger receiver")...)
	r.warn(&o)
	return o
}

// floor is what a trap that went as far as it can leaves, in kg of water per kg of what is
// in the pot, as the outlet: with the carrier that is in it. Stripping takes water along,
// so that the floor of the whole operation is that of its product. Where droplets and moist
// air keep that wetter they are what it stops at, and a trace that is only computed is no floor.
func (r *refluxing) floor(o *Outcome, wetter bool) {
	o.Floor, o.FloorOf = r.water(&r.s), "the pot, carrier included, when the trap stops"
	if r.half == bothHalves {
		o.FloorOf = "the product, with the carrier stripped"
	}
	switch {
	case wetter:
		o.Why = AtPractice
		o.WhyText = fmt.Sprintf("practical limit: droplets and moist air keep an outlet at %s or more; the trap's %s", quantity.FormatWater(r.rules.LowestOutlet), o.WhyText)
		if r.half == bothHalves {
			o.Floor, o.FloorOf = math.NaN(), ""
		}
	case r.half == bothHalves:
		o.WhyText += fmt.Sprintf("; stripped, %s are left", quantity.FormatWater(o.Out.Water()))
	}
}

// share parts lot and dose into product, layers, strippings and vapour past the
// condenser, which is taken to be like the pot. Wetter tells that droplets and moist air
// keep the product wetter than computed.
func (r *refluxing) share(o *Outcome, n, vapourShare float64) (wetter bool) {
	kg := func(amounts Fractions, component int) float64 { return n * r.kg(amounts[component], component) }
	pot := r.s.pot
	vapour := scaled(pot, vapourShare)
	keep := scaled(pot, 1-vapourShare)
	o.Out = Lot{SolventKg: kg(keep, inSolvent), WaterKg: kg(keep, inWater), CarrierKg: kg(keep, inCarrier), TempK: r.rig.RoomK}
	regained := 0.0
	if lowest := r.rules.LowestOutlet / (1 - r.rules.LowestOutlet) * (o.Out.SolventKg + o.Out.CarrierKg); o.Out.WaterKg < math.Min(lowest, o.In.WaterKg) {
		regained = math.Min(lowest, o.In.WaterKg) - o.Out.WaterKg
		if r.why != AtPractice {
			o.Warnings = append(o.Warnings, fmt.Sprintf("droplets and moist air keep an outlet at %s or more, whatever is computed", quantity.FormatWater(r.rules.LowestOutlet)))
		}
		o.Out.WaterKg += regained
	}
	if r.half != stripOnly {
		o.Losses = append(o.Losses, Loss{"dissolved in the aqueous layer", kg(r.s.aqueous, inSolvent)}, Loss{"organic layer left in the receiver", kg(r.s.held, inSolvent)})
		o.Discards = append(o.Discards, Discard{r.classOf(r.s.aqueous), "aqueous layer", n * r.massKg(r.s.aqueous)}, Discard{SolventWaste, "organic layer left in the receiver", n * r.massKg(r.s.held)})
	}
	if r.half != trapOnly {
		o.Losses = append(o.Losses, Loss{strippedOff, kg(r.s.drawn, inSolvent)})
		o.Discards = append(o.Discards, Discard{SolventWaste, "carrier and solvent stripped off", n * r.massKg(r.s.drawn)})
	}
	o.Losses = append(o.Losses, Loss{"vapour past the condenser", kg(vapour, inSolvent)})
	var gone [3]float64
	for i := range gone {
		gone[i] = kg(r.s.aqueous, i) + kg(r.s.held, i) + kg(r.s.drawn, i) + kg(vapour, i)
	}
	o.Balance.WaterRemovedKg = gone[inWater] - regained
	o.Balance.CarrierRemovedKg = gone[inCarrier]
	o.CarrierLostKg = gone[inCarrier]
	return regained > 0
}

// classOf is the class of waste of a layer: of an alcohol the aqueous one may hold more
// of it than of water.
func (r *refluxing) classOf(layer Fractions) WasteClass {
	if r.kg(layer[inWater], inWater) > r.massKg(layer)/2 {
		return AqueousWaste
	}
	return SolventWaste
}

const strippedOff = "stripped off with the carrier"

func (r *refluxing) figures(o *Outcome, heatUpS, refluxS, stripS, drainings float64) {
	if r.half == stripOnly {
		o.Figures = []Figure{
			{"still charges", "", float64(r.rig.Charges)},
			{"equilibrium stages of the column", "", float64(r.plan.Stages)},
			{"boiling temperature at the start", "°C", r.startK - 273.15},
			{"boiling temperature at the end", "°C", r.potK - 273.15},
			{"heat-up, each charge", "h", heatUpS / secondsPerHour},
			{"drawing off, each charge", "h", stripS / secondsPerHour},
			{"volume drawn off, each charge", "L", r.liquidM3(r.s.drawn, r.rig.RoomK) * litrePerM3},
			{"carrier left in the product", "mg/kg", o.Out.Carrier() * mgPerKg},
		}
		return
	}
	a := r.eq.Azeotrope
	o.Figures = []Figure{
		{"still charges", "", float64(r.rig.Charges)},
		{"carrier charged", "kg", r.plan.DoseKg},
		{"boiling temperature at the start", "°C", r.startK - 273.15},
		{"boiling temperature at the end", "°C", r.potK - 273.15},
		{"lowest-boiling mixture", "°C", a.TempK - 273.15},
		{"heat-up, each charge", "h", heatUpS / secondsPerHour},
		{"reflux, each charge", "h", refluxS / secondsPerHour},
		{"stripping, each charge", "h", stripS / secondsPerHour},
		{"vapour boiled up, each charge", "kg", r.s.boiledKg},
		{"aqueous layer, each charge", "mL", r.aqueousM3() * 1e6},
		{"drainings, each charge", "", drainings},
		{holdsOfWater, "mL", r.rig.UsableVolumeM3 * 1e6},
		{"water in the pot when the trap stops", "mg/kg", r.water(&r.trapped) * mgPerKg},
		{"carrier left in the product", "mg/kg", o.Out.Carrier() * mgPerKg},
		{"carrier in the aqueous layer", "kg", float64(r.rig.Charges) * r.kg(r.s.aqueous[inCarrier], inCarrier)},
		{"volume drawn off, each charge", "L", r.liquidM3(r.s.drawn, r.rig.RoomK) * litrePerM3},
		{"equilibrium stages of the column", "", float64(r.plan.Stages)},
		{"band on the water of the organic layer", "factor", math.Max(1, r.widestBand)},
	}
}

func (r *refluxing) warn(o *Outcome) {
	if r.widestBand > 1 {
		o.Warnings = append(o.Warnings, fmt.Sprintf("water in the organic layer rests on %s: within a factor %.3g either way", r.bandBasis, r.widestBand))
	}
	if r.half == trapOnly {
		return
	}
	o.Warnings = append(o.Warnings, fmt.Sprintf("the product holds %s of %s", quantity.FormatWater(o.Out.Carrier()), r.m.Pure[inCarrier].Called()))
	if r.stripWhy == AtHeel {
		o.Warnings = append(o.Warnings, r.stripped())
	}
	for _, l := range o.Losses {
		if share := l.SolventKg / o.In.SolventKg; l.Cause == strippedOff && share > wastefulShare {
			o.Warnings = append(o.Warnings, fmt.Sprintf("%.0f %% of the solvent is stripped off with the carrier", 100*share))
		}
	}
}

// stripped says where the stripping ends.
func (r *refluxing) stripped() string {
	limit, key := quantity.FormatWater(r.plan.CarrierLimit), r.m.Pure[inCarrier].Called()
	if r.stripWhy == AtHeel {
		left := r.kg(r.s.pot[inCarrier], inCarrier) / r.massKg(r.s.pot)
		return fmt.Sprintf("stripping ends at the heel with %s of %s left, above the limit of %s", quantity.FormatWater(left), key, limit)
	}
	return fmt.Sprintf("no more than %s of %s is left", limit, key)
}

// reached words the reason for stopping.
func (r *refluxing) reached() string {
	if r.whyText != "" {
		return r.whyText
	}
	if r.why == AtPractice {
		return fmt.Sprintf("practical limit: droplets and moist air keep a trap's outlet at %s or more", quantity.FormatWater(r.rules.LowestOutlet))
	}
	return fmt.Sprintf("hand-over at %s of water and solvent reached, with %s in the pot, carrier included", quantity.FormatWater(r.plan.Goal), quantity.FormatWater(r.water(&r.trapped)))
}
