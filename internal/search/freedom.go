package search

import (
	"math"
	"slices"

	"parch/internal/routes"
	"parch/internal/steps"
)

// axis is a free setting with a few values, in an order in which neighbours are
// alike. A late one matters little and is tried where the rest is settled.
type axis struct {
	count int
	set   func(s *routes.Settings, value int)
	late  bool
	hours []float64 // of each value, where they are stands; else nil
	soak  int       // the 1-based place of the soak it belongs to; 0: of another step
}

// spot is one choice of every free setting: the place on each axis, and ln(water)
// in mg/kg at each free hand-over.
type spot struct {
	at []int
	u  []float64
}

func (s spot) clone() spot { return spot{slices.Clone(s.at), slices.Clone(s.u)} }

// stand is how a soak is carried out.
type stand struct {
	hours   float64
	stirred bool
}

// blank are settings of the right shape, with nothing chosen.
func (t *Tuner) blank(r routes.Route) routes.Settings {
	s := routes.Settings{HandOverMgPerKg: make([]float64, len(r)-1)}
	for i, stage := range r {
		switch stage.Kind {
		case steps.Soak:
			s.SoakHours, s.Stirred, s.Sieve = append(s.SoakHours, 0), append(s.Stirred, false), append(s.Sieve, "")
		case steps.Column:
			s.Sieve = append(s.Sieve, "")
		case steps.Forerun:
			s.Stages = append(s.Stages, 0)
			if kPa := t.Case.ForerunPressures()[0]; kPa > 0 && !r.Strips(i) {
				s.PressureKPa = append(s.PressureKPa, kPa)
			}
		case steps.Trap:
			s.Receiver, s.ReceiverC = append(s.Receiver, t.Receiver), append(s.ReceiverC, 0)
			if stage.Carrier != "" {
				s.CarrierDose = append(s.CarrierDose, routes.CarrierDoses[0])
			}
		}
	}
	if kept, ok := t.kept(r); ok {
		kept.set(&s, t.Case.Goal())
	}
	return s
}

func cloned(s routes.Settings) routes.Settings {
	s.HandOverMgPerKg, s.SoakHours, s.Stages = slices.Clone(s.HandOverMgPerKg), slices.Clone(s.SoakHours), slices.Clone(s.Stages)
	s.Stirred, s.Sieve, s.Receiver, s.ReceiverC = slices.Clone(s.Stirred), slices.Clone(s.Sieve), slices.Clone(s.Receiver), slices.Clone(s.ReceiverC)
	s.CarrierDose, s.PressureKPa = slices.Clone(s.CarrierDose), slices.Clone(s.PressureKPa)
	s.Charges, s.LotsOverCharge = slices.Clone(s.Charges), slices.Clone(s.LotsOverCharge)
	return s
}

// axes of a route, stage by stage. The stands of its soaks come from outside, as
// they depend on the time that is left.
func (t *Tuner) axes(r routes.Route, stands []stand) (all []axis) {
	count := map[steps.Kind]int{}
	beds, carriers := 0, 0
	for i, stage := range r {
		k := count[stage.Kind]
		count[stage.Kind]++
		before := len(all)
		switch stage.Kind {
		case steps.Trap:
			if stage.Carrier != "" { // as cold as can be: each run takes its time
				dose := carriers
				carriers++
				all = append(all, oneOf(routes.CarrierDoses, func(s *routes.Settings, d float64) { s.CarrierDose[dose] = d }))
				all = append(all, later(oneOf(t.receivers(stage.Carrier), func(s *routes.Settings, key string) { s.Receiver[k] = key })))
				continue
			}
			all = append(all, later(oneOf(t.receivers(""), func(s *routes.Settings, key string) { s.Receiver[k] = key })))
			all = append(all, later(oneOf(t.Case.ReceiverTemperatures(), func(s *routes.Settings, c float64) { s.ReceiverC[k] = c })))
		case steps.Forerun:
			all = append(all, oneOf(t.Case.ColumnStages(), func(s *routes.Settings, n int) { s.Stages[k] = n }))
			if pressures := t.Case.ForerunPressures(); len(pressures) > 1 && !r.Strips(i) {
				all = append(all, later(oneOf(pressures, func(s *routes.Settings, kPa float64) { s.PressureKPa[k] = kPa })))
			}
		case steps.Soak:
			if kept, ok := t.kept(r); ok {
				all = append(all, standsOf(kept.standsOf(k, stands, t.standsLonger), k))
			} else {
				all = append(all, standsOf(stands, k))
				all = append(all, later(oneOf(t.lotsOverCharge(), func(s *routes.Settings, n int) { setLotsOverCharge(s, k, n) })))
				all = append(all, later(oneOf(chargesTried, func(s *routes.Settings, n int) { setCharges(s, k, n) })))
			}
		}
		if stage.Kind == steps.Soak || stage.Kind == steps.Column {
			bed := beds
			beds++
			all = append(all, oneOf(t.afterUse(), func(s *routes.Settings, after string) { s.Sieve[bed] = after }))
		}
		if stage.Kind == steps.Soak {
			for n := before; n < len(all); n++ {
				all[n].soak = i + 1
			}
		}
	}
	return all
}

func (t *Tuner) receivers(carrier string) []string {
	if t.Receiver != "" {
		return []string{t.Receiver}
	}
	return t.Case.Receivers(carrier)
}

func oneOf[T any](values []T, set func(*routes.Settings, T)) axis {
	return axis{count: len(values), set: func(s *routes.Settings, i int) { set(s, values[i]) }}
}

func standsOf(stands []stand, soak int) axis {
	a := oneOf(stands, func(s *routes.Settings, v stand) { s.SoakHours[soak], s.Stirred[soak] = v.hours, v.stirred })
	for _, v := range stands {
		a.hours = append(a.hours, v.hours)
	}
	return a
}

func later(a axis) axis {
	a.late = true
	return a
}

// afterUse is what may be done with a sieve. One that is activated in the oven
// before each use is not thrown away after it: using it again costs nothing more.
func (t *Tuner) afterUse() []string {
	switch {
	case !t.Case.MayRegenerate():
		return []string{routes.Discard}
	case t.Case.Lot.SieveHistoryK > 0:
		return []string{routes.Regenerate}
	}
	return []string{routes.Regenerate, routes.Discard}
}

// places are the stages whose outlet is free to choose: a trap or a forerun and a
// bed of sieve that something follows. A trap before a forerun is run as far as it
// goes: what it takes is not lost with the forerun.
func places(r routes.Route) (all []int) {
	for i := range len(r) - 1 {
		switch {
		case r[i].Kind == steps.Trap && r[i+1].Kind == steps.Forerun, r.Strips(i):
		case r[i].Kind == steps.Trap, r[i].Kind == steps.Forerun, r[i].Kind == steps.Soak, r[i].Kind == steps.Column:
			all = append(all, i)
		}
	}
	return all
}

// settingsAt turns a spot into settings.
func (g *tuning) settingsAt(s spot) routes.Settings {
	out := cloned(g.blank)
	for i, a := range g.axes {
		a.set(&out, s.at[i])
	}
	for i, place := range g.places {
		out.HandOverMgPerKg[place] = significant(math.Exp(s.u[i]), 10)
	}
	return out
}

// significant rounds to so many digits.
func significant(x float64, digits int) float64 {
	unit := math.Pow(10, math.Floor(math.Log10(x))-float64(digits-1))
	return math.Round(x/unit) * unit
}
