package steps

import (
	"cmp"
	"errors"
	"fmt"
	"math"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// SaltAgent is a salt that dries by taking up water of crystallization.
type SaltAgent struct {
	Key, Name         string  // Name: "" is Key
	MolarMassKgPerMol float64 // anhydrous
	Pairs             []HydratePair
	ShareRemoved      float64 // of the dissolved water, in ClaimTimeS at ClaimDoseKgPerM3; 0: none from this solvent
	UselessAboveK     float64 // gives its water up again; 0: not stated
	HoldUpM3PerKg     float64 // solvent kept on a filtered cake, per kg of cake
	MaxDoseKgPerM3    float64
}

// called is the salt's name for the reader.
func (s SaltAgent) called() string { return cmp.Or(s.Name, s.Key) }

// SaltRules are the limits of what may be claimed for a salt, whatever its
// equilibrium says.
type SaltRules struct {
	LowestOutlet     float64 // kg/kg
	LowestTarget     float64 // kg/kg; a salt is not the last step for a lower target
	ClaimTimeS       float64 // to which ShareRemoved belongs
	ClaimDoseKgPerM3 float64
}

// MayEnd reports whether a salt may be the last step for a target (kg/kg).
func (r SaltRules) MayEnd(target float64) bool { return target >= r.LowestTarget }

// SaltRig is how the salt is stirred in and filtered off.
type SaltRig struct {
	TempK      float64
	TimeS      float64 // stirred or left to stand
	RinseM3    float64 // fresh solvent over the cake
	RinseWater float64 // kg/kg of it
	AttendedS  float64 // stir in, filter, transfer
	Portions   int     // filtrations; 0: 1
}

// ErrSaltTooWarm means that a hydrate does not hold its water at this temperature.
var ErrSaltTooWarm = errors.New("too warm for this salt")

// saltBath is a lot that salt is stirred into.
type saltBath struct {
	m         *thermo.Mixture
	feed      Lot
	salt      SaltAgent
	rules     SaltRules
	rig       SaltRig
	volumeM3  float64
	saturated float64   // kg/kg; 1 where water and solvent are miscible
	leaves    []float64 // kg/kg, by each pair
}

func newSaltBath(m *thermo.Mixture, feed Lot, salt SaltAgent, rules SaltRules, rig SaltRig) (*saltBath, error) {
	if err := errors.Join(checkLiquid(m.Solvent, rig.TempK), checkTime(rig.TimeS), checkAmount("a rinse", "L", rig.RinseM3*litrePerM3, 0, 1e4)); err != nil {
		return nil, err
	}
	if salt.UselessAboveK > 0 && rig.TempK >= salt.UselessAboveK {
		return nil, fmt.Errorf("%w: %s loses its water again above %.1f °C; the lot is at %.1f °C", ErrSaltTooWarm, salt.called(), salt.UselessAboveK-273.15, rig.TempK-273.15)
	}
	saturated, ok, err := m.Solubility(rig.TempK)
	if err != nil {
		return nil, err
	}
	if !ok {
		saturated = 1
	}
	b := &saltBath{m: m, feed: feed, salt: salt, rules: rules, rig: rig, volumeM3: LotVolume(m, feed, rig.TempK), saturated: saturated}
	for _, p := range salt.Pairs {
		w, err := waterAtActivity(m, p.At(rig.TempK), rig.TempK, saturated)
		if err != nil {
			return nil, fmt.Errorf("%s: %w", p.Name, err)
		}
		b.leaves = append(b.leaves, w)
	}
	return b, nil
}

// share of the dissolved water that is taken in timeS, by the published removal
// in ClaimTimeS at ClaimDoseKgPerM3. Less time or less salt takes less, as a
// first order in both (assumption); more of either is not claimed to take more.
func (b *saltBath) share(doseKgPerM3, timeS float64) float64 {
	exposure := math.Min(1, timeS/b.rules.ClaimTimeS) * math.Min(1, doseKgPerM3/b.rules.ClaimDoseKgPerM3)
	return 1 - math.Pow(1-b.salt.ShareRemoved, exposure)
}

// claim is what may be claimed after timeS: the largest of the equilibrium, what
// the published removal leaves of the dissolved water, and the lowest outlet of
// any salt. Free water is taken as far as the salt holds it.
func (b *saltBath) claim(h hydration, doseKgPerM3, timeS float64) float64 {
	dissolved := math.Min(b.feed.Water(), b.saturated)
	water := math.Max(h.water, math.Max((1-b.share(doseKgPerM3, timeS))*dissolved, b.rules.LowestOutlet))
	return math.Min(water, b.feed.Water())
}

func (b *saltBath) claimOf(doseKgPerM3 float64) (float64, hydration) {
	h := hydrate(b.m, b.feed, b.salt, b.leaves, doseKgPerM3*b.volumeM3)
	return b.claim(h, doseKgPerM3, b.rig.TimeS), h
}

// RunSalt stirs a dose of dry salt (kg per m3) into a lot and filters it off.
func RunSalt(m *thermo.Mixture, feed Lot, doseKgPerM3 float64, salt SaltAgent, rules SaltRules, rig SaltRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newSaltBath(m, lot, salt, rules, rig)
		if err := errors.Join(err, checkDose(doseKgPerM3)); err != nil {
			return Outcome{}, err
		}
		return b.run(doseKgPerM3, math.NaN()), nil
	})
}

