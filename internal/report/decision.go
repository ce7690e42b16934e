package report

import (
	"math"
	"strconv"
	"strings"

	"parch/internal/quantity"
	"parch/internal/study"
)

// breakEvens prints where routes change places.
func (p *page) breakEvens(l *study.Lot) {
	if len(l.BreakEvens) == 0 {
		return
	}
	p.heading("Break-evens, by cost, the rest as it is, " + l.BreakEvensOf() + ":")
	for _, b := range l.BreakEvens {
		if b.Answer != "" {
			p.say(5, 4, "%s: %s.", sentence(b.What), b.Answer)
		}
	}
}

// nearMisses prints why no route is left.
func (p *page) nearMisses(l *study.Lot) {
	if len(l.NearMisses) == 0 {
		return
	}
	p.heading("No route, because:")
	for _, m := range l.NearMisses {
		p.say(5, 4, "%s.", m)
	}
}

// bookings prints how far the apparatus is taken up where lots share it.
func (p *page) bookings(r *study.Report) {
	if len(r.Lots) < 2 || len(r.Bookings) == 0 {
		return
	}
	p.line("")
	p.say(0, 0, "Apparatus, hours a week by the best routes:")
	for _, b := range r.Bookings {
		p.say(2, 2, "%s: %s of %s h (%.0f %%)", b.Item, quantity.Significant(b.Share*b.PerWeek, 3), quantity.Significant(b.PerWeek, 3), 100*b.Share)
	}
	for _, s := range r.Shared {
		var parts []string
		for i, lot := range s.Lots {
			parts = append(parts, lot+" "+money(s.Parts[i]))
		}
		p.say(2, 2, "%s serves %d lots; each bill holds its whole year, %s %s together, where it costs %s once. Split by batches: %s.",
			s.Item, len(s.Lots), money(s.Charged), r.Job.Currency, money(s.Yearly), strings.Join(parts, ", "))
	}
}

// front prints what is given up for what: the routes that no other beats or equals
// in cost, attended hours, waste and energy at once.
func (p *page) front(l *study.Lot) {
	var best, beaten []string
	for _, f := range l.Front {
		if f.DominatedBy == "" {
			best = append(best, f.ID)
		} else {
			beaten = append(beaten, f.ID+" by "+f.DominatedBy)
		}
	}
	if len(best) == 0 {
		return
	}
	p.heading("Trade-off of cost, attended hours, waste and energy:")
	p.say(5, 4, "No route beats these in all four: %s.", strings.Join(best, ", "))
	if p.all && len(beaten) > 0 {
		p.say(5, 4, "Beaten in all four: %s.", strings.Join(beaten, "; "))
	}
}

// whatIf prints the cheapest route of other starts and targets.
func (p *page) whatIf(r *study.Report, l *study.Lot) {
	if l.WhatIf == nil || !p.all {
		return
	}
	p.heading("The cheapest route from other starts (mg/kg, down) to other targets (across), " + r.Job.Currency + " a litre, " + l.AskedOf() + ":")
	columns := []column{{"From", true, 0}}
	for _, t := range l.WhatIf.Target {
		columns = append(columns, column{"to " + quantity.Significant(t*mgPerKg, 3), false, 20})
	}
	var rows [][]string
	for i, w := range l.WhatIf.StartWater {
		row := []string{quantity.Significant(w*mgPerKg, 3)}
		for _, c := range l.WhatIf.Cells[i] {
			if c.ID == "" || math.IsNaN(c.CostPerLitre) {
				row = append(row, c.Note)
				continue
			}
			row = append(row, brokenAtPlus(c.ID, 18)+"\n"+strconv.FormatFloat(c.CostPerLitre, 'f', 2, 64))
		}
		rows = append(rows, row)
	}
	p.table(columns, rows)
}
