package steps_test

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"parch/internal/steps"
	"parch/internal/thermo"
)

const atmospherePa = 101325

func equilibrium(t testing.TB, solvent string, receiverC float64) *steps.TrapEquilibrium {
	t.Helper()
	eq, err := steps.NewTrapEquilibrium(mixture(t, solvent), receiverC+273.15, atmospherePa)
	if err != nil {
		t.Fatal(err)
	}
	return eq
}

// byFineSteps integrates pot and receiver in equal small portions of vapour
// (explicit midpoint), each condensed, split by the lever rule and the organic
// layer returned: the balances as they stand, without the straight line and the
// quadrature of the program.
func byFineSteps(t *testing.T, eq *steps.TrapEquilibrium, feed steps.Lot, reach float64, r steps.TrapRig) (boiledMol, heatJ, waterRemovedKg float64) {
	m := eq.Mixture
	water, solvent := feed.WaterKg/m.Water.MolarMassKgPerMol, feed.SolventKg/m.Solvent.MolarMassKgPerMol
	total := water + solvent
	l := eq.Floor.Layers
	vapour := func(water, solvent float64) thermo.Vapour {
		x := water / (water + solvent)
		if a := eq.Azeotrope; a.Kind == thermo.Heterogeneous && x > a.Layers.XOrganic {
			return thermo.Vapour{TempK: a.TempK, YWater: a.YWater}
		}
		v, err := m.BubbleFrom(x, eq.PressurePa, 350)
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	latent := func(v thermo.Vapour) float64 {
		return v.YWater*m.Water.HeatOfVaporizationJ.At(v.TempK) + (1-v.YWater)*m.Solvent.HeatOfVaporizationJ.At(v.TempK)
	}
	start := water
	v := vapour(water, solvent)
	potK := v.TempK
	warm := func(tK float64) float64 { // the pot's boiling point rises as it loses water
		heat := (water*m.Water.HeatCapacityJPerMolK.At(tK) + solvent*m.Solvent.HeatCapacityJPerMolK.At(tK)) * (tK - potK)
		potK = tK
		return heat
	}
	const fillSteps = 2000
	for range fillSteps {
		v = vapour(water, solvent)
		dn := r.FillVolumeM3 / fillSteps / m.MolarVolume(v.YWater, eq.ReceiverK)
		water, solvent = water-dn*v.YWater, solvent-dn*(1-v.YWater)
		boiledMol += dn
		heatJ += dn*latent(v) + warm(v.TempK)
	}
	dn := total / 100000
	for m.MassFraction(water/(water+solvent)) > reach {
		v = vapour(water, solvent)
		efficiency := 1.0
		if m.MassFraction(water/(water+solvent)) < rules.EfficiencyBelow {
			efficiency = rules.Efficiency
		}
		change := func(v thermo.Vapour) (dw, ds float64) {
			aqueous := (v.YWater - l.XOrganic) / (l.XAqueous - l.XOrganic) * dn * efficiency
			return aqueous * l.XAqueous, aqueous * (1 - l.XAqueous)
		}
		dw, ds := change(v)
		v = vapour(water-dw/2, solvent-ds/2)
		dw, ds = change(v)
		water, solvent = water-dw, solvent-ds
		mid := (v.TempK + eq.ReceiverK) / 2
		returned := 1 - (v.YWater-l.XOrganic)/(l.XAqueous-l.XOrganic)
		cp := l.XOrganic*m.Water.HeatCapacityJPerMolK.At(mid) + (1-l.XOrganic)*m.Solvent.HeatCapacityJPerMolK.At(mid)
		boiledMol += dn
		heatJ += dn*(latent(v)+returned*cp*(v.TempK-eq.ReceiverK)) + warm(v.TempK)
	}
	return boiledMol, heatJ, (start - water) * m.Water.MolarMassKgPerMol
}

func TestTrapAgainstFineSteps(t *testing.T) {
	for _, c := range []struct {
		solvent              string
		litres, water, reach float64
		returns              string
	}{
		{"toluene", 18, 480e-6, 20e-6, "light"},
		{"toluene", 5, 3000e-6, 50e-6, "light"}, // two liquids in the pot at first
		{"cyclohexane", 10, 200e-6, 25e-6, "light"},
		{"dichloromethane", 10, 1500e-6, 350e-6, "heavy"},
		{"ethyl-acetate", 15, 30000e-6, 12000e-6, "light"},
	} {
		eq := equilibrium(t, c.solvent, 20)
		feed := litres(eq.Mixture, c.litres, c.water)
		r := rig(c.returns)
		quick := rules
		quick.ShortestRefluxS = 0 // so that time follows from the vapour alone
		o, err := steps.RunTrap(eq, feed, c.reach, r, quick)
		if err != nil {
			t.Errorf("%s: %v", c.solvent, err)
			continue
		}
		mol, heat, removed := byFineSteps(t, eq, feed, c.reach, r)
		boilHours := heat / (r.HeaterW * r.HeatShare) / 3600
		energyKWh := r.HeaterW * (boilHours + o.Figure("heat-up, each charge")) / 1e3
		near(t, c.solvent+": water removed", o.Balance.WaterRemovedKg, removed, 0.01)
		near(t, c.solvent+": reflux hours", o.Figure("reflux, each charge"), boilHours, 0.01)
		near(t, c.solvent+": energy", o.EnergyKWh, energyKWh, 0.01)
		if mol <= 0 {
			t.Errorf("%s: nothing boiled", c.solvent)
		}
	}
}

func near(t *testing.T, what string, got, want, share float64) {
	t.Helper()
	if !(math.Abs(got/want-1) <= share) {
		t.Errorf("%s = %.6g, want %.6g within %g %%", what, got, want, 100*share)
	}
}

// A pot of two immiscible liquids boils at the constant azeotrope: what is
// removed per mole of vapour does not change, so the vapour is in proportion.
func TestTwoLiquidPotIsLinear(t *testing.T) {
	eq := equilibrium(t, "toluene", 20)
	vapour := func(water float64) float64 {
		o, err := steps.RunTrap(eq, litres(eq.Mixture, 18, water), 4000e-6, rig("light"), rules)
		if err != nil {
			t.Fatal(err)
		}
		return o.Figure("vapour boiled up, each charge")
	}
	a, b, c := vapour(0.02), vapour(0.04), vapour(0.06)
	near(t, "second step", c-b, b-a, 0.03) // the solvent shrinks by 2 % between the steps
}

// 480 to 20 mg/kg in toluene needs about 4 % of the batch as vapour, and the
// azeotrope boils near 84 °C (common practice, no source).
func TestTolueneNeedsLittleVapour(t *testing.T) {
	eq := equilibrium(t, "toluene", 20)
	o, err := steps.RunTrap(eq, litres(eq.Mixture, 18, 480e-6), 20e-6, rig("light"), rules)
	if err != nil {
		t.Fatal(err)
	}
	if share := o.Figure("vapour as a share of the charge"); share < 2.5 || share > 6 {
		t.Errorf("vapour is %.3g %% of the charge", share)
	}
	if o.HoursTotal < o.Figure("heat-up, each charge")+1 {
		t.Errorf("%.3g h is less than heat-up and one hour of reflux", o.HoursTotal)
	}
}

func TestTrapNeverClaimsLessThanPractice(t *testing.T) {
	eq := equilibrium(t, "toluene", 20)
	for _, litre := range []float64{0.5, 2, 18} {
		o, err := steps.RunTrap(eq, litres(eq.Mixture, litre, 200e-6), 1e-6, rig("light"), rules)
		if err != nil {
			t.Fatal(err)
		}
		if w := o.Out.Water(); w < 20e-6*(1-1e-9) {
			t.Errorf("%g L: outlet %.3g mg/kg", litre, w*1e6)
		}
		if o.Why != steps.AtPractice || !(o.Floor < 6e-6) {
			t.Errorf("%g L stops for %q with a floor of %.3g mg/kg", litre, o.Why, o.Floor*1e6)
		}
	}
}

// A lot under the floor comes out as it went in, and the trap says that nothing is gained.
func TestTrapOnALotUnderItsFloor(t *testing.T) {
	eq := equilibrium(t, "ethyl-acetate", 25)
	feed := litres(eq.Mixture, 1, 0.9*eq.Floor.Water)
	o, err := steps.RunTrap(eq, feed, 100e-6, rig("light"), rules)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "water", o.Out.Water(), feed.Water(), 1e-9)
	if len(o.Warnings) == 0 || !strings.Contains(o.Warnings[0], "nothing is gained") || !strings.Contains(o.WhyText, "takes no water out") {
		t.Errorf("%s; %v", o.WhyText, o.Warnings)
	}
}

