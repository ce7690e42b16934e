// Package routes builds the chains of steps that could dry a lot, refuses the
// dangerous and the pointless ones with the reason, and runs one with given
// settings.
package routes

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"parch/internal/steps"
)

// Stage is one step of a route.
type Stage struct {
	Kind    steps.Kind
	Agent   string
	Carrier string // of a trap
}

// Route is a chain of stages.
type Route []Stage

// ID joins the stages with "+", an agent or a carrier after a colon:
// "trap:toluene+forerun+soak:sieve-3a".
func (r Route) ID() string {
	parts := make([]string, len(r))
	for i, s := range r {
		parts[i] = string(s.Kind)
		if s.Agent != "" {
			parts[i] += ":" + s.Agent
		}
		if s.Carrier != "" {
			parts[i] += ":" + s.Carrier
		}
	}
	return strings.Join(parts, "+")
}

// count is the number of stages of the kinds.
func (r Route) count(kinds ...steps.Kind) int {
	n := 0
	for _, s := range r {
		if slices.Contains(kinds, s.Kind) {
			n++
		}
	}
	return n
}

// LeastAimMgPerKg is the driest that a step is sized for.
const LeastAimMgPerKg = 1e-3

// leastKPa and mostKPa are the pressures that a still is run at.
const leastKPa, mostKPa = 1, 110

// mostDose of a carrier, kg per kg of solvent.
const mostDose = 10

// longestSoakHours is a year.
const longestSoakHours = 366 * 24

// choice is what the settings say of one stage.
type choice struct {
	stages    int
	kPa       float64 // of a forerun; 0: the site's
	hot       bool    // the pot comes hot from the step before
	goesOn    bool    // the next step takes the pot hot
	soakHours float64 // of each charge
	stirred   bool
	charges   int     // of sieve, one after the other; 0: one
	lots      int     // over a charge of sieve before it is taken out; 0: one
	after     string  // what is done with the sieve
	receiver  string  // of a trap; "": the first that fits
	receiverC float64 // 0: the coldest in reach
	dose      float64 // of a carrier, kg per kg of solvent
	carrier   string  // that the trap before has left in the pot
	longestS  float64 // of a trap, under reflux; 0: no limit
	watched   bool    // somebody stands at the trap: its course is told closely
}

// at returns the choices of stage i.
func (s Settings) at(r Route, i int) (c choice) {
	if r[i].Kind == steps.Forerun {
		k := r[:i].count(steps.Forerun)
		c.stages = s.Stages[k]
		if k < len(s.PressureKPa) && !r.Strips(i) {
			c.kPa = s.PressureKPa[k]
		}
		c.hot = i > 0 && r[i-1].Kind == steps.Trap
	}
	if r[i].Carrier != "" {
		c.dose = s.CarrierDose[r.carriersBefore(i)]
		if k := r[:i].count(steps.Forerun); k < len(s.Stages) {
			c.stages = s.Stages[k] // the column that strips the carrier stands there from the start
		}
	}
	if r.Strips(i) {
		c.carrier = r[i-1].Carrier
	}
	c.goesOn = r[i].Kind == steps.Trap && i+1 < len(r) && r[i+1].Kind == steps.Forerun
	if k := r[:i].count(steps.Trap); r[i].Kind == steps.Trap {
		if k < len(s.Receiver) {
			c.receiver = s.Receiver[k]
		}
		if k < len(s.ReceiverC) {
			c.receiverC = s.ReceiverC[k]
		}
	}
	if k := r[:i].count(steps.Soak); r[i].Kind == steps.Soak {
		c.soakHours = s.SoakHours[k]
		c.stirred = k < len(s.Stirred) && s.Stirred[k] // not given: still
		if k < len(s.Charges) {
			c.charges = s.Charges[k]
		}
		if k < len(s.LotsOverCharge) {
			c.lots = s.LotsOverCharge[k]
		}
	}
	if k := r[:i].count(steps.Soak, steps.Column); r[i].Kind == steps.Soak || r[i].Kind == steps.Column {
		c.after = s.Sieve[k]
	}
	return c
}

