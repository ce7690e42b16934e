package report

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/job"
	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

// ranked returns the routes that reach the limit, best first.
func ranked(l *study.Lot) (reach []*study.Route) {
	for i := range l.Routes {
		if l.Routes[i].Rank > 0 {
			reach = append(reach, &l.Routes[i])
		}
	}
	return reach
}

// missed returns the routes that do not reach the limit, nearest first.
func missed(l *study.Lot) (miss []*study.Route) {
	for i := range l.Routes {
		if l.Routes[i].Rank == 0 {
			miss = append(miss, &l.Routes[i])
		}
	}
	return miss
}

// verdict names the best route with the reason, or says how near any came.
func (p *page) verdict(r *study.Report, l *study.Lot) {
	p.line("")
	reach, miss := ranked(l), missed(l)
	switch {
	case len(reach) > 0 && r.Job.Objective == "cost" && !reach[0].Bill.Priced():
		p.say(3, 0, "%s, but none can be ranked by cost: no price for %s. Give those prices in the job; the order below says nothing.",
			count(float64(len(reach)), "route reaches the limit", "routes reach the limit"), strings.Join(reach[0].Bill.NoPrice, ", "))
	case len(reach) > 0:
		best := l.Best()
		p.say(3, 0, "Best: %s (%s). %s", best.Label, best.ID, reason(r, sureEnough(reach)))
		p.say(3, 0, "It leaves %s%s after %s of attended work, %s in all.", quantity.FormatWater(best.Run.WaterOut), unseen(l, best),
			hours(best.Run.HoursAttended), hours(best.Run.HoursTotal))
		p.year(r, best)
		p.sure(r, l)
	case l.CannotShow != "" && len(miss) > 0:
		p.say(3, 0, "No route can be shown to reach the target. The nearest, %s, is computed to leave %s.", miss[0].ID, quantity.FormatWater(miss[0].Run.WaterOut))
	case len(miss) > 0:
		p.say(3, 0, "No route reaches the target. The nearest, %s, leaves %s.", miss[0].ID, quantity.FormatWater(miss[0].Run.WaterOut))
	default:
		p.say(3, 0, "No route can be offered; the reasons stand below.")
	}
}

// unseen says that a computed water content is less than a test can show.
func unseen(l *study.Lot, route *study.Route) string {
	if route.Run.WaterOut >= l.Detection {
		return ""
	}
	return fmt.Sprintf(" as computed, less than the %s that the test can show,", quantity.FormatWater(l.Detection))
}

// reason says why the first of the routes is the best by the job's objective.
func reason(r *study.Report, reach []*study.Route) string {
	best := reach[0]
	aim, value := objective(r.Job.Objective, r.Job.Currency)
	one, many := "route that reaches the limit", "routes that reach the limit"
	if best.Recommended {
		one, many = one+" and is sure enough", many+" and are sure enough"
	}
	text := fmt.Sprintf("It has %s of %s: %s.", aim, count(float64(len(reach)), one, many), value(best))
	if len(reach) == 1 {
		text = fmt.Sprintf("It is the only %s, at %s.", one, value(best))
	}
	if head, share := largestHead(best); share > 0 {
		text += fmt.Sprintf(" %s is %s of its cost.", headNames[head], quantity.FormatShare(math.Round(100*share)/100))
	}
	switch {
	case len(reach) == 1:
	case r.Job.Objective == "cost" && best.Bill.Priced() && !reach[1].Bill.Priced():
		text += " The others lack a price and are not compared by cost."
	default:
		text += fmt.Sprintf(" The next best is %s, at %s%s.", reach[1].ID, value(reach[1]), more(reach))
		if best.Miss != nil && r.Job.Objective == "cost" {
			text += " Expected misses are counted in that."
		}
	}
	return text
}

