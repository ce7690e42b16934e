package routes_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

func useOf(run routes.Run, basis string) float64 {
	for _, u := range run.Uses {
		if strings.Contains(u.Basis, basis) {
			return u.Quantity
		}
	}
	return 0
}

// Beads of a solvent that burns are flushed before the oven, and that is billed: by
// hand, 0.9 kg of beads hold 0.225 L or 0.195 kg of toluene, 2.12 mol. At 60 °C
// toluene has 18.5 kPa (Perry's Handbook, 8th ed., Table 2-8); at half of that a mole
// of gas in 10.95 is toluene, so 2.12 mol x 0.99 x 9.95 = 20.9 mol of nitrogen, 0.502 m3
// as it is metered at 20 °C, carry 99 % of it off, of which 80 % are caught.
func TestRegenerationIsBilled(t *testing.T) {
	const settings = `{"hand_over_mg_per_kg": [], "soak_hours": [72], "sieve": ["regenerate"]}`
	k := caseOf(t, "toluene", "200 mg/kg", "30 mg/kg", "")
	run := runSettings(t, k, settings)
	if kg := run.AgentKg["sieve-3a"]; math.Abs(kg-0.9) > 1e-3 {
		t.Fatalf("%g kg of beads", kg)
	}
	near := func(what string, got, want, within float64) {
		t.Helper()
		if math.Abs(got/want-1) > within {
			t.Errorf("%s: %g, want %g", what, got, want)
		}
	}
	near("nitrogen, m3", useOf(run, "dry nitrogen"), 0.502, 0.02)
	near("caught, kg", useOf(run, routes.FlushedSolvent), 0.195*0.99*0.8, 0.01)
	near("work, h", useOf(run, "loading the oven"), 0.9/5*0.4*1.5, 1e-3)
	near("kWh", useOf(run, "activation: sieve is saved up"), 0.9/5*7, 1e-3)
	once := runSettings(t, k, strings.Replace(settings, "regenerate", "discard", 1))
	if useOf(once, "dry nitrogen") != 0 || useOf(once, routes.FlushedSolvent) != 0 {
		t.Errorf("beads used once are flushed: %+v", once.Uses)
	}
	k.Job.Site.SieveFlush = "vacuum"
	if run := runSettings(t, k, settings); useOf(run, "dry nitrogen") != 0 || useOf(run, routes.FlushedSolvent) == 0 {
		t.Errorf("by vacuum: %+v", run.Uses)
	}
}

// Without a flush an oven within 50 K of the autoignition temperature is refused, and
// so is one where that is not known; what does not burn needs no flush. Tetrahydrofuran
// ignites at 230 °C, toluene at 530 °C (IEC 60079-20-1).
func TestTheOvenIsRefused(t *testing.T) {
	for _, c := range []struct {
		solvent, more, flush string
		says                 string
	}{
		{"tetrahydrofuran", "", "none", "it may ignite at 230"},
		{"tetrahydrofuran", "", "nitrogen", ""},
		{"tetrahydrofuran", "", "vacuum", ""},
		{"tetrahydrofuran", ", sieve history: 182 °C", "none", "it may ignite at 230"},
		{"tetrahydrofuran", ", sieve history: 178 °C", "none", ""},
		{"toluene", "", "none", ""},
		{"dichloromethane", "", "none", ""},
	} {
		k := caseOf(t, c.solvent, "200 mg/kg", "40 mg/kg", c.more)
		k.Job.Site.SieveFlush = c.flush
		reason, source := k.RefuseOven()
		if c.says == "" && reason != "" || !strings.Contains(reason, c.says) || (reason == "") != k.MayRegenerate() || reason != "" && source == "" {
			t.Errorf("%s, %s%s: %q, %q", c.solvent, c.flush, c.more, reason, source)
		}
		_, excluded := k.Candidates()
		told := slices.ContainsFunc(excluded, func(x routes.Excluded) bool { return x.ID == routes.Regenerate && x.Reason == reason })
		if told != (reason != "") {
			t.Errorf("%s, %s: told among the refusals: %v", c.solvent, c.flush, told)
		}
		_, err := k.Run(soak3A, routes.Settings{HandOverMgPerKg: []float64{}, SoakHours: []float64{240}, Sieve: []string{routes.Regenerate}})
		if (err != nil) != (reason != "") {
			t.Errorf("%s, %s: settings that regenerate: %v", c.solvent, c.flush, err)
		}
	}
}

// A gas that leaves with a tenth of the pressure holds nine times the vapour's volume;
// at the boil none is needed (needs no outside value).
func TestFlushGas(t *testing.T) {
	k := caseOf(t, "toluene", "200 mg/kg", "40 mg/kg", "")
	s := k.Mixture.Solvent
	molM3 := 8.314462618 * 293.15 / 101325 // the gas is metered at 20 °C, where a mole takes 24.06 L
	want := (101325/(0.5*s.VapourPressurePa.At(353.15)) - 1) * molM3 / s.MolarMassKgPerMol
	if got := steps.FlushGasM3PerKg(s, 353.15, 0.5); math.Abs(got/want-1) > 1e-9 {
		t.Errorf("%g, want %g", got, want)
	}
	if got := steps.FlushGasM3PerKg(s, 385, 1); got != 0 {
		t.Errorf("above the boil %g", got)
	}
}
