package costs

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/steps"
)

// leastCharge is the item whose price is the least that a collection costs.
const leastCharge = "waste-minimum"

// chillerYears is how long a chiller serves that is priced by the job but not in
// the catalog (from memory).
const chillerYears = 10

const secondsPerYear = 365.25 * 86400

// Arrangement is how a site pays where that is its own choice: what cools the
// condenser, how equipment is written off, how waste is collected.
type Arrangement struct {
	cooling     string
	heatShare   float64 // of the heater power that reaches the liquid
	gridKgPerKW float64 // kg CO2e per kWh
	annuity     bool
	interest    float64
	containerKg float64
	collections float64
	shared      float64 // batches a year of all lots
	priced      map[string]bool
	pieces      map[string]piece
	chillers    []chiller // the smallest first
}

type chiller struct {
	key             string
	coolingW, drawW float64
}

// piece is what a year of a piece of apparatus is worth, as shares of its price.
type piece struct {
	name                       string
	years                      float64
	breakage, writeOff, linear float64
	owned                      bool
}

// NewArrangement reads it from the job.
func NewArrangement(cat *catalog.Catalog, j *job.Job) *Arrangement {
	a := &Arrangement{
		cooling: j.Site.Cooling, heatShare: cat.Practice["heat-share"].SI, gridKgPerKW: cat.Emissions["electricity"].SI,
		annuity: j.WriteOff == job.Annuity, interest: j.Interest,
		containerKg: j.Site.WasteContainerKg, collections: j.Site.WasteCollectionsPerYear,
		priced: map[string]bool{}, pieces: map[string]piece{},
	}
	for _, p := range j.Prices {
		a.priced[p.Item] = true
	}
	for _, lot := range j.Lots {
		a.shared += lot.BatchesPerYear
	}
	for key, app := range cat.Apparatus {
		a.pieces[key] = a.piece(app, slices.Contains(j.Equipment, job.Equipment{Item: key, Owned: true}))
		if app.Kind == "chiller" && app.Cooling != nil && app.Power != nil {
			a.chillers = append(a.chillers, chiller{key, app.Cooling.SI, app.Power.SI})
		}
	}
	slices.SortFunc(a.chillers, func(x, y chiller) int {
		return cmp.Or(cmp.Compare(x.coolingW, y.coolingW), strings.Compare(x.key, y.key))
	})
	return a
}

func (a *Arrangement) piece(app *catalog.Apparatus, owned bool) piece {
	p := piece{name: app.Name, owned: owned}
	if app.Breakage != nil {
		p.breakage = app.Breakage.SI
	}
	if app.Life != nil && !owned {
		p.years = app.Life.SI / secondsPerYear
		p.linear = 1 / p.years
		p.writeOff = p.linear
		if a.annuity {
			p.writeOff = AnnuityFactor(a.interest, p.years)
		}
	}
	return p
}

// Apply changes the uses of a run to what the site pays for.
func (a *Arrangement) Apply(run *routes.Run, batchesPerYear float64) {
	uses := make([]routes.StageUse, 0, len(run.Uses)+3)
	wasteKg := 0.0
	for _, use := range run.Uses {
		switch use.Head {
		case steps.CoolingWater:
			uses = append(uses, a.cool(run, use)...)
			continue
		case steps.Equipment:
			use.Use = a.writeOff(use.Use)
		case steps.Waste:
			wasteKg += use.Quantity
		}
		uses = append(uses, use)
	}
	run.Uses = append(onceEach(uses), a.collect(wasteKg, batchesPerYear)...)
}

// onceEach charges a piece of equipment that serves several steps of a route once.
func onceEach(uses []routes.StageUse) []routes.StageUse {
	most := map[string]int{} // place of the largest share of each piece
	for i, use := range uses {
		if first, seen := most[use.Item]; use.Head == steps.Equipment && (!seen || use.Quantity > uses[first].Quantity) {
			most[use.Item] = i
		}
	}
	kept := make([]routes.StageUse, 0, len(uses))
	for i, use := range uses {
		if use.Head != steps.Equipment || most[use.Item] == i {
			kept = append(kept, use)
		}
	}
	return kept
}

