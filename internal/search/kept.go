package search

import (
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// Kept is what stays of a route while its other settings are tuned, so that it is about
// as sure as it was found to be: how far under the limit its last step is sized for, by
// how many charges and lots each soak is carried out, and how long it stands. Where that
// is too short on another lot it stands longer.
type Kept struct {
	AimShare       float64 // of the acceptance limit; 0: sized for the limit
	Charges        []int   // as in routes.Settings
	LotsOverCharge []int

	stands []stand         // of each soak; 0 h: any
	beds   map[int]float64 // mg/kg handed over by the soak or column at a place
}

// KeptOf is what a run on a case with that acceptance limit (kg/kg) has to keep.
func KeptOf(run *routes.Run, limit float64) Kept {
	s := run.Settings
	k := Kept{AimShare: s.AimMgPerKg * 1e-6 / limit, Charges: slices.Clone(s.Charges), LotsOverCharge: slices.Clone(s.LotsOverCharge), beds: map[int]float64{}}
	for i, hours := range s.SoakHours {
		k.stands = append(k.stands, stand{hours, s.Stirred[i]})
	}
	for _, place := range places(run.Route) {
		if kind := run.Route[place].Kind; kind == steps.Soak || kind == steps.Column {
			k.beds[place] = s.HandOverMgPerKg[place]
		}
	}
	return k
}

// KeptAtTheEnd is the same for another route with the same last step: of its soaks before
// the last, one charge for one lot and any stand.
func KeptAtTheEnd(run *routes.Run, limit float64, other routes.Route) Kept {
	k := Kept{AimShare: run.Settings.AimMgPerKg * 1e-6 / limit, stands: make([]stand, soaks(other))}
	if end := other[len(other)-1]; end.Kind == steps.Soak {
		from, to := soaks(run.Route)-1, soaks(other)-1
		k.Charges = placed(nil, to, countAt(run.Settings.Charges, from))
		k.LotsOverCharge = placed(nil, to, countAt(run.Settings.LotsOverCharge, from))
		k.stands[to] = stand{run.Settings.SoakHours[from], run.Settings.Stirred[from]}
	}
	return k
}

// standsOf are those on offer that are the one kept of a soak or, where it is to stand
// longer, longer ones; all where none is.
func (k Kept) standsOf(soak int, all []stand, longer bool) []stand {
	kept := k.stands[soak]
	if kept.hours == 0 {
		return all
	}
	if !longer {
		return []stand{kept}
	}
	long := slices.DeleteFunc(slices.Clone(all), func(s stand) bool { return s.stirred != kept.stirred || s.hours <= kept.hours })
	if len(long) == 0 {
		return []stand{kept}
	}
	return long
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
