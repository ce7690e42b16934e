//go:build unix

package main

import (
	"math"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/doubt"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
	"parch/internal/steps"
)

// plan is a route of the first lot of the demonstration, as it is tuned but for its
// hand-over.
type plan struct {
	lot  job.Lot
	k    *routes.Case
	book costs.Book
	site *costs.Arrangement
	run  routes.Run
}

func planned(cat *catalog.Catalog, r routes.Route, handOverMgPerKg ...float64) (p plan, err error) {
	name, data := job.Demo()
	j, err := job.Read(name, data, cat)
	if err != nil {
		return p, err
	}
	p.lot, p.site = j.Lots[0], costs.NewArrangement(cat, j)
	if p.book, err = costs.NewBook(cat, j); err != nil {
		return p, err
	}
	if p.k, err = routes.NewCase(j, p.lot, cat); err != nil {
		return p, err
	}
	t := &search.Tuner{Case: p.k, Book: p.book, Objective: search.Cost, Site: p.site}
	if p.run, err = t.Tune(r); err != nil || len(handOverMgPerKg) == 0 {
		return p, err
	}
	settings := p.run.Settings
	settings.HandOverMgPerKg = handOverMgPerKg
	p.run, err = t.Run(r, settings)
	return p, err
}

var (
	soaked  = routes.Route{{Kind: steps.Soak, Agent: "sieve-3a"}}
	trapped = routes.Route{{Kind: steps.Trap}, {Kind: steps.Soak, Agent: "sieve-3a"}}
)

// uses are the lines that a plan is paid by. grows names the operating fact that a
// quantity goes with, "" for one that stays as planned.
func (p plan) uses() (lines []map[string]any) {
	ownLabour := true
	for _, u := range p.run.Uses {
		quantity, grows := u.Quantity, ""
		if u.PerYear {
			quantity /= p.lot.BatchesPerYear
		}
		switch {
		case u.Head == steps.Testing && u.Item == "technician":
			grows = "karl-fischer-time"
		case u.Head == steps.Labour && ownLabour:
			grows, ownLabour = "soak-attended", false
		case u.Head == steps.Labour:
			grows = "oven-attended"
		}
		lines = append(lines, map[string]any{"item": u.Item, "quantity": quantity, "grows": grows})
	}
	return lines
}

const allDraws = 2000 // as a comparison takes

// drawn is a plan gone through the draws of what is not known exactly.
type drawn struct {
	lot *doubt.Lot
	out *doubt.Outcome
}

func (p plan) through() (d drawn, err error) {
	if d.lot, err = doubt.New(p.k, p.book, p.site, allDraws, 1); err == nil {
		d.out, err = d.lot.Through(&p.run)
	}
	return d, err
}

// facts are operating facts that a draw may change.
var facts = []string{"karl-fischer-time", "soak-attended", "oven-attended", "heat-share", "trap-efficiency", "trap-setup", "trap-shutdown", "vapour-loss-per-day"}

// handed is what draw i is for the other side: everything that was drawn, each fact
// as it turns out.
func (p plan) handed(l *doubt.Lot, i int) map[string]any {
	d, book := l.Draw(i)
	prices := map[string]float64{}
	for _, u := range p.run.Uses {
		prices[u.Item] = book[u.Item].PerUnit.InexactFloat64()
	}
	found := map[string]float64{}
	for _, fact := range facts {
		found[fact] = p.k.Catalog.Practice[fact].SI
		if si, ok := d.Practice[fact]; ok {
			found[fact] = si
		}
	}
	rate := d.StillRate
	if p.run.Settings.StirredAt(p.run.Route, len(p.run.Route)-1) {
		rate = d.StirredRate
	}
	loading, ok := d.Loading["sieve-3a"]
	if !ok {
		loading = 1
	}
	if s := p.run.Settings.Sieve; s[len(s)-1] == routes.Regenerate { // sized for its last use
		a := p.k.Catalog.Agents["sieve-3a"]
		loading *= math.Pow(1-a.Fade.SI, a.Lives.SI-1)
	}
	return map[string]any{
		"shift_25": d.Shift().Ln25, "trend": d.Shift().LnTrend, "water": d.Water, "residual": d.ResidualKgPerKg, "loading": loading,
		"rate": rate, "prices": prices, "facts": found,
	}
}

// common is what the soak of a plan needs, whatever stands before it.
func (p plan) common(l *doubt.Lot, shown int) map[string]any {
	planned := map[string]float64{}
	for _, fact := range facts {
		planned[fact] = p.k.Catalog.Practice[fact].SI
	}
	var all []map[string]any
	for i := range shown {
		all = append(all, p.handed(l, i*allDraws/shown))
	}
	o, lots := &p.run.Outcomes[len(p.run.Outcomes)-1], 1
	if over := p.run.Settings.LotsOverCharge; len(over) > 0 && over[0] > 0 {
		lots = over[0]
	}
	return map[string]any{
		"lots": lots, "pair": pair(p.k.Mixture), "sites": sites(p.k.Catalog.Agents["sieve-3a"]), "temp_k": p.k.Job.Site.RoomK, "volume_m3": p.lot.BatchM3,
		"dose_kg": o.AgentKg, "held_kg": o.Losses[0].SolventKg, "rate_per_h": o.Figure("rate constant K"),
		"hours": p.run.Settings.SoakHours[0], "uses": p.uses(), "planned": planned, "draws": all,
	}
}

