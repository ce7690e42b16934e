package report

import (
	"fmt"
	"slices"
	"strings"

	"github.com/shopspring/decimal"

	"parch/internal/quantity"
	"parch/internal/spread"
	"parch/internal/study"
)

// ranges fills in what the draws say of a route.
func (out *routeOut) ranges(r *study.Route) {
	if r.Miss != nil {
		out.ExpectedMiss = &r.Miss.PerBatch
	}
	if r.Range == nil {
		return
	}
	low, high := number(r.Range.Water.Low*mgPerKg), number(r.Range.Water.High*mgPerKg)
	out.WaterOutLow, out.WaterOutHigh = &low, &high
	if c := r.Range.CostPerLitre; c != nil {
		low, high := decimal.NewFromFloat(c.Low).Round(6), decimal.NewFromFloat(c.High).Round(6)
		out.CostPerLitreLow, out.CostPerLitreHi = &low, &high
	}
	if r.Range.Chance != nil {
		chance, share := number(*r.Range.Chance), number(r.Range.CheapestShare)
		out.ChanceOfTarget, out.CheapestShare = &chance, &share
	}
}

// band prints what nine draws in ten lie in, as finely as the draws bear it.
func band(b spread.Band, scale float64) string {
	low, high := quantity.Significant(b.Low*scale, 2), quantity.Significant(b.High*scale, 2)
	if low == high {
		return "about " + low
	}
	return low + " to " + high
}

// chanceOf prints a chance that is reached at least.
func chanceOf(chance float64) string {
	switch {
	case chance >= 0.99:
		return "over 99 %"
	case chance == 0: // told to a tenth where the draws are few
		return "under 10 %"
	}
	return "at least " + quantity.FormatShare(chance)
}

// sure says how sure the best route is, what is cheaper and less sure, and what the
// answer turns on.
func (p *page) sure(r *study.Report, l *study.Lot) {
	best := l.Best()
	if best == nil || best.Range == nil || best.Range.Chance == nil {
		return
	}
	text := fmt.Sprintf("In %s draws of what is not known exactly (seed %d), rounded to what they bear, it reaches the limit in %s; nine draws in ten leave %s mg/kg",
		thousands(r.Draws), r.Seed, chanceOf(*best.Range.Chance), band(best.Range.Water, mgPerKg))
	if c := best.Range.CostPerLitre; c != nil {
		text += fmt.Sprintf(" at %s %s a litre", band(*c, 1), r.Job.Currency)
	}
	p.say(3, 0, "%s, in %s h.", text, band(best.Range.Hours, 1))
	if m := best.Miss; m != nil {
		p.say(3, 0, "A batch that misses is expected to cost %s %s a batch on top, which is in the ranking and not in the bill.", money(m.PerBatch), r.Job.Currency)
	}
	for i, u := range l.Unsure() {
		if i == mostUnsure {
			p.say(3, 0, "and %s more that are not sure enough.", count(float64(len(l.Unsure())-i), "route", "routes"))
			break
		}
		cost := ""
		if u.Bill.Priced() {
			cost = fmt.Sprintf(", at %s %s a litre,", money(u.Bill.WrittenPerLitre()), r.Job.Currency)
		}
		p.say(3, 0, "Before it in the ranking and not recommended: %s%s as it reaches the limit in %s only.", u.ID, cost, chanceOf(*u.Range.Chance))
	}
	if !best.Recommended {
		p.say(3, 0, "No route is as sure as the %s asked for.", quantity.FormatShare(r.Job.Assurance))
	}
	if len(l.Doubts) > 0 {
		var parts []string
		for _, d := range l.Doubts {
			parts = append(parts, fmt.Sprintf("%s (moves its %s)", d.Input, d.Of))
		}
		p.say(3, 0, "The largest doubts: %s.", strings.Join(parts, "; "))
	}
}

// mostUnsure is how many routes are named that stand before the best.
const mostUnsure = 3

// thousands parts a large number for the eye.
func thousands(n int) string {
	if n < 1000 {
		return fmt.Sprint(n)
	}
	return fmt.Sprintf("%d %03d", n/1000, n%1000)
}

// chanceCell is the chance of a route in the ranking.
func chanceCell(route *study.Route) string {
	if route.Range == nil || route.Range.Chance == nil {
		return ""
	}
	return strings.TrimPrefix(strings.TrimSuffix(chanceOf(*route.Range.Chance), " %"), "at least ")
}

// sureEnough keeps the routes that are recommended, where any is.
func sureEnough(reach []*study.Route) []*study.Route {
	sure := slices.DeleteFunc(slices.Clone(reach), func(r *study.Route) bool { return !r.Recommended })
	if len(sure) == 0 {
		return reach
	}
	return sure
}
