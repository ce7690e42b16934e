// Package routes builds the chains of steps that could dry a lot, refuses the
// dangerous and the pointless ones with the reason, and runs one with given
// settings.
package routes

import (
	"errors"
	"fmt"
	"strings"

	"parch/internal/steps"
)

// Stage is one step of a route.
type Stage struct {
	Kind  steps.Kind
	Agent string
}

// Route is a chain of stages.
type Route []Stage

// ID joins the stages with "+", an agent after a colon: "trap+soak:sieve-3a".
func (r Route) ID() string {
	parts := make([]string, len(r))
	for i, s := range r {
		parts[i] = string(s.Kind)
		if s.Agent != "" {
			parts[i] += ":" + s.Agent
		}
	}
	return strings.Join(parts, "+")
}

// Settings are the free choices of a route. Doses follow from them.
type Settings struct {
	HandOverMgPerKg []float64 `json:"hand_over_mg_per_kg"`  // water after each stage but the last
	SoakHours       []float64 `json:"soak_hours,omitempty"` // one for each soak
	Sieve           []string  `json:"sieve,omitempty"`      // "regenerate" or "discard", one for each soak
}

// ErrRefused means that the physics refuses a step of a route on this lot.
var ErrRefused = errors.New("refused")

// ErrSettings means that settings do not belong to a route.
var ErrSettings = errors.New("settings do not fit")

// Fit reports settings that do not belong to the route.
func (s Settings) Fit(r Route) error {
	soaks := 0
	for _, stage := range r {
		if stage.Kind == steps.Soak {
			soaks++
		}
	}
	if len(s.HandOverMgPerKg) != len(r)-1 || len(s.SoakHours) != soaks || len(s.Sieve) != soaks {
		return fmt.Errorf("%s: %w: %d hand-overs, %d soak hours, %d sieve choices", r.ID(), ErrSettings, len(s.HandOverMgPerKg), len(s.SoakHours), len(s.Sieve))
	}
	for _, h := range s.SoakHours {
		if !(h > 0) {
			return fmt.Errorf("%s: %w: a soak of %g h is not possible", r.ID(), ErrSettings, h)
		}
	}
	for _, after := range s.Sieve {
		if after != Regenerate && after != Discard {
			return fmt.Errorf("%s: %w: sieve %q is not one of %s, %s", r.ID(), ErrSettings, after, Regenerate, Discard)
		}
	}
	return nil
}

// Run is a route carried out.
type Run struct {
	Route           Route
	Settings        Settings
	Outcomes        []steps.Outcome
	Uses            []StageUse // every use, with the place of its stage
	WaterOut        float64    // kg/kg
	Meets           bool
	HoursTotal      float64
	HoursAttended   float64
	EnergyKWh       float64
	CoolingWaterL   float64
	SolventLostL    float64
	LitresDelivered float64
	AgentKg         map[string]float64
	WasteKg         float64
	CO2eKg          float64
	Warnings        []string
}

// StageUse is a use and the 1-based place of its stage (0: the whole route).
type StageUse struct {
	Stage int
	steps.Use
}

// Excluded is a route that is not offered.
type Excluded struct {
	ID, Reason, Source string
}
