package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// RunReactive boils a lot over a reactive agent and distils it off. The agent is
// charged over its need; the heel stays with it and goes as waste of its class.
func RunReactive(m *thermo.Mixture, feed Lot, agent ReactiveAgent, found Measured, rig ReactiveRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) { return runReactive(m, lot, agent, found, rig) })
}

func runReactive(m *thermo.Mixture, feed Lot, agent ReactiveAgent, found Measured, rig ReactiveRig) (Outcome, error) {
	if err := agent.check(feed, m.Solvent.Called(), rig); err != nil {
		return Outcome{}, err
	}
	boilK, err := thermo.Boil(m.Solvent, rig.PressurePa)
	if err != nil {
		return Outcome{}, err
	}
	if rig.HighestPotK > 0 && boilK > rig.HighestPotK {
		return Outcome{}, fmt.Errorf("%w: the pot reaches %.1f °C at %.4g kPa, the limit is %.1f °C", ErrNoReactive, boilK-273.15, rig.PressurePa/1e3, rig.HighestPotK-273.15)
	}
	left, err := agent.residual(m, feed, found, rig)
	if err != nil {
		return Outcome{}, err
	}
	c := agent.charge(m, feed.WaterKg, LotVolume(m, feed, rig.RoomK), rig)
	if c.boundSolventKg > 0.5*feed.SolventKg {
		return Outcome{}, fmt.Errorf("%w: %.3g kg of %s would bind more than half the lot", ErrNoSense, c.chargedKg, agent.called())
	}
	d := distilling{m: m, rig: rig, feed: feed, boilK: boilK, bound: c.boundSolventKg}
	d.heat()
	if err := d.boils(); err != nil {
		return Outcome{}, err
	}
	o := d.outcome(left.water, c, agent.wasteClass())
	o.Agent = agent.Key
	o.Floor = left.water
	o.Why, o.WhyText = left.why, left.text
	o.RuledBy = left.text
	o.Figures = d.figures(agent, c, left)
	o.Warnings = reactiveWarnings(agent, c, left)
	return o, nil
}

// distilling is a lot in the still over its agent.
type distilling struct {
	m            *thermo.Mixture
	rig          ReactiveRig
	feed         Lot
	boilK, bound float64

	heelKg, vapourKg          float64 // solvent
	heatUpJ, distilJ, distilS float64 // of the whole lot
	heatUpS, refluxS, heatedS float64 // the charges one after the other
	refluxJ, heaterJ          float64
}

func (d *distilling) heelShare() float64 { return math.Max(leastHeel, d.rig.HeelShare) }

// heat runs the lot through: up to the boil, reflux, and the share that is drawn
// off boiled over.
func (d *distilling) heat() {
	charges, netW := float64(d.rig.Charges), d.rig.HeaterW*d.rig.HeatShare
	mol := d.feed.SolventKg / d.m.Solvent.MolarMassKgPerMol
	waterMol := d.feed.WaterKg / d.m.Water.MolarMassKgPerMol
	mid := (d.boilK + d.rig.RoomK) / 2
	d.heatUpJ = (mol*d.m.Solvent.HeatCapacityJPerMolK.At(mid) + waterMol*d.m.Water.HeatCapacityJPerMolK.At(mid)) * math.Max(0, d.boilK-d.rig.RoomK)
	d.heelKg = d.heelShare() * (d.feed.SolventKg - d.bound)
	over := (d.feed.SolventKg - d.bound - d.heelKg) / d.m.Solvent.MolarMassKgPerMol
	d.distilJ = over * d.m.Solvent.HeatOfVaporizationJ.At(d.boilK)
	d.heatUpS, d.distilS = d.heatUpJ/netW, d.distilJ/netW
	d.refluxS = d.rig.RefluxS * charges
	d.refluxJ = netW * d.refluxS
	d.heatedS = d.heatUpS + d.refluxS + d.distilS
	d.heaterJ = d.rig.HeaterW * d.heatedS
	d.vapourKg = d.feed.SolventKg * d.rig.VapourLossPerDay * (d.refluxS + d.distilS) / charges / secondsPerDay
	d.vapourKg = math.Min(d.vapourKg, d.feed.SolventKg-d.bound-d.heelKg)
}