// more is by how much the second route is worse than the first.
func more(reach []*study.Route) string {
	if best := reach[0].Objective; best > 0 && reach[1].Bill.Priced() {
		return fmt.Sprintf(", %s more", quantity.Format(reach[1].Objective/best-1, quantity.Share, "%", 2))
	}
	return ""
}

func objective(objective, currency string) (aim string, value func(*study.Route) string) {
	switch objective {
	case "time":
		return "the shortest time", func(r *study.Route) string { return hours(r.Run.HoursTotal) }
	case "waste":
		return "the least waste", func(r *study.Route) string { return quantity.FormatMass(r.Run.WasteKg) + " a batch" }
	case "energy":
		return "the least energy", func(r *study.Route) string {
			return quantity.Significant(r.Run.EnergyKWh, 3) + " kWh a batch"
		}
	}
	if objective == job.Weighted {
		return "the best mix of the weighed objectives", func(r *study.Route) string {
			return quantity.Significant(r.Objective, 3) + " of the cheapest route"
		}
	}
	return "the lowest cost", func(r *study.Route) string {
		if !r.Bill.Priced() {
			return "no price"
		}
		return fmt.Sprintf("%s %s a litre delivered", money(r.Bill.WrittenPerLitre()), currency)
	}
}

var headNames = map[steps.Head]string{
	steps.Labour:       "Labour",
	steps.Energy:       "Energy",
	steps.CoolingWater: "Cooling water",
	steps.Agent:        "Drying agent",
	steps.SolventLost:  "Lost solvent",
	steps.Waste:        "Waste",
	steps.Equipment:    "Equipment",
	steps.Testing:      "Testing",
	steps.Purchase:     "Purchase",
}

func largestHead(r *study.Route) (largest steps.Head, share float64) {
	most := decimal.Zero
	for _, head := range steps.Heads {
		if amount := r.Bill.ByHead[head]; amount.GreaterThan(most) {
			largest, most = head, amount
		}
	}
	if !r.Bill.PerBatch.IsPositive() || !r.Bill.Priced() {
		return largest, 0
	}
	return largest, most.Div(r.Bill.PerBatch).InexactFloat64()
}

// money is shown to the cent.
func money(d decimal.Decimal) string { return d.StringFixed(2) }

func hours(h float64) string { return quantity.Significant(h, 3) + " h" }

func mgKg(water float64) string {
	return quantity.Significant(water*mgPerKg, 3)
}

// routeColumns keeps the tables within the width of the page.
const routeColumns = 26

func (p *page) ranking(r *study.Report, l *study.Lot) {
	reach := ranked(l)
	if len(reach) == 0 {
		return
	}
	columns := []column{
		{"Rank", true, 0}, {"Route", false, 0}, {"Water out\nmg/kg", true, 0}, {"Attended\nh", true, 0}, {"In all\nh", true, 0},
		{"Energy\nkWh", true, 0}, {"Lost\nL", true, 0}, {"A batch\n" + r.Job.Currency, true, 0}, {"A litre\n" + r.Job.Currency, true, 0},
	}
	reach, hidden := p.first(reach, firstRanked)
	if r.Draws > 0 {
		columns = append(columns, column{"Chance\n%", true, 0})
	}
	rows := make([][]string, len(reach))
	for i, route := range reach {
		run := &route.Run
		rows[i] = []string{
			strconv.Itoa(route.Rank), brokenAtPlus(route.ID, routeColumns), mgKg(run.WaterOut), quantity.Significant(run.HoursAttended, 3),
			quantity.Significant(run.HoursTotal, 3), quantity.Significant(run.EnergyKWh, 3), quantity.Significant(run.SolventLostL, 2),
			marked(route, route.Bill.PerBatch), marked(route, route.Bill.WrittenPerLitre()),
		}
		if r.Draws > 0 {
			rows[i] = append(rows[i], chanceCell(route))
		}
	}
	p.line("")
	p.table(columns, rows)
	p.more(hidden)
	if slices.ContainsFunc(reach, func(r *study.Route) bool { return r.Bill.Priced() && len(r.Bill.Doubts) > 0 }) {
		p.say(5, 0, "* rests on prices to check, which stand below.")
	}
	p.unsuitable(l)
}