// carriersBefore counts the traps with a carrier before stage i.
func (r Route) carriersBefore(i int) (n int) {
	for _, s := range r[:i] {
		if s.Carrier != "" {
			n++
		}
	}
	return n
}

// Settings are the free choices of a route. Doses follow from them.
type Settings struct {
	HandOverMgPerKg []float64 `json:"hand_over_mg_per_kg"`        // water after each stage but the last
	SoakHours       []float64 `json:"soak_hours,omitempty"`       // one for each soak
	Stages          []int     `json:"stages,omitempty"`           // of the column of each forerun; 0: a simple still
	PressureKPa     []float64 `json:"pressure_kpa,omitempty"`     // of each forerun; 0, or not given: the site's
	Stirred         []bool    `json:"stirred,omitempty"`          // one for each soak
	Charges         []int     `json:"charges,omitempty"`          // of sieve, one after the other, each for the hours of its soak; one for each soak; not given: one
	LotsOverCharge  []int     `json:"lots_over_charge,omitempty"` // that go over a charge as it is before it is taken out; one for each soak; not given: one
	Sieve           []string  `json:"sieve,omitempty"`            // "regenerate" or "discard", one for each soak or column
	Receiver        []string  `json:"receiver,omitempty"`         // of each trap: key of the apparatus
	ReceiverC       []float64 `json:"receiver_c,omitempty"`       // of each trap: temperature, °C
	CarrierDose     []float64 `json:"carrier_dose,omitempty"`     // of each trap with a carrier: kg per kg of solvent
	AimMgPerKg      float64   `json:"aim_mg_per_kg,omitempty"`    // the last step is sized for it; 0: for the acceptance limit

	// Packs that set the prices of the route, by item, where there are several:
	// chosen by the need of all lots, not tuned for the route.
	Packs map[string]string `json:"packs,omitempty"`
}

// ErrRefused means that the physics refuses a step of a route on this lot.
var ErrRefused = errors.New("refused")

// ErrWasteful means that a step would take most of the lot with the water.
var ErrWasteful = errors.New("wasteful")

// ErrSettings means that settings do not belong to a route.
var ErrSettings = errors.New("settings do not fit")

