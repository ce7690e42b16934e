package routes

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"parch/internal/steps"
)

// rateBand is how well a soak's rate is known, a factor either way (most of the
// published dryings lie within it; see the catalog's checks).
const rateBand = 2

// singleSoak has two of dose, time and goal, or the goal alone: then the dose is
// sized for the times that people plan with.
func (c *Case) singleSoak(a Asked, s *Single) (err error) {
	sorbent, rig := c.soakOf(a)
	switch {
	case given(a.DoseKgPerM3) && given(a.TimeS):
		s.Outcome, err = c.over(a, a.DoseKgPerM3, a.TimeS, sorbent, rig)
	case given(a.DoseKgPerM3) && given(a.Goal):
		s.Outcome, err = steps.SeriesUntil(c.Mixture, c.Feed, a.Goal, a.DoseKgPerM3, a.Charges, sorbent, rig)
	case given(a.TimeS) && given(a.Goal):
		s.Outcome, err = steps.SeriesFor(c.Mixture, c.Feed, a.Goal, a.TimeS, a.Charges, sorbent, rig)
	case given(a.Goal):
		err = c.sizeSoak(a, s, sorbent, rig)
	default:
		return fmt.Errorf("%w: a soak needs two of dose, time and goal, or the goal", ErrAsked)
	}
	if err != nil {
		return err
	}
	if a.Powder {
		for i, lost := range s.Losses {
			s.Losses[i].Cause = strings.Replace(lost.Cause, "drained beads", "filtered powder", 1)
		}
	}
	timeS := s.Course[len(s.Course)-1].Hours * 3600
	if a.Stirred {
		s.EnergyKWh += float64(rig.Vessels) * c.practice("stirrer-power") * timeS / 3.6e6
	}
	return c.bandOfSoak(a, s, timeS/float64(max(1, a.Charges)), sorbent, rig)
}

// soakOf is what an asked soak is done with.
func (c *Case) soakOf(a Asked) (steps.Sorbent, steps.SoakRig) {
	sorbent, rig := c.sorbent(a.Agent, Discard), c.soakRig(a.Stirred)
	if a.Powder {
		sorbent.BeadDiameterM, sorbent.HoldUpM3PerKg = c.practice("powder-diameter"), c.practice("powder-hold-up")
		sorbent.DispersionPerS = c.practice("stirred-slurry-rate")
		rig.AttendedS += c.practice("salt-attended") // filtered off as a salt is
	}
	return sorbent, rig
}

// over stands the lot over a dose, whole or in equal charges that each have the time.
func (c *Case) over(a Asked, doseKgPerM3, timeS float64, sorbent steps.Sorbent, rig steps.SoakRig) (steps.Outcome, error) {
	return c.standOver(c.Feed, a.Charges, doseKgPerM3, timeS, sorbent, rig)
}

func (c *Case) standOver(lot steps.Lot, charges int, doseKgPerM3, timeS float64, sorbent steps.Sorbent, rig steps.SoakRig) (steps.Outcome, error) {
	if charges <= 1 {
		return steps.SoakOver(c.Mixture, lot, doseKgPerM3, timeS, sorbent, rig)
	}
	kg := doseKgPerM3 * steps.LotVolume(c.Mixture, lot, rig.TempK)
	return steps.SoakSeries(c.Mixture, lot, steps.EqualCharges(charges, kg, timeS), sorbent, rig)
}

// sizeSoak sizes the dose for each of the usual times, which each charge has to itself. The outcome is that of the
// shortest that reaches the goal, or of the longest.
func (c *Case) sizeSoak(a Asked, s *Single, sorbent steps.Sorbent, rig steps.SoakRig) (err error) {
	if s.Sizes, err = steps.SizeSeries(c.Mixture, c.Feed, a.Goal, a.Charges, sorbent, rig, steps.SoakTimes...); err != nil {
		return err
	}
	shown := s.Sizes[len(s.Sizes)-1]
	for _, size := range s.Sizes {
		if size.Enough {
			shown = size
			break
		}
	}
	s.Outcome, err = steps.SeriesFor(c.Mixture, c.Feed, a.Goal, shown.Hours*3600, a.Charges, sorbent, rig)
	return err
}

