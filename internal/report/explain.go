package report

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"parch/internal/costs"
	"parch/internal/quantity"
	"parch/internal/search"
	"parch/internal/steps"
	"parch/internal/study"
)

// equations are those that a step is computed with.
var equations = map[steps.Kind][]string{
	steps.Settle: {"water dissolved = solubility at room temperature; what is above it settles, but for a share of the batch left with the interface"},
	steps.Trap: {
		"dN_i/dt = -V y_i + L_r x_i,r; V y_i = L_r x_i,r + L_c x_i,c once the receiver overflows",
		"y_i P = x_i gamma_i Psat_i; V = Q / (sum y_i Hvap_i + reheating of the returned layer)",
		"floor: y_w(pot, boiling) = x_w,saturated(receiver)",
	},
	steps.Forerun:  {"dN_w/dN = y_w over the stages of the column at total reflux (Rayleigh)"},
	steps.Salt:     {"water left = max(equilibrium of the hydrate, (1 - share removed) x dissolved water, least claim)"},
	steps.Reactive: {"need = water x stoichiometry; water left = what was measured, or the activity of its class of agents"},
	steps.Soak: {
		"w(t) = w_eq + (w_0 - w_eq) exp(-K t); 1/K = 1/k_mix + 1/(k_f a) + 1/(k_int a)",
		"W_0 + m q_0 = W_eq + m q(a_w(W_eq)), q the isotherm, q_0 what its history left on the sieve",
	},
	steps.Column: {"unused bed = height of a transfer unit x ln(w_in/w_break); capacity = (bed - unused bed) x (q(w_in) - q_0)"},
	steps.Buy:    {"the batch at the price of the dry grade; its water is the limit it is sold with"},
}

// Explain prints how every number of a route came about, in each lot that has it:
// step by step with formula, inputs and figures, then the bill line by line with
// the source of each price.
func Explain(w io.Writer, r *study.Report, id string) error {
	p := &page{w: w, all: true}
	for i := range r.Lots {
		l := &r.Lots[i]
		for k := range l.Routes {
			if l.Routes[k].ID == id {
				p.explain(r, l, &l.Routes[k])
			}
		}
		for _, x := range l.Excluded {
			if x.ID == id {
				p.line("")
				p.say(0, 3, "%s for %s is not offered: %s%s", id, l.Job.Name, x.Reason, cite(x.Source))
			}
		}
	}
	return p.close()
}

// Explainable lists the routes of a report, each once.
func Explainable(r *study.Report) (ids []string) {
	for i := range r.Lots {
		for _, route := range r.Lots[i].Routes {
			ids = append(ids, route.ID)
		}
		for _, x := range r.Lots[i].Excluded {
			ids = append(ids, x.ID)
		}
	}
	slices.Sort(ids)
	return slices.Compact(ids)
}

func (p *page) explain(r *study.Report, l *study.Lot, route *study.Route) {
	p.line("")
	p.say(0, 3, "%s (%s) for %s: %s of %s from %s to %s", route.Label, route.ID, l.Job.Name, quantity.FormatVolume(l.Job.BatchM3),
		solventName(l), startWater(&l.Job), quantity.FormatWater(l.Job.Target))
	p.acceptance(l)
	for i := range route.Run.Outcomes {
		p.explainStep(i+1, &route.Run.Outcomes[i])
	}
	p.explainHours(route)
	p.explainBill(r, route)
	p.notes("What it rests on", warningsOf(route))
	p.explainSources(r, l, route)
}

func (p *page) explainStep(n int, o *steps.Outcome) {
	what := string(o.Kind)
	for _, part := range []string{o.Agent, o.Carrier, o.Apparatus} {
		if part != "" {
			what += ", " + part
		}
	}
	p.heading(fmt.Sprintf("Step %d: %s", n, what))
	for _, e := range equations[o.Kind] {
		p.say(5, 4, "%s", e)
	}
	floor := "none"
	if !math.IsNaN(o.Floor) {
		floor = withPlace(quantity.FormatWater(o.Floor), o.FloorOf)
	}
	p.say(5, 4, "In: %.6g kg with %s. Out: %.6g kg with %s. Floor: %s.", o.In.MassKg(), quantity.FormatWater(o.In.Water()), o.Out.MassKg(), quantity.FormatWater(o.Out.Water()), floor)
	p.say(5, 4, "Stops: %s.", firstText(o.WhyText, string(o.Why)))
	if o.RuledBy != "" {
		p.say(5, 4, "Turns on: %s.", o.RuledBy)
	}
	var figures []string
	for _, f := range o.Figures {
		if !math.IsNaN(f.Value) && !math.IsInf(f.Value, 0) {
			figures = append(figures, strings.TrimSpace(fmt.Sprintf("%s %s %s", f.Name, quantity.Significant(f.Value, 4), f.Unit)))
		}
	}
	if len(figures) > 0 {
		p.say(5, 4, "Figures: %s.", strings.Join(figures, "; "))
	}
	p.say(5, 4, "Hours: %s, of them attended %s. Energy: %s kWh.", quantity.Significant(o.HoursTotal, 4), quantity.Significant(o.HoursAttended, 4), quantity.Significant(o.EnergyKWh, 4))
	for _, loss := range o.Losses {
		p.say(5, 4, "Lost: %s kg of solvent, %s.", quantity.Significant(loss.SolventKg, 4), loss.Cause)
	}
}

