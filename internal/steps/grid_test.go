package steps_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"

	"parch/internal/steps"
	"parch/internal/thermo"
)

// The grid on which nothing may fail but by a refusal that says why.
var (
	gridPressures = []float64{5e3, 50e3, 110e3}
	gridReceivers = []float64{274.15, 293.15, 313.15}
	gridWaters    = []float64{1e-6, 1e-4, 1e-2, 0.1, 0.5}
)

// fullGrid runs all 9450 ternaries instead of a sample, in a minute or two:
//
//	PARCH_FULL_GRID=1 go test -run OnTheGrid ./internal/steps
var fullGrid = os.Getenv("PARCH_FULL_GRID") != ""

// refusal reports whether an error is a refusal in words.
func refusal(err error) bool {
	var outside *thermo.OutsideModel
	var warm *thermo.WarmReceiver
	return errors.Is(err, steps.ErrNoTrap) || errors.Is(err, steps.ErrNoForerun) || errors.Is(err, steps.ErrNoCarrier) || errors.As(err, &outside) || errors.As(err, &warm)
}

func sound(o *steps.Outcome) bool {
	for _, v := range []float64{o.Out.SolventKg, o.Out.WaterKg, o.Out.CarrierKg, o.HoursTotal, o.EnergyKWh, o.SolventLostL, o.CoolingWaterL} {
		if math.IsNaN(v) || math.IsInf(v, 0) || v < 0 {
			return false
		}
	}
	for _, p := range o.Course {
		if math.IsNaN(p.Hours) || math.IsNaN(p.Water) || math.IsNaN(p.PotK) {
			return false
		}
	}
	return o.Out.SolventKg > 0 && o.WhyText != ""
}

func lotOf(water float64) steps.Lot {
	return steps.Lot{SolventKg: 10 * (1 - water), WaterKg: 10 * water, TempK: 293.15}
}

func TestEveryBinaryOnTheGrid(t *testing.T) {
	c := shelf(t)
	traps, foreruns, refused := 0, 0, 0
	for _, s := range c.Solvents {
		if s.Water == nil {
			continue
		}
		m := mixture(t, s.Key)
		m.Limits = s.Water.Limits
		for _, pressurePa := range gridPressures {
			draw, err := steps.NewForerunEquilibrium(m, pressurePa)
			if err != nil && !refusal(err) {
				t.Errorf("%s at %g kPa: %v", s.Key, pressurePa/1e3, err)
			}
			for _, water := range gridWaters {
				for _, stages := range []int{0, 8} {
					if draw == nil {
						continue
					}
					o, err := steps.RunForerun(draw, lotOf(water), water/20, still(stages), drawingRules)
					switch {
					case err == nil && sound(&o):
						foreruns++
					case refusal(err):
						refused++
					default:
						t.Errorf("%s at %g kPa, %g water, %d stages: %v %+v", s.Key, pressurePa/1e3, water, stages, err, o.Out)
					}
				}
			}
			for _, receiverK := range gridReceivers {
				eq, err := steps.NewTrapEquilibrium(m, receiverK, pressurePa)
				if err != nil {
					if !refusal(err) {
						t.Errorf("%s at %g kPa, receiver %g K: %v", s.Key, pressurePa/1e3, receiverK, err)
					}
					refused++
					continue
				}
				for _, water := range gridWaters {
					o, err := steps.RunTrap(eq, lotOf(water), water/20, rig("either"), rules)
					switch {
					case err == nil && sound(&o):
						traps++
					case refusal(err):
						refused++
					default:
						t.Errorf("%s at %g kPa, receiver %g K, %g water: %v %+v", s.Key, pressurePa/1e3, receiverK, water, err, o.Out)
					}
				}
			}
		}
	}
	t.Logf("%d traps, %d foreruns, %d refusals", traps, foreruns, refused)
	if traps == 0 || foreruns == 0 {
		t.Error("nothing ran")
	}
}

type ternaryCase struct {
	pair                         [2]string
	pressurePa, receiverK, water float64
}

func ternaryCases(t *testing.T) (all []ternaryCase) {
	var pairs [][2]string
	for k := range shelf(t).Pairs {
		pairs = append(pairs, k)
	}
	slices.SortFunc(pairs, func(a, b [2]string) int { return strings.Compare(a[0]+" "+a[1], b[0]+" "+b[1]) })
	for _, k := range pairs {
		for _, p := range gridPressures {
			for _, r := range gridReceivers {
				for _, w := range gridWaters {
					all = append(all, ternaryCase{k, p, r, w})
				}
			}
		}
	}
	return all
}

func TestTernariesOnTheGrid(t *testing.T) {
	cases := ternaryCases(t)
	if !fullGrid {
		const sample = 200
		random := rand.New(rand.NewPCG(3, 4))
		random.Shuffle(len(cases), func(i, j int) { cases[i], cases[j] = cases[j], cases[i] })
		cases = cases[:sample]
	}
	ran, refused := 0, 0
	for _, c := range cases {
		m, organic, doubt := three(t, c.pair[0], c.pair[1])
		eq, err := steps.NewCarrierEquilibrium(m, organic, doubt, c.receiverK, c.pressurePa)
		if err == nil {
			lot := lotOf(c.water)
			plan := withColumn(lot, 0.3, 3)
			plan.Goal = c.water / 20
			var o steps.Outcome
			if o, err = steps.RunCarrier(eq, lot, plan, rig("either"), rules); err == nil {
				ran++
				if !sound(&o) {
					t.Errorf("%+v: %+v", c, o.Out)
				}
				continue
			}
		}
		refused++
		if !refusal(err) {
			t.Errorf("%+v: %v", c, err)
		}
	}
	t.Logf("%d runs, %d refusals", ran, refused)
	if ran == 0 {
		t.Error("nothing ran")
	}
}
