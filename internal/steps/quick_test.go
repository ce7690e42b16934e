package steps_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"parch/internal/history"
	"parch/internal/steps"
	"parch/internal/thermo"

	"pgregory.net/rapid"
)

// asides are draws: as planned, and with everything off at once.
func asides(residual float64) []steps.Aside {
	return []steps.Aside{
		{Loading: 1, ResidualKgPerKg: residual, Rate: 1, Left: 1},
		{Loading: 1.4, ResidualKgPerKg: 1.3 * residual, Rate: 0.5, Left: 1.6, Shift: thermo.Shift{Ln25: 0.1, LnTrend: -0.05}},
		{Loading: 0.6, ResidualKgPerKg: 0.8 * residual, Rate: 1.8, Left: 0.5, Shift: thermo.Shift{Ln25: -0.12, LnTrend: 0.08}},
	}
}

// turnedOut is the pair as a draw has it.
func turnedOut(m *thermo.Mixture, a steps.Aside) *thermo.Mixture {
	moved := *m
	moved.NRTL.Shift = a.Shift
	return &moved
}

// The quick forms are the steps, run in full on the pair, the sorbent and the rate
// of the draw.
func TestQuickSoakIsTheSoak(t *testing.T) {
	for _, solvent := range []string{"toluene", "tetrahydrofuran"} {
		m, rig, sieve := mixture(t, solvent), bottle(t, solvent, 0.25), sieve3A(t, 0.02)
		feed := litres(m, 18, 400e-6)
		const doseKg, timeS = 1.2, 40 * 3600.0
		quick, err := steps.NewQuickSoak(m, feed, doseKg, timeS, 1, sieve, rig)
		if err != nil {
			t.Fatal(err)
		}
		for _, a := range asides(0.02) {
			drawn := sieve
			drawn.CapacityShare, drawn.ResidualKgPerKg = a.Loading, a.ResidualKgPerKg
			for _, water := range []float64{400e-6, 250e-6} {
				lot := litres(m, 18, water)
				full, err := steps.SoakOver(turnedOut(m, a), lot, doseKg/steps.LotVolume(m, lot, rig.TempK), timeS*a.Rate, drawn, rig)
				if err != nil {
					t.Fatal(err)
				}
				near(t, solvent+" soaked", quick.Water(water, lot.SolventKg, &a), full.Out.Water(), 1e-3)
			}
			// what a still has left of the lot is met by more beads a litre: rates go with them
			stirred := rig
			stirred.Stirred, stirred.RelativeVelocityMS = true, 0.005
			short, err := steps.NewQuickSoak(m, feed, doseKg, 2*3600, 1, sieve, stirred)
			if err != nil {
				t.Fatal(err)
			}
			for _, volumeL := range []float64{18, 13, 24} {
				lot := litres(m, volumeL, 300e-6)
				full, err := steps.SoakOver(turnedOut(m, a), lot, doseKg/steps.LotVolume(m, lot, rig.TempK), 2*3600*a.Rate, drawn, stirred)
				if err != nil {
					t.Fatal(err)
				}
				near(t, solvent+" stirred", short.Water(300e-6, lot.SolventKg, &a), full.Out.Water(), 1e-3)
			}
			if got := quick.Water(1e-9, feed.SolventKg, &a); got != 1e-9 {
				t.Errorf("a lot drier than the sieve leaves at %g", got)
			}
		}
	}
}

func TestQuickColumnIsTheColumn(t *testing.T) {
	m, rig, sieve := mixture(t, "toluene"), tube("toluene", 0.0002), sieve3A(t, 0.01)
	feed := litres(m, 5, 300e-6)
	planned, err := steps.ColumnFor(m, feed, 20e-6, sieve, rig)
	if err != nil {
		t.Fatal(err)
	}
	quick, err := steps.NewQuickColumn(m, feed, planned.AgentKg, sieve, rig)
	if err != nil {
		t.Fatal(err)
	}
	for _, a := range asides(0.01) {
		drawn, slower := sieve, rig
		drawn.CapacityShare, drawn.ResidualKgPerKg = a.Loading, a.ResidualKgPerKg
		slower.Association = a.Rate * a.Rate // of toluene 1; the diffusivity goes with its root
		full, err := steps.ColumnOver(turnedOut(m, a), feed, planned.AgentKg, 20e-6, drawn, slower)
		if err != nil {
			t.Fatal(err)
		}
		got, ok := quick.Water(feed.Water(), feed.SolventKg, &a)
		if !ok {
			t.Errorf("%+v: the bed is called wetter than the lot", a)
		}
		near(t, "pumped", got, full.Out.Water(), 2e-3)
		if _, ok := quick.Water(1e-9, feed.SolventKg, &a); ok {
			t.Error("a lot drier than the bed is dried")
		}
	}
}

