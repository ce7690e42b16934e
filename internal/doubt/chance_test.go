package doubt_test

import (
	"bytes"
	"math"
	"runtime"
	"slices"
	"testing"

	"gonum.org/v1/gonum/stat"
	"gonum.org/v1/gonum/stat/distuv"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/spread"
	"parch/internal/steps"
)

func lotOf(t *testing.T, yaml string, draws int) (*routes.Case, *doubt.Lot) {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	j, err := job.Read("job.yaml", []byte(yaml), cat)
	if err != nil {
		t.Fatal(err)
	}
	k, err := routes.NewCase(j, j.Lots[0], cat)
	if err != nil {
		t.Fatal(err)
	}
	book, err := costs.NewBook(cat, j)
	if err != nil {
		t.Fatal(err)
	}
	l, err := doubt.New(k, book, costs.NewArrangement(cat, j), draws, 3)
	if err != nil {
		t.Fatal(err)
	}
	return k, l
}

// A measured residual without a band of its own is off by a lognormal factor, so
// the chance of a limit has a closed form:
//
//	P(r f <= limit) = Phi(ln(limit/r) 1.645/ln(band))
func TestChanceAgainstTheClosedForm(t *testing.T) {
	const draws = 4000
	k, l := lotOf(t, "lots:\n- {solvent: dichloromethane, batch: 5 L, water: 200 mg/kg, target: 60 mg/kg}\n", draws)
	r := routes.Route{{Kind: steps.Reactive, Agent: "calcium-hydride"}}
	run, err := k.Run(r, routes.Settings{HandOverMgPerKg: []float64{}})
	if err != nil {
		t.Fatal(err)
	}
	var residual catalog.Value
	for _, x := range k.Catalog.Agents["calcium-hydride"].Residuals {
		if x.Solvent == "dichloromethane" {
			residual = x.Water
		}
	}
	if residual.Banded() || residual.SI == 0 {
		t.Fatalf("the residual of calcium hydride in dichloromethane is not what this test counts on: %+v", residual)
	}
	band := k.Catalog.Doubts[catalog.DoubtReactive].SI
	for _, times := range []float64{0.8, 1, 1.2, 1.5} {
		got, err := l.Chance(&run, doubt.Limits{Most: residual.SI * times})
		if err != nil {
			t.Fatal(err)
		}
		want := distuv.UnitNormal.CDF(math.Log(times) * 1.6448536269514722 / math.Log(band))
		if e := spread.QuantileError(want, draws); math.Abs(got-want) > 3*e {
			t.Errorf("limit %g times the residual: chance %g, want %g within %g", times, got, want, 3*e)
		}
	}
}

// More sieve for the same time never lowers the chance.
func TestChanceRisesWithTheDose(t *testing.T) {
	k, l := lotOf(t, "lots:\n- {solvent: tetrahydrofuran, batch: 10 L, water: 1200 mg/kg, target: 20 mg/kg, vessel height: 0.1 m}\n", 1000)
	r := routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}}
	lastKg, last := 0.0, 0.0
	for _, aim := range []float64{16, 12, 8, 5, 3, 2, 1} {
		run, err := k.Run(r, routes.Settings{HandOverMgPerKg: []float64{}, SoakHours: []float64{24}, Stirred: []bool{true}, Sieve: []string{routes.Regenerate}, AimMgPerKg: aim})
		if err != nil {
			t.Fatal(err)
		}
		chance, err := l.Chance(&run, doubt.Limits{Most: k.Limit.AcceptAt})
		if err != nil {
			t.Fatal(err)
		}
		if kg := run.Outcomes[0].AgentKg; kg < lastKg || chance < last {
			t.Errorf("aim %g: %.4g kg, chance %g; before %.4g kg, %g", aim, kg, chance, lastKg, last)
		} else {
			lastKg, last = kg, chance
		}
	}
	if last == 0 {
		t.Error("no dose reaches the limit in any draw: the test says nothing")
	}
}

// The draws do not depend on how many processors there are.
func TestSameDrawsOnAnyNumberOfProcessors(t *testing.T) {
	outcome := func(procs int) []byte {
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(procs))
		k, l := lotOf(t, "lots:\n- {solvent: toluene, batch: 18 L, water: 300 to 480 mg/kg, target: 30 mg/kg, heater: 1.6 kW}\n", 200)
		run, err := k.Run(routes.Route{{Kind: steps.Trap}}, routes.Settings{HandOverMgPerKg: []float64{}})
		if err != nil {
			t.Fatal(err)
		}
		o, err := l.Through(&run)
		if err != nil {
			t.Fatal(err)
		}
		var b bytes.Buffer
		for i := range o.Water {
			for _, x := range []float64{o.Water[i], o.Hours[i], o.CostPerLitre[i]} {
				bits := math.Float64bits(x)
				for s := 0; s < 64; s += 8 {
					b.WriteByte(byte(bits >> s))
				}
			}
		}
		return b.Bytes()
	}
	one := outcome(1)
	for _, procs := range []int{2, 8} {
		if !bytes.Equal(one, outcome(procs)) {
			t.Errorf("%d processors give other results than one", procs)
		}
	}
}

// A draw in which the plan fails (a lot too wet for the hydride) does what was planned
// and costs it: no failed draw is cheap.
func TestAFailedDrawCostsWhatWasDone(t *testing.T) {
	k, l := lotOf(t, "lots:\n- {solvent: dichloromethane, batch: 5 L, water: 400 to 600 mg/kg, target: 60 mg/kg}\n", 1000)
	run, err := k.Run(routes.Route{{Kind: steps.Reactive, Agent: "calcium-hydride"}}, routes.Settings{HandOverMgPerKg: []float64{}})
	if err != nil {
		t.Fatal(err)
	}
	o, err := l.Through(&run)
	if err != nil {
		t.Fatal(err)
	}
	failed, done := []float64{}, []float64{}
	for i, w := range o.Water {
		if math.IsInf(w, 1) {
			failed = append(failed, o.CostPerLitre[i])
		} else {
			done = append(done, o.CostPerLitre[i])
		}
	}
	if len(failed) < 50 || len(done) < 50 {
		t.Fatalf("%d failed, %d done: the test says nothing", len(failed), len(done))
	}
	if low, least := slices.Min(failed), slices.Min(done); low < 0.9*least || math.Abs(stat.Mean(failed, nil)/stat.Mean(done, nil)-1) > 0.1 {
		t.Errorf("failed draws cost from %g, %g on average; the others from %g, %g on average", low, stat.Mean(failed, nil), least, stat.Mean(done, nil))
	}
}