// unsuitable names the routes over an agent that is unsuitable and was accepted.
func (p *page) unsuitable(l *study.Lot) {
	var ids []string
	for i := range l.Routes {
		if strings.Contains(l.Routes[i].Label, routes.UnsuitableMark) {
			ids = append(ids, l.Routes[i].ID)
		}
	}
	if len(ids) > 0 {
		p.say(5, 2, "unsuitable, accepted by the job: %s", strings.Join(ids, ", "))
	}
}

// marked is money with a mark where it rests on prices that have to be checked.
func marked(r *study.Route, amount decimal.Decimal) string {
	switch {
	case !r.Bill.Priced():
		return "no price"
	case len(r.Bill.Doubts) > 0:
		return money(amount) + "*"
	}
	return money(amount) + " "
}

// missing lists how far each route got that does not reach the limit.
func (p *page) missing(l *study.Lot) {
	miss := missed(l)
	if len(miss) == 0 {
		return
	}
	miss, hidden := p.first(miss, firstMissed)
	rows := make([][]string, len(miss))
	for i, route := range miss {
		rows[i] = []string{brokenAtPlus(route.ID, routeColumns), mgKg(route.Run.WaterOut), stops(route)}
	}
	if l.CannotShow != "" {
		p.heading("Routes that cannot be shown to reach it, and how far each got:")
	} else {
		p.heading("Routes that do not reach it, and how far each got:")
	}
	p.table([]column{{"Route", false, 0}, {"Water out\nmg/kg", true, 0}, {"Why it stops there", false, 52}}, rows)
	p.more(hidden)
}

// How many routes of a lot are printed unless all are asked for.
const (
	firstRanked = 12
	firstMissed = 8
)

// first are the routes that are printed, the first n and every single step, and
// the number of those that are not.
func (p *page) first(all []*study.Route, n int) (shown []*study.Route, hidden int) {
	for i, r := range all {
		if p.all || i < n || len(r.Run.Route) == 1 {
			shown = append(shown, r)
		}
	}
	return shown, len(all) - len(shown)
}

func (p *page) more(hidden int) {
	if hidden > 0 {
		p.say(5, 0, "and %s more: --all prints them, the workbook holds them.", count(float64(hidden), "route", "routes"))
	}
}

func stops(r *study.Route) string {
	if r.Run.TooDry {
		return "too dry for the band of the target"
	}
	if len(r.Run.Outcomes) == 0 {
		return ""
	}
	last := r.Run.Outcomes[len(r.Run.Outcomes)-1]
	if last.WhyText != "" {
		return last.WhyText
	}
	return string(last.Why)
}

// excluded lists what is not offered; routes with the same reason share a line.
func (p *page) excluded(l *study.Lot) {
	if len(l.Excluded) == 0 {
		return
	}
	type cause struct{ reason, source string }
	var causes []cause
	ids := map[cause][]string{}
	beaten := 0
	for _, x := range l.Excluded {
		if x.Beaten && !p.all {
			beaten++
			continue
		}
		c := cause{x.Reason, x.Source}
		if ids[c] == nil {
			causes = append(causes, c)
		}
		ids[c] = append(ids[c], x.ID)
	}
	p.heading("Not offered:")
	for _, c := range causes {
		p.say(5, 4, "%s: %s%s", strings.Join(ids[c], ", "), c.reason, cite(c.source))
	}
	if beaten > 0 {
		p.say(5, 0, "and %s that others beat in everything: --all names them.", count(float64(beaten), "chain", "chains"))
	}
}

// cite points to an entry of the list of sources.
func cite(source string) string {
	if source == "" {
		return ""
	}
	return " [" + source + "]"
}
