package workbook

import "fmt"

// changedName counts the inputs and prices that differ from the run.
const changedName = "inputs_changed"

// runDate is the day that the results belong to: of the plan, or else of the
// newest price. The clock of the computer plays no part.
func (l *layout) runDate() string {
	for _, d := range []string{l.report.Job.Date, l.report.PriceDate} {
		if d != "" {
			return d
		}
	}
	return l.report.CatalogDate
}

// banner says at the top of a sheet of results to which run they belong, and that
// it has to be repeated as soon as anything is edited.
func (l *layout) banner(g *grid, row int) {
	state := fmt.Sprintf(`IF(%s>0,"Edited since: %s","")`, changedName, runAgain)
	g.bannerRows = 2
	g.put(1, row, text(plain, l.ofRun()))
	g.put(1, row+1, cell{look: message, formula: state, value: ""})
	g.flags = append(g.flags, flag{at(1, row+1), fmt.Sprintf("LEN($A%d)>0", row+1), warn})
}

// ofRun names the run that results belong to.
func (l *layout) ofRun() string {
	of := "Results of the run of " + l.runDate()
	if l.report.Draws > 0 {
		of += fmt.Sprintf(", %d draws, seed %d", l.report.Draws, l.report.Seed)
	}
	return of
}
