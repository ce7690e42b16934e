package job

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/shopspring/decimal"

	"parch/catalog"
)

// full uses every key that a job may have.
const full = `title: Spring drying plan, Fernbrook pilot hall
currency: EUR
objective: cost
assurance: 90 %
catalog: [our-solvents.yaml]
prices:
  - {item: sieve-3a, pack: 5 kg, price: 148 EUR, date: 2026-10-01}
  - {item: toluene-dry, pack: 20 L, price: 690 EUR, water: 10 ppm}
  - {item: still-20l, price: 2400 EUR}
  - {item: karl-fischer, pack: 100, price: 120 EUR}
  - {item: sodium-free, price: 1 EUR}
site:
  {room: 21 °C, pressure: 1013 hPa, humidity: 50 %, receiver: 15 °C, technician: 48 EUR/h, electricity: 0.24 EUR/kWh,
   cooling water: 4.20 EUR/m3, attended hours per day: 7 h, peroxide limit: 5 mg/L, karl fischer: volumetric}
equipment: [{item: still-20l, owned: yes}, {item: drum-25l, owned: no}]
stock: [{item: sieve-3a, on hand: 4 kg}]
accept: {carriers: [benzene], agents: [sodium], unsuitable: [sieve-4a]}
exclude: {steps: [settle], agents: [sodium]}
lots:
  - {name: reclaimed toluene, solvent: Toluol, batch: 18 L, batches: 40 /yr, water: 480 mg/kg, free water: 0 mL,
     target: 15 mg/kg, not below: 0 mg/kg, needed within: 48 h, peroxide: {reading: 0 mg/L, date: 2026-11-28},
     heater: 1.6 kW, sieve history: 275 °C, vessel height: 0.25 m, reclaimed: yes}
  - {solvent: DCM, batch: 5 L, water: 1 %, target: 50 mg/kg}
  - {solvent: dichloromethane, batch: 5 L, water: 100 mg/kg, target: 200 mg/kg, sieve history: opened-tin}
invented: yes
`

// noTerms is what an offer says that says nothing.
var noTerms = Terms{LeadDays: unknownDays}

func TestEveryKey(t *testing.T) {
	text := strings.Replace(full, "  - {item: sodium-free, price: 1 EUR}\n", "", 1)
	j, err := Read("job.yaml", []byte(text), shelf())
	if err != nil {
		t.Fatal(err)
	}
	want := &Job{
		File: "job.yaml", Title: "Spring drying plan, Fernbrook pilot hall", Currency: "EUR", Objective: "cost", Assurance: 0.9, Invented: true,
		Prices: []Price{
			{Item: "technician", Unit: "hour", PerUnit: decimal.RequireFromString("48"), Terms: noTerms, Line: 12},
			{Item: "electricity", Unit: "kwh", PerUnit: decimal.RequireFromString("0.24"), Terms: noTerms, Line: 12},
			{Item: "cooling-water", Unit: "m3", PerUnit: decimal.RequireFromString("4.2"), Terms: noTerms, Line: 13},
			{Item: "sieve-3a", Unit: "kg", PerUnit: decimal.RequireFromString("29.6"), PackSize: decimal.NewFromInt(5), PackPrice: decimal.NewFromInt(148), Date: "2026-10-01", Terms: noTerms, Line: 7},
			{Item: "toluene-dry", Unit: "litre", PerUnit: decimal.RequireFromString("34.5"), PackSize: decimal.NewFromInt(20), PackPrice: decimal.NewFromInt(690), WaterMax: 10e-6, Terms: noTerms, Line: 8},
			{Item: "still-20l", Unit: "each", PerUnit: decimal.RequireFromString("2400"), Terms: noTerms, Line: 9},
			{Item: "karl-fischer", Unit: "test", PerUnit: decimal.RequireFromString("1.2"), PackSize: decimal.NewFromInt(100), PackPrice: decimal.NewFromInt(120), Terms: noTerms, Line: 10},
		},
		Site: Site{
			RoomK: 294.15, PressurePa: 101300, Humidity: 0.5, ReceiverK: 288.15, AttendedSecondsPerDay: 25200,
			PeroxideLimitKgPerM3: 0.005, KarlFischer: "volumetric", Cooling: Tap, SieveFlush: FlushNitrogen, LotsOverACharge: 12, WasteContainerKg: 20,
		},
		Equipment: []Equipment{{"still-20l", true}, {"drum-25l", false}},
		WriteOff:  StraightLine,
		Stock:     []Stock{{Item: "sieve-3a", OnHandKg: 4}},
		Accept:    Accept{Carriers: []string{"benzene"}, Agents: []string{"sodium"}, Unsuitable: []string{"sieve-4a"}},
		Exclude:   Exclude{Steps: []string{"settle"}, Agents: []string{"sodium"}},
		Lots: []Lot{
			{
				Name: "reclaimed toluene", Solvent: "toluene", BatchM3: 0.018, BatchesPerYear: 40, Water: 480e-6, Target: 15e-6, NeededWithinS: 172800,
				Peroxide: &Peroxide{0, "2026-11-28"}, HeaterW: 1600, SieveHistoryK: 548.15, ResidualLoading: 0.0225, VesselHeightM: 0.25, Reclaimed: true, Line: 19,
			},
			{
				Name: "dichloromethane", Solvent: "dichloromethane", BatchM3: 0.005, BatchesPerYear: 1, Water: 0.01, Target: 50e-6,
				SieveHistory: "furnace-300", SieveHistoryK: 573.15, ResidualLoading: 0.02, Line: 22,
			},
			{
				Name: "dichloromethane 2", Solvent: "dichloromethane", BatchM3: 0.005, BatchesPerYear: 1, Water: 100e-6, Target: 200e-6,
				SieveHistory: "opened-tin", ResidualLoading: 0.075, Line: 23,
			},
		},
		Warnings: []string{
			"job.yaml:5: catalog[0]: not read here: the built-in catalog is used",
			`job.yaml:8: prices[1].water: "ppm" read as mg/kg (by mass)`,
			"job.yaml:16: accept: sodium with dichloromethane is dangerous and stays excluded: can explode",
			"job.yaml:21: lots[0].sieve history: what the sieve still holds, 2.25 g/100 g, is interpolated between the catalog's activation temperatures",
			`job.yaml:22: lots[1].water: "%" read as per cent by mass (% m/m)`,
		},
	}
	j.Defaults = nil // see TestDefaults
	near := cmp.Comparer(func(a, b float64) bool { return math.Abs(a-b) <= 1e-12*math.Max(math.Abs(a), math.Abs(b)) })
	if diff := cmp.Diff(want, j, near); diff != "" {
		t.Error(diff)
	}
}

