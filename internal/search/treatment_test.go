package search_test

import (
	"fmt"
	"testing"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

func tuned(t *testing.T, lot string) routes.Run {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read("job.yaml", fmt.Appendf(nil, "objective: cost\nlots:\n  - {name: lot, %s}\n", lot), c)
	if err != nil {
		t.Fatal(err)
	}
	k, err := routes.NewCase(j, j.Lots[0], c)
	if err != nil {
		t.Fatal(err)
	}
	book, err := costs.NewBook(c, j)
	if err != nil {
		t.Fatal(err)
	}
	tuner := &search.Tuner{Case: k, Book: book, Objective: search.Cost, Site: costs.NewArrangement(c, j)}
	run, err := tuner.Tune(routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}})
	if err != nil {
		t.Fatal(err)
	}
	if err := run.Settings.Fit(run.Route); err != nil {
		t.Error(err)
	}
	again, err := k.Run(run.Route, run.Settings)
	if err != nil || again.WaterOut != run.WaterOut {
		t.Errorf("the settings give %g, then %g: %v", run.WaterOut, again.WaterOut, err)
	}
	return run
}

// A charge that serves several lots costs each of them less: sieve, oven and the
// solvent on its beads are shared. A single batch a year has no second lot, and a
// ketone makes water on the beads.
func TestTheSieveIsUsedAgain(t *testing.T) {
	const lot = "solvent: toluene, batch: 18 L, water: 480 mg/kg, target: 15 mg/kg"
	often := tuned(t, lot+", batches: 40 /yr")
	if len(often.Settings.LotsOverCharge) != 1 || !often.Meets || !(often.Outcomes[0].Figure(steps.LotsServed) > 1) {
		t.Errorf("40 batches: %+v", often.Settings)
	}
	if once := tuned(t, lot+", batches: 1 /yr"); once.Settings.LotsOverCharge != nil {
		t.Errorf("one batch: %+v", once.Settings)
	}
	if ketone := tuned(t, "solvent: 2-butanone, batch: 18 L, batches: 40 /yr, water: 1000 mg/kg, target: 300 mg/kg"); ketone.Settings.LotsOverCharge != nil {
		t.Errorf("a ketone: %+v", ketone.Settings)
	}
}

// Where the largest practical dose holds too little, two charges reach the target.
func TestTwoChargesWhereOneIsNotEnough(t *testing.T) {
	run := tuned(t, "solvent: ethanol, batch: 18 L, batches: 12 /yr, water: 3 %, target: 100 mg/kg")
	if !run.Meets || len(run.Settings.Charges) != 1 || run.Settings.Charges[0] != 2 || len(run.Outcomes[0].Losses) != 2 {
		t.Errorf("%+v: %s, %g mg/kg", run.Settings, run.Outcomes[0].WhyText, run.WaterOut*1e6)
	}
}
