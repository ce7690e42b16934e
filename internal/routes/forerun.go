package routes

import (
	"fmt"
	"math"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/steps"
)

// wastefulForerun is the share of a lot beyond which drawing off is no way to dry
// it (common practice, no source).
const wastefulForerun = 0.5

// runForerun draws the water off without return, over the column of the settings.
func (c *Case) runForerun(lot steps.Lot, goal float64, choice choice) (steps.Outcome, error) {
	eq, err := c.forerunAt(choice.kPa)
	if err != nil {
		return steps.Outcome{}, err
	}
	rig, rules := c.forerunRig(choice.stages), c.forerunRules(choice)
	o, err := steps.RunForerun(eq, lot, goal, rig, rules)
	miss := c.missBelowAtmosphere(eq.PressurePa)
	if err != nil && miss != "" {
		return o, fmt.Errorf("%w; %s", err, miss)
	}
	if err != nil {
		return o, err
	}
	if miss != "" {
		o.Warnings = append(o.Warnings, miss)
	}
	if choice.kPa > 0 {
		o.Warnings = append(o.Warnings, fmt.Sprintf("drawn over at %.3g kPa: low enough for the pot, and what distils over condenses at %.3g K or more over the cooling water (common practice)",
			choice.kPa, c.practice("condenser-difference")))
	}
	if column := c.columnOf(choice.stages); column != nil {
		o.Apparatus = column.Key
	}
	if lost := o.Balance.SolventRemovedKg / lot.SolventKg; lost > wastefulForerun {
		does := "take %.0f %% of the lot with it"
		if o.Overhead {
			does = "leave %.0f %% of the lot in the pot"
		}
		return o, wasteful{lost, fmt.Errorf("a forerun over %d stages would "+does, choice.stages, 100*lost)}
	}
	return o, nil
}

// missBelowAtmosphere tells where the pair's model is known to be off, at pressures far
// below the one atmosphere that azeotropes are fitted at; "" elsewhere.
func (c *Case) missBelowAtmosphere(pressurePa float64) string {
	const farBelowPa = 50e3
	if c.Solvent.Water.KnownMiss == "" || pressurePa > farBelowPa {
		return ""
	}
	return "known miss of the model of water in " + c.Solvent.Name + ": " + c.Solvent.Water.KnownMiss
}

func (c *Case) forerunRig(stages int) steps.ForerunRig {
	still, charges := c.Still()
	rig := steps.ForerunRig{
		HeaterW: c.heaterW(still), HeatShare: c.practice("heat-share"), RoomK: c.Job.Site.RoomK, Coolant: c.coolant(), Charges: charges, Stages: stages,
	}
	if stages > 0 {
		rig.RefluxRatio = c.practice("forerun-reflux")
	}
	if c.Solvent.HottestPot != nil {
		rig.HighestPotK = c.Solvent.HottestPot.SI
	}
	return rig
}

// forerunAt is the equilibrium of a forerun at a pressure (kPa; 0: the site's).
func (c *Case) forerunAt(kPa float64) (*steps.ForerunEquilibrium, error) {
	pressurePa := c.Job.Site.PressurePa
	if kPa > 0 {
		pressurePa = kPa * 1e3
	}
	return c.site.forerunAt(pressurePa, func() (*steps.ForerunEquilibrium, error) {
		return steps.NewForerunEquilibrium(c.Mixture, pressurePa)
	})
}

// reducedKPa are the pressures at which a high boiler is drawn over. At 3 kPa water
// still condenses on cooling water of 10 °C and dimethyl sulfoxide boils under 90 °C.
var reducedKPa = []float64{20, 10, 5, 3, 2, 1}

// ForerunPressures (kPa; 0: the site's) are those that a forerun of the lot may be
// drawn at: the site's for most solvents; for one whose pot may not become as hot as
// it boils there, those of reducedKPa at which it stays below its limit, boils above
// the room and its vapour condenses.
func (c *Case) ForerunPressures() []float64 {
	limit := c.Solvent.HottestPot
	if eq, err := c.forerunAt(0); limit == nil || err != nil || eq.DryK <= limit.SI {
		return []float64{0}
	}
	var all []float64
	for _, kPa := range reducedKPa {
		eq, err := c.forerunAt(kPa)
		if err == nil && steps.CheckForerun(eq, c.Feed, c.forerunRig(0), c.forerunRules(choice{})) == nil {
			all = append(all, kPa)
		}
	}
	if len(all) == 0 {
		return []float64{0} // refused with its reason
	}
	return all
}

// Overhead reports whether a forerun of the lot has the distillate for its product.
func (c *Case) Overhead() bool {
	eq, err := c.forerunAt(0)
	return err == nil && eq.Overhead(c.Feed)
}

// coolant is the cooling water and what a condenser needs of it.
func (c *Case) coolant() steps.Coolant {
	return steps.Coolant{InK: c.coolantK(), DifferenceK: c.practice("condenser-difference")}
}

// coolantK is the temperature of the cooling water: of the tap, or as cold as a
// chiller or a loop keeps the receiver.
func (c *Case) coolantK() float64 {
	if c.Job.Site.Cooling == job.Tap {
		return math.Min(c.practice("coolant-tap"), c.Job.Site.ReceiverK)
	}
	return c.Job.Site.ReceiverK
}

func (c *Case) forerunRules(choice choice) steps.ForerunRules {
	rules := steps.ForerunRules{
		HeelShare: c.practice("forerun-heel"), LowestOutlet: c.practice("trap-outlet-minimum"),
		SetUpS: c.practice("forerun-attended"), AttendedShare: c.practice("trap-attended-share"), ShutDownS: c.practice("trap-shutdown"),
		VapourLossPerDay: c.practice("vapour-loss-per-day"), CoolingFlowM3S: c.practice("cooling-flow"), CoolingRiseK: c.practice("cooling-rise"),
		LongestHeatUpS: c.practice("heat-up-maximum"),
	}
	if choice.stages > 0 {
		rules.SettleColumnS = c.practice("forerun-column")
	}
	if choice.hot {
		rules.SetUpS = c.practice("draining-time") // the trap is turned off and runs out
	}
	return rules
}

// ColumnStages are the columns that a forerun may be drawn over: a simple still,
// and the packed ones of the catalog.
func (c *Case) ColumnStages() []int {
	stages := []int{0}
	for _, a := range c.pieces("fractionating column") {
		stages = append(stages, int(a.Stages.SI))
	}
	return stages
}

func (c *Case) columnOf(stages int) *catalog.Apparatus {
	for _, a := range c.pieces("fractionating column") {
		if stages > 0 && int(a.Stages.SI) == stages {
			return a
		}
	}
	return nil
}
