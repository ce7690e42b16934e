package job

import (
	"errors"
	"math"
	"strings"
	"testing"
	"time"

	"parch/internal/document"
)

// FuzzRead holds Read to three promises whatever the file: it does not panic, it
// answers within a second, and it gives either messages or a job whose numbers
// are finite and in range.
func FuzzRead(f *testing.F) {
	_, data := Demo()
	cat := shelf()
	f.Add(data)
	f.Add([]byte(full))
	f.Add([]byte(small))
	f.Add(Template(cat.Solvents["tetrahydrofuran"]))
	f.Fuzz(func(t *testing.T, data []byte) {
		invalid := answered(t, data, func() (*Job, error) { return Read("job.yaml", data, cat) })
		if invalid != nil {
			checkMessages(t, "job.yaml:", invalid, strings.Contains(string(data), "%!"))
		}
	})
}

// answered wants an answer soon that is either a job in range, then it returns nil,
// or messages and no job.
func answered(t *testing.T, data []byte, read func() (*Job, error)) (invalid *document.Invalid) {
	t.Helper()
	started := time.Now()
	j, err := read()
	if took := time.Since(started); took > time.Second {
		t.Errorf("took %v for %d bytes", took, len(data))
	}
	switch {
	case err == nil && j != nil:
		checkJob(t, j)
	case j != nil || !errors.As(err, &invalid):
		t.Errorf("job %v with error %v", j, err)
	}
	return invalid
}

// checkMessages looks for messages that are unprintable, endless or wrongly formatted;
// "%!" shows the latter unless it was typed.
func checkMessages(t *testing.T, file string, invalid *document.Invalid, typed bool) {
	if invalid.Count() == 0 || len(invalid.Lines()) > 51 {
		t.Errorf("%d messages for %d problems", len(invalid.Lines()), invalid.Count())
	}
	for _, line := range invalid.Lines() {
		if !strings.HasPrefix(line, file) || strings.ContainsAny(line, "\n\r\x1b\x00") || !typed && strings.Contains(line, "%!") || len(line) > 3000 {
			t.Errorf("message %q", line)
		}
	}
}

func checkJob(t *testing.T, j *Job) {
	in := func(name string, x, low, high float64) {
		const rounding = 1e-9
		if math.IsNaN(x) || x < low-rounding*math.Abs(low) || x > high+rounding*math.Abs(high) {
			t.Errorf("%s = %g is not within %g to %g", name, x, low, high)
		}
	}
	in("assurance", j.Assurance, 0.5, 0.999)
	in("room", j.Site.RoomK, 278.15, 313.15)
	in("pressure", j.Site.PressurePa, 1e3, 110e3)
	in("receiver", j.Site.ReceiverK, 274.15, 313.15)
	in("humidity", j.Site.Humidity, 0, 1)
	in("attended time", j.Site.AttendedSecondsPerDay, 1800, 86400)
	in("peroxide limit", j.Site.PeroxideLimitKgPerM3, 0, 0.1)
	in("number of lots", float64(len(j.Lots)), 1, 100)
	names := map[string]bool{}
	for _, lot := range j.Lots {
		if names[lot.Name] || lot.Name == "" || lot.Solvent == "" || lot.Solvent == water {
			t.Errorf("lot %q of %q", lot.Name, lot.Solvent)
		}
		names[lot.Name] = true
		in("batch", lot.BatchM3, 5e-5, 10)
		in("batches", lot.BatchesPerYear, 0.1, 1e4)
		in("water", lot.Water, 0, 0.5)
		in("target", lot.Target, 1e-8, 0.5)
		in("not below", lot.NotBelow, 0, lot.Target)
		in("free water", lot.FreeWaterM3, 0, lot.BatchM3)
		in("needed within", lot.NeededWithinS, 0, 366*86400)
		in("heater", lot.HeaterW, 0, 1e5)
		in("height", lot.VesselHeightM, 0, 5)
		in("residual loading", lot.ResidualLoading, 0.01, 0.1)
		if lot.Peroxide != nil {
			in("peroxide", lot.Peroxide.ReadingKgPerM3, 0, 10)
		}
	}
	items := map[string]bool{}
	for _, p := range j.Prices {
		if items[p.Item] && p.PackSize.IsZero() || p.Unit == "" || p.PerUnit.IsNegative() {
			t.Errorf("price %+v", p)
		}
		items[p.Item] = true
		in("price", p.PerUnit.InexactFloat64(), 0, 1e18)
		in("pack", p.PackSize.InexactFloat64(), 0, 1e6)
		in("smallest order", float64(p.MinimumOrder), 0, 1e5)
		in("lead time", float64(p.LeadDays), -1, 1100)
		in("water of the grade", p.WaterMax, 0, 0.01)
	}
}
