package search

import (
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Kept is what stays of a route while its other settings are tuned, so that it is about
// as sure as it was found to be: how far under the limit its last step is sized for, and
// by how many charges and lots each soak is carried out.
type Kept struct {
	AimShare       float64 // of the acceptance limit; 0: sized for the limit
	Charges        []int   // as in routes.Settings
	LotsOverCharge []int
}

// KeptOf is what a run on a case with that acceptance limit (kg/kg) has to keep.
func KeptOf(run *routes.Run, limit float64) Kept {
	s := run.Settings
	return Kept{s.AimMgPerKg * 1e-6 / limit, slices.Clone(s.Charges), slices.Clone(s.LotsOverCharge)}
}

// KeptAtTheEnd is the same for another route with the same last step: of its soaks before
// the last, one charge for one lot.
func KeptAtTheEnd(run *routes.Run, limit float64, other routes.Route) Kept {
	k := Kept{AimShare: run.Settings.AimMgPerKg * 1e-6 / limit}
	if end := other[len(other)-1]; end.Kind == steps.Soak {
		from, to := soaks(run.Route)-1, soaks(other)-1
		k.Charges = placed(nil, to, countAt(run.Settings.Charges, from))
		k.LotsOverCharge = placed(nil, to, countAt(run.Settings.LotsOverCharge, from))
	}
	return k
}

func soaks(r routes.Route) (n int) {
	for _, s := range r {
		if s.Kind == steps.Soak {
			n++
		}
	}
	return n
}

// Share of the acceptance limit for which the last step is sized.
func (k Kept) Share() float64 {
	if k.AimShare == 0 {
		return 1
	}
	return k.AimShare
}

func (t *Tuner) kept(r routes.Route) (Kept, bool) {
	if t.Kept == nil {
		return Kept{}, false
	}
	return t.Kept(r)
}

// set enters it into the settings of a case with that acceptance limit.
func (k Kept) set(s *routes.Settings, limit float64) {
	s.Charges, s.LotsOverCharge = slices.Clone(k.Charges), slices.Clone(k.LotsOverCharge)
	if k.AimShare > 0 {
		s.AimMgPerKg = significant(k.AimShare*limit*1e6, 10)
	}
}
