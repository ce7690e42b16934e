package study

import (
	"parch/internal/memo"
	"parch/internal/routes"
	"parch/internal/search"
)

// surely is how the routes of a lot became sure enough, as things are. What is asked of
// other lots, prices and uses rests on it: each answer anew by draws would take too long.
type surely struct {
	limit  float64 // kg/kg, that of acceptance
	found  []judged
	closed bool                  // what was not tried is no part of the answer
	ways   memo.Map[string, way] // by route id
}

type judged struct {
	run  routes.Run
	sure bool
}

// surelyOf is nil where no route is sure enough, or no draws were made.
func surelyOf(l *Lot) *surely {
	if !l.anySure() {
		return nil
	}
	s := &surely{limit: l.AcceptAt}
	for i := range l.Routes {
		if r := &l.Routes[i]; r.Meets() {
			s.found = append(s.found, judged{r.Run, r.Recommended})
		}
	}
	return s
}

// way is what a route has to keep to be about as sure as now.
type way struct {
	kept  search.Kept
	known bool // else it is taken as computed
	out   bool // it, or each route that ends as it does, reaches the limit and is not sure enough
}

func (s *surely) way(r routes.Route) way {
	if s == nil {
		return way{}
	}
	return s.ways.Of(r.ID(), func() way { return s.find(r) })
}

// find takes for a route that was not tried the lowest aim of those that end as it does.
func (s *surely) find(r routes.Route) (w way) {
	id, end := r.ID(), r[len(r)-1]
	if s.closed {
		w.out = true
	}
	for i := range s.found {
		f := &s.found[i]
		same := f.run.Route.ID() == id
		switch {
		case same && f.sure:
			return way{kept: search.KeptOf(&f.run, s.limit), known: true}
		case same:
			return way{out: true}
		case s.closed || f.run.Route[len(f.run.Route)-1] != end:
		case f.sure:
			if k := search.KeptAtTheEnd(&f.run, s.limit, r); !w.known || k.Share() < w.kept.Share() {
				w = way{kept: k, known: true}
			}
		default:
			w.out = !w.known
		}
	}
	return w
}

// kept is what search.Tuner.Kept asks for.
func (s *surely) kept(r routes.Route) (search.Kept, bool) {
	w := s.way(r)
	return w.kept, w.known
}
