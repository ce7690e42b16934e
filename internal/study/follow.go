package study

import "parch/internal/routes"

// follow gathers what a reader needs to follow the routes without the program. A
// lot whose curves cannot be tabulated is not followed.
func (l *Lot) follow(k *routes.Case) {
	runs := make([]*routes.Run, len(l.Routes))
	for i := range l.Routes {
		runs[i] = &l.Routes[i].Run
	}
	if f, err := k.Follow(runs); err == nil {
		l.Follow = f
	}
}
