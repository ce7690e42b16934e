package job

// PlanDate is the day for which the job plans: its date; without one, the newest date
// among its prices and that of the catalog. The clock of the computer plays no part, so
// that the same job gives the same report.
func (j *Job) PlanDate(catalogDate string) string {
	if j.Date != "" {
		return j.Date
	}
	newest := catalogDate
	for _, p := range j.Prices {
		newest = max(newest, p.Date) // ISO dates sort as text
	}
	return newest
}
