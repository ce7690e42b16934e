package routes

import (
	"fmt"
	"math"

	"parch/catalog"
	"parch/internal/steps"
)

const secondsPerYear = 365.25 * 86400

const discardedLot = "the reclaimed lot that is not dried"

// account turns what a step did into what is paid for.
func (c *Case) account(place int, o steps.Outcome, choice choice) []StageUse {
	uses := make([]StageUse, 0, 16)
	use := func(head steps.Head, item, unit string, quantity float64, basis string) {
		if quantity > 0 {
			uses = append(uses, StageUse{place, steps.Use{Head: head, Item: item, Unit: unit, Quantity: quantity, Basis: basis}})
		}
	}
	use(steps.Labour, "technician", "hour", o.HoursAttended, fmt.Sprintf("attended hours of the %s", o.Kind))
	use(steps.Energy, "electricity", "kwh", o.EnergyKWh, energyBasis(o.Kind))
	use(steps.CoolingWater, "cooling-water", "m3", o.CoolingWaterL/1e3, "tap flow x hours of reflux")
	density := c.Mixture.Solvent.DensityKgPerM3.At(c.Job.Site.RoomK)
	for _, l := range o.Losses {
		use(steps.SolventLost, c.Solvent.Key, "litre", l.SolventKg/density*1e3, l.Cause)
	}
	for _, d := range o.Discards {
		use(steps.Waste, c.wasteItemWith(d.Class, o.Carrier), "kg", d.Kg, d.What)
	}
	switch o.Kind {
	case steps.Trap:
		still, _ := c.Still()
		uses = append(uses, c.wear(place, still, 1)...)
		uses = append(uses, c.wear(place, c.Catalog.Apparatus[o.Apparatus], 1)...)
		if o.Carrier != "" {
			use(steps.Agent, o.Carrier, "litre", o.CarrierKg/c.carrierDensity(o.Carrier)*1e3, "carrier charged; what is stripped off is mixed with solvent and not used again")
		}
	case steps.Forerun:
		still, _ := c.Still()
		uses = append(uses, c.wear(place, still, 1)...)
		if column, ok := c.Catalog.Apparatus[o.Apparatus]; ok {
			uses = append(uses, c.wear(place, column, 1)...)
		}
		if pumps := c.pieces("vacuum pump"); choice.kPa > 0 && len(pumps) > 0 {
			hours := o.Figure("still charges") * (o.Figure("heat-up, each charge") + o.Figure("drawing off, each charge"))
			use(steps.Energy, "electricity", "kwh", pumps[0].Power.SI*hours/1e3, fmt.Sprintf("vacuum pump, %.3g kPa", choice.kPa))
			uses = append(uses, c.wear(place, pumps[0], 1)...)
		}
	case steps.Salt:
		use(steps.Agent, o.Agent, "kg", o.AgentKg, "used once")
	case steps.Reactive:
		use(steps.Agent, o.Agent, "kg", o.AgentKg, "charged: need and surplus, used once")
		use(steps.Labour, "technician", "hour", c.practice("reactive-spent")/3600, "spent agent, by people trained for it")
		still, _ := c.Still()
		uses = append(uses, c.wear(place, still, 1)...)
	case steps.Soak:
		uses = append(uses, c.sieveUses(place, o, choice)...)
		vessel, count := c.vessel()
		uses = append(uses, c.wear(place, vessel, count)...)
	case steps.Column:
		uses = append(uses, c.sieveUses(place, o, choice)...)
		uses = append(uses, c.wear(place, c.Catalog.Apparatus[o.Apparatus], 1)...)
	case steps.Buy:
		use(steps.Purchase, c.Solvent.Key+"-dry", "litre", c.Lot.BatchM3*1e3, "the batch bought dry")
		if c.Lot.Reclaimed {
			use(steps.Waste, c.WasteItem(steps.SolventWaste), "kg", o.In.MassKg(), discardedLot)
		}
	}
	return uses
}