// SaltFor stirs in the least salt that may be claimed to bring a lot to goal
// (kg/kg), or the largest practical dose where none may.
func SaltFor(m *thermo.Mixture, feed Lot, goal float64, salt SaltAgent, rules SaltRules, rig SaltRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newSaltBath(m, lot, salt, rules, rig)
		if err != nil {
			return Outcome{}, err
		}
		return b.run(b.dose(goal), goal), nil
	})
}

// SaltUntil stirs a given dose (kg per m3) in for the least time that may be claimed
// to bring a lot to goal (kg/kg), or for the time of the claim where none may: more
// time is not claimed to take more.
func SaltUntil(m *thermo.Mixture, feed Lot, goal, doseKgPerM3 float64, salt SaltAgent, rules SaltRules, rig SaltRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newSaltBath(m, lot, salt, rules, rig)
		if err := errors.Join(err, checkDose(doseKgPerM3)); err != nil {
			return Outcome{}, err
		}
		b.rig.TimeS = b.time(goal, doseKgPerM3)
		return b.run(doseKgPerM3, goal), nil
	})
}

// time is found by bisection; the claim falls with it.
func (b *saltBath) time(goal, doseKgPerM3 float64) float64 {
	h := hydrate(b.m, b.feed, b.salt, b.leaves, doseKgPerM3*b.volumeM3)
	least, most := 0.0, b.rules.ClaimTimeS
	if b.claim(h, doseKgPerM3, most) > goal {
		return most
	}
	for most-least > 1e-9*b.rules.ClaimTimeS {
		mid := (least + most) / 2
		if b.claim(h, doseKgPerM3, mid) <= goal {
			most = mid
		} else {
			least = mid
		}
	}
	return most
}

// dose is found by bisection: the claim has steps where a pair is used up.
func (b *saltBath) dose(goal float64) float64 {
	least, most := 0.0, b.salt.MaxDoseKgPerM3
	if goal >= b.feed.Water() {
		return 0
	}
	if w, _ := b.claimOf(most); w > goal {
		return most
	}
	for most-least > 1e-9*most {
		mid := (least + most) / 2
		if w, _ := b.claimOf(mid); w <= goal {
			most = mid
		} else {
			least = mid
		}
	}
	return most
}

// reason says what the claim rests on.
func (b *saltBath) reason(goal, water float64, dose float64, h hydration) (Stop, string) {
	w := quantity.FormatWater(water)
	switch {
	case !math.IsNaN(goal) && water <= goal*(1+1e-9):
		return AtTarget, fmt.Sprintf("hand-over at %s reached", quantity.FormatWater(goal))
	case water == b.feed.Water() && b.salt.ShareRemoved == 0:
		return AtPractice, fmt.Sprintf("practical limit: no removal of dissolved water by %s is claimed here; it takes suspended water only", b.salt.called())
	case h.takenKg == 0 && dose > 0:
		return AtFloor, fmt.Sprintf("floor: the lot is drier than what %s leaves", b.salt.Pairs[0].Name)
	case water == b.feed.Water():
		return AtPractice, fmt.Sprintf("practical limit: no salt is claimed to go below %s, and the lot is there already", quantity.FormatWater(b.rules.LowestOutlet))
	case water == h.water && h.spent && h.pair == len(b.salt.Pairs)-1:
		return AtCapacity, fmt.Sprintf("capacity: the salt has gone to its highest hydrate and leaves %s", w)
	case water == h.water:
		return AtFloor, fmt.Sprintf("floor: %s holds the water at %s", b.salt.Pairs[h.pair].Name, w)
	case water == b.rules.LowestOutlet:
		return AtPractice, fmt.Sprintf("practical limit: no salt is claimed to go below %s, whatever its equilibrium (%s)", w, quantity.FormatWater(h.water))
	}
	return AtTime, fmt.Sprintf("practical limit: %.0f %% of the dissolved water in %.3g min leave %s; the equilibrium of %s is not claimed",
		100*b.share(dose, b.rig.TimeS), b.rig.TimeS/60, w, quantity.FormatWater(h.water))
}
