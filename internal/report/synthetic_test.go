package report_test

import (
	"math"

	"github.com/shopspring/decimal"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

// synthetic is a report made up by hand: its figures are no results.
func synthetic() *study.Report {
	return &study.Report{
		Version:     "0.1",
		CatalogDate: "2026-12-01",
		PriceDate:   "2026-12-01",
		Job:         &job.Job{File: "job.yaml", Title: "Made up", Currency: "EUR", Objective: "cost"},
		Book: costs.Book{
			"technician": {Item: "technician", Own: true},
			"sieve-3a":   {Item: "sieve-3a", Indicative: true, Flag: costs.Indicative, Date: "2026-12-01"},
			"toluene":    {Item: "toluene", Own: true, Flag: costs.Old, Date: "2025-03-01", Packs: make([]costs.Pack, 2)},
		},
		Buying:   buying(),
		Lots:     []study.Lot{rankedLot(), hopelessLot(), dryLot()},
		Weak:     []study.Weak{{What: "share of heat that reaches the liquid", Value: "0.5", Confidence: "common practice"}},
		Warnings: []string{"job.yaml:9: stock: not used yet"},
	}
}

func buying() costs.Buying {
	d := decimal.RequireFromString
	large := costs.Pack{Size: d("5"), Price: d("148"), PerUnit: d("29.6"), Minimum: 1, LeadDays: 14, Supplier: "+49 Nord, Ost", Date: "2026-10-01"}
	small := costs.Pack{Size: d("1"), Price: d("40"), PerUnit: d("40"), Minimum: 1, LeadDays: -1}
	return costs.Buying{
		FirstBatchDay: 14,
		Purchases: []costs.Purchase{
			{Item: "karl-fischer", Label: "reagent", Unit: "test", Process: 80, ToBuy: 80, Priced: true, Total: d("96"), Flag: costs.Undated, Why: "priced by the unit: no pack sizes are known",
				Orders: []costs.Order{{Pack: costs.Pack{Price: d("1.2"), PerUnit: d("1.2"), LeadDays: -1}, Count: 1, Amount: d("80"), Cost: d("96"), Each: 1, OrderDay: 14, NeedDay: 14}}},
			{Item: "sieve-3a", Label: "sieve 3A", Unit: "kg", Specification: "molecular sieve 3A, beads of 2 mm", Process: 12, LaterYears: 2.5, Safety: 1, Have: 2, ToBuy: 11, KgPerUnit: 1, Priced: true,
				Total: d("336"), Leftover: 0, Why: "the cheapest of the packs on offer",
				Orders: []costs.Order{{Pack: large, Count: 2, Amount: d("10"), Cost: d("296"), Each: 1, Every: 152, NeedDay: 14}, {Pack: small, Count: 1, Amount: d("1"), Cost: d("40"), Each: 1, OrderDay: 320, NeedDay: 320}}},
			{Item: "toluene", Label: "toluene", Unit: "litre", Losses: 16, LaterYears: 16, ToBuy: 16, KgPerUnit: 0.867, Why: "no price: the packs are left open",
				Transport: costs.Transport{UN: "1294", Class: "3", Group: "II", Basis: "from memory"}},
		},
		Flags: []string{"flammable: up to 120 L in store at once, the limit is 100 L"},
	}
}

func bill(labour, agent, perLitre string) costs.Bill {
	l, a := decimal.RequireFromString(labour), decimal.RequireFromString(agent)
	return costs.Bill{
		Currency: "EUR",
		ByHead:   map[steps.Head]decimal.Decimal{steps.Labour: l, steps.Agent: a},
		PerBatch: l.Add(a),
		PerLitre: decimal.RequireFromString(perLitre),

		LitresDelivered: l.Add(a).DivRound(decimal.RequireFromString(perLitre), 12),
	}
}

func lotOf(name string, water float64) job.Lot {
	return job.Lot{Name: name, Solvent: "toluene", BatchM3: 0.018, BatchesPerYear: 40, Water: water, Target: 15e-6}
}

func rankedLot() study.Lot {
	peroxide := catalog.Caution{Code: "wet-sieve-oven", Level: "danger", Text: "Never put solvent-wet sieve into an oven.", Origin: catalog.Origin{Source: "practice"}}
	codes := catalog.Caution{Code: "local-codes", Level: "info", Text: "Local codes decide."}
	return study.Lot{
		Job: lotOf("reclaimed toluene", 480e-6), Solvent: &catalog.Solvent{Name: "toluene"},
		AcceptAt: 11.4e-6, Uncertainty: 3.6e-6, Injections: 2,
		Routes: []study.Route{
			{
				ID: "trap+soak:sieve-3a", Label: "boil out under a trap, stand over sieve 3A", Rank: 1,
				Run: routes.Run{
					Route:    routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: "sieve-3a"}},
					Settings: routes.Settings{HandOverMgPerKg: []float64{61.80339887498949}, SoakHours: []float64{24}, Sieve: []string{"regenerate"}},
					Outcomes: []steps.Outcome{
						{Kind: steps.Trap, In: steps.Lot{SolventKg: 999.52, WaterKg: 0.48}, Out: steps.Lot{SolventKg: 999.938, WaterKg: 0.062}, Floor: 5.8e-6, Why: steps.AtTarget},
						{Kind: steps.Soak, Agent: "sieve-3a", In: steps.Lot{SolventKg: 999.938, WaterKg: 0.062}, Out: steps.Lot{SolventKg: 999.992, WaterKg: 0.008}, Floor: 2e-6, Why: steps.AtTime, AgentKg: 1.5},
					},
					WaterOut: 8e-6, Meets: true, HoursTotal: 26.25, HoursAttended: 1.85, EnergyKWh: 3.1, CoolingWaterL: 200,
					SolventLostL: 0.4, LitresDelivered: 17.6, AgentKg: map[string]float64{"sieve-3a": 1.5}, WasteKg: 2.2, CO2eKg: 1.5,
				},
				Bill: bill("88.80", "44.40", "7.568182"),
				Year: &costs.Year{Batches: 40, Regenerations: 36, MakeUpLitres: 16, Cost: decimal.NewFromInt(5328), Equipment: decimal.NewFromInt(2490),
					FirstYear: decimal.NewFromInt(7402), LaterYears: decimal.NewFromInt(4912), PackCost: decimal.NewFromInt(336),
					Investment: &costs.Investment{Against: "buy", YearlySaving: decimal.NewFromInt(2308), PaybackYears: 1.0789, Years: 5, Interest: 0.06, PresentValue: decimal.RequireFromString("-7232.15")}},
				Footprint: costs.Footprint{EnergyKg: 0.9, MakingKg: 0.3, BurningKg: 0.2, AgentKg: 0.1, WasteKg: map[string]float64{"waste-aqueous": 0.02, "waste-wet-solid": 2.18}, Sources: []string{"memory"}},
				Cautions:  []catalog.Caution{codes, peroxide},
				Warnings:  []string{"room too warm for the receiver"},
			},
			{
				ID: "buy", Label: "buy dry", Rank: 2,
				Run:      routes.Run{Route: routes.Route{{Kind: steps.Buy}}, WaterOut: 10e-6, Meets: true, AgentKg: map[string]float64{}, Outcomes: []steps.Outcome{{Kind: steps.Buy, In: steps.Lot{SolventKg: 1}, Out: steps.Lot{SolventKg: 1}, Floor: math.NaN(), Why: steps.AtGrade}}},
				Bill:     bill("100", "80.5", "10.027778"),
				Cautions: []catalog.Caution{codes},
			},
			{
				ID: "trap", Label: "boil out under a trap",
				Run:      routes.Run{Route: routes.Route{{Kind: steps.Trap}}, WaterOut: 20e-6, Outcomes: []steps.Outcome{{Kind: steps.Trap, In: steps.Lot{SolventKg: 1}, Out: steps.Lot{SolventKg: 1}, Why: steps.AtPractice, WhyText: "practical limit: droplets and moist air keep a trap's outlet at 20 mg/kg or more, whatever its floor"}}},
				Bill:     bill("50", "0", "2.8"),
				Cautions: []catalog.Caution{codes},
			},
		},
		Excluded: []routes.Excluded{
			{ID: "settle", Reason: "nothing settles: the lot holds less than saturation", Source: "iupac-81"},
			{ID: "settle+trap", Reason: "nothing settles: the lot holds less than saturation", Source: "iupac-81"},
			{ID: "soak:sieve-5a", Reason: "no data on sieve-5a with toluene"},
		},
	}
}

func hopelessLot() study.Lot {
	l := rankedLot()
	l.Job.Name = "target too low"
	l.Job.Target = 2e-6
	l.AcceptAt, l.CannotShow = math.NaN(), "cannot be shown: 2 mg/kg less the uncertainty lies under the detection limit of 8 mg/kg"
	l.Routes = l.Routes[2:]
	l.Excluded = nil
	return l
}

func dryLot() study.Lot {
	return study.Lot{Job: lotOf("dry already", 8e-6), AcceptAt: 11.4e-6, Uncertainty: 3.6e-6, Injections: 2,
		NothingToDo: "nothing to do: the reading of 8 mg/kg lies at or below the limit of 11.4 mg/kg"}
}
