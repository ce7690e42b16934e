package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// Charge is one portion of fresh sorbent and how long the lot stands over it.
type Charge struct {
	Kg    float64
	TimeS float64
}

// ErrNoCharge means that a series has no charge.
var ErrNoCharge = errors.New("no charge of sorbent")

// SoakSeries stands a lot over several charges of fresh sorbent, one after the
// other, decanting between them. Each charge keeps its share of solvent. Portions
// leave a lot drier than one charge of the same mass if each is given its time;
// cut short, a small charge has less area to work with.
func SoakSeries(m *thermo.Mixture, feed Lot, charges []Charge, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	if len(charges) == 0 {
		return Outcome{}, ErrNoCharge
	}
	return withCarrier(feed, func(lot Lot) (Outcome, error) { return series(m, lot, charges, sorbent, rig) })
}

func series(m *thermo.Mixture, feed Lot, charges []Charge, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	total := Outcome{Kind: Soak, Agent: sorbent.Key, In: feed, Out: feed}
	for i, c := range charges {
		if !(total.Out.SolventKg > 0) {
			return Outcome{}, fmt.Errorf("%w: nothing of the lot is left for charge %d", ErrNoSense, i+1)
		}
		o, err := SoakOver(m, total.Out, c.Kg/LotVolume(m, total.Out, rig.TempK), c.TimeS, sorbent, rig)
		if err != nil {
			return Outcome{}, fmt.Errorf("charge %d: %w", i+1, err)
		}
		total.follow(o, i+1)
		if !rig.Outline {
			total.tell(o, i+1)
		}
	}
	if rig.Outline {
		return total, nil
	}
	total.Why = AtTime
	total.WhyText = fmt.Sprintf("%s after %d charges", quantity.FormatWater(total.Out.Water()), len(charges))
	total.Figures = append([]Figure{
		{"dose", "g/L", total.AgentKg / LotVolume(m, feed, rig.TempK)},
		{"charges", "", float64(len(charges))},
		{"loading before", "g/100 g", 100 * sorbent.ResidualKgPerKg},
	}, total.Figures...)
	if madeKg := total.Balance.WaterMadeKg; madeKg > 0 {
		total.Figures = append(total.Figures, Figure{"water made by condensation", "g", madeKg * 1e3})
	}
	return total, nil
}

// UsedCharge is a charge that lots have stood over, and what it holds now.
type UsedCharge struct{ Kg, LoadingKgPerKg float64 }

// OverUsed is what is left (kg/kg) in one more lot that stands over used charges in the
// same order, each for timeS; NaN where one of them would make it wetter.
func OverUsed(m *thermo.Mixture, feed Lot, used []UsedCharge, timeS float64, sorbent Sorbent, rig SoakRig) (float64, error) {
	left := feed
	for _, u := range used {
		sorbent.ResidualKgPerKg = u.LoadingKgPerKg
		o, err := SoakOver(m, left, u.Kg/LotVolume(m, left, rig.TempK), timeS, sorbent, rig)
		switch {
		case errors.Is(err, ErrWetSieve):
			return math.NaN(), nil
		case err != nil:
			return math.NaN(), err
		}
		left = o.Out
	}
	return left.Water(), nil
}

// waterAfter is what a series leaves, kg/kg, NaN where it does not get so far.
func waterAfter(m *thermo.Mixture, feed Lot, charges []Charge, sorbent Sorbent, rig SoakRig) float64 {
	left := feed
	left.SolventKg, left.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	for _, c := range charges {
		b, err := newBath(m, left, sorbent, rig)
		if err != nil {
			return math.NaN()
		}
		eq, err := b.over(c.Kg / b.volumeM3)
		if left = b.decanted(eq, c.Kg/b.volumeM3, c.TimeS); err != nil || !(left.SolventKg > 0) {
			return math.NaN()
		}
	}
	return left.Water()
}

// mostHeld is the largest share of a lot that a series is let keep on its charges.
const mostHeld = 0.95

