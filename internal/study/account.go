package study

import (
	"fmt"
	"slices"
	"strings"

	"parch/catalog"
	"parch/internal/costs"
	"parch/internal/job"
	"parch/internal/routes"
	"parch/internal/search"
)

// account bills a route and looks at its year and its emissions.
func (r *Route) account(k *routes.Case, site *costs.Arrangement, book costs.Book) (err error) {
	lot := k.Lot
	plan := r.plan(lot.Name, lot.BatchesPerYear)
	r.Footprint = costs.FootprintOf(k.Catalog, k.Solvent, k.Job.Site.RoomK, plan)
	r.Bill, err = book.Bill(r.Run.Uses, r.Run.LitresDelivered, lot.BatchesPerYear, k.Job.Currency)
	if err != nil {
		return err
	}
	if !r.Bill.Priced() {
		r.Warnings = append(r.Warnings, fmt.Sprintf("no price for %s: computed in quantities only, its settings chosen without it, and ranked after the routes that have their prices", strings.Join(r.Bill.NoPrice, ", ")))
		return nil
	}
	r.Year, err = site.Yearly(k.Catalog, k.Job, book, plan, &r.Bill)
	return err
}

func (r *Route) plan(lot string, batchesPerYear float64) costs.Plan {
	return costs.Plan{Lot: lot, Run: &r.Run, BatchesPerYear: batchesPerYear}
}

// invest compares the equipment to buy among the routes that reach the target.
func (l *Lot) invest(site *costs.Arrangement) {
	var all []costs.Alternative
	for i := range l.Routes {
		if r := &l.Routes[i]; r.Meets() {
			all = append(all, costs.Alternative{ID: r.ID, Plan: r.plan(l.Job.Name, l.Job.BatchesPerYear), Year: r.Year})
		}
	}
	site.Invest(all)
}

// plans are the routes of each lot that reach the target, or all where none does.
func (r *Report) plans() [][]costs.Plan {
	plans := make([][]costs.Plan, len(r.Lots))
	for i := range r.Lots {
		l := &r.Lots[i]
		reached := len(l.Routes) > 0 && l.Routes[0].Meets()
		for j := range l.Routes {
			if route := &l.Routes[j]; route.Meets() || !reached {
				plans[i] = append(plans[i], route.plan(l.Job.Name, l.Job.BatchesPerYear))
			}
		}
	}
	return plans
}

// buy lists what the best routes need. A lot without a route that reaches its
// target buys nothing. Equipment serves all lots.
func (r *Report) buy(c *catalog.Catalog) error {
	site := costs.NewArrangement(c, r.Job)
	var best []costs.Plan
	pieces := map[string]int{}
	for i := range r.Lots {
		l := &r.Lots[i]
		chosen := l.Best()
		if chosen == nil {
			continue
		}
		plan := chosen.plan(l.Job.Name, l.Job.BatchesPerYear)
		best = append(best, plan)
		for item, n := range site.ToBuyEquipment(plan) {
			pieces[item] = max(pieces[item], n)
		}
	}
	var err error
	r.Buying, err = costs.Buy(c, r.Job, r.Book, costs.Needs(best), pieces)
	return err
}

// Priced is the report with its unpriced routes moved to those not offered, for
// a reader that needs a total for every route. Where the job weighs objectives, that
// reader ranks by the cost, which a warning says.
func (r *Report) Priced() *Report {
	priced := *r
	if r.Job.Objective == job.Weighted {
		byCost := *r.Job
		byCost.Objective = string(search.Cost)
		priced.Job = &byCost
		priced.Warnings = append(slices.Clone(r.Warnings), "the job weighs several objectives; here the routes are ranked by cost, their settings being those of the weights")
	}
	priced.Lots = make([]Lot, len(r.Lots))
	for i, l := range r.Lots {
		all := l.Routes
		l.Routes, l.Excluded = nil, append([]routes.Excluded(nil), l.Excluded...)
		for _, route := range all {
			if route.Bill.Priced() {
				l.Routes = append(l.Routes, route)
				continue
			}
			if route.Meets() {
				l.NoPrice = append(l.NoPrice, route.Bill.NoPrice...)
			}
			l.Excluded = append(l.Excluded, routes.Excluded{ID: route.ID, Reason: "no price for " + strings.Join(route.Bill.NoPrice, ", ") + ": computed in quantities only"})
		}
		slices.Sort(l.NoPrice)
		l.NoPrice = slices.Compact(l.NoPrice)
		priced.Lots[i] = l
	}
	return &priced
}

// recalled names the figures around the money that rest on memory.
func (r *Report) recalled() []Weak {
	var weak []Weak
	if r.Job.Site.Cooling == job.Chiller {
		weak = append(weak, Weak{What: "electricity of a chiller", Value: "its draw over its cooling, both from the catalog", Confidence: string(catalog.Memory), Note: "a unit that runs below its limit draws less"})
	}
	for _, p := range r.Buying.Purchases {
		if p.Transport.UN != "" {
			weak = append(weak, Weak{What: "transport class of " + p.Item, Value: "UN " + p.Transport.UN, Confidence: string(catalog.Memory), Note: p.Transport.Basis})
		}
	}
	return weak
}