func TestTrapRefusals(t *testing.T) {
	for _, solvent := range []string{"tetrahydrofuran", "acetonitrile"} {
		if _, err := steps.NewTrapEquilibrium(mixture(t, solvent), 298.15, atmospherePa); !errors.Is(err, steps.ErrNoTrap) {
			t.Errorf("%s: %v, want that no trap works", solvent, err)
		}
	}
	eq := equilibrium(t, "dichloromethane", 15)
	if _, err := steps.RunTrap(eq, litres(eq.Mixture, 5, 1000e-6), 400e-6, rig("light"), rules); !errors.Is(err, steps.ErrNoTrap) {
		t.Errorf("a light return for dichloromethane: %v", err)
	}
}

// Water, solvent and heat close, whatever the lot, the still and the receiver, for every
// solvent of the catalog that a trap can dry.
func TestTrapBalances(t *testing.T) {
	var solvents []string
	for key, s := range shelf(t).Solvents {
		if s.Water != nil {
			solvents = append(solvents, key)
		}
	}
	slices.Sort(solvents)
	ran := map[string]bool{}
	rapid.Check(t, func(rt *rapid.T) {
		solvent := rapid.SampledFrom(solvents).Draw(rt, "solvent")
		receiver := rapid.Float64Range(1, 40).Draw(rt, "receiver")
		m := mixture(t, solvent)
		m.Limits = shelf(t).Solvents[solvent].Water.Limits
		eq, err := steps.NewTrapEquilibrium(m, receiver+273.15, rapid.Float64Range(5e3, 110e3).Draw(rt, "P"))
		if refusal(err) {
			return
		}
		if err != nil {
			rt.Fatal(err)
		}
		water := math.Exp(rapid.Float64Range(math.Log(1e-6), math.Log(0.5)).Draw(rt, "ln w"))
		goal := water * rapid.Float64Range(0.001, 1).Draw(rt, "goal")
		r := rig("either")
		r.Charges = rapid.IntRange(1, 4).Draw(rt, "charges")
		r.HeaterW = rapid.Float64Range(200, 4000).Draw(rt, "W")
		r.FillVolumeM3 = rapid.Float64Range(1e-6, 300e-6).Draw(rt, "fill")
		r.UsableVolumeM3 = rapid.Float64Range(5e-6, 300e-6).Draw(rt, "usable")
		feed := litres(eq.Mixture, rapid.Float64Range(0.5, 60).Draw(rt, "litres"), water)
		o, err := steps.RunTrap(eq, feed, goal, r, rules)
		if errors.Is(err, steps.ErrNoTrap) || errors.Is(err, steps.ErrHeater) {
			return
		}
		if err != nil {
			rt.Fatal(err)
		}
		ran[solvent] = true
		b := o.Balance
		closes(rt, "water", b.WaterInKg, b.WaterOutKg+b.WaterRemovedKg)
		closes(rt, "solvent", b.SolventInKg, b.SolventOutKg+b.SolventRemovedKg)
		closes(rt, "heat", b.HeatInJ, b.HeatUsedJ)
		// a pot wetter than its azeotrope grows wetter while the receiver fills
		if eq.Mixture.MoleFraction(water) < eq.Azeotrope.YWater && o.Out.Water() > water*(1+1e-9) {
			rt.Fatalf("wetter out (%g) than in (%g)", o.Out.Water(), water)
		}
		timeGoesOn(rt, o)
		if o.HoursAttended > o.HoursTotal {
			rt.Fatalf("%g h attended of %g", o.HoursAttended, o.HoursTotal)
		}
		if o.Out.Water() < math.Min(water, o.Floor)*(1-1e-9) {
			rt.Fatalf("below the floor: %g < %g", o.Out.Water(), o.Floor)
		}
	})
	if len(ran) < 10 {
		t.Errorf("only %d solvents were run", len(ran))
	}
}