func TestQuickSaltIsTheSalt(t *testing.T) {
	for _, c := range []struct {
		solvent, salt string
		water         float64
	}{{"ethyl-acetate", "magnesium-sulfate", 0.02}, {"toluene", "calcium-chloride", 450e-6}, {"toluene", "calcium-sulfate", 300e-6}, {"ethyl-acetate", "potassium-carbonate", 0.025}} {
		m, s, rig := mixture(t, c.solvent), salt(c.salt), flask()
		feed := litres(m, 15, c.water)
		const doseKg = 1.5
		holds := steps.NewSolubilities(m, rig.TempK, -0.3, 0.3)
		quick, err := steps.NewQuickSalt(m, feed, doseKg, s, claims, rig, holds)
		if err != nil {
			t.Fatal(err)
		}
		for _, a := range asides(0.02) {
			drawn := s
			if s.ShareRemoved > 0 {
				drawn.ShareRemoved = 1 - math.Min(1, (1-s.ShareRemoved)*a.Left)
			}
			full, err := steps.RunSalt(turnedOut(m, a), feed, doseKg/steps.LotVolume(m, feed, rig.TempK), drawn, claims, rig)
			if err != nil {
				t.Fatal(err)
			}
			got := quick.Run(c.water, feed.SolventKg, &a)
			what := c.solvent + " over " + c.salt
			near(t, what+": water", got.Water, full.Out.Water(), 5e-3)
			near(t, what+": solvent kept", got.SolventKg, full.Out.SolventKg, 1e-3)
			near(t, what+": solvent held", got.HeldKg, full.Losses[0].SolventKg, 5e-3)
			near(t, what+": cake", got.CakeKg, full.Discards[0].Kg, 5e-3)
		}
	}
}

func TestQuickReactiveIsTheAgent(t *testing.T) {
	m := mixture(t, "toluene")
	feed := litres(m, 2, 300e-6)
	for _, found := range []steps.Measured{{}, {Water: 31e-6, Low: 12e-6, High: 62e-6}} {
		for _, refluxS := range []float64{0, 3 * 3600} {
			agent, rig := reactive("calcium-hydride"), pot()
			agent.LeastRefluxS, rig.RefluxS = 3600, math.Max(refluxS, 60)
			quick := steps.NewQuickReactive(m, agent, found, rig, steps.NewSolubilities(m, 298.15, -0.3, 0.3))
			for _, a := range asides(0.02) {
				drawn, seen := agent, found
				drawn.ClassActivity *= a.Left
				seen.Water, seen.Low, seen.High = seen.Water*a.Left, seen.Low*a.Left, seen.High*a.Left
				full, err := steps.RunReactive(turnedOut(m, a), feed, drawn, seen, rig)
				if err != nil {
					t.Fatal(err)
				}
				got, ok := quick.Water(feed.Water(), &a)
				if !ok {
					t.Error("300 mg/kg are called too wet")
				}
				near(t, fmt.Sprintf("%+v, reflux %g s", found, rig.RefluxS), got, full.Out.Water(), 5e-3)
			}
			if _, ok := quick.Water(600e-6, &steps.Aside{Left: 1}); ok {
				t.Error("600 mg/kg are not too wet for an agent that handles 500")
			}
		}
	}
}

// Solubilities between the points of a table are those of the shifted pair.
func TestSolubilitiesOverShifts(t *testing.T) {
	m := mixture(t, "toluene")
	holds := steps.NewSolubilities(m, 298.15, -0.3, 0.3)
	quick := func(shift float64) float64 { // an agent whose activity is above one is stopped by the solubility
		agent := reactive("calcium-hydride")
		agent.ClassActivity, agent.HandlesBelow = 1, 1
		q := steps.NewQuickReactive(m, agent, steps.Measured{}, pot(), holds)
		w, _ := q.Water(0.5, &steps.Aside{Left: 1, Shift: thermo.Shift{Ln25: shift}})
		return w
	}
	for _, shift := range []float64{-0.3, -0.1234, 0, 0.05, 0.3} {
		want, ok, err := turnedOut(m, steps.Aside{Shift: thermo.Shift{Ln25: shift}}).Solubility(298.15)
		if err != nil || !ok {
			t.Fatal(err)
		}
		near(t, fmt.Sprintf("shift %g", shift), quick(shift), want, 1e-3)
	}
}