const small = "lots:\n- solvent: toluene\n  batch: 18 L\n  water: 480 mg/kg\n  target: 15 mg/kg\n"

// What is left out is filled in, and each filling is listed with its source.
func TestDefaults(t *testing.T) {
	j, err := Read("job.yaml", []byte(small), shelf())
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, d := range j.Defaults {
		got = append(got, d.Key+" = "+d.Text+" ("+d.Source+", "+d.Confidence+", "+d.Date+")")
	}
	want := []string{
		"title = Drying plan (assumption, assumption, 2026-12-01)",
		"currency = EUR (assumption, assumption, 2026-12-01)",
		"objective = cost (assumption, assumption, 2026-12-01)",
		"assurance = 90 % (assumption, assumption, 2026-12-01)",
		"site.room = 20 °C (practice, common practice, 2026-12-01)",
		"site.pressure = 1013.25 hPa (practice, common practice, 2026-12-01)",
		"site.humidity = 50 % (practice, common practice, 2026-12-01)",
		"site.receiver = 18 °C (practice, common practice, 2026-12-01)",
		"site.attended hours per day = 7 h (practice, common practice, 2026-12-01)",
		"site.peroxide limit = 5 mg/L (practice, common practice, 2026-12-01)",
		"site.karl fischer = coulometric (assumption, assumption, 2026-12-01)",
		"site.cooling = tap (assumption, assumption, 2026-12-01)",
		"site.sieve flush = nitrogen (assumption, assumption, 2026-12-01)",
		"site.lots over a charge = up to 12 (assumption, assumption, 2026-12-01)",
		"equipment costing = straight line (assumption, assumption, 2026-12-01)",
		"lots[0].batches = 1 /yr (assumption, assumption, 2026-12-01)",
		"lots[0].free water = 0 mL (assumption, assumption, 2026-12-01)",
		"lots[0].heater = the still's own (assumption, assumption, 2026-12-01)",
		"lots[0].vessel height = from the charge of the vessel (assumption, assumption, 2026-12-01)",
		"lots[0].sieve history = furnace-300 (practice, common practice, 2026-12-01)",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	if j.Site.RoomK != 293.15 || j.Site.PressurePa != 101325 || j.Lots[0].ResidualLoading != 0.02 || len(j.Prices) != 0 {
		t.Errorf("site %+v, lot %+v, prices %v", j.Site, j.Lots[0], j.Prices)
	}
}

// Names of files are understood, and the reader is told that they have no effect yet.
func TestFileNames(t *testing.T) {
	j, err := Read("job.yaml", []byte("catalog: ours.yaml\n"+small), shelf())
	if err != nil {
		t.Fatal(err)
	}
	want := []string{"job.yaml:1: catalog: not read here: the built-in catalog is used"}
	if diff := cmp.Diff(want, j.Warnings); diff != "" {
		t.Error(diff)
	}
}

// The demonstration and every starter file are valid with the built-in catalog.
func TestOwnFiles(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	name, data := Demo()
	j, err := Read(name, data, cat)
	if err != nil {
		t.Fatal(err)
	}
	if !j.Invented || len(j.Lots) != 3 || len(j.Warnings) != 0 {
		t.Errorf("demo: invented %v, %d lots, warnings %v", j.Invented, len(j.Lots), j.Warnings)
	}
	for key, solvent := range cat.Solvents {
		if key == water {
			continue
		}
		text := Template(solvent)
		j, err := Read("job.yaml", text, cat)
		if err != nil {
			t.Errorf("%s: %v", key, err)
			continue
		}
		forms := solvent.Hazards.PeroxideClass != "none"
		if j.Lots[0].Solvent != key || j.Lots[0].Peroxide != nil || forms != strings.Contains(string(text), "peroxide: {reading: ...") {
			t.Errorf("%s: lot %+v", key, j.Lots[0])
		}
		if _, err := Read("job.yaml", uncommented(text), cat); err != nil {
			t.Errorf("%s with the examples used: %v", key, err)
		}
	}
}

// uncommented takes the # off every example of a starter file.
func uncommented(text []byte) []byte {
	var out []string
	for _, line := range strings.Split(string(text), "\n") {
		at := strings.Index(line, "# ")
		example := at >= 0 && strings.TrimSpace(line[:at]) == "" && !strings.Contains(line, "...")
		key, _, hasColon := strings.Cut(strings.TrimLeft(line, "# -{"), ":")
		if example && hasColon && len(strings.Fields(key)) <= 4 {
			line = line[:at] + line[at+2:]
		}
		out = append(out, line)
	}
	return []byte(strings.Join(out, "\n"))
}
