package routes

import (
	"fmt"
	"math"
	"slices"

	"parch/internal/job"
	"parch/internal/steps"
)

const hoursPerDay = 24

// waiting is how long a lot waits for people: attended work that does not fit into
// the attended hours of one day goes on the next, so that each day after the first
// brings the hours between two of them.
//
//	wait = (ceil(attended/perDay) - 1) (24 h - perDay)
func waiting(attended, perDay float64) float64 {
	if perDay <= 0 || perDay >= hoursPerDay {
		return 0
	}
	days := math.Ceil(attended/perDay - 1e-9)
	return math.Max(0, days-1) * (hoursPerDay - perDay)
}

// AcceptFrom is the least water (kg/kg) that passes: the lower end of a target that
// is a band, with the uncertainty of the mean added; 0 where there is none.
func (c *Case) AcceptFrom() float64 {
	if c.Lot.NotBelow == 0 {
		return 0
	}
	return c.Lot.NotBelow + c.Limit.Uncertainty
}

// Booked is how long a batch keeps a rig.
type Booked struct {
	Item    string  // apparatus
	Hours   float64 // a batch
	PerWeek float64 // hours of the rig in a week
}

const workingDays = 5

// Bookings of a run. A vessel stands day and night; a still or a column is not left
// alone and has the attended hours of five days (common practice, no source).
func (c *Case) Bookings(run *Run) (all []Booked) {
	attended := workingDays * c.Job.Site.AttendedSecondsPerDay / 3600
	add := func(item string, hours, perWeek float64) {
		for i := range all {
			if all[i].Item == item {
				all[i].Hours += hours
				return
			}
		}
		all = append(all, Booked{item, hours, perWeek})
	}
	for _, o := range run.Outcomes {
		switch o.Kind {
		case steps.Trap, steps.Forerun, steps.Reactive:
			still, _ := c.Still()
			add(still.Key, o.HoursTotal, attended)
		case steps.Column:
			add(o.Apparatus, o.HoursTotal, attended)
		case steps.Soak, steps.Settle, steps.Salt:
			vessel, _ := c.vessel()
			add(vessel.Key, o.HoursTotal, 7*hoursPerDay)
		}
	}
	return all
}

// Overbooked says which rig of a run cannot dry the litres of a week, or "".
func (c *Case) Overbooked(run *Run) string {
	if c.Lot.WeeklyM3 == 0 {
		return ""
	}
	batches := c.Lot.WeeklyM3 / c.Lot.BatchM3
	for _, b := range c.Bookings(run) {
		if share := batches * b.Hours / b.PerWeek; share > 1+1e-9 {
			return fmt.Sprintf("%.3g L a week are %.3g batches of %.3g h: %s is booked %.0f %%", c.Lot.WeeklyM3*1e3, batches, b.Hours, b.Item, 100*share)
		}
	}
	return ""
}

// refuseHazard holds back what the site excludes by hazard.
func (c *Case) refuseHazard(s Stage) string {
	excluded := func(hazard string) bool { return slices.Contains(c.Job.Exclude.Hazards, hazard) }
	switch {
	case s.Kind.Heated() && excluded(job.Boiling):
		return "the job excludes boiling solvents"
	case s.Kind == steps.Reactive && excluded(job.ReactiveWaste) && c.leavesReactiveWaste(s.Agent):
		return "the job excludes reactive waste"
	case s.Kind == steps.Reactive && excluded(job.Hydrogen) && c.makesHydrogen(s.Agent):
		return "the job excludes hydrogen"
	}
	return ""
}

func (c *Case) leavesReactiveWaste(agent string) bool {
	a := c.Catalog.Agents[agent]
	return a == nil || a.Reaction == nil || wasteClass(a.Reaction.Waste) == steps.ReactiveWaste
}

func (c *Case) makesHydrogen(agent string) bool {
	a := c.Catalog.Agents[agent]
	return a != nil && a.Reaction != nil && a.Reaction.Hydrogen > 0
}
