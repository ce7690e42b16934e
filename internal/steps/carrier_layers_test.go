package steps_test

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"parch/internal/steps"
)

// Runs that end at the edge of two layers, where the organic layer of the
// condensate shrinks to nothing, or begin on it: found by random runs of the
// balances.
func TestCarrierAtTheEdgeOfTwoLayers(t *testing.T) {
	for _, c := range []struct {
		solvent, carrier               string
		receiverC, water, litres, dose float64
		stages                         int
		preFilled                      bool
		goal                           float64
		charges                        int
		want                           string
	}{
		{"ethanol", "cyclohexane", 10, 0.02581100663500964, 3.9673298556663212, 0.05, 1, true, 0.2180391346118995, 3, "do not settle"},
		{"ethanol", "cyclohexane", 10, 0.029980716999603557, 1.9263801574707031, 0.088140545377330293, 0, true, 0.047931754837653016, 2, "do not settle"},
		{"n-n-dimethylformamide", "toluene", 10, 0.16835916284868391, 3.9444505438068518, 0.066423043259419501, 0, true, 0.048978615089054885, 3, "do not settle"},
		{"n-n-dimethylformamide", "toluene", 25, 0.29999999999999999, 9.0727877616882324, 1, 0, false, 0.080079801577085163, 3, "hardly any second layer"},
		{"n-n-dimethylformamide", "toluene", 25, 0.014814076666171789, 6.9420175738632679, 0.15380859375, 1, false, 0.042140581941566779, 1, "hardly any second layer"},
	} {
		eq := carrierEquilibrium(t, c.solvent, c.carrier, c.receiverC)
		feed := carrierLot(eq, c.litres, c.water)
		plan := withColumn(feed, c.dose, c.stages)
		plan.PreFilled, plan.Goal = c.preFilled, c.water*c.goal
		r := rig("either")
		r.Charges = c.charges
		o, err := steps.RunCarrier(eq, feed, plan, r, rules)
		told := o.WhyText
		if err != nil {
			told = err.Error()
		}
		if err != nil && !errors.Is(err, steps.ErrNoCarrier) || !strings.Contains(told, c.want) {
			t.Errorf("%+v: %s", c, told)
		}
		if len(o.Course) > 100 {
			t.Errorf("%+v: %d steps", c, len(o.Course))
		}
	}
}

// Layers that come together in density, and would change places: chloroform (1.48 kg/L)
// makes the organic layer heavy, isobutanol (0.80 kg/L, handbooks) light. By hand, with
// volumes that add up, a layer of both is as heavy as water (0.99 kg/L) where 42 % of it
// are chloroform. A step once went past that, and the run ended far drier than with finer
// steps. The same pot is light once it is dry, and with less chloroform from the start.
func TestCarrierLayersComeTogether(t *testing.T) {
	eq := carrierEquilibrium(t, "isobutanol", "chloroform", 40)
	run := func(water, dose, stepError float64) (steps.Outcome, error) {
		feed := steps.Lot{SolventKg: 10 * (1 - water), WaterKg: 10 * water, TempK: 293.15}
		plan := withColumn(feed, dose, 0)
		plan.RefluxRatio, plan.Goal, plan.PreFilled, plan.StepError = 0, 100e-6, true, stepError
		return steps.RunCarrierTrap(eq, feed, plan, rig("either"), rules)
	}
	for _, water := range []float64{0.15, 0.2, 0.25, 0.3} {
		fine, err := run(water, 0.05, 1e-6)
		if err != nil {
			t.Fatal(err)
		}
		for _, stepError := range []float64{0, 1e-4, 1e-3} {
			o, err := run(water, 0.05, stepError)
			if err != nil {
				t.Fatal(err)
			}
			if o.Why != steps.AtExchange || o.Returns != "heavy" || !strings.Contains(o.WhyText, "have come together") {
				t.Errorf("%g water, steps of %g: %s return, %s", water, stepError, o.Returns, o.WhyText)
			}
			name := fmt.Sprintf("%g water, steps of %g", water, stepError)
			near(t, name, o.Figure("water in the pot when the trap stops"), fine.Figure("water in the pot when the trap stops"), 0.005)
		}
	}
	for water, dose := range map[float64]float64{0.08: 0.05, 0.2: 0.02} {
		if o, err := run(water, dose, 0); err != nil || o.Returns != "light" {
			t.Errorf("%g water, a dose of %g: %s return, %v", water, dose, o.Returns, err)
		}
	}
	_, err := run(0.1, 0.05, 0)
	if !errors.Is(err, steps.ErrNoCarrier) || !strings.Contains(err.Error(), "differ by 0.2 % only and do not settle") {
		t.Fatalf("layers of the same density: %v", err)
	}
	var water, isobutanol, chloroform float64
	_, held, _ := strings.Cut(err.Error(), "it holds ")
	if _, err := fmt.Sscanf(held, "%f %% water, %f %% isobutanol and %f %% chloroform", &water, &isobutanol, &chloroform); err != nil {
		t.Fatalf("%s: %v", held, err)
	}
	near(t, "chloroform beside isobutanol where both layers are as heavy", chloroform/(chloroform+isobutanol), 0.42, 0.03)
}