// cool replaces the cooling water of a stage where a chiller or a loop takes the
// heat. That heat is what the heater brings into the liquid.
func (a *Arrangement) cool(run *routes.Run, water routes.StageUse) []routes.StageUse {
	if a.cooling != job.Loop && (a.cooling != job.Chiller || len(a.chillers) == 0) {
		return []routes.StageUse{water}
	}
	heatKWh := 0.0
	for _, use := range run.Uses {
		if use.Stage == water.Stage && use.Head == steps.Energy && use.Item == "electricity" {
			heatKWh += use.Quantity * a.heatShare
		}
	}
	run.CoolingWaterL -= water.Quantity * 1e3
	if at := water.Stage - 1; at >= 0 && at < len(run.Outcomes) {
		run.Outcomes[at].CoolingWaterL = 0
	}
	if a.cooling == job.Loop {
		water.Use = steps.Use{Head: steps.CoolingWater, Item: "loop-cooling", Unit: "kwh", Quantity: heatKWh,
			Basis: "heat to the cooling loop: heater energy x share that reaches the liquid"}
		return []routes.StageUse{water}
	}
	dutyW := a.dutyW(run, water.Stage, heatKWh)
	c, count := a.chillerFor(dutyW)
	draw := c.drawW / c.coolingW
	drawn := heatKWh * draw
	run.EnergyKWh += drawn
	run.CO2eKg += drawn * a.gridKgPerKW
	if at := water.Stage - 1; at >= 0 && at < len(run.Outcomes) {
		run.Outcomes[at].EnergyKWh += drawn
	}
	water.Use = steps.Use{Head: steps.CoolingWater, Item: "electricity", Unit: "kwh", Quantity: drawn,
		Basis: fmt.Sprintf("chiller: %.2g kWh a kWh of heat, the draw of a %.0f W unit over its cooling; heat = heater energy x share that reaches the liquid", draw, c.coolingW)}
	return append([]routes.StageUse{water}, a.chillerWear(water.Stage, c, count, dutyW)...)
}

// chillerFor is the smallest chiller of the catalog that takes a duty, or several
// of the largest where none does.
func (a *Arrangement) chillerFor(dutyW float64) (c chiller, count int) {
	for _, c := range a.chillers {
		if c.coolingW >= dutyW {
			return c, 1
		}
	}
	c = a.chillers[len(a.chillers)-1]
	return c, int(math.Ceil(dutyW / c.coolingW))
}

// chillerWear is the share of the chiller: the one that the job prices, or that of
// the catalog.
func (a *Arrangement) chillerWear(stage int, c chiller, count int, dutyW float64) []routes.StageUse {
	item, share := "chiller", a.chillerShare()
	basis := fmt.Sprintf("over %d years (from memory)", chillerYears)
	if !a.priced["chiller"] {
		p := a.pieces[c.key]
		item, share = c.key, float64(count)*(p.breakage+p.writeOff)
		basis = "owned"
		if !p.owned {
			basis = fmt.Sprintf("%d bought for a duty of %.0f W, over %.3g years", count, dutyW, p.years)
		}
	}
	if share == 0 {
		return nil
	}
	return []routes.StageUse{{Stage: stage, Use: steps.Use{Head: steps.Equipment, Item: item, Unit: "each", Quantity: share, PerYear: true,
		Basis: basis + "; a year's share over the batches of the lot"}}}
}

// dutyW is the heat that a stage hands to its condenser while it boils, or its
// mean where the step does not say.
func (a *Arrangement) dutyW(run *routes.Run, stage int, heatKWh float64) float64 {
	at := stage - 1
	if at < 0 || at >= len(run.Outcomes) {
		return 0
	}
	o := &run.Outcomes[at]
	if o.Condenser.DutyW == 0 && o.HoursTotal > 0 {
		return heatKWh * 1e3 / o.HoursTotal
	}
	return o.Condenser.DutyW
}

func (a *Arrangement) chillerShare() float64 {
	if a.annuity {
		return AnnuityFactor(a.interest, chillerYears)
	}
	return 1.0 / chillerYears
}

// writeOff turns the straight line of a piece of equipment into an annuity where
// the job asks for it. Breakage stays.
func (a *Arrangement) writeOff(use steps.Use) steps.Use {
	p, known := a.pieces[use.Item]
	if !a.annuity || !known || p.owned || p.linear == 0 {
		return use
	}
	use.Quantity *= (p.breakage + p.writeOff) / (p.breakage + p.linear)
	use.Basis = fmt.Sprintf("bought, annuity over %.3g years at %.3g %%; a year's share over the batches of the lot", p.years, a.interest*100)
	return use
}

// collect adds what the job prices around waste: containers and the least charge
// of a collection, shared by the batches of all lots.
func (a *Arrangement) collect(wasteKg, batchesPerYear float64) []routes.StageUse {
	var uses []routes.StageUse
	if a.priced["waste-container"] && wasteKg > 0 && a.containerKg > 0 {
		uses = append(uses, routes.StageUse{Use: steps.Use{Head: steps.Waste, Item: "waste-container", Unit: "each", Quantity: wasteKg / a.containerKg,
			Basis: fmt.Sprintf("share of a container, which is full at %.4g kg", a.containerKg)}})
	}
	if a.priced[leastCharge] && a.collections > 0 && a.shared > 0 {
		uses = append(uses, routes.StageUse{Use: steps.Use{Head: steps.Waste, Item: leastCharge, Unit: "each", Quantity: a.collections * batchesPerYear / a.shared, PerYear: true,
			Basis: fmt.Sprintf("what %.3g collections a year are charged at least, shared by the batches of all lots, beyond the other lines of waste", a.collections)}})
	}
	return uses
}

// AnnuityFactor is the yearly payment, at the end of each year, that pays off a
// price of 1 over some years:
//
//	a = i / (1 - (1 + i)^-n)
//
// with the interest i as a share per year; at no interest 1/n.
func AnnuityFactor(interest, years float64) float64 {
	if interest == 0 {
		return 1 / years
	}
	return interest / -math.Expm1(-years*math.Log1p(interest))
}