// timeGoesOn holds a course to a clock: no point of it is earlier than the one before.
func timeGoesOn(t interface{ Fatalf(string, ...any) }, o steps.Outcome) {
	for i, p := range o.Course[1:] {
		if p.Hours < o.Course[i].Hours-1e-9 { // less is rounding
			t.Fatalf("back in time: %g h after %g h", p.Hours, o.Course[i].Hours)
		}
	}
}

// A wet pot of 2-butanone boils off a vapour that is drier than that of a less wet one:
// its condensate does not split, and no trap starts there. Where one starts, time goes on.
func TestAWetPotMayNotSplit(t *testing.T) {
	refused := 0
	for _, receiverC := range []float64{10, 12, 15, 20, 30} {
		eq, err := steps.NewTrapEquilibrium(mixture(t, "2-butanone"), receiverC+273.15, 110e3)
		if err != nil {
			t.Fatal(err)
		}
		for _, water := range []float64{0.15, 0.3, 0.4, 0.45, 0.5} {
			o, err := steps.RunTrap(eq, litres(eq.Mixture, 1, water), 0.12, rig("light"), rules)
			if err == nil {
				timeGoesOn(t, o)
				continue
			}
			if refused++; !errors.Is(err, steps.ErrNoTrap) || !strings.Contains(err.Error(), "does not split") || water < 0.3 {
				t.Errorf("%g kg/kg, receiver at %g °C: %v", water, receiverC, err)
			}
		}
	}
	if refused == 0 {
		t.Error("nothing refused")
	}
}

