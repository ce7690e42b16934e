package doubt_test

import (
	"math"
	"testing"

	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/spread"
)

// What alumina holds after a zeolite's history lies anywhere from a tenth of it to three
// times of it (assumption), and in the draws of a plan too; what a sieve holds, and what
// was stated, do not.
func TestBorrowedHistoryIsDrawnFromAWideBand(t *testing.T) {
	_, cat := jobs(t)
	for _, c := range []struct {
		agent, history string
		wide           bool
	}{
		{"alumina", "", true}, {"silica-gel", "", true}, {"sieve-3a", "", false}, {"alumina", ", sieve history: residual 2 g/100 g", false},
	} {
		text := "accept: {agents: [alumina, silica-gel]}\nlots: [{solvent: toluene, batch: 10 L, water: 400 mg/kg, target: 50 mg/kg" + c.history + "}]"
		j, err := job.Read("job.yaml", []byte(text), cat)
		if err != nil {
			t.Fatal(err)
		}
		k, err := routes.NewCase(j, j.Lots[0], cat)
		if err != nil {
			t.Fatal(err)
		}
		if k.Borrows(c.agent) != c.wide {
			t.Errorf("%s%s: borrows %t", c.agent, c.history, k.Borrows(c.agent))
		}
		l, err := doubt.New(k, nil, nil, 2000, 1)
		if err != nil {
			t.Fatal(err)
		}
		b := spread.BandOf(l.ResidualOn(c.agent))
		if ratio := b.High / b.Low; (ratio > 20) != c.wide {
			t.Errorf("%s%s: %g to %g kg/kg", c.agent, c.history, b.Low, b.High)
		}
		if math.Abs(b.Median/0.02-1) > 0.2 {
			t.Errorf("%s%s: %g kg/kg in the middle", c.agent, c.history, b.Median)
		}
	}
}