// SeriesFor stands a lot over n equal charges, each for timeS, of the least dose
// that reaches goal (kg/kg) with the last of them; or over n of the largest
// practical doses where none does, less if those would keep the lot. Each charge is at least the least usual dose.
func SeriesFor(m *thermo.Mixture, feed Lot, goal, timeS float64, n int, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	if n <= 1 {
		return SoakFor(m, feed, goal, timeS, sorbent, rig)
	}
	if err := errors.Join(checkDose(sorbent.MaxDoseKgPerM3), checkTime(timeS), checkAmount("a goal", "mg/kg", goal*mgPerKg, 0, mgPerKg)); err != nil {
		return Outcome{}, err
	}
	volumeM3 := LotVolume(m, feed, rig.TempK)
	drunkUp := (feed.SolventKg + feed.CarrierKg) / m.Solvent.DensityKgPerM3.At(rig.TempK) / sorbent.HoldUpM3PerKg / volumeM3
	most := math.Min(float64(n)*sorbent.MaxDoseKgPerM3, mostHeld*orOne(float64(rig.Lots))*drunkUp)
	charges := func(doseKgPerM3 float64) []Charge { return EqualCharges(n, doseKgPerM3*volumeM3, timeS) }
	over := func(doseKgPerM3 float64) (Outcome, error) {
		return SoakSeries(m, feed, charges(doseKgPerM3), sorbent, rig)
	}
	after := func(doseKgPerM3 float64) float64 {
		return waterAfter(m, feed, charges(doseKgPerM3), sorbent, rig)
	}
	dose := float64(n) * math.Max(sorbent.MinDoseKgPerM3, leastDose)
	if after(dose) <= goal {
		o, err := over(dose)
		return reachedBySeries(o, n), err
	}
	if largest := math.Max(most, dose); !(after(largest) <= goal) {
		o, err := over(largest)
		if err != nil || rig.Outline {
			return o, err
		}
		unhurried := waterAfter(m, feed, EqualCharges(n, most*volumeM3, longestSoakS/float64(n)), sorbent, rig)
		return missedBySeries(o, goal, n, unhurried > goal), nil
	}
	lnDose, err := thermo.Brent(func(lnDose float64) float64 {
		return math.Log(after(math.Exp(lnDose)) / goal)
	}, math.Log(dose), math.Log(most), 1e-10)
	if err != nil {
		return Outcome{}, err
	}
	o, err := over(math.Exp(lnDose))
	return reachedBySeries(o, n), err
}

// SeriesUntil stands a lot over n equal charges that make up a dose until it has
// come to goal (kg/kg), each charge for the same time.
func SeriesUntil(m *thermo.Mixture, feed Lot, goal, doseKgPerM3 float64, n int, sorbent Sorbent, rig SoakRig) (Outcome, error) {
	if n <= 1 {
		return SoakUntil(m, feed, goal, doseKgPerM3, sorbent, rig)
	}
	if err := errors.Join(checkDose(doseKgPerM3), checkAmount("a goal", "mg/kg", goal*mgPerKg, 0, mgPerKg)); err != nil {
		return Outcome{}, err
	}
	kg := doseKgPerM3 * LotVolume(m, feed, rig.TempK)
	charges := func(lnTimeS float64) []Charge { return EqualCharges(n, kg, math.Exp(lnTimeS)) }
	over := func(lnTimeS float64) (Outcome, error) {
		return SoakSeries(m, feed, charges(lnTimeS), sorbent, rig)
	}
	longest := math.Log(longestSoakS / float64(n))
	o, err := over(longest)
	if err != nil || o.Out.Water() > goal {
		return missedBySeries(o, goal, n, true), err
	}
	lnTimeS, err := thermo.Brent(func(lnTimeS float64) float64 {
		return math.Log(waterAfter(m, feed, charges(lnTimeS), sorbent, rig) / goal)
	}, 0, longest, 1e-10)
	if err != nil {
		return Outcome{}, err
	}
	o, err = over(lnTimeS)
	return reachedBySeries(o, n), err
}

// SizeSeries is SizeSoak for n equal charges, each of which has the time to itself.
// The grams are those of all charges together: for capacity of as much as all hold
// when none is hurried, for speed with each taking its share of ln(w_0/goal).
func SizeSeries(m *thermo.Mixture, feed Lot, goal float64, n int, sorbent Sorbent, rig SoakRig, timesS ...float64) ([]SoakSize, error) {
	if n <= 1 {
		return SizeSoak(m, feed, goal, sorbent, rig, timesS...)
	}
	feed.SolventKg, feed.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	b, err := newBath(m, feed, sorbent, rig)
	if err != nil {
		return nil, err
	}
	unhurried := sorbent
	unhurried.MinDoseKgPerM3 = 0
	ample, err := SeriesFor(m, feed, goal, longestSoakS/float64(n), n, unhurried, rig)
	if err != nil {
		return nil, err
	}
	capacityGrams := math.NaN()
	if ample.Why == AtTarget {
		capacityGrams = ample.AgentKg * 1e3
	}
	sizes := make([]SoakSize, 0, len(timesS))
	for _, timeS := range timesS {
		o, err := SeriesFor(m, feed, goal, timeS, n, sorbent, rig)
		if err != nil {
			return nil, err
		}
		sizes = append(sizes, b.sizeOf(o, goal, timeS, n, capacityGrams))
	}
	return sizes, nil
}