// 18 L of toluene with 36 g of water at 20 °C, by the lever rule on masses: what
// toluene holds stays, the rest is drawn with the little toluene it holds.
func TestSettlingByHand(t *testing.T) {
	m := mixture(t, "toluene")
	const tempK = 293.15
	rules := steps.SettleRules{TimeS: 7200, AttendedS: 900, InterfaceShare: 0.01}
	feed := litres(m, 18, 2300e-6)
	o, err := steps.RunSettle(m, feed, tempK, rules)
	if err != nil {
		t.Fatal(err)
	}
	l, err := m.LayersAt(tempK)
	if err != nil {
		t.Fatal(err)
	}
	holds, aqueous := m.MassFraction(l.XOrganic), m.MassFraction(l.XAqueous)
	drawn := feed.MassKg() * (feed.Water() - holds) / (aqueous - holds)
	organic := feed.MassKg() - drawn
	near(t, "water in the product", o.Out.Water(), holds, 1e-9)
	near(t, "product", o.Out.MassKg(), 0.99*organic, 1e-9)
	near(t, "drawn water", o.Discards[0].Kg, drawn, 1e-9)
	near(t, "interface", o.Discards[1].Kg, 0.01*organic, 1e-9)
	near(t, "toluene in the drawn water", o.Losses[0].SolventKg, drawn*(1-aqueous), 1e-6)
	near(t, "toluene at the interface", o.Losses[1].SolventKg, 0.01*organic*(1-holds), 1e-9)
	near(t, "hours", o.HoursTotal, 2.25, 1e-12)
	near(t, "attended", o.HoursAttended, 0.25, 1e-12)
	near(t, "free water, mL", o.Figure("free water drawn"), 1e6*drawn/998.2, 2e-3) // kg/m3 at 20 °C, CRC Handbook
	near(t, "water balance", o.Balance.WaterRemovedKg+o.Out.WaterKg, feed.WaterKg, 1e-12)
	for _, c := range []struct {
		lot  steps.Lot
		want string
	}{{litres(m, 18, 300e-6), "holds"}, {litres(m, 18, 0.9999), "the lot is water"}} {
		if _, err := steps.RunSettle(m, c.lot, tempK, rules); !errors.Is(err, steps.ErrNothingSettles) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%v, want %q", err, c.want)
		}
	}
	if _, err := steps.RunSettle(mixture(t, "tetrahydrofuran"), feed, tempK, rules); !errors.Is(err, steps.ErrNothingSettles) {
		t.Errorf("tetrahydrofuran: %v", err)
	}
}

// 20 L of toluene of 10 mg/kg, 0.8669 kg/L at 20 °C (CRC Handbook), half an hour to order.
func TestBuyingByHand(t *testing.T) {
	m := mixture(t, "toluene")
	o := steps.RunBuy(m, litres(m, 18, 480e-6), 20e-3, 10e-6, 1800, 293.15)
	near(t, "kg", o.Out.MassKg(), 20*0.8669, 1e-2)
	near(t, "water", o.Out.Water(), 10e-6, 1e-9)
	near(t, "hours", o.HoursTotal, 0.5, 1e-12)
	if o.HoursAttended != o.HoursTotal || o.Floor != 10e-6 || o.Why != steps.AtGrade || !strings.Contains(o.WhyText, "10 mg/kg") {
		t.Errorf("%+v", o)
	}
}