func closes(t *rapid.T, what string, in, out float64) {
	if math.Abs(in-out) > 1e-10*math.Abs(in) {
		t.Fatalf("%s: %g in, %g accounted for", what, in, out)
	}
}

// A receiver that holds nearly the whole charge takes all the water of a dry pot on the
// way: of a pot of constant K nine tenths of the vapour leave exp(-2.3 K) of it, and K is in
// the thousands. The filling comes to an end and keeps its balances. A receiver that would
// leave less than 10 % in the pot is refused: nothing is boiled to dryness.
func TestAReceiverNearlyAsLargeAsTheCharge(t *testing.T) {
	for _, solvent := range []string{"n-hexane", "n-heptane", "n-octane", "toluene"} {
		eq, err := steps.NewTrapEquilibrium(mixture(t, solvent), 275.15, 30e3) // where K is largest, and less is left than a number holds
		if err != nil {
			t.Fatal(err)
		}
		m := eq.Mixture
		r := rig("either")
		feed := litres(m, 1, 1e-6)
		r.FillVolumeM3 = 0.89 * feed.SolventKg / m.Solvent.MolarMassKgPerMol * m.MolarVolume(0, eq.ReceiverK)
		ended := make(chan error, 1)
		go func() {
			o, err := steps.RunTrap(eq, feed, 1e-7, r, rules)
			if err == nil && math.Abs(o.Balance.WaterInKg-o.Balance.WaterOutKg-o.Balance.WaterRemovedKg) > 1e-10*feed.WaterKg {
				err = fmt.Errorf("%+v", o.Balance)
			}
			if err == nil {
				if last := o.Course[len(o.Course)-1]; !(last.LostShare > 0.88 && last.Water < 1e-9) {
					err = fmt.Errorf("%+v", last)
				}
			}
			ended <- err
		}()
		select {
		case err := <-ended:
			if err != nil {
				t.Errorf("%s: %v", solvent, err)
			}
		case <-time.After(20 * time.Second): // it takes milliseconds
			t.Fatalf("%s: the filling does not end", solvent)
		}
		r.FillVolumeM3 *= 0.91 / 0.89
		if _, err := steps.RunTrap(eq, feed, 1e-7, r, rules); !errors.Is(err, steps.ErrNoTrap) || !strings.Contains(err.Error(), "less than 10 %") {
			t.Errorf("%s, boiled to a heel of 9 %%: %v", solvent, err)
		}
	}
}

