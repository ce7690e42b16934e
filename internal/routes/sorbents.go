package routes

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"parch/catalog"
	"parch/internal/quantity"
	"parch/internal/steps"
)

func (c *Case) runSoak(lot steps.Lot, goal float64, agent string, choice choice) (steps.Outcome, error) {
	if err := c.fitForBeads(lot, goal, choice.after); err != nil {
		return steps.Outcome{}, err
	}
	if choice.charges > 1 && choice.lots > 1 {
		return steps.Outcome{}, refusal{errors.New("several charges in sequence are not used again as they are")}
	}
	o, err := steps.SeriesFor(c.Mixture, lot, goal, choice.soakHours*3600, choice.charges, c.sorbent(agent, choice.after), c.soakRigOf(choice))
	if err == nil {
		o.EnergyKWh += c.stirrerKWh(choice)
	}
	return o, err
}

// stirrerKWh is what stirring a soak takes, with all its charges.
func (c *Case) stirrerKWh(choice choice) float64 {
	if !choice.stirred {
		return 0
	}
	_, vessels := c.vessel()
	return float64(vessels) * c.practice("stirrer-power") * float64(max(1, choice.charges)) * choice.soakHours / 1e3
}

// soakRigOf is the vessel of a soak of a route.
func (c *Case) soakRigOf(choice choice) steps.SoakRig {
	rig := c.soakRig(choice.stirred)
	rig.Lots, rig.Outline = choice.lots, c.outline
	return rig
}

// fitForBeads refuses a sieve on a lot that is at its goal already, and on one in
// which water stands as a layer of its own: no isotherm goes beyond saturation,
// and beads that liquid water wets grow hot and crack (common practice, no source).
// What was read as dissolved is taken for dissolved. Nor are beads regenerated that
// must not see the oven.
func (c *Case) fitForBeads(lot steps.Lot, goal float64, after string) error {
	if reason, _ := c.RefuseOven(); after == Regenerate && reason != "" {
		return refusal{errors.New(reason)}
	}
	switch {
	case lot.Water() <= goal:
		return refusal{fmt.Errorf("%s is at or below the %s asked for: nothing is left for a sieve", quantity.FormatWater(lot.Water()), quantity.FormatWater(goal))}
	case lot.Water() > c.MostForBeads()*(1+1e-6):
		return refusal{fmt.Errorf("free water never goes over beads: the lot holds %s, %s dissolves %s; draw the water off first", quantity.FormatWater(lot.Water()), c.Solvent.Name, quantity.FormatWater(c.saturated().water))}
	}
	return nil
}

// Saturation is the water (kg/kg) that the solvent holds at room temperature, 1
// where it takes up any amount.
func (c *Case) Saturation() float64 {
	if s := c.saturated(); s.err == nil && s.partly {
		return s.water
	}
	return 1
}

// MostForBeads is the water (kg/kg) above which a lot holds free water.
func (c *Case) MostForBeads() float64 {
	if s := c.saturated(); s.err == nil && s.partly {
		return math.Max(leastExcess*s.water, c.Lot.Water)
	}
	return math.Inf(1)
}

func (c *Case) soakRig(stirred bool) steps.SoakRig {
	_, vessels := c.vessel()
	rig := steps.SoakRig{
		TempK: c.Job.Site.RoomK, DepthM: c.depth(vessels), Vessels: vessels,
		StillRatePerS: c.Solvent.StillRate.SI, RateDepthM: c.practice("still-rate-depth"),
		AttendedS: c.practice("soak-attended"), WaterMolarM3: c.practice("water-molar-volume"),
		Stirred: stirred, RelativeVelocityMS: c.practice("stir-velocity"),
	}
	if c.MakesWater() {
		rig.CondensationPerS = c.practice("sieve-ketone-water") / 3600
	}
	return rig
}

// MakesWater reports whether the solvent condenses on a sorbent, so that a longer stand
// may leave it wetter.
func (c *Case) MakesWater() bool { return c.Solvent.Class == "ketone" }