// boils refuses a pot that boils in the room, and a heater that cannot keep it at the
// boil or gives more vapour than a condenser takes up.
func (d *distilling) boils() error {
	if err := boilsInTheRoom(d.m.Solvent.Called(), d.boilK, d.rig.RoomK, d.rig.PressurePa, d.m.Solvent.VapourPressurePa.At); err != nil {
		return fmt.Errorf("%w: %w", ErrNoReactive, err)
	}
	charges := float64(d.rig.Charges)
	return checkHeater(d.rig.HeaterW, d.rig.HeatShare, d.rig.LongestHeatUpS,
		hotCharge{d.heatUpJ / charges, LotVolume(d.m, d.feed, d.rig.RoomK) / charges, d.boilK - d.rig.RoomK})
}

func (d *distilling) outcome(water float64, c charge, class WasteClass) Outcome {
	charges := float64(d.rig.Charges)
	keptKg := d.feed.SolventKg - d.bound - d.heelKg - d.vapourKg
	keptWaterKg := keptKg * water / (1 - water)
	reactedKg := d.feed.WaterKg - keptWaterKg
	o := Outcome{
		Kind: Reactive, In: d.feed,
		Out:           Lot{SolventKg: keptKg, WaterKg: keptWaterKg, TempK: d.rig.RoomK},
		HoursTotal:    (d.heatedS + charges*d.rig.SetUpS) / secondsPerHour,
		HoursAttended: (d.rig.AttendedShare*d.heatedS + charges*d.rig.SetUpS) / secondsPerHour,
		EnergyKWh:     d.heaterJ / joulePerKWh,
		CoolingWaterL: d.rig.CoolingFlowM3S * (d.refluxS + d.distilS) * litrePerM3,
		AgentKg:       c.chargedKg,
		Losses: []Loss{
			{"heel left with the agent", d.heelKg},
			{"vapour past the condenser", d.vapourKg},
		},
		Discards: []Discard{{class, "spent and surplus agent under its heel", d.heelKg + d.bound + c.chargedKg + reactedKg}},
	}
	if d.bound > 0 {
		o.Losses = append(o.Losses, Loss{"bound by surplus agent", d.bound})
	}
	for _, p := range []struct{ s, water float64 }{
		{0, d.feed.Water()}, {d.heatUpS / charges, d.feed.Water()},
		{(d.heatUpS + d.refluxS) / charges, water}, {d.heatedS / charges, water},
	} {
		o.Course = append(o.Course, Point{Hours: p.s / secondsPerHour, Water: p.water})
	}
	o.account(d.m.Solvent, d.rig.RoomK)
	o.Balance.WaterRemovedKg = reactedKg
	o.Balance.HeatInJ = d.rig.HeatShare * d.heaterJ
	o.Balance.HeatUsedJ = d.heatUpJ + d.refluxJ + d.distilJ
	return o
}

func (d *distilling) figures(agent ReactiveAgent, c charge, left residual) []Figure {
	charges := float64(d.rig.Charges)
	figures := []Figure{
		{"agent needed", "g", c.needKg * 1e3},
		{"agent charged", "g", c.chargedKg * 1e3},
		{"surplus", "g", c.surplusKg * 1e3},
		{"charges", "", charges},
		{"heat-up, each charge", "h", d.heatUpS / charges / secondsPerHour},
		{"reflux, each charge", "h", d.rig.RefluxS / secondsPerHour},
		{"distillation, each charge", "h", d.distilS / charges / secondsPerHour},
		{"heel", "%", 100 * d.heelShare()},
		{"residual, low", "mg/kg", left.low * mgPerKg},
		{"residual, high", "mg/kg", left.high * mgPerKg},
	}
	if agent.HydrogenMolPerMol == 0 {
		return figures
	}
	return append(figures,
		Figure{"hydrogen while drying", "L", c.hydrogenNowM3 * litrePerM3},
		Figure{"hydrogen held by the surplus, set free at disposal", "L", c.hydrogenLater * litrePerM3},
		Figure{"hydrogen of a gram of agent", "L", agent.HydrogenM3PerKg(hydrogenK)})
}

func reactiveWarnings(agent ReactiveAgent, c charge, left residual) []string {
	w := []string{fmt.Sprintf("the spent agent is %s waste: hand it to the site's trained waste service under its own rules", agent.wasteClass())}
	if c.hydrogenNowM3 > 0 {
		w = append([]string{fmt.Sprintf("up to %s of hydrogen come off while drying: the vessel is vented to a safe place, never sealed; no ignition source", quantity.FormatVolume(c.hydrogenNowM3))}, w...)
	}
	if c.surplusKg > c.needKg {
		w = append(w, fmt.Sprintf("%.0f %% of the %s charged is surplus and becomes waste unspent", 100*c.surplusKg/c.chargedKg, agent.called()))
	}
	if left.unmeasured != "" {
		w = append(w, left.unmeasured)
	}
	return w
}
