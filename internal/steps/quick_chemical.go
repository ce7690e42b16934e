package steps

import (
	"math"

	"parch/internal/thermo"
)

// QuickSalt is a weighed charge of salt, stirred in and filtered off.
type QuickSalt struct {
	pair   thermo.Isothermal
	bath   saltBath
	doseKg float64
	lnAct  []float64 // of each pair at the temperature of the lot
	holds  *Solubilities
}

// Solubilities are the water that a solvent holds at one temperature, over the
// shifts of its model.
type Solubilities struct {
	lowest, step float64
	lnWater      []float64 // kg/kg; 0 where the two mix
}

const solubilityPoints = 33

// NewSolubilities works them out for shifts from lowest to highest at tK.
func NewSolubilities(m *thermo.Mixture, tK, lowest, highest float64) *Solubilities {
	s := &Solubilities{lowest: lowest, step: (highest - lowest) / (solubilityPoints - 1)}
	for i := range solubilityPoints {
		moved := *m
		moved.NRTL.Shift = thermo.Shift{Ln25: lowest + s.step*float64(i)}
		water, ok, err := moved.Solubility(tK)
		if err != nil || !ok {
			water = 1
		}
		s.lnWater = append(s.lnWater, math.Log(water))
	}
	return s
}

// at is the solubility at a shift, between the nearest points in the logarithm.
func (s *Solubilities) at(shift float64) float64 {
	at := math.Max(0, math.Min((shift-s.lowest)/s.step, solubilityPoints-1))
	i := min(int(at), solubilityPoints-2)
	share := at - float64(i)
	if low, high := s.lnWater[i], s.lnWater[i+1]; low == 0 || high == 0 {
		share = math.Round(share)
	}
	return math.Exp(s.lnWater[i]*(1-share) + s.lnWater[i+1]*share)
}

// NewQuickSalt prepares a charge of doseKg for lots about as large as feed.
func NewQuickSalt(m *thermo.Mixture, feed Lot, doseKg float64, salt SaltAgent, rules SaltRules, rig SaltRig, holds *Solubilities) (*QuickSalt, error) {
	feed.SolventKg, feed.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	b, err := newSaltBath(m, feed, salt, rules, rig)
	if err != nil {
		return nil, err
	}
	q := &QuickSalt{pair: m.At(rig.TempK), bath: *b, doseKg: doseKg, holds: holds}
	for _, p := range salt.Pairs {
		q.lnAct = append(q.lnAct, math.Log(p.At(rig.TempK)))
	}
	return q, nil
}

// QuickSalted is what a salt does to a lot.
type QuickSalted struct {
	Water                     float64 // kg/kg
	HeldKg, CakeKg, SolventKg float64 // solvent held by the cake, the whole cake, solvent kept
}

// Run stirs the charge into a lot with solventKg and water (kg/kg).
func (q *QuickSalt) Run(water, solventKg float64, a *Aside) QuickSalted {
	b := q.bath
	shift := a.Shift.At(b.rig.TempK)
	b.feed.SolventKg, b.feed.WaterKg = solventKg, solventKg*water/(1-water)
	b.saturated = q.holds.at(shift)
	b.salt.ShareRemoved = leftOf(b.salt.ShareRemoved, a.Left)
	var leaves [8]float64
	for i, lnA := range q.lnAct {
		lnRatio, ok := q.pair.LnRatioAt(lnA, shift, b.saturated/(1-math.Min(b.saturated, 0.999)))
		leaves[i] = math.Min(b.saturated, 1-1e-9)
		if ok {
			ratio := math.Exp(lnRatio)
			leaves[i] = ratio / (1 + ratio)
		}
	}
	h := hydrate(b.m, b.feed, b.salt, leaves[:len(q.lnAct)], q.doseKg)
	out := b.claim(h, q.doseKg/LotVolume(b.m, b.feed, b.rig.TempK), b.rig.TimeS)
	ratio := out / (1 - out)
	takenKg := math.Max(0, b.feed.WaterKg-solventKg*ratio)
	r := QuickSalted{Water: out}
	r.HeldKg = math.Min((q.doseKg+takenKg)*b.salt.HoldUpM3PerKg*b.m.Solvent.DensityKgPerM3.At(b.rig.TempK), solventKg)
	r.SolventKg = solventKg - r.HeldKg
	r.CakeKg = q.doseKg + takenKg + r.HeldKg*(1+ratio)
	return r
}

// leftOf is the share removed where what is left is off by a factor.
func leftOf(removed, factor float64) float64 {
	if removed == 0 {
		return 0
	}
	return 1 - math.Min(1, (1-removed)*factor)
}

// QuickReactive is a reactive agent of which so much is charged that the water of
// every draw finds enough.
type QuickReactive struct {
	pair  thermo.Isothermal
	agent ReactiveAgent
	found Measured
	short bool // refluxed for less than the wet end of the band asks for
	holds *Solubilities
}

// NewQuickReactive prepares an agent for a solvent; its floor is looked up at 25 °C,
// and so are the solubilities.
func NewQuickReactive(m *thermo.Mixture, agent ReactiveAgent, found Measured, rig ReactiveRig, holds *Solubilities) *QuickReactive {
	return &QuickReactive{pair: m.At(referenceK), agent: agent, found: found, short: rig.RefluxS < agent.LeastRefluxS, holds: holds}
}

// Water is what the agent leaves of a lot with water (kg/kg). ok is false where the
// lot is too wet for it.
func (q *QuickReactive) Water(water float64, a *Aside) (out float64, ok bool) {
	if water > q.agent.HandlesBelow {
		return water, false
	}
	if q.found.Water > 0 {
		out = q.found.Water * a.Left
		if q.short {
			_, high := q.found.band()
			out *= high / q.found.Water
		}
		return math.Min(out, water), true
	}
	activity := q.agent.ClassActivity * a.Left
	if q.short {
		activity *= q.agent.ClassBand
	}
	out = q.atActivity(math.Min(1, activity), a.Shift.At(referenceK))
	return math.Min(math.Max(out, q.agent.LowestOutlet), water), true
}

func (q *QuickReactive) atActivity(activity, shift float64) float64 {
	saturated := q.holds.at(shift)
	lnRatio, ok := q.pair.LnRatioAt(math.Log(activity), shift, saturated/(1-math.Min(saturated, 0.999)))
	if !ok {
		return saturated
	}
	ratio := math.Exp(lnRatio)
	return ratio / (1 + ratio)
}
