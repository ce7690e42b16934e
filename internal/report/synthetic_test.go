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
		Job:         &job.Job{File: "job.yaml", Title: "Made up", Currency: "EUR", Objective: "cost"},
		Book: costs.Book{
			"technician": {Item: "technician", Own: true},
			"sieve-3a":   {Item: "sieve-3a", Indicative: true},
		},
		Lots:     []study.Lot{rankedLot(), hopelessLot(), dryLot()},
		Weak:     []study.Weak{{What: "share of heat that reaches the liquid", Value: "0.5", Confidence: "common practice"}},
		Warnings: []string{"job.yaml:9: stock: not used yet"},
	}
}

func bill(labour, agent, perLitre string) costs.Bill {
	l, a := decimal.RequireFromString(labour), decimal.RequireFromString(agent)
	return costs.Bill{
		Currency: "EUR",
		ByHead:   map[steps.Head]decimal.Decimal{steps.Labour: l, steps.Agent: a},
		PerBatch: l.Add(a),
		PerLitre: decimal.RequireFromString(perLitre),
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
				Bill:     bill("88.80", "44.40", "7.568182"),
				Cautions: []catalog.Caution{codes, peroxide},
				Warnings: []string{"room too warm for the receiver"},
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
