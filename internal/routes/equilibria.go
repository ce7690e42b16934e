package routes

import (
	"sync"

	"parch/internal/memo"
	"parch/internal/steps"
)

// equilibria are what the boiling steps of a solvent rest on at one site. They do
// not depend on the lot and are worked out once.
type equilibria struct {
	lock      sync.Mutex
	traps     map[float64]*steps.TrapEquilibrium // by receiver temperature, K
	carriers  map[string]carrierEquilibrium      // by carrier
	foreruns  map[float64]forerunEquilibrium     // by pressure, Pa
	uptakes   memo.Map[string, *steps.Uptakes]   // at room temperature, by sorbent
	saturated *solubility
}

// solubility of water at room temperature.
type solubility struct {
	water  float64 // kg/kg
	partly bool    // there is a second layer at all
	err    error
}

func (c *Case) saturated() solubility {
	e := c.site
	e.lock.Lock()
	defer e.lock.Unlock()
	if e.saturated == nil {
		e.saturated = &solubility{}
		e.saturated.water, e.saturated.partly, e.saturated.err = c.Mixture.Solubility(c.Job.Site.RoomK)
	}
	return *e.saturated
}

func (e *equilibria) trap(tK float64, find func() (*steps.TrapEquilibrium, error)) (*steps.TrapEquilibrium, error) {
	e.lock.Lock()
	defer e.lock.Unlock()
	if known := e.traps[tK]; known != nil {
		return known, nil
	}
	trap, err := find()
	if err == nil {
		e.traps[tK] = trap
	}
	return trap, err
}

func (e *equilibria) carrier(key string, find func() carrierEquilibrium) carrierEquilibrium {
	e.lock.Lock()
	defer e.lock.Unlock()
	known, ok := e.carriers[key]
	if !ok {
		known = find()
		e.carriers[key] = known
	}
	return known
}

// forerunEquilibrium is what was found for a pressure.
type forerunEquilibrium struct {
	eq  *steps.ForerunEquilibrium
	err error
}

func (e *equilibria) forerunAt(pressurePa float64, find func() (*steps.ForerunEquilibrium, error)) (*steps.ForerunEquilibrium, error) {
	e.lock.Lock()
	defer e.lock.Unlock()
	known, ok := e.foreruns[pressurePa]
	if !ok {
		known.eq, known.err = find()
		e.foreruns[pressurePa] = known
	}
	return known.eq, known.err
}