func BenchmarkTrap(b *testing.B) {
	eq := equilibrium(b, "toluene", 20)
	feed := litres(eq.Mixture, 18, 480e-6)
	for b.Loop() {
		if _, err := steps.RunTrap(eq, feed, 20e-6, rig("light"), rules); err != nil {
			b.Fatal(err)
		}
	}
}

// A trap that is given less time than its goal takes boils for that time exactly, and
// comes to where a trap with that goal takes as long. The heat is that of the heater.
func TestTrapForATime(t *testing.T) {
	eq, r := equilibrium(t, "toluene", 15), rig("light")
	feed, quick := litres(eq.Mixture, 18, 480e-6), rules
	quick.ShortestRefluxS = 0
	whole, err := steps.RunTrap(eq, feed, 30e-6, r, quick)
	if err != nil {
		t.Fatal(err)
	}
	for _, share := range []float64{0.6, 0.9} {
		hours := share * whole.Figure("reflux, each charge")
		timed := quick
		timed.LongestRefluxS = hours * 3600
		o, err := steps.RunTrap(eq, feed, 30e-6, r, timed)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "reflux", o.Figure("reflux, each charge"), hours, 1e-8)
		near(t, "energy", o.EnergyKWh, r.HeaterW*(hours+o.Figure("heat-up, each charge"))/1e3, 1e-8)
		if o.Why != steps.AtTime || !(o.Out.Water() > 30e-6 && o.Out.Water() < 480e-6) {
			t.Errorf("%s at %g", o.Why, o.Out.Water())
		}
		back, err := steps.RunTrap(eq, feed, o.Out.Water(), r, quick)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "time to that goal", back.Figure("reflux, each charge"), hours, 1e-4)
	}
	short := quick
	short.LongestRefluxS = 1
	if _, err := steps.RunTrap(eq, feed, 30e-6, r, short); !errors.Is(err, steps.ErrNoTrap) || !strings.Contains(err.Error(), "the receiver is not full") {
		t.Errorf("one second: %v", err)
	}
}

// A course that is told more closely is the same course: what it ends with does not
// move by more than 0.02 % (needs no outside value).
func TestCloserCourse(t *testing.T) {
	for _, solvent := range []string{"toluene", "ethyl-acetate", "1-butanol", "dichloromethane"} {
		eq := equilibrium(t, solvent, 20)
		feed := litres(eq.Mixture, 15, 3*eq.Floor.Water+500e-6)
		goal := 1.2*eq.Floor.Water + 30e-6
		returns := string(eq.Floor.Return)
		plain, err := steps.RunTrap(eq, feed, goal, rig(returns), rules)
		if err != nil {
			t.Fatal(err)
		}
		closer := rules
		closer.Closely = true
		o, err := steps.RunTrap(eq, feed, goal, rig(returns), closer)
		if err != nil {
			t.Fatal(err)
		}
		if len(o.Course) < len(plain.Course)+2 {
			t.Errorf("%s: %d points, %d more closely", solvent, len(plain.Course), len(o.Course))
		}
		near(t, solvent+": water", o.Out.Water(), plain.Out.Water(), 1e-6)
		near(t, solvent+": hours", o.HoursTotal, plain.HoursTotal, 2e-4)
		near(t, solvent+": lost", o.SolventLostL, plain.SolventLostL, 2e-4)
		near(t, solvent+": aqueous layer", o.Figure("aqueous layer, each charge"), plain.Figure("aqueous layer, each charge"), 1e-6)
	}
}
