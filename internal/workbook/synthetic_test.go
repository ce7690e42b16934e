package workbook

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

// hostile is text that would do harm if it were taken for a formula, a reference,
// a code of a page footer or markup.
const hostile = "=1+1 & 'x'!A1 <b>\"@\" &P \x00\x1b ünï 水"

// synthetic is a report made up by hand: its figures are no results. It holds what
// the demonstration does not: hostile text, a tie, a target that cannot be shown, a
// lot that is dry already, one route only, missing numbers.
func synthetic() *study.Report {
	book := costs.Book{}
	for _, p := range []struct{ item, unit, price string }{
		{"technician", "hour", "48"}, {"electricity", "kwh", "0.24"}, {"sieve-3a", "kg", "29.6"}, {"still-20l", "each", "1900"}, {"toluene", "litre", "3.333333"},
	} {
		book[p.item] = costs.Price{Item: p.item, Unit: p.unit, Label: hostile, PerUnit: decimal.RequireFromString(p.price), Own: true, SourceText: hostile, Note: "+note"}
	}
	r := &study.Report{
		Version: "0", CatalogDate: "2026-12-01", Book: book,
		Job:      &job.Job{File: "=job.yaml", Title: hostile, Currency: "EUR", Objective: "time", Assurance: 0.9, Site: job.Site{RoomK: 294.15, ReceiverK: 288.15}},
		Warnings: []string{hostile},
		Weak:     []study.Weak{{What: hostile, Value: "=2", Confidence: "memory", Source: "-1", Note: "@x"}},
		Sources:  []catalog.Source{{ID: "=id", Reference: hostile}},
	}
	// Two routes level in time and in cost, one behind, one that misses.
	level := func(id string) study.Route { return madeUp(book, id, 5e-6, 12, 1, 2) }
	r.Lots = append(r.Lots,
		madeUpLot(hostile, 15e-6, ranked(level("soak:b"), 2), ranked(level("soak:a"), 1), ranked(madeUp(book, "soak:c", 5e-6, 13, 0.5, 1), 3), madeUp(book, "trap", 20e-6, 1, 1, 1)),
		madeUpLot("cannot be shown", 10e-6, madeUp(book, "trap", 4e-6, 1, 1, 1)),
		madeUpLot("dry already", 15e-6))
	r.Lots[1].CannotShow, r.Lots[1].AcceptAt = "below the detection limit", math.NaN()
	r.Lots[2].NothingToDo = "dry already"
	r.Lots[0].Routes[0].Cautions = []catalog.Caution{{Code: "x", Level: "danger", Text: hostile}}
	r.Lots[0].Excluded = []routes.Excluded{{ID: "=route", Reason: hostile, Source: "s"}}
	return r
}

func ranked(r study.Route, rank int) study.Route {
	r.Rank, r.Run.Meets = rank, true
	return r
}

func madeUpLot(name string, target float64, list ...study.Route) study.Lot {
	return study.Lot{
		Job:      job.Lot{Name: name, Solvent: "toluene", BatchM3: 0.018, BatchesPerYear: 7, Water: 480e-6, Target: target},
		AcceptAt: target - 3.6e-6, Uncertainty: 3.6e-6, Detection: 8e-6, Injections: 2, Routes: list,
	}
}

// madeUp is a route with a bill that follows the rules of the bill.
func madeUp(book costs.Book, id string, water, hours, labour, sieve float64) study.Route {
	uses := []routes.StageUse{
		{Stage: 1, Use: steps.Use{Head: steps.Labour, Item: "technician", Unit: "hour", Quantity: labour, Basis: hostile}},
		{Stage: 1, Use: steps.Use{Head: steps.Agent, Item: "sieve-3a", Unit: "kg", Quantity: sieve / 3}},
		{Stage: 1, Use: steps.Use{Head: steps.Equipment, Item: "still-20l", Unit: "each", Quantity: 0.1, PerYear: true}},
		{Stage: 0, Use: steps.Use{Head: steps.SolventLost, Item: "toluene", Unit: "litre", Quantity: 1.0 / 7}},
	}
	run := routes.Run{
		WaterOut: water, HoursTotal: hours, HoursAttended: labour, LitresDelivered: 17.3, CO2eKg: math.NaN(), Uses: uses,
		Outcomes: []steps.Outcome{{Kind: steps.Soak, Agent: "sieve-3a", In: steps.Lot{SolventKg: 15, WaterKg: 0.007}, Out: steps.Lot{SolventKg: 15, WaterKg: 1e-4},
			Floor: math.NaN(), WhyText: hostile, Figures: []steps.Figure{{Name: hostile, Unit: "", Value: math.NaN()}}}},
	}
	bill, err := book.Bill(uses, run.LitresDelivered, 7, "EUR")
	if err != nil {
		panic(err) // the test's own data are wrong
	}
	return study.Route{ID: id, Label: hostile, Run: run, Bill: bill}
}