func energyBasis(kind steps.Kind) string {
	switch kind {
	case steps.Soak:
		return "stirrer power x hours"
	case steps.Column:
		return "pump power x hours"
	}
	return "heater power x hours at the heater"
}

// sieveUses is the sieve's share per use: its price over its lives, the oven
// run shared by the oven's load, the solvent-wet beads when they are discarded.
func (c *Case) sieveUses(place int, o steps.Outcome, choice choice) []StageUse {
	agent := c.Catalog.Agents[o.Agent]
	lots := float64(max(1, choice.lots))
	lives := lots
	if choice.after == Regenerate {
		lives *= agent.Lives.SI
	}
	uses := []StageUse{{place, steps.Use{
		Head: steps.Agent, Item: o.Agent, Unit: "kg", Quantity: o.AgentKg / lives,
		Basis: fmt.Sprintf("%.4g kg charged, used %.0f times", o.AgentKg, lives),
	}}}
	heldKg := 0.0
	for _, l := range o.Losses {
		heldKg += l.SolventKg * lots // each lot bears its share of what the charge holds
	}
	uses = append(uses, StageUse{place, steps.Use{
		Head: steps.Waste, Item: c.WasteItem(steps.WetSolidWaste), Unit: "kg", Quantity: (o.AgentKg + heldKg) / lives,
		Basis: "solvent-wet beads, discarded after their last use",
	}})
	if oven, runs := c.ovenRuns(o.AgentKg/lots, choice.after); runs > 0 {
		uses = append(uses,
			StageUse{place, steps.Use{
				Head: steps.Energy, Item: "electricity", Unit: "kwh", Quantity: runs * oven.Energy.SI / 3.6e6,
				Basis: fmt.Sprintf("activation: sieve is saved up for runs of %.3g kg and %.3g kWh", oven.Load.SI, oven.Energy.SI/3.6e6),
			}},
			StageUse{place, c.ovenLabour(runs, choice.after)})
		uses = append(uses, c.wear(place, oven, 1)...)
		if choice.after == Regenerate {
			uses = append(uses, c.flushUses(place, heldKg/lots)...)
		}
	}
	return uses
}

// ovenLabour is the work of oven runs; used beads are flushed before.
func (c *Case) ovenLabour(runs float64, after string) steps.Use {
	u := steps.Use{Head: steps.Labour, Item: "technician", Unit: "hour", Quantity: runs * c.practice("oven-attended") / 3600, Basis: ovenWork}
	if r := c.Regeneration(); after == Regenerate && r.Flushed {
		u.Quantity, u.Basis = u.Quantity*(1+r.WorkOfFlush), flushWork
	}
	return u
}

// ovenRuns is the share of oven runs that a charge of sieve needs. A sieve used
// straight from an opened tin needs none.
func (c *Case) ovenRuns(chargeKg float64, after string) (*catalog.Apparatus, float64) {
	if after == Discard && c.Lot.SieveHistoryK == 0 {
		return nil, 0
	}
	ovens := c.pieces("oven")
	if len(ovens) == 0 || chargeKg == 0 {
		return nil, 0
	}
	return ovens[0], chargeKg / ovens[0].Load.SI
}

// wear is a year's share of a piece of apparatus: breakage, and its price over
// its life unless it is owned already.
func (c *Case) wear(place int, a *catalog.Apparatus, count int) []StageUse {
	share, basis := 0.0, "owned; "
	if a.Breakage != nil {
		share = a.Breakage.SI
	}
	if !c.owned(a.Key) && a.Life != nil {
		share += secondsPerYear / a.Life.SI
		basis = fmt.Sprintf("bought, over %.3g years; ", a.Life.SI/secondsPerYear)
	}
	if share == 0 {
		return nil
	}
	return []StageUse{{place, steps.Use{
		Head: steps.Equipment, Item: a.Key, Unit: "each", Quantity: share * float64(count), PerYear: true,
		Basis: basis + "a year's share over the batches of the lot",
	}}}
}

