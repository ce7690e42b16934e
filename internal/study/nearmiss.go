package study

import (
	"context"
	"fmt"
	"math"

	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/search"
)

// nearMisses says for each constraint of a lot without a route how near it is
// missed: what the best route does when that constraint alone is lifted.
func nearMisses(ctx context.Context, k *routes.Case, t *search.Tuner) (said []string, err error) {
	for _, lift := range []func(*job.Job, *job.Lot, *routes.Case) (string, search.Objective){
		liftTime, liftAttendance, liftWeek, liftExclusions, liftBand, liftTarget,
	} {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		j, lot := *k.Job, k.Lot
		what, by := lift(&j, &lot, k)
		if what == "" {
			continue
		}
		other, err := routes.NewCase(&j, lot, k.Catalog)
		if err != nil {
			return nil, err
		}
		run, err := bestOf(other, t, by)
		if err != nil {
			return nil, err
		}
		if run == nil {
			said = append(said, what+": lifted alone, no route reaches the limit either")
			continue
		}
		if by == driest {
			said = append(said, fmt.Sprintf("%s: the driest is %s, which leaves %s", what, run.Route.ID(), quantity.FormatWater(run.WaterOut)))
			continue
		}
		said = append(said, fmt.Sprintf("%s: without it %s leaves %s in %.3g h", what, run.Route.ID(), quantity.FormatWater(run.WaterOut), run.HoursTotal))
	}
	return said, nil
}

func liftTime(_ *job.Job, lot *job.Lot, _ *routes.Case) (string, search.Objective) {
	if lot.NeededWithinS == 0 {
		return "", ""
	}
	what := fmt.Sprintf("needed within %.3g h", lot.NeededWithinS/3600)
	lot.NeededWithinS = 0
	return what, search.Time
}

// wholeDay of attendance, s.
const wholeDay = 24 * 3600

// liftAttendance lets somebody be there around the clock, where a time is set.
func liftAttendance(j *job.Job, lot *job.Lot, _ *routes.Case) (string, search.Objective) {
	if lot.NeededWithinS == 0 || j.Site.AttendedSecondsPerDay >= wholeDay {
		return "", ""
	}
	what := fmt.Sprintf("%.3g attended hours per day", j.Site.AttendedSecondsPerDay/3600)
	j.Site.AttendedSecondsPerDay = wholeDay
	return what, search.Time
}

func liftWeek(_ *job.Job, lot *job.Lot, _ *routes.Case) (string, search.Objective) {
	if lot.WeeklyM3 == 0 {
		return "", ""
	}
	what := fmt.Sprintf("%.3g litres per week", lot.WeeklyM3*1e3)
	lot.WeeklyM3 = 0
	return what, search.Time
}

func liftExclusions(j *job.Job, _ *job.Lot, _ *routes.Case) (string, search.Objective) {
	if len(j.Exclude.Steps)+len(j.Exclude.Agents)+len(j.Exclude.Hazards) == 0 {
		return "", ""
	}
	j.Exclude = job.Exclude{}
	return "what the job excludes", search.Cost
}

func liftBand(_ *job.Job, lot *job.Lot, _ *routes.Case) (string, search.Objective) {
	if lot.NotBelow == 0 {
		return "", ""
	}
	what := "not below " + quantity.FormatWater(lot.NotBelow)
	lot.NotBelow = 0
	return what, search.Cost
}

// liftTarget takes any target: what the driest route leaves is the nearest miss.
func liftTarget(_ *job.Job, lot *job.Lot, k *routes.Case) (string, search.Objective) {
	return "target " + quantity.FormatWater(k.Lot.Target), driest
}

// driest is the objective of one who takes any target: as little water as can be.
const driest search.Objective = "water"

// alike is how far two contents may lie apart and still be told as the same.
const alike = 1e-3

// bestOf tunes every route of a case and takes the best that reaches the limit; by the
// driest, the cheapest of those that leave as little as any.
func bestOf(k *routes.Case, like *search.Tuner, by search.Objective) (*routes.Run, error) {
	t := &search.Tuner{Case: k, Book: like.Book, Objective: by, Site: like.Site, Stop: like.Stop}
	if by == driest {
		t.Objective = search.Cost
	}
	offered, _ := k.Candidates()
	var runs []routes.Run
	least := math.Inf(1)
	for _, r := range offered {
		if r.CarrierOf() != "" { // each takes as long as all others together
			continue
		}
		run, err := t.Tune(r)
		if _, refused := refusal(err); refused {
			continue
		}
		if err != nil {
			return nil, err
		}
		runs = append(runs, run)
		least = min(least, run.WaterOut)
	}
	var best *routes.Run
	lowest := math.Inf(1)
	for i := range runs {
		run := &runs[i]
		if by == driest && run.WaterOut > least*(1+alike) || by != driest && !run.Meets {
			continue
		}
		value, err := t.Value(run)
		if err != nil {
			return nil, err
		}
		if value < lowest {
			best, lowest = run, value
		}
	}
	return best, nil
}
