package cli

import (
	"io"
	"os"
	"time"

	"github.com/jedib0t/go-pretty/v6/progress"
	"golang.org/x/term"
)

// barAfter keeps short runs quiet.
const barAfter = 700 * time.Millisecond

// progressBar shows how far a long run has come, on a terminal only. done is told
// each part that is finished; stop takes the bar away.
func (p *program) progressBar(quiet bool) (done func(of, total int), stop func()) {
	if quiet || !isTerminal(p.stderr) {
		return nil, func() {}
	}
	w := progress.NewWriter()
	w.SetOutputWriter(p.stderr)
	w.SetAutoStop(false)
	w.SetTrackerLength(30)
	w.SetUpdateFrequency(100 * time.Millisecond)
	w.Style().Visibility.Speed, w.Style().Visibility.Value = false, false
	w.Style().Options.DoneString = "done"
	bar := &progress.Tracker{Message: "comparing"}
	started := time.Now()
	shown := false
	done = func(of, total int) {
		bar.UpdateTotal(int64(total))
		bar.SetValue(int64(of))
		if !shown && time.Since(started) > barAfter && of < total {
			shown = true
			w.AppendTracker(bar)
			go w.Render()
		}
	}
	return done, func() {
		if shown {
			bar.MarkAsDone()
			w.Stop()
		}
	}
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}
