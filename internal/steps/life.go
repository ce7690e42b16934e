package steps

import (
	"errors"
	"fmt"

	"parch/internal/quantity"
	"parch/internal/thermo"
)

// LifeRules are how a charge of sieve ages.
type LifeRules struct {
	Kg              float64 // of the charge, kept up with fresh beads
	FreshKgPerKg    float64 // water that it holds when new or regenerated
	FadePerCycle    float64 // share of the capacity lost at each regeneration
	DustPerBatch    float64 // share of the charge lost as dust with each batch
	DiscardBelow    float64 // share of a new sieve's capacity
	MostCycles      int     // regenerations before it is discarded
	RegenerateAfter int     // batches, whatever the outlet; 0: only when the target would be missed
}

// LifeBatch is one batch in the life of a charge.
type LifeBatch struct {
	Number                      int // from 1
	Cycle                       int // regenerations so far
	RegeneratedFirst            bool
	RenewedFirst                bool // a new charge was put in
	CapacityShare               float64
	LoadingBefore, LoadingAfter float64 // kg/kg
	WaterTakenKg                float64 // by the charge since it was new
	Outlet                      float64 // kg/kg, predicted
	Reaches                     bool
}

// SieveLife is the life of a charge over a number of batches.
type SieveLife struct {
	Batches          []LifeBatch
	RegenerateBefore int // the first batch that needs it; 0: none of these
	Regenerations    int
	Renewals         int
	MakeUpKg         float64 // fresh beads for dust
	RenewedKg        float64
	SolventHeldKg    float64 // held on beads that were taken out; carried beads stay wet
	Verdict          string
}

// FollowSieve uses one charge of sieve for batch after batch, carrying on what it
// has taken up, and regenerates it before the batch whose outlet would miss the
// target (kg/kg). A charge that has faded or has had its cycles is renewed.
func FollowSieve(m *thermo.Mixture, feed Lot, target, timeS float64, sorbent Sorbent, rig SoakRig, rules LifeRules, batches int) (SieveLife, error) {
	if err := rules.check(batches); err != nil {
		return SieveLife{}, err
	}
	f := follower{m: m, feed: feed, target: target, timeS: timeS, sorbent: sorbent, rig: rig, rules: rules}
	f.capacity = orOne(sorbent.CapacityShare)
	f.sorbent.CapacityShare, f.sorbent.ResidualKgPerKg = f.capacity, rules.FreshKgPerKg
	for n := 1; n <= batches; n++ {
		if err := f.batch(n); err != nil {
			return f.life, fmt.Errorf("batch %d: %w", n, err)
		}
	}
	f.life.Verdict = f.verdict(batches)
	return f.life, nil
}

func (r LifeRules) check(batches int) error {
	return errors.Join(
		checkAmount("a charge of sieve", "kg", r.Kg, 1e-6, 1e5),
		checkAmount("a fade", "% a cycle", 100*r.FadePerCycle, 0, 50),
		checkAmount("a loss as dust", "% a batch", 100*r.DustPerBatch, 0, 50),
		checkAmount("a number of batches", "", float64(batches), 1, 1e4))
}

type follower struct {
	m             *thermo.Mixture
	feed          Lot
	target, timeS float64
	sorbent       Sorbent // as it stands
	rig           SoakRig
	rules         LifeRules
	capacity      float64 // share of a sieve that is new
	cycle, used   int     // regenerations, batches since the last
	takenKg       float64
	life          SieveLife
}

func (f *follower) batch(n int) error {
	b := LifeBatch{Number: n}
	o, err := f.soak()
	if err != nil && !errors.Is(err, ErrWetSieve) {
		return err
	}
	due := f.rules.RegenerateAfter > 0 && f.used >= f.rules.RegenerateAfter
	missed := err == nil && o.Out.Water() > f.target && f.freshReaches()
	if f.used > 0 && (err != nil || due || missed) {
		f.refresh(&b)
		if f.life.RegenerateBefore == 0 {
			f.life.RegenerateBefore = n
		}
		o, err = f.soak()
	}
	if err != nil {
		return err
	}
	b.Cycle, b.CapacityShare = f.cycle, f.sorbent.CapacityShare
	b.LoadingBefore = f.sorbent.ResidualKgPerKg
	b.LoadingAfter = o.Figure("loading after") / 100
	b.Outlet, b.Reaches = o.Out.Water(), o.Out.Water() <= f.target
	f.takenKg += (b.LoadingAfter - b.LoadingBefore) * f.rules.Kg
	b.WaterTakenKg = f.takenKg
	f.life.Batches = append(f.life.Batches, b)
	dust := f.rules.DustPerBatch // made up with fresh beads
	f.sorbent.ResidualKgPerKg = (1-dust)*b.LoadingAfter + dust*f.rules.FreshKgPerKg
	f.life.MakeUpKg += dust * f.rules.Kg
	f.used++
	return nil
}

// freshReaches reports whether the first batch reached the target: where even a
// fresh charge misses it, regenerating before every batch is no help.
func (f *follower) freshReaches() bool {
	return len(f.life.Batches) > 0 && f.life.Batches[0].Reaches
}

func (f *follower) soak() (Outcome, error) {
	return SoakOver(f.m, f.feed, f.rules.Kg/LotVolume(f.m, f.feed, f.rig.TempK), f.timeS, f.sorbent, f.rig)
}

// refresh regenerates the charge, or puts in a new one where it has had its time.
func (f *follower) refresh(b *LifeBatch) {
	f.life.SolventHeldKg += f.rules.Kg * f.sorbent.HoldUpM3PerKg * f.m.Solvent.DensityKgPerM3.At(f.rig.TempK)
	f.sorbent.ResidualKgPerKg, f.used = f.rules.FreshKgPerKg, 0
	faded := f.sorbent.CapacityShare * (1 - f.rules.FadePerCycle)
	if f.cycle >= f.rules.MostCycles || faded < f.rules.DiscardBelow*f.capacity {
		b.RenewedFirst = true
		f.sorbent.CapacityShare, f.cycle, f.takenKg = f.capacity, 0, 0
		f.life.Renewals++
		f.life.RenewedKg += f.rules.Kg
		return
	}
	b.RegeneratedFirst = true
	f.sorbent.CapacityShare = faded
	f.cycle++
	f.life.Regenerations++
}

func (f *follower) verdict(batches int) string {
	first := f.life.Batches[0]
	switch {
	case !first.Reaches:
		return fmt.Sprintf("even a fresh charge leaves %s, above %s: more sieve, more time or a drier start", quantity.FormatWater(first.Outlet), quantity.FormatWater(f.target))
	case f.life.RegenerateBefore == 0:
		last := f.life.Batches[batches-1]
		return fmt.Sprintf("no regeneration in %d batches: %s of water taken, %.2g g/100 g held", batches, quantity.FormatMass(last.WaterTakenKg), 100*last.LoadingAfter)
	}
	return fmt.Sprintf("regenerate before batch %d", f.life.RegenerateBefore)
}