// wasteItemWith is wasteItem where a carrier goes with the solvent.
func (c *Case) wasteItemWith(class steps.WasteClass, carrier string) string {
	if class == steps.SolventWaste && carrier != "" && c.Catalog.Solvents[carrier].Hazards.Halogenated {
		return "waste-halogenated-liquid"
	}
	return c.WasteItem(class)
}

// WasteItem is the price item for a class of waste of the lot.
func (c *Case) WasteItem(class steps.WasteClass) string {
	switch class {
	case steps.AqueousWaste:
		return "waste-aqueous"
	case steps.WetSolidWaste:
		return "waste-wet-solid"
	case steps.ReactiveWaste:
		return "waste-reactive"
	}
	if c.Solvent.Hazards.Halogenated {
		return "waste-halogenated-liquid"
	}
	return "waste-flammable-liquid"
}

// WholeRoute is what is paid once a batch: showing the result, and the feed.
func (c *Case) WholeRoute(run *Run) []StageUse {
	tests := c.tests(run.Route)
	injections := float64(c.Assay.Injections)
	hours := c.practice("karl-fischer-time") / 3600
	basis := "the product"
	if tests > 1 {
		basis = "the hand-over and the product"
	}
	uses := []StageUse{
		{0, steps.Use{Head: steps.Testing, Item: "karl-fischer", Unit: "test", Quantity: tests * injections, Basis: fmt.Sprintf("%.0f injections each of %s", injections, basis)}},
		{0, steps.Use{Head: steps.Testing, Item: "technician", Unit: "hour", Quantity: tests * hours, Basis: "sampling, test and log of " + basis}},
	}
	if run.Route[0].Kind != steps.Buy && !c.Lot.Reclaimed {
		uses = append(uses, StageUse{0, steps.Use{
			Head: steps.Purchase, Item: c.Solvent.Key, Unit: "litre", Quantity: run.LitresDelivered,
			Basis: "regular grade that was dried, litres delivered; what was lost is under solvent lost",
		}})
	}
	return uses
}

// tests is how often a route is tested: at the end, and where a chosen
// hand-over has to be met.
func (c *Case) tests(r Route) float64 {
	n := 1.0
	for _, s := range r[:len(r)-1] {
		if chosenOutlet(s.Kind) && s.Carrier == "" {
			n++
		}
	}
	return n
}

// emissions of the run in kg CO2e: energy, solvent bought (making) and lost
// (making its replacement, burning), a lot that is discarded (burning), agent.
// NaN where a factor is missing.
func (c *Case) emissions(run *Run) float64 {
	factor := func(key string) float64 {
		if v, ok := c.Catalog.Emissions[key]; ok {
			return v.SI
		}
		return math.NaN()
	}
	total := 0.0
	density := c.Mixture.Solvent.DensityKgPerM3.At(c.Job.Site.RoomK)
	for _, u := range run.Uses {
		switch {
		case u.Item == "electricity":
			total += u.Quantity * factor("electricity")
		case u.Head == steps.SolventLost:
			total += u.Quantity / 1e3 * density * (factor("making/"+c.Solvent.Key) + factor("burning/"+c.Solvent.Key))
		case u.Head == steps.Purchase:
			total += u.Quantity / 1e3 * density * factor("making/"+c.Solvent.Key)
		case u.Head == steps.Waste && u.Basis == discardedLot:
			total += u.Quantity * factor("burning/"+c.Solvent.Key)
		case u.Head == steps.Agent && u.Unit == "litre": // a carrier
			total += u.Quantity / 1e3 * c.carrierDensity(u.Item) * (factor("making/"+u.Item) + factor("burning/"+u.Item))
		case u.Head == steps.Agent:
			total += u.Quantity * factor("making/"+u.Item)
		}
	}
	return total
}
