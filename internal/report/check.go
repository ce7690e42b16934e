package report

import (
	"io"

	"parch/internal/job"
)

// Check prints what a job file that is in order left to the catalog, and how its
// readings were understood.
func Check(w io.Writer, j *job.Job) error {
	p := &page{w: w}
	p.say(0, 2, "%s is in order: %s, in %s.", j.File, count(float64(len(j.Lots)), "lot", "lots"), j.Currency)
	if len(j.Defaults) > 0 {
		rows := make([][]string, len(j.Defaults))
		for i, d := range j.Defaults {
			rows[i] = []string{d.Key, d.Text, d.Confidence + cite(d.Source), d.Date}
		}
		p.heading("Left to the catalog:")
		p.table([]column{{"Key", false, 0}, {"Value", false, 18}, {"Rests on", false, 0}, {"Date", false, 0}}, rows)
	}
	p.notes("Notes", j.Warnings)
	return p.close()
}
