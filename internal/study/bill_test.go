package study_test

import (
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/shopspring/decimal"

	"parch/internal/costs"
	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

func compareFile(t *testing.T, name string) *study.Report {
	t.Helper()
	data, err := os.ReadFile("testdata/" + name)
	if err != nil {
		t.Fatal(err)
	}
	return compare(t, string(data), study.Options{})
}

func routeOf(t *testing.T, l *study.Lot, id string) *study.Route {
	t.Helper()
	for i := range l.Routes {
		if l.Routes[i].ID == id {
			return &l.Routes[i]
		}
	}
	t.Fatalf("no route %s", id)
	return nil
}

func lineOf(t *testing.T, r *study.Route, head steps.Head, item string) costs.Line {
	t.Helper()
	for _, line := range r.Bill.Lines {
		if line.Head == head && line.Item == item {
			return line
		}
	}
	t.Fatalf("%s: no line of %s for %s", r.ID, head, item)
	return costs.Line{}
}

// The whole bill of the route "buy" on paper, EUR for one of 40 batches a year.
//
// Density of toluene at 294.15 K by Perry's Chemical Engineers' Handbook, 8th ed.
// (2007), Table 2-32: rho = 0.8792/0.27136^(1+(1-294.15/591.75)^0.29241) kmol/m3
// = 9.4158 kmol/m3, x 92.14 kg/kmol = 867.6 kg/m3. The reclaimed lot that is given up
// weighs 18 L x 0.8676 kg/L = 15.616 kg (its 480 mg/kg of water change that by 1 g).
//
//	labour    order, receipt, label: 0.2 h (common practice)    x 48          =   9.60
//	purchase  18 L                                              x 690/20      = 621.00
//	waste     15.616 kg                                         x 1.35        =  21.08
//	          15.616 kg / 20 kg = 0.7808 containers             x 8           =   6.25
//	          a year 40 x 27.33 = 1093; least 4 x 400 = 1600; short by 507/40 =  12.67
//	          together 1600/40                                                =  40.00
//	testing   2 injections                                      x 120/100     =   2.40
//	          0.2 h (common practice)                           x 48          =   9.60
//	                                                                            ------
//	a batch                                                                   = 682.60
//	a litre   682.60 / 18 L                                                   =  37.922
func TestBillByHand(t *testing.T) {
	report := compareFile(t, "by-hand-buy.yaml")
	r := routeOf(t, &report.Lots[0], "buy")
	for _, c := range []struct {
		head       steps.Head
		item, want string
	}{
		{steps.Labour, "technician", "9.60"},
		{steps.Purchase, "toluene-dry", "621.00"},
		{steps.Waste, "waste-flammable-liquid", "21.08"},
		{steps.Waste, "waste-container", "6.25"},
		{steps.Waste, "waste-minimum", "12.67"},
		{steps.Testing, "karl-fischer", "2.40"},
		{steps.Testing, "technician", "9.60"},
	} {
		if got := lineOf(t, r, c.head, c.item).Amount.StringFixed(2); got != c.want {
			t.Errorf("%s, %s: %s, want %s", c.head, c.item, got, c.want)
		}
	}
	if len(r.Bill.Lines) != 7 {
		t.Errorf("%d lines, want 7", len(r.Bill.Lines))
	}
	for what, c := range map[string][2]string{
		"waste":   {r.Bill.ByHead[steps.Waste].StringFixed(2), "40.00"},
		"a batch": {r.Bill.PerBatch.StringFixed(2), "682.60"},
		"a litre": {r.Bill.PerLitre.StringFixed(3), "37.922"},
		"a year":  {r.Bill.PerYear.StringFixed(2), "27304.00"},
	} {
		if c[0] != c[1] {
			t.Errorf("%s: %s, want %s", what, c[0], c[1])
		}
	}
}

// The whole bill of a still soak on paper, EUR for one of 50 batches a year. Water asks for
// less sieve than the 50 g/L that are always charged; common practice, no source: 50
// g/L, ten uses, 0.25 mL of solvent kept by a gram of drained beads, oven runs of 5 kg
// and 7 kWh, 0.4 h for a vessel, 0.4 h for an oven run, 0.2 h for a test, a drum serves
// ten years. Density of dichloromethane at 20 °C: 1.3266 kg/L (CRC Handbook of
// Chemistry and Physics, physical constants of organic compounds).
//
//	charge    50 g/L x 16 L = 0.8 kg; kept by it 0.25 mL/g x 800 g = 0.2 L
//	labour    the vessel                          0.4 h                 x 48       19.2
//	          0.8 kg / 5 kg = 0.16 oven runs      0.16 x 0.4 = 0.064 h  x 48        3.072
//	energy    0.16 x 7 kWh                        1.12 kWh              x 0.24      0.2688
//	agent     0.8 kg / 10                         0.08 kg               x 740/25    2.368
//	lost      by the beads                        0.2 L                 x 62/20     0.62
//	waste     (0.8 + 0.2 x 1.3266) kg / 10        0.10653 kg            x 3.80      0.40482
//	          0.10653 kg / 25 kg                  0.0042613 containers  x 8         0.03409
//	equipment 1/10 drum a year / 50               0.002                 x 600       1.2
//	testing   2 injections                                              x 120/100   2.4
//	          0.2 h                                                     x 48        9.6
//	purchase  16 L x 1.3266 = 21.2256 kg hold 120 mg/kg, 2.5 g, of water; 21.2231 kg
//	          are 15.9981 L; less 0.2 L           15.7981 L             x 62/20    48.9741
//	a batch                                                                        88.1418
//	a litre   88.1418 / 15.798                                                      5.5793
//
// Running totals 22.272, 22.5408, 22.5408, 24.9088, 25.5288, 25.9677, 27.1677, 39.1677,
// 88.1418 are written 22.27, 22.54, 22.54, 24.91, 25.53, 25.97, 27.17, 39.17, 88.14.
func TestSoakByHand(t *testing.T) {
	data, err := os.ReadFile("testdata/by-hand-soak.yaml")
	if err != nil {
		t.Fatal(err)
	}
	still := routes.Settings{SoakHours: []float64{24}, Stirred: []bool{false}, Sieve: []string{routes.Regenerate}}
	report := compare(t, string(data), study.Options{Settings: map[string]map[string]routes.Settings{"by hand": {"soak:sieve-3a": still}}})
	r := routeOf(t, &report.Lots[0], "soak:sieve-3a")
	for _, c := range []struct {
		head        steps.Head
		basis, want string
	}{
		{steps.Labour, "attended hours of the soak", "19.20"},
		{steps.Labour, "loading the oven", "3.07"},
		{steps.Energy, "activation", "0.27"},
		{steps.Agent, "0.8 kg charged, used 10 times", "2.37"},
		{steps.SolventLost, "held by the drained beads", "0.62"},
		{steps.Waste, "solvent-wet beads", "0.40"},
		{steps.Waste, "share of a container", "0.03"},
		{steps.Equipment, "bought, over 10 years", "1.20"},
		{steps.Testing, "2 injections each", "2.40"},
		{steps.Testing, "sampling, test and log", "9.60"},
		{steps.Purchase, "regular grade", "48.97"},
	} {
		found := slices.IndexFunc(r.Bill.Lines, func(l costs.Line) bool { return l.Head == c.head && strings.HasPrefix(l.Basis, c.basis) })
		if found < 0 || r.Bill.Lines[found].Amount.StringFixed(2) != c.want {
			t.Errorf("%s, %s: line %d, want %s", c.head, c.basis, found, c.want)
		}
	}
	if len(r.Bill.Lines) != 11 {
		t.Errorf("%d lines, want 11", len(r.Bill.Lines))
	}
	written, total := r.Bill.Written()
	for i, want := range []string{"22.27", "0.27", "0", "2.37", "0.62", "0.44", "1.20", "12.00", "48.97"} {
		if got := written[steps.Heads[i]]; !got.Equal(decimal.RequireFromString(want)) {
			t.Errorf("%s is written %s, want %s", steps.Heads[i], got, want)
		}
	}
	if !total.Equal(decimal.RequireFromString("88.14")) || r.Bill.WrittenPerLitre().String() != "5.58" {
		t.Errorf("a batch %s, a litre %s; want 88.14 and 5.58", total, r.Bill.WrittenPerLitre())
	}
}

// Energy, cooling water and equipment of a trap on paper.
//
// Heating 14 L x 0.868 kg/L = 12.15 kg of toluene from 20 °C takes 12.15 kg x
// 1.86 kJ/kg/K (liquid toluene, mean of 1.69 at 20 °C and 2.03 at 105 °C; handbook
// values from memory) for each kelvin up to where the wet pot begins to boil. Half of
// 1.6 kW reaches the liquid (common practice). Then follows one hour of reflux, the
// least there is. Energy = 1.6 kW x (22.6 kJ/K x (T - 20 °C)/0.8 kW/3600 s + 1 h);
// cooling water = 2 L/min x 60 min = 0.12 m3 x 4.20 = 0.50.
//
// Equipment by annuity at 6 %: capital recovery factor over 5 years 0.23740 (tables
// of engineering economy). Still 0.23740 x 2400 / 40 = 14.24. Receiver, of which 10 %
// a year break (common practice): 0.33740 x 90 / 40 = 0.76.
func TestTrapByHand(t *testing.T) {
	report := compareFile(t, "by-hand-trap.yaml")
	r := routeOf(t, &report.Lots[0], "trap")
	begins := r.Run.Outcomes[0].Figure("boiling temperature at the start")
	want := 1.6 * (22.6*(begins-20)/0.8/3600 + 1)
	if kWh := lineOf(t, r, steps.Energy, "electricity").Quantity.InexactFloat64(); math.Abs(kWh/want-1) > 0.01 {
		t.Errorf("energy %.4g kWh, want %.4g within 1 %%", kWh, want)
	}
	for _, c := range []struct {
		head       steps.Head
		item, want string
	}{
		{steps.CoolingWater, "cooling-water", "0.50"},
		{steps.Equipment, "still-20l", "14.24"},
		{steps.Equipment, "receiver-light", "0.76"},
	} {
		if got := lineOf(t, r, c.head, c.item).Amount.StringFixed(2); got != c.want {
			t.Errorf("%s, %s: %s, want %s", c.head, c.item, got, c.want)
		}
	}
	if y := r.Year; !y.Equipment.Equal(decimal.NewFromInt(2490)) {
		t.Errorf("equipment to buy %s, want 2400 + 90", y.Equipment)
	}
}

// A chiller or a loop in place of tap water: the heat is that which the heater
// brings into the liquid, half of its energy (common practice). The unit of 1500 W
// draws 1500 W (catalog, from memory), that of 500 W would draw 700 W.
func TestCoolingAlternatives(t *testing.T) {
	data, err := os.ReadFile("testdata/by-hand-trap.yaml")
	if err != nil {
		t.Fatal(err)
	}
	with := func(old, now string) *study.Route {
		report := compare(t, strings.Replace(string(data), old, now, 1), study.Options{})
		return routeOf(t, &report.Lots[0], "trap")
	}
	tap := with("", "")
	heater := lineOf(t, tap, steps.Energy, "electricity").Quantity.InexactFloat64()

	chiller := with("room: 20 °C", "room: 20 °C, cooling: chiller")
	drawn := lineOf(t, chiller, steps.CoolingWater, "electricity").Quantity.InexactFloat64()
	if math.Abs(drawn-1500.0/1500*0.5*heater) > 1e-9 || chiller.Run.CoolingWaterL != 0 {
		t.Errorf("chiller draws %.6g kWh with %g L of water, want %.6g and none", drawn, chiller.Run.CoolingWaterL, 1500.0/1500*0.5*heater)
	}
	if more := chiller.Run.EnergyKWh - tap.Run.EnergyKWh; math.Abs(more-drawn) > 1e-9 {
		t.Errorf("energy rises by %g kWh, want %g", more, drawn)
	}
	if math.Abs(chiller.Footprint.TotalKg()-chiller.Run.CO2eKg) > 1e-9 {
		t.Errorf("emissions %g, run %g", chiller.Footprint.TotalKg(), chiller.Run.CO2eKg)
	}

	// Half of 1.6 kW is a duty of 800 W: of the catalog's chillers (500 and 1500 W) the
	// larger, 7000 EUR over 8 years at 6 %, capital recovery factor 0.16104 (tables of
	// engineering economy): 7000 x 0.16104 / 40 = 28.18. It is bought with the rest.
	if got := lineOf(t, chiller, steps.Equipment, "chiller-1500w").Amount.StringFixed(2); got != "28.18" {
		t.Errorf("chiller %s a batch, want 28.18", got)
	}
	if y := chiller.Year; !y.Equipment.Equal(decimal.NewFromInt(2490 + 7000)) {
		t.Errorf("equipment to buy %s, want 2490 + 7000", y.Equipment)
	}
	owned := routeOf(t, &compare(t, strings.NewReplacer("room: 20 °C", "room: 20 °C, cooling: chiller", "equipment: [", "equipment: [{item: chiller-1500w, owned: yes}, ").
		Replace(string(data)), study.Options{}).Lots[0], "trap")
	for _, line := range owned.Bill.Lines {
		if line.Item == "chiller-1500w" {
			t.Errorf("an owned chiller that does not break costs %s", line.Amount)
		}
	}

	loop := with("room: 20 °C", "room: 20 °C, cooling: loop")
	if loop.Bill.Priced() || loop.Bill.NoPrice[0] != "loop-cooling" {
		t.Errorf("a loop without a price: %v", loop.Bill.NoPrice)
	}
	data = []byte(strings.Replace(string(data), "prices:\n", "prices:\n  - {item: loop-cooling, price: 0.05 EUR/kWh}\n", 1))
	heat := lineOf(t, with("room: 20 °C", "room: 20 °C, cooling: loop"), steps.CoolingWater, "loop-cooling")
	if want := decimal.RequireFromString("0.05").Mul(heat.Quantity); math.Abs(heat.Quantity.InexactFloat64()-0.5*heater) > 1e-9 || !heat.Amount.Equal(want) {
		t.Errorf("loop takes %s kWh for %s, want %.6g for %s", heat.Quantity, heat.Amount, 0.5*heater, want)
	}
}

// A piece that serves two steps of a route is written off once: still, receiver and
// column of trap and forerun in one route.
func TestEquipmentIsChargedOnce(t *testing.T) {
	report := compare(t, mustRead(t, "../../testdata/jobs/reclaimed-ethyl-acetate.yaml"), study.Options{})
	checked := 0
	for _, r := range report.Lots[0].Routes {
		seen := map[string]bool{}
		for _, line := range r.Bill.Lines {
			if line.Head != steps.Equipment {
				continue
			}
			if checked++; seen[line.Item] {
				t.Errorf("%s: %s is charged twice", r.ID, line.Item)
			}
			seen[line.Item] = true
		}
	}
	if checked == 0 {
		t.Error("no equipment at all")
	}
}

// The losses of solvent stand in the bill by cause, at the price of a litre.
func TestSolventLostByCause(t *testing.T) {
	causes := map[string]bool{}
	for _, name := range []string{"saturated-toluene", "reclaimed-ethyl-acetate", "acetonitrile"} {
		for _, r := range compare(t, mustRead(t, "../../testdata/jobs/"+name+".yaml"), study.Options{}).Lots[0].Routes {
			litres := 0.0
			for _, line := range r.Bill.Lines {
				if line.Head == steps.SolventLost {
					cause, _, _ := strings.Cut(line.Basis, ", charge")
					causes[cause] = true
					litres += line.Quantity.InexactFloat64()
				}
			}
			if math.Abs(litres-r.Run.SolventLostL) > 1e-6*r.Run.SolventLostL {
				t.Errorf("%s: %g L in the bill, %g L lost", r.ID, litres, r.Run.SolventLostL)
			}
		}
	}
	for _, want := range []string{"held by the drained beads", "held by the filtered cake", "dissolved in the aqueous layer", "vapour past the condenser", "drawn off with the water"} {
		if !causes[want] {
			t.Errorf("no line for solvent %q; there are %v", want, causes)
		}
	}
}

// Every route of the three jobs, of the demonstration and of two more: heads add up to the total, the search's float price
// agrees, and the emissions by origin add up to those of the run.
func TestEveryRouteOfTheJobs(t *testing.T) {
	if testing.Short() {
		t.Skip("many whole comparisons")
	}
	halogenated := `
date: 2026-12-01
equipment costing: annuity
interest: 8 %
site: {cooling: chiller, waste collections: 12 /yr}
prices:
  - {item: waste-minimum, price: 60 EUR, date: 2026-10-01}
  - {item: waste-container, price: 8 EUR, date: 2026-10-01}
  - {item: sieve-3a, pack: 1 kg, price: 90 EUR, date: 2025-10-01}
  - {item: sieve-3a, pack: 5 kg, price: 225 EUR, date: 2026-10-01}
lots:
  - {solvent: dichloromethane, batch: 12 L, batches: 30 /yr, water: 1200 mg/kg, target: 50 mg/kg}
`
	for name, yaml := range map[string]string{"demo": demo(t), "halogenated": halogenated, "trap": mustRead(t, "testdata/by-hand-trap.yaml"),
		"toluene": mustRead(t, "../../testdata/jobs/saturated-toluene.yaml"), "ethyl acetate": mustRead(t, "../../testdata/jobs/reclaimed-ethyl-acetate.yaml"),
		"acetonitrile": mustRead(t, "../../testdata/jobs/acetonitrile.yaml")} {
		report := compare(t, yaml, study.Options{})
		for _, l := range report.Lots {
			for _, r := range l.Routes {
				heads := decimal.Zero
				for _, amount := range r.Bill.ByHead {
					heads = heads.Add(amount)
				}
				if !heads.Equal(r.Bill.PerBatch) || !r.Bill.PerYear.Equal(r.Bill.PerBatch.Mul(decimal.NewFromFloat(l.Job.BatchesPerYear))) {
					t.Errorf("%s, %s: heads %s, batch %s, year %s", name, r.ID, heads, r.Bill.PerBatch, r.Bill.PerYear)
				}
				written, total := decimal.Zero, r.Bill.PerBatch.Round(costs.Cents)
				byHead, shown := r.Bill.Written()
				for _, amount := range byHead {
					written = written.Add(amount)
				}
				if !written.Equal(total) || !shown.Equal(total) {
					t.Errorf("%s, %s: written heads %s, written total %s, exact %s", name, r.ID, written, shown, r.Bill.PerBatch)
				}
				float, err := report.Book.PerBatchFloat(r.Run.Uses, l.Job.BatchesPerYear)
				if err != nil || math.Abs(float/r.Bill.PerBatch.InexactFloat64()-1) > 1e-9 {
					t.Errorf("%s, %s: search %.15g, bill %s, %v", name, r.ID, float, r.Bill.PerBatch, err)
				}
				if f := r.Footprint.TotalKg(); math.Abs(f-r.Run.CO2eKg) > 1e-9*r.Run.CO2eKg {
					t.Errorf("%s, %s: emissions by origin %g, run %g", name, r.ID, f, r.Run.CO2eKg)
				}
			}
		}
	}
}

func mustRead(t *testing.T, path string) string {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}
