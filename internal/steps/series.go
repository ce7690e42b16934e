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
	}
	total.Why = AtTime
	total.WhyText = fmt.Sprintf("%s after %d charges", quantity.FormatWater(total.Out.Water()), len(charges))
	return total, nil
}

// follow adds the next charge to a series.
func (o *Outcome) follow(next Outcome, charge int) {
	started := 0.0
	if n := len(o.Course); n > 0 {
		started = o.Course[n-1].Hours
	}
	for _, p := range next.Course {
		p.Hours += started
		o.Course = append(o.Course, p)
	}
	for _, l := range next.Losses {
		o.Losses = append(o.Losses, Loss{fmt.Sprintf("%s, charge %d", l.Cause, charge), l.SolventKg})
	}
	o.Figures = append(o.Figures,
		Figure{fmt.Sprintf("dose, charge %d", charge), "g/L", next.Figure("dose")},
		Figure{fmt.Sprintf("water after charge %d", charge), "mg/kg", next.Out.Water() * mgPerKg},
		Figure{fmt.Sprintf("loading after, charge %d", charge), "g/100 g", next.Figure("loading after")})
	for _, w := range next.Warnings {
		o.Warnings = append(o.Warnings, fmt.Sprintf("charge %d: %s", charge, w))
	}
	o.Out, o.RuledBy = next.Out, next.RuledBy
	o.Floor = next.Floor
	o.HoursTotal += next.HoursTotal
	o.HoursAttended += next.HoursAttended
	o.AgentKg += next.AgentKg
	o.SolventLostL += next.SolventLostL
	o.Balance.add(next.Balance)
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
