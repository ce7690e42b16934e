// Package report shows a study to people, as text for a terminal, and to
// programs, as JSON.
package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"strconv"

	"github.com/shopspring/decimal"

	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

// The documents below are the outside contract: units stand in the keys, money
// is a decimal string, and a value that does not exist is null.

type documentOut struct {
	Parch       string        `json:"parch"`
	CatalogDate string        `json:"catalog_date"`
	Seed        int64         `json:"seed"`
	Draws       int           `json:"draws"`
	Currency    string        `json:"currency"`
	Lots        []lotOut      `json:"lots"`
	Purchases   []purchaseOut `json:"purchases"`
}

type lotOut struct {
	Name           string        `json:"name"`
	Solvent        string        `json:"solvent"`
	BatchL         number        `json:"batch_l"`
	BatchesPerYear number        `json:"batches_per_year"`
	WaterIn        number        `json:"water_in_mg_per_kg"`
	Target         number        `json:"target_mg_per_kg"`
	AcceptAt       number        `json:"accept_at_or_below_mg_per_kg"`
	Routes         []routeOut    `json:"routes"`
	Excluded       []excludedOut `json:"excluded"`
	BreakEven      breakEvensOut `json:"break_even"`
	AskedOf        string        `json:"break_even_of,omitempty"` // which routes break-evens, trade-off and grid are asked of
	TradeOff       []frontOut    `json:"trade_off,omitempty"`
	WhatIf         *whatIfOut    `json:"what_if,omitempty"`
	NothingToDo    string        `json:"nothing_to_do,omitempty"`
	CannotShow     string        `json:"cannot_show,omitempty"`
	Warnings       []string      `json:"warnings,omitempty"`
}

type routeOut struct {
	ID              string                          `json:"id"`
	Label           string                          `json:"label"`
	Rank            *int                            `json:"rank"`
	MeetsTarget     bool                            `json:"meets_target"`
	Recommended     bool                            `json:"recommended"`
	WhyNot          string                          `json:"why_not_recommended,omitempty"`
	WaterOut        number                          `json:"water_out_mg_per_kg"`
	WaterOutLow     *number                         `json:"water_out_low_mg_per_kg"`
	WaterOutHigh    *number                         `json:"water_out_high_mg_per_kg"`
	ChanceOfTarget  *number                         `json:"chance_of_target"`
	HoursTotal      number                          `json:"hours_total"`
	HoursAttended   number                          `json:"hours_attended"`
	EnergyKWh       number                          `json:"energy_kwh"`
	CoolingWaterL   number                          `json:"cooling_water_l"`
	SolventLostL    number                          `json:"solvent_lost_l"`
	AgentKg         map[string]number               `json:"agent_kg"`
	WasteKg         number                          `json:"waste_kg"`
	CO2eKg          number                          `json:"co2e_kg"`
	CostPerBatch    *decimal.Decimal                `json:"cost_per_batch"`
	CostPerLitre    *decimal.Decimal                `json:"cost_per_litre"`
	CostPerLitreLow *decimal.Decimal                `json:"cost_per_litre_low"`
	CostPerLitreHi  *decimal.Decimal                `json:"cost_per_litre_high"`
	CheapestShare   *number                         `json:"cheapest_share,omitempty"`
	ExpectedMiss    *decimal.Decimal                `json:"expected_cost_of_missing,omitempty"` // per batch, no part of cost_per_batch
	CostByHead      map[steps.Head]*decimal.Decimal `json:"cost_by_head"`
	Settings        routes.Settings                 `json:"settings"`
	Steps           []stepOut                       `json:"steps"`
	Cautions        []cautionOut                    `json:"cautions"`
	Warnings        []string                        `json:"warnings"`
}

// purchaseOut is what is bought of one item, by mass.
type purchaseOut struct {
	Item  string           `json:"item"`
	Need  number           `json:"need_kg_per_year"` // in the first year, a first charge whole
	Later number           `json:"later_years_kg_per_year"`
	Packs []packOut        `json:"packs"`
	Total *decimal.Decimal `json:"total"`
}