// draws takes a soak through what is not known exactly: the water it leaves and the
// cost of a litre in each draw. The draws themselves are handed to the other side,
// which solves them one by one; neither side's time counts the making of them.
func draws(cat *catalog.Catalog) (problem, error) {
	return drawsOf(cat, "draw of a soak", func(p plan, d drawn) error { _, err := d.lot.Through(&p.run); return err })
}

// madeDraws are the same; the time here counts the making of the draws too, which
// the other side is spared.
func madeDraws(cat *catalog.Catalog) (problem, error) {
	return drawsOf(cat, "draw made too", func(p plan, _ drawn) error { _, err := p.through(); return err })
}

func drawsOf(cat *catalog.Catalog, name string, timed func(plan, drawn) error) (problem, error) {
	const shown = 200
	p, err := planned(cat, soaked)
	if err != nil {
		return problem{}, err
	}
	d, err := p.through()
	if err != nil {
		return problem{}, err
	}
	t, err := seconds(func() error { return timed(p, d) })
	answer := map[string]float64{}
	for i := range shown {
		at := i * allDraws / shown
		answer[key("water", i)], answer[key("cost", i)] = d.out.Water[at], d.out.CostPerLitre[at]
	}
	return problem{Name: name, SecondsPerOp: t / allDraws, Answer: answer, Input: p.common(d.lot, shown)}, err
}

// trapDraws are those of a trap before the soak: the water it leaves, the hours.
func trapDraws(cat *catalog.Catalog) (problem, error) {
	const shown = 10
	p, err := planned(cat, trapped, 60)
	if err != nil {
		return problem{}, err
	}
	d, err := p.through()
	if err != nil {
		return problem{}, err
	}
	t, err := seconds(func() error { _, err := p.through(); return err })
	answer := map[string]float64{}
	for i := range shown {
		at := i * allDraws / shown
		answer[key("water", i)], answer[key("hours", i)] = d.out.Water[at], d.out.Hours[at]
	}
	o, practice := &p.run.Outcomes[0], p.k.Catalog.Practice
	receiver := p.k.Catalog.Apparatus[o.Apparatus]
	receiverK := p.k.Job.Site.ReceiverK
	if c := p.run.Settings.ReceiverC; len(c) > 0 && c[0] != 0 {
		receiverK = c[0] + 273.15
	}
	in := p.common(d.lot, shown)
	tests := 0.0
	for _, u := range p.run.Uses {
		if u.Head == steps.Testing && u.Item == "technician" {
			tests += u.Quantity
		}
	}
	own := 0.0
	for _, u := range p.run.Uses {
		if u.Stage == 2 && u.Head == steps.Labour {
			own = u.Quantity
			break
		}
	}
	in["trap"] = map[string]any{
		"goal": p.run.Settings.HandOverMgPerKg[0] * 1e-6, "receiver_k": receiverK, "pressure_pa": p.k.Job.Site.PressurePa,
		"room_k": p.k.Job.Site.RoomK, "heater_w": p.lot.HeaterW, "fill_m3": receiver.FillVolume.SI, "efficiency_below": practice["trap-efficiency-below"].SI,
		"charges": o.Figure("still charges"), "least_reflux_h": practice["trap-reflux-minimum"].SI / 3600, "hot_h": o.Figure("heat-up, each charge") + o.Figure("reflux, each charge"),
	}
	in["hours_total"], in["test_h"], in["soak_attended_h"] = p.run.HoursTotal, tests, own
	return problem{Name: "draw of trap+soak", SecondsPerOp: t / allDraws, Answer: answer, Input: in}, err
}

// bill adds up what the plan costs, exactly.
func bill(cat *catalog.Catalog) (problem, error) {
	p, err := planned(cat, soaked)
	if err != nil {
		return problem{}, err
	}
	once := func() (costs.Bill, error) {
		return p.book.Bill(p.run.Uses, p.run.LitresDelivered, p.lot.BatchesPerYear, "EUR")
	}
	b, err := once()
	if err != nil {
		return problem{}, err
	}
	t, err := seconds(func() error { _, err := once(); return err })
	var lines []map[string]any
	for _, u := range p.run.Uses {
		if price, ok := p.book[u.Item]; ok {
			lines = append(lines, map[string]any{"head": string(u.Head), "quantity": u.Quantity, "per_year": u.PerYear, "price": price.PerUnit.String()})
		}
	}
	answer := map[string]float64{"total": b.PerBatch.InexactFloat64(), "litre": b.PerLitre.InexactFloat64()}
	for head, amount := range b.ByHead {
		if !amount.IsZero() {
			answer[string(head)] = amount.InexactFloat64()
		}
	}
	return problem{
		Name: "bill", SecondsPerOp: t, Answer: answer,
		Input: map[string]any{"lines": lines, "batches": p.lot.BatchesPerYear, "litres": p.run.LitresDelivered},
	}, err
}