// sorbent is a sieve of the catalog with the lot's history. A sieve that is
// used again is sized for its last use.
func (c *Case) sorbent(agent, after string) steps.Sorbent {
	a := c.Catalog.Agents[agent]
	share := 1.0
	if after == Regenerate {
		share = math.Pow(1-a.Fade.SI, a.Lives.SI-1)
	}
	s := steps.Sorbent{
		Key: agent, Name: a.Plain(), Loading: a.Isotherm.LoadingKgPerKg, DataFromPa: a.Isotherm.LowestPa,
		ResidualKgPerKg: c.ResidualOn(agent), CapacityShare: share * c.loadingFactor(agent), Unfit: c.unfit(a),
		BeadDiameterM: a.BeadDiameter.SI, BeadKgPerM3: a.BeadDensity.SI, Porosity: a.BeadPorosity.SI, Tortuosity: a.BeadTortuosity.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MinDoseKgPerM3: c.practice("dose-minimum"), MaxDoseKgPerM3: a.MaxDose.SI,
	}
	if pores, ok := a.PoreSpace[c.Solvent.Key]; ok {
		s.PoreShare = pores.SI
	}
	if a.HeatOfUptake != nil && a.HeatCapacity != nil {
		s.HeatOfSorptionJPerMol, s.HeatCapacityJPerKgK = a.HeatOfUptake.SI, a.HeatCapacity.SI
	}
	return s
}

// Borrows reports whether what a sorbent holds is taken over from zeolites with the
// lot's history, because nothing is known of its own.
func (c *Case) Borrows(agent string) bool {
	a := c.Catalog.Agents[agent]
	return a != nil && a.Kind == "oxide" && !c.Lot.ResidualStated
}

// OxideHistory is the operating fact for what other sorbents hold by what zeolites do.
const OxideHistory = "oxide-history"

// ResidualOn is the water (kg/kg) on a sorbent after the lot's history.
func (c *Case) ResidualOn(agent string) float64 { return c.Lot.ResidualLoading * c.HistoryShare(agent) }

// HistoryShare is what a sorbent holds after the lot's history over
// Lot.ResidualLoading.
func (c *Case) HistoryShare(agent string) float64 {
	if c.Borrows(agent) {
		return c.Lot.HistoryShare(agent) * c.practice(OxideHistory)
	}
	return c.Lot.HistoryShare(agent)
}

// alcohols take the surface of oxides: measured loadings lie a factor of 2 to 67
// under the isotherm.
var alcohols = []string{"small-alcohol", "alcohol"}

func (c *Case) unfit(a *catalog.Agent) string {
	if a.Kind == "oxide" && slices.Contains(alcohols, c.Solvent.Class) {
		return fmt.Sprintf("%s takes the surface of %s; its isotherm does not hold there", c.Solvent.Name, a.Name)
	}
	return ""
}

// runColumn takes the narrowest column that reaches the goal, or the widest.
func (c *Case) runColumn(lot steps.Lot, goal float64, agent string, choice choice) (steps.Outcome, error) {
	if err := c.fitForBeads(lot, goal, choice.after); err != nil {
		return steps.Outcome{}, err
	}
	var o steps.Outcome
	for _, column := range c.columns() {
		var err error
		if o, err = steps.ColumnFor(c.Mixture, lot, goal, c.sorbent(agent, choice.after), c.columnRig(column)); err != nil {
			return o, err
		}
		o.Apparatus = column.Key
		if o.Why == steps.AtTarget {
			break
		}
	}
	return o, nil
}

// columns of beads, the narrowest first.
func (c *Case) columns() []*catalog.Apparatus {
	all := c.pieces("column")
	slices.SortStableFunc(all, func(a, b *catalog.Apparatus) int {
		return int(math.Copysign(1, a.Diameter.SI-b.Diameter.SI))
	})
	return all
}

func (c *Case) columnRig(a *catalog.Apparatus) steps.ColumnRig {
	return steps.ColumnRig{
		TempK: c.Job.Site.RoomK, DiameterM: a.Diameter.SI, LongestM: a.Length.SI, VoidShare: c.practice("bed-void"),
		FlowM3S:           c.practice("column-velocity") * math.Pi / 4 * a.Diameter.SI * a.Diameter.SI,
		RecycleBedVolumes: c.practice("column-recycle"), PumpW: c.practice("pump-power"),
		SetUpS: c.practice("column-setup"), AttendedShare: c.practice("column-attended-share"), WaterMolarM3: c.practice("water-molar-volume"),
	}
}