// A table of a trap says what the trap does between two of its points.
func TestTrapTableIsTheTrap(t *testing.T) {
	eq := equilibrium(t, "toluene", 15)
	free := rules
	free.Efficiency, free.ShortestRefluxS = 1, 0
	tiny := rig("light")
	tiny.FillVolumeM3 = 1e-9 // nothing to speak of is taken from the pot
	waters := []float64{40e-6, 60e-6, 100e-6, 200e-6, 400e-6}
	nodes, err := steps.TrapTable(eq, free, tiny.RoomK, waters)
	if err != nil {
		t.Fatal(err)
	}
	m := eq.Mixture
	feed := litres(m, 18, 400e-6)
	x := eq.Floor.Layers.XAqueous
	rest := feed.SolventKg/m.Solvent.MolarMassKgPerMol - feed.WaterKg/m.Water.MolarMassKgPerMol*(1-x)/x
	for i, goal := range waters[:4] {
		o, err := steps.RunTrap(eq, feed, goal, tiny, free)
		if err != nil {
			t.Fatal(err)
		}
		n := nodes[i]
		near(t, fmt.Sprintf("heat to %.0f mg/kg", goal*1e6), n.HeatJ*rest, o.Figure("reflux, each charge")*3600*tiny.HeaterW*tiny.HeatShare, 1e-3)
		perMol := func(y float64) float64 { return y*m.Water.MolarMassKgPerMol + (1-y)*m.Solvent.MolarMassKgPerMol }
		boiled := o.Figure("vapour boiled up, each charge") / (n.BoiledMol * rest)
		if wet, dry := perMol(nodes[4].YWater), perMol(n.YWater); !(boiled > wet && boiled < dry) {
			t.Errorf("a mole of vapour weighs %g kg, want between %g wet and %g dry", boiled, wet, dry)
		}
		if n.LnLeftM3 >= 0 || i > 0 && n.LnLeftM3 <= nodes[i-1].LnLeftM3 {
			t.Errorf("ln of what is left: %g", n.LnLeftM3)
		}
	}
	start := nodes[4]
	near(t, "heat-up", (start.WarmWaterJ*feed.WaterKg/m.Water.MolarMassKgPerMol+start.WarmSolventJ*feed.SolventKg/m.Solvent.MolarMassKgPerMol)/(tiny.HeaterW*tiny.HeatShare),
		3600*mustTrap(t, eq, feed, tiny, free).Figure("heat-up, each charge"), 1e-3)
	// Rayleigh between two points with K = y/x almost constant: ln N = ln(x/x0)/(K - 1).
	k := nodes[1].YWater / m.MoleFraction(60e-6)
	perMolM3 := func(water float64) float64 { return m.MolarVolume(m.MoleFraction(water), eq.ReceiverK) }
	near(t, "drawn off without return", nodes[0].LnLeftM3-nodes[1].LnLeftM3, math.Log(40./60)/(k-1)+math.Log(perMolM3(40e-6)/perMolM3(60e-6)), 1e-2)
}

func mustTrap(t *testing.T, eq *steps.TrapEquilibrium, feed steps.Lot, r steps.TrapRig, rules steps.TrapRules) *steps.Outcome {
	t.Helper()
	o, err := steps.RunTrap(eq, feed, 100e-6, r, rules)
	if err != nil {
		t.Fatal(err)
	}
	return &o
}

// The outlet of a trap is its goal, but never under 1.05 times its floor or the
// least that is claimed, and never above what it is given.
func TestTrapOutletByHand(t *testing.T) {
	for _, c := range []struct{ feed, goal, floor, lowest, want float64 }{
		{400e-6, 50e-6, 5e-6, 20e-6, 50e-6}, {400e-6, 10e-6, 5e-6, 20e-6, 20e-6}, {400e-6, 10e-6, 100e-6, 20e-6, 105e-6},
	} {
		near(t, fmt.Sprintf("%+v", c), steps.TrapOutlet(c.feed, c.goal, c.floor, c.lowest), c.want, 1e-9)
	}
	near(t, "margin", steps.FloorMargin, 1.05, 1e-12)
}

func TestSpacingOfWaters(t *testing.T) {
	equal := func(what string, got, want []float64) {
		t.Helper()
		if len(got) != len(want) {
			t.Errorf("%s: %v, want %v", what, got, want)
			return
		}
		for i := range got {
			near(t, what, got[i], want[i], 1e-12)
		}
	}
	equal("logarithmic", steps.SpacedWaters(1, 16, 5), []float64{1, 2, 4, 8, 16})
	equal("fourth roots", steps.WetterWaters(1, 81, 3), []float64{1, 16, 81})
	nodes := func() []float64 { return []float64{1, 2, 4} }
	equal("between", steps.WithNodes(nodes(), 3), []float64{1, 2, 3, 4})
	equal("in place of the next", steps.WithNodes(nodes(), 1.9999), []float64{1, 1.9999, 4})
	equal("in place of the one before", steps.WithNodes(nodes(), 2.0001), []float64{1, 2.0001, 4})
	equal("outside", steps.WithNodes(nodes(), 0.5, 5), []float64{1, 2, 4})
	eq := equilibrium(t, "toluene", 15)
	waters := steps.TrapWaters(eq, rules, 400e-6, 8, 250e-6)
	if waters[0] < rules.LowestOutlet*(1-1e-9) || waters[len(waters)-1] > 400e-6*(1+1e-9) {
		t.Errorf("%v", waters)
	}
	has := func(w float64) bool {
		for _, have := range waters {
			if math.Abs(have/w-1) < 1e-9 {
				return true
			}
		}
		return false
	}
	if !has(250e-6) || !has(rules.EfficiencyBelow) || len(waters) != 10 {
		t.Errorf("%v lacks a node", waters)
	}
	if got := steps.TrapWaters(eq, rules, 10e-6, 8); got != nil {
		t.Errorf("below the least outlet: %v", got)
	}
}