// Fit reports settings that do not belong to the route.
func (s Settings) Fit(r Route) error {
	soaks, beds := r.count(steps.Soak), r.count(steps.Soak, steps.Column)
	if foreruns := r.count(steps.Forerun); len(s.Stages) != foreruns {
		return fmt.Errorf("%s: %w: %d column stages for %d foreruns", r.ID(), ErrSettings, len(s.Stages), foreruns)
	}
	if foreruns := r.count(steps.Forerun); len(s.PressureKPa) > foreruns {
		return fmt.Errorf("%s: %w: %d pressures for %d foreruns", r.ID(), ErrSettings, len(s.PressureKPa), foreruns)
	}
	for _, kPa := range s.PressureKPa {
		if kPa != 0 && !(kPa >= leastKPa && kPa <= mostKPa) {
			return fmt.Errorf("%s: %w: a pressure of %g kPa; %d to %d kPa are allowed, or 0 for the site's", r.ID(), ErrSettings, kPa, leastKPa, mostKPa)
		}
	}
	if len(s.HandOverMgPerKg) != len(r)-1 || len(s.SoakHours) != soaks || len(s.Stirred) > soaks || len(s.Sieve) != beds {
		return fmt.Errorf("%s: %w: %d hand-overs, %d soak hours, %d stirred, %d sieve choices", r.ID(), ErrSettings,
			len(s.HandOverMgPerKg), len(s.SoakHours), len(s.Stirred), len(s.Sieve))
	}
	if traps := r.count(steps.Trap); len(s.Receiver) > traps || len(s.ReceiverC) > traps {
		return fmt.Errorf("%s: %w: %d receivers, %d receiver temperatures for %d traps", r.ID(), ErrSettings, len(s.Receiver), len(s.ReceiverC), traps)
	}
	if s.AimMgPerKg != 0 && !(s.AimMgPerKg >= LeastAimMgPerKg && s.AimMgPerKg < 1e6) {
		return fmt.Errorf("%s: %w: an aim of %g mg/kg; %g to 1000000 are allowed, or 0 for the acceptance limit", r.ID(), ErrSettings, s.AimMgPerKg, LeastAimMgPerKg)
	}
	if n := r.carriersBefore(len(r)); len(s.CarrierDose) != n {
		return fmt.Errorf("%s: %w: %d doses for %d carriers", r.ID(), ErrSettings, len(s.CarrierDose), n)
	}
	for _, d := range s.CarrierDose {
		if !(d > 0 && d <= mostDose) {
			return fmt.Errorf("%s: %w: a carrier dose of %g kg/kg; above 0 to %d kg/kg are allowed", r.ID(), ErrSettings, d, mostDose)
		}
	}
	for _, h := range s.SoakHours {
		if !(h > 0 && h <= longestSoakHours) {
			return fmt.Errorf("%s: %w: a soak of %g h; above 0 to %d h are allowed", r.ID(), ErrSettings, h, longestSoakHours)
		}
	}
	if err := s.fitCharges(r, soaks); err != nil {
		return err
	}
	for _, after := range s.Sieve {
		if after != Regenerate && after != Discard {
			return fmt.Errorf("%s: %w: sieve %q is not one of %s, %s", r.ID(), ErrSettings, after, Regenerate, Discard)
		}
	}
	return nil
}

// MostCharges of sieve are stood over one after the other.
const MostCharges = 5

// fitCharges reports charges of sieve and lots over a charge that do not exist.
func (s Settings) fitCharges(r Route, soaks int) error {
	if len(s.Charges) > soaks || len(s.LotsOverCharge) > soaks {
		return fmt.Errorf("%s: %w: %d charges, %d lots over a charge for %d soaks", r.ID(), ErrSettings, len(s.Charges), len(s.LotsOverCharge), soaks)
	}
	for i := range r {
		c := s.at(r, i)
		switch {
		case c.charges < 0 || c.charges > MostCharges:
			return fmt.Errorf("%s: %w: %d charges of sieve; 1 to %d are allowed", r.ID(), ErrSettings, c.charges, MostCharges)
		case c.lots < 0 || c.lots > steps.MostLots:
			return fmt.Errorf("%s: %w: %d lots over a charge; 1 to %d are allowed", r.ID(), ErrSettings, c.lots, steps.MostLots)
		case c.charges > 1 && c.lots > 1:
			return fmt.Errorf("%s: %w: several charges in sequence are not used again as they are", r.ID(), ErrSettings)
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
	TooDry          bool    // drier than the band of the target allows
	HoursTotal      float64 // start to finish, with HoursWaiting
	HoursWaiting    float64 // nights between days of attended work
	HoursAttended   float64
	EnergyKWh       float64
	CoolingWaterL   float64
	SolventLostL    float64
	LitresDelivered float64
	AgentKg         map[string]float64
	WasteKg         float64
	CO2eKg          float64
	Warnings        []string
	Shortened       *Shortened // nil: no longer run was passed over
}

// Shortened tells of a longer run that would be better by next to nothing.
type Shortened struct {
	HoursTotal float64
	Saves      float64 // share of the objective
}

// StageUse is a use and the 1-based place of its stage (0: the whole route).
type StageUse struct {
	Stage int
	steps.Use
}

// Excluded is a route that is not offered.
type Excluded struct {
	ID, Reason, Source string
	Beaten             bool // it could be run, but others are no worse in anything
}