func firstText(texts ...string) string {
	for _, t := range texts {
		if t != "" {
			return strings.TrimSuffix(t, ".")
		}
	}
	return ""
}

func (p *page) explainHours(route *study.Route) {
	var parts []string
	sum := 0.0
	for _, o := range route.Run.Outcomes {
		parts = append(parts, quantity.Significant(o.HoursTotal, 4))
		sum += o.HoursTotal
	}
	if tests := route.Run.HoursTotal - route.Run.HoursWaiting - sum; tests > 1e-9 {
		parts = append(parts, quantity.Significant(tests, 4)+" for tests")
	}
	if route.Run.HoursWaiting > 0 {
		parts = append(parts, quantity.Significant(route.Run.HoursWaiting, 4)+" between days of attended work")
	}
	p.heading(fmt.Sprintf("Start to finish: %s = %s h", strings.Join(parts, " + "), quantity.Significant(route.Run.HoursTotal, 4)))
	if s := route.Run.Shortened; s != nil {
		p.say(5, 4, "The best by the objective takes %s and saves %s of it: the shortest stand within %s of the best is taken.",
			hours(s.HoursTotal), shareSaved(s.Saves), percent(search.Tie))
	}
}

// shareSaved tells a share that may be next to nothing.
func shareSaved(share float64) string {
	const least = 1e-5
	if share < least {
		return "under " + percent(least)
	}
	return percent(share)
}

func percent(share float64) string { return quantity.Significant(share*100, 2) + " %" }

func (p *page) explainBill(r *study.Report, route *study.Route) {
	p.heading("Cost of a batch, " + r.Job.Currency + ":")
	for _, line := range route.Bill.Lines {
		quantityText := quantity.Significant(line.Quantity.InexactFloat64(), 6)
		if !line.YearShare.IsZero() {
			quantityText = quantity.Significant(line.YearShare.InexactFloat64(), 6) + " a year over the batches = " + quantityText
		}
		p.say(5, 4, "%s, %s: %s %s x %s = %s (%s; price: %s)", headNames[line.Head], line.Label, quantityText, line.Unit, line.UnitPrice, line.Amount.StringFixed(4),
			firstText(line.Basis, "as used"), priceOrigin(r.Book[line.Item]))
	}
	if !route.Bill.Priced() {
		p.say(5, 4, "No total: no price for %s.", strings.Join(route.Bill.NoPrice, ", "))
		return
	}
	p.say(5, 4, "Together %s; delivered %s L; a litre %s.", route.Bill.PerBatch.StringFixed(4), route.Bill.LitresDelivered.StringFixed(4), route.Bill.PerLitre)
}

func priceOrigin(price costs.Price) string {
	text := firstText(price.SourceText, price.Source)
	if price.Date != "" {
		text += ", " + price.Date
	}
	if price.Flag != costs.NoFlag {
		text += ", " + string(price.Flag)
	}
	return text
}

// explainSources lists the inputs from the catalog, and the sources they cite.
func (p *page) explainSources(r *study.Report, l *study.Lot, route *study.Route) {
	inputs, sources := r.Behind(l, route)
	var lines []string
	for _, in := range inputs {
		lines = append(lines, strings.TrimSpace(in.What+" "+in.Value)+", "+in.Confidence+cite(in.Source))
	}
	p.notes("Inputs from the catalog", lines)
	lines = nil
	for _, s := range sources {
		lines = append(lines, s.ID+": "+s.Reference)
	}
	p.notes("Sources", lines)
}
