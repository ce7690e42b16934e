package study

import (
	"parch/internal/costs"
	"parch/internal/routes"
	"parch/internal/search"
)

// receiver asks how often a trap has to be used in a year before a receiver made
// for it costs less than one assembled from common glassware.
func (q *question) receiver() (*BreakEven, error) {
	trapped := q.cheapestTrap()
	if trapped == nil {
		return nil, nil
	}
	made, assembled := q.k.MadeAndAssembled(trapped.CarrierOf())
	if made == "" || assembled == "" {
		return nil, nil
	}
	b := BreakEven{Key: Receiver, Unit: "uses/yr", Now: q.lot.Job.BatchesPerYear, From: 0.2, To: 1000, What: "uses a year at which buying a receiver beats assembling one"}
	cost := q.withReceiver(trapped, made, assembled)
	c, err := search.Cross(func(x float64) (float64, float64, error) {
		one, err := cost(x, made)
		if err != nil {
			return 0, 0, err
		}
		other, err := cost(x, assembled)
		return one, other, err
	}, b.From, b.To, b.Now, points)
	if err != nil {
		return nil, err
	}
	b.settle(c, made, assembled)
	b.What += ", for " + trapped.ID()
	return &b, nil
}

// withReceiver is the cost of a route at so many uses a year over one receiver or the
// other, where neither is at hand.
func (q *question) withReceiver(trapped routes.Route, made, assembled string) func(x float64, key string) (float64, error) {
	none := *q.job
	none.Equipment = nil
	for _, e := range q.job.Equipment {
		if e.Item != made && e.Item != assembled {
			none.Equipment = append(none.Equipment, e)
		}
	}
	site := costs.NewArrangement(q.k.Catalog, &none)
	return func(x float64, key string) (float64, error) {
		lot := q.k.Lot
		lot.BatchesPerYear = x
		k := q.k.With(lot)
		k.Job = &none
		t := q.tuner(k, q.book)
		t.Site, t.Receiver = site, key
		return search.Field{Tuner: t, Warm: q.warm}.Cost(trapped)
	}
}

// cheapestTrap is the cheapest route with a trap that reaches the limit.
func (q *question) cheapestTrap() routes.Route {
	for i := range q.lot.Routes {
		if r := &q.lot.Routes[i]; r.Meets() && isTrapped(r.Run.Route) {
			for _, offered := range q.offered {
				if offered.ID() == r.ID {
					return offered
				}
			}
		}
	}
	return nil
}