// bandOfSoak runs the same dose for the same time with loading, residual loading
// and rate all at the good ends of their bands, and all at the bad ones. A rate
// that is twice as high is the same as twice the time.
func (c *Case) bandOfSoak(a Asked, s *Single, timeS float64, sorbent steps.Sorbent, rig steps.SoakRig) (err error) {
	if s.AgentKg == 0 || timeS == 0 {
		return nil
	}
	at := func(end sorbentEnd, rate float64) (float64, error) {
		rig := rig
		rig.CondensationPerS /= rate
		o, err := c.over(a, s.Figure("dose"), math.Min(timeS*rate, longestSoakHours*3600), end.apply(sorbent), rig)
		return c.outletOr(o, err)
	}
	good, bad, told := c.endsOf(a)
	low, errLow := at(good, rateBand)
	high, errHigh := at(bad, 1.0/rateBand)
	if err := errors.Join(errLow, errHigh); err != nil {
		return err
	}
	s.Low, s.High = math.Min(low, s.Out.Water()), math.Max(high, s.Out.Water())
	s.Bands = append(told, fmt.Sprintf("rate, a factor of %d either way", rateBand))
	return nil
}

// sorbentEnd is one end of what is known of a sorbent.
type sorbentEnd struct{ loading, residualKgPerKg float64 }

func (e sorbentEnd) apply(s steps.Sorbent) steps.Sorbent {
	s.CapacityShare *= e.loading
	s.ResidualKgPerKg = e.residualKgPerKg
	return s
}

// endsOf are the ends of an agent's loading and of what its history left on it,
// with what they are in words.
func (c *Case) endsOf(a Asked) (good, bad sorbentEnd, told []string) {
	band := math.Max(1, c.Catalog.Agents[a.Agent].LoadingBand)
	good, bad = sorbentEnd{band, c.ResidualOn(a.Agent)}, sorbentEnd{1 / band, c.ResidualOn(a.Agent)}
	if band > 1 {
		told = append(told, fmt.Sprintf("loading, a factor of %.2g either way", band))
	}
	if given(a.ResidualLow) && given(a.ResidualHigh) {
		good.residualKgPerKg, bad.residualKgPerKg = a.ResidualLow, a.ResidualHigh
		told = append(told, fmt.Sprintf("residual loading, %.2g to %.2g g/100 g", 100*a.ResidualLow, 100*a.ResidualHigh))
	}
	return good, bad, told
}

// outletOr is the outlet of a run, or the feed's water where the sorbent is too
// wet to dry it.
func (c *Case) outletOr(o steps.Outcome, err error) (float64, error) {
	if errors.Is(err, steps.ErrWetSieve) {
		return c.Feed.Water(), nil
	}
	return o.Out.Water(), err
}

// singleColumn has a goal, for which the bed is sized, or a bed: so much sorbent
// per volume of the lot.
func (c *Case) singleColumn(a Asked, s *Single) (err error) {
	switch {
	case given(a.DoseKgPerM3):
		s.Outcome, err = c.columnOver(a)
	case given(a.Goal):
		s.Outcome, err = c.runColumn(c.Feed, a.Goal, a.Agent, choice{after: Discard})
	default:
		return fmt.Errorf("%w: a column needs a dose or a goal", ErrAsked)
	}
	if err != nil {
		return err
	}
	return c.bandOfColumn(a, s)
}

// columnOver takes the narrowest column that holds the bed.
func (c *Case) columnOver(a Asked) (o steps.Outcome, err error) {
	bedKg := a.DoseKgPerM3 * steps.LotVolume(c.Mixture, c.Feed, c.Job.Site.RoomK)
	for _, column := range c.columns() {
		o, err = steps.ColumnOver(c.Mixture, c.Feed, bedKg, a.Goal, c.sorbent(a.Agent, Discard), c.columnRig(column))
		if !errors.Is(err, steps.ErrNoColumn) {
			o.Apparatus = column.Key
			return o, err
		}
	}
	return o, err
}

// halfDiffusion halves the diffusivity, which goes with the root of the factor of
// association; the correlation overstates it by up to two.
const halfDiffusion = 0.25

func (c *Case) bandOfColumn(a Asked, s *Single) error {
	if s.AgentKg == 0 {
		return nil
	}
	at := func(end sorbentEnd, association float64) (float64, error) {
		rig := c.columnRig(c.Catalog.Apparatus[s.Apparatus])
		rig.Association = association
		o, err := steps.ColumnOver(c.Mixture, c.Feed, s.AgentKg*(1-1e-12), a.Goal, end.apply(c.sorbent(s.Agent, Discard)), rig)
		return c.outletOr(o, err)
	}
	good, bad, told := c.endsOf(a)
	low, errLow := at(good, 1)
	high, errHigh := at(bad, halfDiffusion)
	if err := errors.Join(errLow, errHigh); err != nil {
		return err
	}
	s.Low, s.High = math.Min(low, s.Out.Water()), math.Max(high, s.Out.Water())
	s.Bands = append(told, "diffusion, up to a factor of 2 slower")
	return nil
}
