package costs

import (
	"parch/catalog"
	"parch/internal/job"
)

// Usual doses, kg of agent per litre of solvent (common practice: 100 g of salt or
// sieve, some grams of hydride).
const (
	usualDose         = 0.1
	usualReactiveDose = 0.005
	usualLoss         = 0.1 // litres made up per litre dried
)

// LikelyNeed guesses what a year of the job's lots takes of each item, by usual
// doses, so that the search begins with packs that a need will probably justify.
func LikelyNeed(cat *catalog.Catalog, j *job.Job) map[string]float64 {
	need := map[string]float64{}
	for _, lot := range j.Lots {
		litres := lot.BatchM3 * 1e3 * lot.BatchesPerYear
		need[lot.Solvent+"-dry"] += litres
		need[lot.Solvent] += litres * usualLoss
		if !lot.Reclaimed {
			need[lot.Solvent] += litres
		}
		for key, agent := range cat.Agents {
			dose := usualDose
			if agent.Kind == "reactive" {
				dose = usualReactiveDose
			}
			year := dose * litres
			if agent.Lives != nil && agent.Lives.SI > 1 {
				year = max(year/agent.Lives.SI, dose*lot.BatchM3*1e3)
			}
			need[key] += year
		}
	}
	return need
}
