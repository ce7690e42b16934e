package costs

import (
	"time"

	"parch/catalog"
	"parch/internal/job"
)

// ReferenceDate is the day from which prices are old or not.
func ReferenceDate(cat *catalog.Catalog, j *job.Job) string { return j.PlanDate(cat.Date) }

// age flags a price of the user's own by its dates.
func age(date, validUntil, reference string) Flag {
	switch {
	case validUntil != "" && validUntil < reference:
		return Expired
	case date == "" && validUntil == "":
		return Undated
	case olderThanAYear(date, reference):
		return Old
	}
	return NoFlag
}

func olderThanAYear(date, reference string) bool {
	then, errThen := time.Parse(time.DateOnly, date)
	now, errNow := time.Parse(time.DateOnly, reference)
	return errThen == nil && errNow == nil && then.AddDate(1, 0, 0).Before(now)
}
