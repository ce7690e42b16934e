package steps

import (
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// SoakDose is how much sorbent a soak needs, kg per m3 of solvent.
type SoakDose struct {
	Capacity float64 // enough to hold the water, given for ever; NaN where nothing is enough
	Speed    float64 // enough area to be in time, if it held nothing; NaN where none is enough
	Dose     float64 // what both together need, at most the largest practical dose
	Enough   bool
	AtLeast  bool // Dose is the least usual one; less would do

	eq float64 // kg/kg, in equilibrium with Dose, where it was found with it; 0: it was not
}

// Ruling names the larger of the two sizes of a dose, or the least dose where
// that is larger than both.
func (d SoakDose) Ruling() string {
	if d.AtLeast {
		return "the least usual dose"
	}
	if d.Speed > d.Capacity {
		return "speed"
	}
	return "capacity"
}

// SoakSize is a dose in grams for one time, with what rules it.
type SoakSize struct {
	SoakDose
	Hours                                float64
	CapacityGrams, SpeedGrams, DoseGrams float64 // NaN where no dose helps
	Ruling                               string  // capacity, speed, or "" where no dose helps
	Reached                              float64 // kg/kg
	Advice                               string  // a sentence for the bench
}

// SoakTimes are the times people plan with: overnight, a day, three days.
var SoakTimes = []float64{16 * secondsPerHour, 24 * secondsPerHour, 72 * secondsPerHour}

// SizeSoak says how many grams of sorbent bring a lot to goal (kg/kg) in each of
// the times, or that no dose does.
func SizeSoak(m *thermo.Mixture, feed Lot, goal float64, sorbent Sorbent, rig SoakRig, timesS ...float64) ([]SoakSize, error) {
	feed.SolventKg, feed.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	sizes := make([]SoakSize, 0, len(timesS))
	for _, timeS := range timesS {
		b, dose, err := choose(m, feed, goal, timeS, sorbent, rig)
		if err != nil {
			return nil, err
		}
		o, err := b.run(goal, timeS, dose)
		if err != nil {
			return nil, err
		}
		grams := b.volumeM3 * 1e3
		s := SoakSize{
			SoakDose: dose, Hours: timeS / secondsPerHour, Reached: o.Out.Water(), Advice: o.WhyText,
			CapacityGrams: dose.Capacity * grams, SpeedGrams: dose.Speed * grams, DoseGrams: math.NaN(),
		}
		if dose.Enough {
			s.DoseGrams, s.Ruling = dose.Dose*grams, dose.Ruling()
		}
		sizes = append(sizes, s)
	}
	return sizes, nil
}

// choose checks goal and time and finds the dose.
func choose(m *thermo.Mixture, feed Lot, goal, timeS float64, sorbent Sorbent, rig SoakRig) (*bath, SoakDose, error) {
	b, err := newBath(m, feed, sorbent, rig)
	if err != nil {
		return nil, SoakDose{}, err
	}
	if !(goal > 0 && goal < 1) {
		return nil, SoakDose{}, fmt.Errorf("%w: a goal of %s; allowed: above 0", ErrNoSense, quantity.FormatWater(goal))
	}
	if err := checkTime(timeS); err != nil {
		return nil, SoakDose{}, err
	}
	dose, err := b.dose(goal, timeS)
	return b, dose, err
}

func checkTime(timeS float64) error {
	return checkAmount("a time", "h", timeS/secondsPerHour, 0, 24*366)
}

// checkDose allows no more than fills the vessel: beads pack to about 0.7 kg/L.
func checkDose(doseKgPerM3 float64) error {
	return checkAmount("a dose", "g/L", doseKgPerM3, 0, 1000)
}

// dose solves for the sorbent that reaches goal within timeS.
func (b *bath) dose(goal, timeS float64) (SoakDose, error) {
	d := SoakDose{Capacity: math.NaN(), Speed: math.NaN(), Dose: b.sorbent.MaxDoseKgPerM3}
	feed := b.feed.Water()
	if goal >= feed {
		return SoakDose{Enough: true}, nil
	}
	if spare := b.loading(goal) - b.sorbent.ResidualKgPerKg; spare > 0 {
		d.Capacity = (b.feed.SolventKg*(feed/(1-feed)-goal/(1-goal)) + b.beforeKg()) / spare / b.volumeM3
	}
	d.Speed = b.doseOfRate(math.Log(feed/goal) / timeS)
	if b.rig.CondensationPerS > 0 {
		return b.doseWithCondensation(d, goal, timeS)
	}
	return b.exact(d, goal, timeS)
}

const leastDose = 1e-6 // kg/m3, the lower end of the search

// exact finds the dose at which the balance holds with the equilibrium that
// time and rate ask for:
//
//	w_eq = (w - w_0 e)/(1 - e), e = exp(-K(m) t)
//
// A goal next to what came in is reached by less than the least dose; what the largest
// has nothing to spare for is not reached.
func (b *bath) exact(d SoakDose, goal, timeS float64) (SoakDose, error) {
	spare, least, most := b.spare(goal, timeS), math.Log(leastDose), math.Log(d.Dose)
	switch {
	case spare(most) < 0:
		return d, nil
	case spare(least) >= 0:
		d.Dose = leastDose
	default:
		lnDose, err := thermo.Brent(spare, least, most, 1e-12)
		if err != nil {
			return d, err
		}
		d.Dose = math.Exp(lnDose)
		d.eq = b.needed(goal, timeS, d.Dose)
	}
	d.Enough = true
	if least := b.sorbent.MinDoseKgPerM3; d.Dose < least {
		d.Dose, d.AtLeast, d.eq = least, true, 0
	}
	return d, nil
}

// needed is the equilibrium (kg/kg) on the way to which a dose comes to goal in timeS.
func (b *bath) needed(goal, timeS, doseKgPerM3 float64) float64 {
	e := math.Exp(-b.rate(doseKgPerM3) * timeS)
	return (goal - b.feed.Water()*e) / (1 - e)
}

// spare is the water (kg) that a dose of a logarithm could take beyond what it takes
// on the way to goal in timeS; below zero where it is not enough.
func (b *bath) spare(goal, timeS float64) func(lnDose float64) float64 {
	feed := b.feed.Water()
	return func(lnDose float64) float64 {
		dose := math.Exp(lnDose)
		eq := b.needed(goal, timeS, dose)
		if eq <= 0 {
			return -feed*b.feed.SolventKg - b.beforeKg()
		}
		taken := b.feed.SolventKg*(feed/(1-feed)-eq/(1-eq)) + b.beforeKg()
		return dose*b.volumeM3*(b.loading(eq)-b.sorbent.ResidualKgPerKg) - taken
	}
}

// doseWithCondensation finds the smallest dose that reaches goal where more
// sorbent also makes more water, or the dose that comes nearest to it.
func (b *bath) doseWithCondensation(d SoakDose, goal, timeS float64) (SoakDose, error) {
	const lowest, steps = 1.0, 60 // kg/m3; doses tried, evenly spaced in the logarithm
	ratio := math.Pow(d.Dose/lowest, 1.0/steps)
	nearest := math.Inf(1)
	last := lowest
	for i := range steps + 1 {
		dose := lowest * math.Pow(ratio, float64(i))
		w, err := b.water(dose, timeS)
		if err != nil {
			return d, err
		}
		if w <= goal {
			d.Dose, d.Enough = dose, true
			if i == 0 {
				return d, nil
			}
			d.Dose, err = thermo.Brent(func(dose float64) float64 { w, _ := b.water(dose, timeS); return w - goal }, last, dose, 1e-9)
			return d, err
		}
		if w < nearest {
			nearest, d.Dose = w, dose
		}
		last = dose
	}
	return d, nil
}
