package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// longestSoakS is a year, the longest time a soak may be asked for.
const longestSoakS = 24 * 366 * secondsPerHour

// SoakUntil stands a lot over a given dose (kg per m3 of solvent) until it has
// come down to goal (kg/kg):
//
//	t = ln((w_0 - w_eq)/(goal - w_eq))/K
//
// Where no time is enough, the lot stands until it has all but come to its
// equilibrium, or is at its driest, and the outcome says why.
func SoakUntil(m *thermo.Mixture, feed Lot, goal, doseKgPerM3 float64, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newBath(m, lot, sorbent, rig)
		if err := errors.Join(err, checkDose(doseKgPerM3)); err != nil {
			return Outcome{}, err
		}
		if !(goal > 0 && goal < lot.Water()) {
			return Outcome{}, fmt.Errorf("%w: a goal of %s; allowed: above 0 and below the %s that the lot has", ErrNoSense, quantity.FormatWater(goal), quantity.FormatWater(lot.Water()))
		}
		eq, err := b.equilibrium(doseKgPerM3 * b.volumeM3)
		if err != nil {
			return Outcome{}, err
		}
		timeS, reached := b.until(goal, eq, doseKgPerM3)
		o, err := b.run(goal, timeS, SoakDose{Capacity: math.NaN(), Speed: math.NaN(), Dose: doseKgPerM3, Enough: reached})
		if err != nil {
			return Outcome{}, err
		}
		o.Why, o.WhyText = b.reasonUntil(goal, o.Floor, o.Out.Water(), timeS, doseKgPerM3, reached)
		return o, nil
	})
}

// nearEquilibrium is how close to its equilibrium a lot is left that cannot
// reach its goal.
const nearEquilibrium = 0.01

func (b *bath) until(goal, eq, doseKgPerM3 float64) (timeS float64, reached bool) {
	k, away := b.rate(doseKgPerM3), b.feed.Water()-eq
	switch made := b.made(doseKgPerM3, 1); {
	case !(away > 0):
		return 0, false
	case made > 0:
		return b.untilDriest(goal, eq, doseKgPerM3, math.Log(k*away/made)/k)
	case goal > eq:
		timeS = math.Log(away/(goal-eq)) / k
		return math.Min(timeS, longestSoakS), timeS <= longestSoakS
	}
	return math.Min(longestSoakS, math.Max(0, math.Log(away/(nearEquilibrium*eq))/k)), false
}

// untilDriest looks no further than the moment at which a solvent that makes
// water on the sorbent is at its driest.
func (b *bath) untilDriest(goal, eq, doseKgPerM3, driestS float64) (timeS float64, reached bool) {
	driestS = math.Min(longestSoakS, math.Max(0, driestS))
	left := func(t float64) float64 { return b.course(eq, doseKgPerM3, t) - goal }
	if left(driestS) > 0 {
		return driestS, false
	}
	timeS, err := thermo.Brent(left, 0, driestS, 1e-9*driestS)
	return timeS, err == nil
}

func (b *bath) reasonUntil(goal, floor, out, timeS, doseKgPerM3 float64, reached bool) (Stop, string) {
	g, hours := quantity.FormatWater(goal), timeS/secondsPerHour
	switch {
	case reached:
		return AtTarget, fmt.Sprintf("%s after %.3g h", g, hours)
	case goal <= floor:
		return AtFloor, fmt.Sprintf("floor: a sieve that still holds %.2g g/100 g leaves %s, whatever the dose and the time", b.sorbent.ResidualKgPerKg*100, quantity.FormatWater(floor))
	case b.rig.CondensationPerS > 0:
		return AtPractice, fmt.Sprintf("%s makes water on the sorbent: driest, at %s, after %.2g h", b.m.Solvent.Called(), quantity.FormatWater(out), hours)
	case timeS >= longestSoakS:
		return AtTime, fmt.Sprintf("time: %s would take more than a year", g)
	}
	return AtCapacity, fmt.Sprintf("capacity: %.3g g/L end at %s, however long they stand; more sorbent is needed for %s", doseKgPerM3, quantity.FormatWater(out), g)
}