type packOut struct {
	Size  number          `json:"size_kg"`
	Count int             `json:"count"`
	Price decimal.Decimal `json:"price"`
}

type stepOut struct {
	Kind          steps.Kind `json:"kind"`
	Agent         *string    `json:"agent"`
	Carrier       *string    `json:"carrier"`
	WaterIn       number     `json:"water_in_mg_per_kg"`
	WaterOut      number     `json:"water_out_mg_per_kg"`
	Floor         number     `json:"floor_mg_per_kg"`
	WhyItStops    steps.Stop `json:"why_it_stops"`
	HoursTotal    number     `json:"hours_total"`
	HoursAttended number     `json:"hours_attended"`
	EnergyKWh     number     `json:"energy_kwh"`
	AgentKg       number     `json:"agent_kg"`
	SolventLostL  number     `json:"solvent_lost_l"`
	FloorOf       string     `json:"floor_of,omitempty"` // what has this floor, and when, where it is not the outlet's own
}

type cautionOut struct {
	Code  string `json:"code"`
	Level string `json:"level"`
	Text  string `json:"text"`
}

type excludedOut struct {
	ID     string  `json:"id"`
	Reason string  `json:"reason"`
	Source *string `json:"source"`
}

// number prints with 12 significant digits; NaN, which stands for "does not
// exist", prints as null. An infinity is a mistake of the program.
type number float64

// MarshalJSON implements json.Marshaler.
func (n number) MarshalJSON() ([]byte, error) {
	x := float64(n)
	if math.IsNaN(x) {
		return []byte("null"), nil
	}
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', 11, 64), 64)
	if err != nil {
		return nil, err
	}
	return json.Marshal(rounded)
}

const mgPerKg = 1e6 // mg/kg in one kg/kg

// JSON writes the report as one JSON document, the same bytes for the same report.
func JSON(w io.Writer, r *study.Report) error {
	doc := documentOut{
		Parch:       r.Version,
		CatalogDate: r.CatalogDate,
		Seed:        r.Seed,
		Draws:       r.Draws,
		Currency:    r.Job.Currency,
		Lots:        make([]lotOut, len(r.Lots)),
		Purchases:   showPurchases(r),
	}
	for i := range r.Lots {
		doc.Lots[i] = showLot(&r.Lots[i])
	}
	return writeJSON(w, doc)
}

func writeJSON(w io.Writer, doc any) error {
	enc := json.NewEncoder(w)
	enc.SetIndent("", "  ")
	enc.SetEscapeHTML(false)
	if err := enc.Encode(doc); err != nil {
		return fmt.Errorf("JSON: %w", err)
	}
	return nil
}

func showLot(l *study.Lot) lotOut {
	out := lotOut{
		Name:           l.Job.Name,
		Solvent:        l.Job.Solvent,
		BatchL:         number(l.Job.BatchM3 * 1000),
		BatchesPerYear: number(l.Job.BatchesPerYear),
		WaterIn:        number(l.Job.Water * mgPerKg),
		Target:         number(l.Job.Target * mgPerKg),
		AcceptAt:       number(l.AcceptAt * mgPerKg),
		Routes:         make([]routeOut, len(l.Routes)),
		Excluded:       make([]excludedOut, len(l.Excluded)),
		NothingToDo:    l.NothingToDo,
		CannotShow:     l.CannotShow,
		BreakEven:      showBreakEvens(l),
		TradeOff:       showFront(l),
		WhatIf:         showWhatIf(l.WhatIf),
		Warnings:       l.Warnings,
	}
	if len(l.BreakEvens) > 0 || l.WhatIf != nil {
		out.AskedOf = l.BreakEvensOf()
	}
	for i := range l.Routes {
		out.Routes[i] = showRoute(&l.Routes[i])
	}
	for i, x := range l.Excluded {
		out.Excluded[i] = excludedOut{x.ID, x.Reason, known(x.Source)}
	}
	return out
}

