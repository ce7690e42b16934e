package routes

import (
	"fmt"
	"math"

	"parch/catalog"
	"parch/internal/assay"
	"parch/internal/job"
	"parch/internal/memo"
	"parch/internal/mixture"
	"parch/internal/quantity"
	"parch/internal/steps"
	"parch/internal/thermo"
)

// Case is one lot at one site: everything a route needs to run.
type Case struct {
	Job     *job.Job
	Lot     job.Lot
	Catalog *catalog.Catalog
	Solvent *catalog.Solvent
	Mixture *thermo.Mixture
	Feed    steps.Lot // dissolved and free water together, at room temperature
	Limit   assay.Limit
	Assay   assay.Method
	Trap    *steps.TrapEquilibrium // at the coldest receiver in reach; nil where no trap works
	NoTrap  error                  // why

	site  *equilibria                // the same for all lots of the solvent
	known *memo.Map[stepKey, result] // nil: nothing is remembered
	drawn *Drawn                     // nil: everything as it was planned
	plan  *Run                       // whose doses are weighed out; nil: doses follow from the goal

	outline bool // soaks are given in outline
}

// NewCase prepares a lot.
func NewCase(j *job.Job, lot job.Lot, c *catalog.Catalog) (*Case, error) {
	solvent, ok := c.Solvents[lot.Solvent]
	if !ok || solvent.Water == nil {
		return nil, fmt.Errorf("%s: no data on water in %s", lot.Name, lot.Solvent)
	}
	m := mixture.Pair(c, solvent)
	k := c.Assays[j.Site.KarlFischer]
	method := assay.Method{Name: k.Key, Repeatability: k.Repeatability.SI, DetectionLimit: k.DetectionLimit.SI, Injections: k.Injections}
	trap, noTrap := steps.NewTrapEquilibrium(m, j.Site.ReceiverK, j.Site.PressurePa)
	return (&Case{
		Job: j, Catalog: c, Solvent: solvent, Mixture: m, Assay: method, Trap: trap, NoTrap: noTrap,
		site: &equilibria{traps: map[float64]*steps.TrapEquilibrium{}, carriers: map[string]carrierEquilibrium{}, foreruns: map[float64]forerunEquilibrium{}},
	}).With(lot), nil
}

// With is the case of another lot of the same solvent at the same site.
func (c *Case) With(lot job.Lot) *Case {
	k := *c
	k.Lot, k.Feed, k.Limit = lot, feed(c.Mixture, lot, c.Job.Site.RoomK), assay.Accept(lot.Target, c.Assay)
	k.known = &memo.Map[stepKey, result]{}
	if from := k.AcceptFrom(); from > 0 && from >= k.Limit.AcceptAt {
		k.Limit.CannotShow = fmt.Sprintf("cannot be shown: between %s and %s no reading is sure to lie in the band, each end being known to %s",
			quantity.FormatWater(lot.NotBelow), quantity.FormatWater(lot.Target), quantity.FormatWater(k.Limit.Uncertainty))
		k.Limit.AcceptAt = math.NaN()
	}
	return &k
}

// Forget drops the outcomes that are remembered for a search.
func (c *Case) Forget() { c.known.Forget() }

// feed is the lot as delivered. The batch volume is the solvent with its
// dissolved water; free water stands beside it.
func feed(m *thermo.Mixture, lot job.Lot, roomK float64) steps.Lot {
	return delivered(&lot, lot.Water, m.Water.DensityKgPerM3.At(roomK), m.Solvent.DensityKgPerM3.At(roomK), roomK)
}

// delivered is a lot with w kg/kg of dissolved water.
func delivered(lot *job.Lot, w, waterKgPerM3, solventKgPerM3, roomK float64) steps.Lot {
	mass := lot.BatchM3 / (w/waterKgPerM3 + (1-w)/solventKgPerM3)
	free := lot.FreeWaterM3 * waterKgPerM3
	return steps.Lot{SolventKg: mass * (1 - w), WaterKg: mass*w + free, TempK: roomK}
}

// practice returns an operating fact in SI units. The catalog's own test sees
// to it that every key asked for here exists.
func (c *Case) practice(key string) float64 { return c.Catalog.Practice[key].SI }

// Dry reports whether the lot passes as it stands.
func (c *Case) Dry() bool {
	return c.Lot.FreeWaterM3 == 0 && c.Feed.Water() <= c.Limit.AcceptAt && c.Feed.Water() >= c.AcceptFrom()
}

// Goal is what the last step of a route must reach: the acceptance limit, or
// the target itself where the limit cannot be shown.
func (c *Case) Goal() float64 {
	if math.IsNaN(c.Limit.AcceptAt) {
		return c.Lot.Target
	}
	return c.Limit.AcceptAt
}