func (b *bath) sizeOf(o Outcome, goal, timeS float64, n int, capacityGrams float64) SoakSize {
	s := SoakSize{
		Hours: timeS / secondsPerHour, Reached: o.Out.Water(), Advice: o.WhyText,
		CapacityGrams: capacityGrams, DoseGrams: math.NaN(),
	}
	s.SpeedGrams = float64(n) * b.volumeM3 * 1e3 * b.doseOfRate(math.Log(b.feed.Water()/goal)/float64(n)/timeS)
	s.Capacity, s.Speed, s.Dose = s.CapacityGrams/b.volumeM3/1e3, s.SpeedGrams/b.volumeM3/1e3, o.Figure("dose")
	if s.Enough = o.Why == AtTarget; s.Enough {
		s.AtLeast = s.Dose <= float64(n)*b.sorbent.MinDoseKgPerM3*(1+1e-9)
		s.DoseGrams, s.Ruling = o.AgentKg*1e3, s.SoakDose.Ruling()
	}
	return s
}

func reachedBySeries(o Outcome, n int) Outcome {
	if len(o.Course) == 0 { // an outline
		return o
	}
	o.Why = AtTarget
	o.WhyText = fmt.Sprintf("%s with the last of %d charges", quantity.FormatWater(o.Out.Water()), n)
	return o
}

// missedBySeries says why a series stops short of goal (kg/kg); full means that all the
// time there is would not bring it there.
func missedBySeries(o Outcome, goal float64, n int, full bool) Outcome {
	g, left := quantity.FormatWater(goal), quantity.FormatWater(o.Out.Water())
	switch {
	case goal <= o.Floor:
		o.Why, o.WhyText = AtFloor, fmt.Sprintf("floor: the sieve's residual loading leaves %s, whatever the number of charges", quantity.FormatWater(o.Floor))
	case full:
		o.Why, o.WhyText = AtCapacity, fmt.Sprintf("capacity: %d charges of %.3g g/L in all leave %s, not %s, and hold too little for it however long they stand", n, o.Figure("dose"), left, g)
	default:
		o.Why, o.WhyText = AtTime, fmt.Sprintf("time: %d charges leave %s, not %s; more time, a stirrer or one charge more", n, left, g)
	}
	return o
}

// follow adds the next charge to a series.
func (o *Outcome) follow(next Outcome, charge int) {
	for _, l := range next.Losses {
		o.Losses = append(o.Losses, Loss{fmt.Sprintf("%s, charge %d", l.Cause, charge), l.SolventKg})
	}
	o.Out = next.Out
	o.HoursTotal += next.HoursTotal
	o.HoursAttended += next.HoursAttended
	o.AgentKg += next.AgentKg
	o.SolventLostL += next.SolventLostL
	o.Balance.add(next.Balance)
}

// tell enters what is to be said of the next charge of a series.
func (o *Outcome) tell(next Outcome, charge int) {
	started := 0.0
	if n := len(o.Course); n > 0 {
		started = o.Course[n-1].Hours
	}
	for _, p := range next.Course {
		p.Hours += started
		o.Course = append(o.Course, p)
	}
	o.Figures = append(o.Figures,
		Figure{fmt.Sprintf("dose, charge %d", charge), "g/L", next.Figure("dose")},
		Figure{fmt.Sprintf("water after charge %d", charge), "mg/kg", next.Out.Water() * mgPerKg},
		Figure{fmt.Sprintf("loading after, charge %d", charge), "g/100 g", next.Figure("loading after")})
	for _, w := range next.Warnings {
		o.Warnings = append(o.Warnings, fmt.Sprintf("charge %d: %s", charge, w))
	}
	o.RuledBy, o.Floor = next.RuledBy, next.Floor
}

// add joins the balance of the step that follows: what came out of the first is
// what went into the second.
func (b *Balance) add(next Balance) {
	if b.WaterInKg == 0 && b.SolventInKg == 0 {
		*b = next
		return
	}
	b.WaterOutKg, b.SolventOutKg = next.WaterOutKg, next.SolventOutKg
	b.WaterRemovedKg += next.WaterRemovedKg
	b.SolventRemovedKg += next.SolventRemovedKg
	b.WaterMadeKg += next.WaterMadeKg
	b.HeatInJ += next.HeatInJ
	b.HeatUsedJ += next.HeatUsedJ
}

// EqualCharges splits kg of sorbent into n charges that each stand for timeS.
func EqualCharges(n int, kg, timeS float64) []Charge {
	charges := make([]Charge, max(n, 0))
	for i := range charges {
		charges[i] = Charge{kg / math.Max(1, float64(n)), timeS}
	}
	return charges
}
