package search

import (
	"slices"

	"parch/internal/routes"
)

// hopeless reports whether no soak at the end of a route is sure: not even over the most
// sieve, fresh, in the most charges and for the longest of the stands, still or stirred.
// More sieve and more time leave a lot no wetter, nor do two halves than one whole; false
// where that does not tell: of a solvent that makes water on the sieve, and of a lot that
// may be too dry.
func (l *lifting) hopeless(run routes.Run, stands []stand) (bool, error) {
	if l.t.Case.MakesWater() || l.t.Case.AcceptFrom() > 0 {
		return false, nil
	}
	last := soaks(run.Route) - 1
	for _, stirred := range []bool{false, true} {
		s := cloned(run.Settings)
		s.SoakHours[last], s.Stirred[last] = longest(stands, stirred), stirred
		setLotsOverCharge(&s, last, 1)
		setCharges(&s, last, slices.Max(chargesTried))
		s.AimMgPerKg = routes.LeastAimMgPerKg
		strongest, err := l.t.outline(l.route, s)
		if err != nil {
			return false, nil // tells nothing
		}
		if sure, err := l.Sure(&strongest); err != nil || sure {
			return false, err
		}
	}
	return true, nil
}

func longest(stands []stand, stirred bool) (hours float64) {
	for _, s := range stands {
		if s.stirred == stirred {
			hours = max(hours, s.hours)
		}
	}
	return hours
}