func showRoute(r *study.Route) routeOut {
	run := &r.Run
	out := routeOut{
		ID:            r.ID,
		Label:         r.Label,
		MeetsTarget:   r.Meets(),
		WaterOut:      number(run.WaterOut * mgPerKg),
		HoursTotal:    number(run.HoursTotal),
		HoursAttended: number(run.HoursAttended),
		EnergyKWh:     number(run.EnergyKWh),
		CoolingWaterL: number(run.CoolingWaterL),
		SolventLostL:  number(run.SolventLostL),
		AgentKg:       make(map[string]number, len(run.AgentKg)),
		WasteKg:       number(run.WasteKg),
		CO2eKg:        number(run.CO2eKg),
		CostByHead:    make(map[steps.Head]*decimal.Decimal, len(steps.Heads)),
		Settings:      run.Settings,
		Steps:         make([]stepOut, len(run.Outcomes)),
		Cautions:      make([]cautionOut, len(r.Cautions)),
		Warnings:      append(append([]string{}, warningsOf(r)...), r.Bill.Doubts...),
		Recommended:   r.Recommended,
		WhyNot:        r.WhyNot,
	}
	out.ranges(r)
	if r.Rank > 0 {
		out.Rank = &r.Rank
	}
	for agent, kg := range run.AgentKg {
		out.AgentKg[agent] = number(kg)
	}
	if r.Bill.Priced() { // what part of the items costs is no cost
		out.CostPerBatch, out.CostPerLitre = &r.Bill.PerBatch, &r.Bill.PerLitre
	}
	for _, head := range steps.Heads {
		out.CostByHead[head] = nil
		if amount := r.Bill.ByHead[head]; r.Bill.Priced() {
			out.CostByHead[head] = &amount
		}
	}
	if out.Settings.HandOverMgPerKg == nil {
		out.Settings.HandOverMgPerKg = []float64{}
	}
	for i := range run.Outcomes {
		out.Steps[i] = showStep(&run.Outcomes[i])
	}
	for i, c := range r.Cautions {
		out.Cautions[i] = cautionOut{c.Code, c.Level, c.Text}
	}
	return out
}

// showPurchases lists what is bought by mass or has a known one. The rest of the
// buying list (tests, equipment) stands in the text and the CSV.
func showPurchases(r *study.Report) []purchaseOut {
	all := []purchaseOut{}
	for i := range r.Buying.Purchases {
		p := &r.Buying.Purchases[i]
		if p.KgPerUnit == 0 {
			continue
		}
		one := purchaseOut{Item: p.Item, Need: number((p.Process + p.Losses) * p.KgPerUnit), Later: number(p.LaterYears * p.KgPerUnit), Packs: []packOut{}}
		if p.Priced {
			one.Total = &p.Total
		}
		for _, o := range p.Orders {
			pack := packOut{number(o.Amount.InexactFloat64() / float64(o.Count) * p.KgPerUnit), o.Count, o.Pack.Price}
			if o.Pack.AnyAmount() {
				pack.Price = o.Cost
			}
			one.Packs = append(one.Packs, pack)
		}
		all = append(all, one)
	}
	return all
}

// floorShown is zero for what is no more than the lower end of a search: that of a
// sorbent that was stated to be empty.
func floorShown(floor float64) float64 {
	const least = 1e-15 // kg/kg
	if floor < least {
		return 0
	}
	return floor
}

func showStep(o *steps.Outcome) stepOut {
	return stepOut{
		Kind:          o.Kind,
		Agent:         known(o.Agent),
		Carrier:       known(o.Carrier),
		WaterIn:       number(o.In.Water() * mgPerKg),
		WaterOut:      number(o.Out.Water() * mgPerKg),
		Floor:         number(floorShown(o.Floor) * mgPerKg),
		WhyItStops:    o.Why,
		HoursTotal:    number(o.HoursTotal),
		HoursAttended: number(o.HoursAttended),
		EnergyKWh:     number(o.EnergyKWh),
		AgentKg:       number(o.AgentKg),
		SolventLostL:  number(o.SolventLostL),
		FloorOf:       o.FloorOf,
	}
}

// known is nil, which prints as null, where there is no text.
func known(text string) *string {
	if text == "" {
		return nil
	}
	return &text
}