// 0.1 mL of water is 115 mg/kg in a litre of toluene and 6 in 20 L (ASTM D95's
// repeatability over 0.867 kg/L).
func TestWhatAReadingProves(t *testing.T) {
	near(t, "1 L", 1e6*steps.ProvedByReading(0.867), 115, 5e-3)
	near(t, "20 L", 1e6*steps.ProvedByReading(20*0.867), 5.8, 1e-2)
}

// A receiver of 2 mL is full at 2 and 4 mL of the 5 that come: on paper 0.5 h and
// 1.5 h, as 4 mL come in the first hour and 1 mL in the second.
func TestDrainingsByHand(t *testing.T) {
	o := steps.Outcome{
		Course:  []steps.Point{{Hours: 0, Water: 400e-6}, {Hours: 1, Water: 100e-6, AqueousM3: 3.5e-6, BoiledKg: 1, PotK: 380}, {Hours: 2, Water: 25e-6, AqueousM3: 4.5e-6, BoiledKg: 3, PotK: 384}},
		Figures: []steps.Figure{{Name: "receiver holds of aqueous layer", Unit: "mL", Value: 2}},
	}
	got := o.DrainAt()
	if len(got) != 2 {
		t.Fatalf("%+v", got)
	}
	near(t, "first draining", got[0].Hours, 2/3.5, 1e-12)
	near(t, "second draining", got[1].Hours, 1.5, 1e-12)
	near(t, "water then", got[1].Water, 50e-6, 1e-12)
	near(t, "vapour then", got[1].BoiledKg, 2, 1e-12)
	near(t, "pot then", got[1].PotK, 382, 1e-12)
}

// Of a course that falls by half each hour, five rows are evenly spaced.
func TestRowsWorthReading(t *testing.T) {
	var o steps.Outcome
	for h := range 17 {
		o.Course = append(o.Course, steps.Point{Hours: float64(h), Water: 400e-6 * math.Pow(0.5, float64(h))})
	}
	rows := o.Watch(5)
	for i, want := range []float64{0, 4, 8, 12, 16} {
		if want == 12 || want == 8 { // below 1 ug/kg the logarithm is held
			continue
		}
		if rows[i].Hours != want {
			t.Errorf("row %d at %g h, want %g", i, rows[i].Hours, want)
		}
	}
	if got := o.Watch(1); len(got) != 17 {
		t.Errorf("%d rows for one", len(got))
	}
}

// On paper: q_room = 0.2, the oven keeps 0.001 x 10 = 0.01, handling adds 0.018, and
// two days at 0.1 % a day go towards the room.
func TestHistoryByHand(t *testing.T) {
	s := steps.Sorbent{Loading: func(pa, tK float64) float64 {
		if tK > 400 {
			return 1e-5 * pa
		}
		return 2e-4 * pa
	}}
	a := history.Activation{OvenK: 573.15, Days: 2, RoomK: 293.15, RoomWaterPa: 1000}
	r, err := history.ResidualLoading(s.Loading, a, history.DefaultPickup)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "oven", r.OvenKgPerKg, 0.01, 1e-12)
	near(t, "usual", r.KgPerKg, 0.2-(0.2-0.028)*math.Exp(-0.002), 1e-12)
	near(t, "low", r.Low, 0.2-(0.2-0.018)*math.Exp(-0.0004), 1e-12)
	near(t, "high", r.High, 0.2-(0.2-0.033)*math.Exp(-0.01), 1e-12)
	near(t, "added", r.AddedKgPerKg, r.KgPerKg-0.01, 1e-12)
	if len(r.Notes) != 1 {
		t.Errorf("%q", r.Notes)
	}
	a.ClosedHot, a.VacuumPa = true, 100
	r, _ = history.ResidualLoading(s.Loading, a, history.DefaultPickup)
	near(t, "vacuum oven, bottled hot", r.KgPerKg, 0.2-(0.2-0.009)*math.Exp(-0.002), 1e-12)
	a.VacuumPa, a.PurgePa, a.LeftOpen = 0, 10, true
	r, _ = history.ResidualLoading(s.Loading, a, history.DefaultPickup)
	near(t, "purged, left open", r.KgPerKg, 0.2-(0.2-0.0081)*math.Exp(-4), 1e-12)
	for celsius, notes := range map[float64]int{120: 2, 149.9: 2, 150: 1} {
		a.OvenK = celsius + 273.15
		if r, err = history.ResidualLoading(s.Loading, a, history.DefaultPickup); err != nil || len(r.Notes) != notes {
			t.Errorf("%g °C: %q, %v", celsius, r.Notes, err)
		}
	}
	for _, bad := range []history.Activation{{OvenK: 1000}, {OvenK: 573, Days: -1}, {OvenK: 573, VacuumPa: -1}} {
		if _, err := history.ResidualLoading(s.Loading, bad, history.DefaultPickup); err == nil {
			t.Errorf("%+v is taken", bad)
		}
	}
}

