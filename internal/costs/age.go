package costs

import (
	"time"

	"parch/catalog"
	"parch/internal/job"
)

// ReferenceDate is the day from which prices are old or not: the date of the job;
// without one, the newest date among its prices and that of the catalog. The
// clock of the computer plays no part, so that the same job gives the same report.
func ReferenceDate(cat *catalog.Catalog, j *job.Job) string {
	if j.Date != "" {
		return j.Date
	}
	newest := cat.Date
	for _, p := range j.Prices {
		newest = max(newest, p.Date) // ISO dates sort as text
	}
	return newest
}

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
