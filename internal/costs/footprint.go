package costs

import (
	"fmt"
	"maps"
	"math"
	"slices"

	"parch/catalog"
	"parch/internal/steps"
)

// Footprint is what a batch emits and leaves behind.
type Footprint struct {
	EnergyKg, MakingKg, BurningKg, AgentKg float64            // CO2e, of energy, solvent and agent; NaN where a factor is missing
	WasteKg                                map[string]float64 // by item of waste
	Sources                                []string           // ids of the factors
}

// TotalKg is the CO2e of a batch.
func (f Footprint) TotalKg() float64 { return f.EnergyKg + f.MakingKg + f.BurningKg + f.AgentKg }

// FootprintOf adds up the emissions of a plan's batch: energy; making the solvent
// that is bought or made up; burning what is lost, and a lot that is given up for
// a dry grade; making the agent.
func FootprintOf(cat *catalog.Catalog, solvent *catalog.Solvent, roomK float64, plan Plan) Footprint {
	f := Footprint{WasteKg: map[string]float64{}}
	sources := map[string]bool{}
	factor := func(key string) float64 {
		v, ok := cat.Emissions[key]
		if !ok {
			return math.NaN()
		}
		sources[v.Source] = true
		return v.SI
	}
	kgPerLitre := solvent.Pure.DensityKgPerM3.At(roomK) / 1e3
	for _, use := range plan.Run.Uses {
		switch {
		case use.Quantity == 0:
		case use.Item == "electricity":
			f.EnergyKg += use.Quantity * factor("electricity")
		case use.Head == steps.SolventLost:
			f.MakingKg += use.Quantity * kgPerLitre * factor("making/"+solvent.Key)
			f.BurningKg += use.Quantity * kgPerLitre * factor("burning/"+solvent.Key)
		case use.Head == steps.Purchase:
			f.MakingKg += use.Quantity * kgPerLitre * factor("making/"+solvent.Key)
		case use.Head == steps.Agent && use.Unit == "litre": // a carrier
			kg := use.Quantity / 1e3 * cat.Solvents[use.Item].Pure.DensityKgPerM3.At(roomK)
			f.MakingKg += kg * factor("making/"+use.Item)
			f.BurningKg += kg * factor("burning/"+use.Item)
		case use.Head == steps.Agent:
			f.AgentKg += use.Quantity * factor("making/"+use.Item)
		case use.Head == steps.Waste && use.Unit == "kg":
			f.WasteKg[use.Item] += use.Quantity
			if at := use.Stage - 1; at >= 0 && at < len(plan.Run.Route) && plan.Run.Route[at].Kind == steps.Buy {
				f.BurningKg += use.Quantity * factor("burning/"+solvent.Key)
			}
		}
	}
	f.Sources = slices.Sorted(maps.Keys(sources))
	return f
}

// Text says where a batch's emissions come from.
func (f Footprint) Text() string {
	if math.IsNaN(f.TotalKg()) {
		return "what is not known, for want of an emission factor"
	}
	return fmt.Sprintf("%.3g kg CO2e: energy %.2g, making solvent %.2g, burning it %.2g, agent %.2g", f.TotalKg(), f.EnergyKg, f.MakingKg, f.BurningKg, f.AgentKg)
}