func TestEqualChargesByHand(t *testing.T) {
	got := steps.EqualCharges(3, 1.5, 7200)
	if len(got) != 3 || got[2] != got[0] || len(steps.EqualCharges(-1, 1, 1)) != 0 {
		t.Errorf("%+v", got)
	}
	near(t, "J for a m3 by 10 K", steps.CoolantJPerM3(10), 4.18e6*10, 5e-3) // water, CRC Handbook
}

// BenchmarkIsothermInversion finds the water that a sieve and a lot agree on.
func BenchmarkIsothermInversion(b *testing.B) {
	m, rig, sieve := mixture(b, "toluene"), bottle(b, "toluene", 0.25), sieve3A(b, 0.02)
	feed := litres(m, 18, 400e-6)
	quick, err := steps.NewQuickSoak(m, feed, 1.2, 40*3600, 1, sieve, rig)
	if err != nil {
		b.Fatal(err)
	}
	a := asides(0.02)[0]
	for b.Loop() {
		_ = quick.Water(400e-6, feed.SolventKg, &a)
	}
}

// What is told of a limit without the equilibrium is what the water left says of it.
func TestQuickSoakLeavesWhatItsWaterSays(t *testing.T) {
	m, rig, sieve := mixture(t, "tetrahydrofuran"), bottle(t, "tetrahydrofuran", 0.25), sieve3A(t, 0.02)
	wettest := litres(m, 18, 2000e-6)
	yes, no := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		rig := rig
		charges := rapid.IntRange(1, 3).Draw(t, "charges")
		if charges == 1 {
			rig.Lots = rapid.IntRange(1, 4).Draw(t, "lots")
		}
		if rapid.Bool().Draw(t, "makes water") {
			rig.Lots, rig.CondensationPerS = 1, 1e-9
		}
		doseKg, hours := rapid.Float64Range(0, 4).Draw(t, "dose"), rapid.Float64Range(0, 100).Draw(t, "hours")
		quick, err := steps.NewQuickSoak(m, wettest, doseKg, hours*3600, charges, sieve, rig)
		if err != nil {
			t.Fatal(err)
		}
		a := asides(0.02)[rapid.IntRange(0, 2).Draw(t, "draw")]
		water, kg := math.Exp(rapid.Float64Range(math.Log(1e-7), math.Log(2000e-6)).Draw(t, "ln water")), rapid.Float64Range(5, 20).Draw(t, "kg")
		left := quick.Water(water, kg, &a)
		for _, limit := range []float64{left * (1 - 1e-6), left * (1 + 1e-6), left / 3, left * 3, 1e-6, water} {
			for _, least := range []float64{0, limit / 2, limit * (1 - 1e-6)} {
				want := left <= limit && left >= least
				if want {
					yes++
				} else {
					no++
				}
				if got := quick.Leaves(water, kg, &a, least, limit); got != want && math.Abs(left/limit-1) > 1e-8 && math.Abs(left-least) > 1e-8*left {
					t.Fatalf("%g left of %g; between %g and %g: %v", left, water, least, limit, got)
				}
			}
		}
	})
	if yes == 0 || no == 0 {
		t.Errorf("%d within, %d outside", yes, no)
	}
}
