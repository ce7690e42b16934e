package routes

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"parch/internal/quantity"
	"parch/internal/steps"
)

// Asked is one stage asked for by itself, outside any route. NaN stands for what
// was not said: it is solved for, or taken as usual.
type Asked struct {
	Stage
	Goal        float64 // kg/kg
	DoseKgPerM3 float64
	TimeS       float64
	RinseM3     float64 // of a salt: fresh solvent, as wet as the lot, over the cake
	Stirred     bool
	Powder      bool   // of a soak: not beads
	Charges     int    // of a soak, one after the other, that make up the dose; 0: one
	Stages      int    // of the column of a forerun, or of a trap with a carrier
	Receiver    string // of a trap, by its key; "": the first that fits

	ResidualLow, ResidualHigh float64 // kg/kg, the band of the lot's residual loading
}

// Single is what one stage does by itself.
type Single struct {
	steps.Outcome
	OwnHours  float64          // attended at the step itself
	Elsewhere []StageUse       // work and energy that are no part of its own
	Low, High float64          // kg/kg, the outlet at the ends of the bands that are known; NaN where none is
	Bands     []string         // what was taken to both ends
	Sizes     []steps.SoakSize // of a soak to a goal for which neither dose nor time was given
}

// ErrAsked means that what was asked for has no meaning for the stage.
var ErrAsked = errors.New("not for this step")

// Refused returns the reason why a stage is not run on the lot, or "". As its
// goal is no target of a route, a salt may have one that it would not end.
func (c *Case) Refused(s Stage) (reason, source string) {
	if s.Kind == steps.Salt {
		return c.refuseAgent(s.Agent)
	}
	return c.refuseStage(s, true)
}

// Single carries out one stage on the lot as it stands. Hours of attendance and
// energy include those that a route would pay for, such as the share of the oven
// run that activates a sieve.
func (c *Case) Single(a Asked) (Single, error) {
	s := Single{Low: math.NaN(), High: math.NaN()}
	var err error
	switch a.Kind {
	case steps.Settle:
		s.Outcome, err = steps.RunSettle(c.Mixture, c.Feed, c.Job.Site.RoomK, c.settleRules())
		c.bandOfSolubility(&s, func(factor float64) float64 { return s.Out.Water() * factor })
	case steps.Trap:
		err = c.singleTrap(a, &s)
	case steps.Forerun:
		s.Outcome, err = c.runForerun(c.Feed, orZero(a.Goal), choice{stages: a.Stages})
	case steps.Soak:
		err = c.singleSoak(a, &s)
	case steps.Column:
		err = c.singleColumn(a, &s)
	case steps.Salt:
		err = c.singleSalt(a, &s)
	case steps.Reactive:
		err = c.singleReactive(a, &s)
	default:
		err = fmt.Errorf("%w: %q", ErrAsked, a.Kind)
	}
	if err == nil {
		err = nothingKept(s.Outcome)
	}
	if err != nil {
		return Single{}, refused(err)
	}
	uses := c.account(1, s.Outcome, choice{stirred: a.Stirred, after: Discard})
	s.OwnHours = s.HoursAttended
	s.Elsewhere = append(beside(uses, "technician", s.HoursAttended), beside(uses, "electricity", s.EnergyKWh)...)
	if a.Kind == steps.Reactive {
		s.HoursTotal += c.practice("reactive-spent") / 3600 // as of a route
	}
	s.HoursAttended, s.EnergyKWh = sum(uses, "technician"), sum(uses, "electricity")
	return s, nil
}

// beside are the uses of an item but the step's own, which comes first.
func beside(uses []StageUse, item string, own float64) (others []StageUse) {
	for _, u := range uses {
		switch {
		case u.Item != item:
		case own > 0:
			own = 0
		default:
			others = append(others, u)
		}
	}
	return others
}

// nothingKept refuses a step of which no solvent comes out.
func nothingKept(o steps.Outcome) error {
	if o.Out.SolventKg > 0 {
		return nil
	}
	var causes []string
	for _, l := range o.Losses {
		if l.SolventKg > 0 {
			causes = append(causes, l.Cause)
		}
	}
	return refusal{fmt.Errorf("nothing is left of the lot: %s of solvent are %s", quantity.FormatVolume(o.SolventLostL/1e3), strings.Join(causes, ", "))}
}

func orZero(x float64) float64 {
	if math.IsNaN(x) {
		return 0
	}
	return x
}

func given(x float64) bool { return !math.IsNaN(x) }

// bandOfSolubility takes the outlet to both ends of the scatter of the published
// solubility of water.
func (c *Case) bandOfSolubility(s *Single, outlet func(factor float64) float64) {
	band := c.Solvent.Water.SolubilityBand
	if band <= 1 || s.Kind == "" {
		return
	}
	s.Low, s.High = math.Min(outlet(1/band), s.Out.Water()), math.Max(outlet(band), s.Out.Water())
	s.Bands = append(s.Bands, fmt.Sprintf("published solubility, a factor of %.3g either way", band))
}
