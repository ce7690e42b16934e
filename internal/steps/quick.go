package steps

import (
	"math"
	"sort"

	"parch/internal/thermo"
)

// The quick forms below give what the steps themselves give of a lot whose dose is
// weighed out, without their accounts, for thousands of draws of what is not known
// exactly. Tests hold them to the steps.

// Aside is how far a draw is from what a quick form was made for.
type Aside struct {
	Shift           thermo.Shift // of the pair's activity model
	Loading         float64      // factor on the uptake of a sorbent
	ResidualKgPerKg float64      // on it
	Rate            float64      // factor on the rate of a soak, on the diffusion of a column
	Left            float64      // factor on the share that a salt, on the water that a reactive agent leaves
}

// Uptakes are the isotherm of a sorbent at one temperature as a table of ln q against
// ln p.
type Uptakes struct {
	lnLowest, lnStep float64
	lnLoading        []float64
}

const quickPoints = 600

// UptakesOf tabulates what a sorbent holds of the vapour over solutions in m.
func UptakesOf(m *thermo.Mixture, sorbent Sorbent, tempK float64) *Uptakes {
	lnPsat := math.Log(m.Water.VapourPressurePa.At(tempK))
	const decades = 14
	u := &Uptakes{lnLowest: lnPsat - decades*math.Ln10, lnStep: decades * math.Ln10 / (quickPoints - 1)}
	for i := range quickPoints {
		u.lnLoading = append(u.lnLoading, math.Log(sorbent.Loading(math.Exp(u.lnLowest+u.lnStep*float64(i)), tempK)))
	}
	return u
}

// quickSorption is a sorbent in a solvent at one temperature.
type quickSorption struct {
	*Uptakes
	pair          thermo.Isothermal
	tempK, lnPsat float64
	lnShare       float64
}

func newQuickSorption(s *sorption) *quickSorption {
	known := s.sorbent.Uptakes
	if known == nil {
		known = UptakesOf(s.m, s.sorbent, s.tempK)
	}
	return &quickSorption{known, s.m.At(s.tempK), s.tempK, math.Log(s.psatWater), math.Log(s.sorbent.CapacityShare * orOne(s.sorbent.PoreShare))}
}

// ln of the uptake at ln p, and its slope. Below the table Henry's law holds.
func (u *Uptakes) lnLoadingAt(lnP float64) (lnQ, slope float64) {
	at := (lnP - u.lnLowest) / u.lnStep
	i := int(max(0, min(at, quickPoints-2)))
	slope = (u.lnLoading[i+1] - u.lnLoading[i]) / u.lnStep
	return u.lnLoading[i] + slope*u.lnStep*(at-float64(i)), slope
}

// lnPAt is ln p at ln of the uptake.
func (u *Uptakes) lnPAt(lnQ float64) float64 {
	above := sort.SearchFloat64s(u.lnLoading, lnQ)
	i := max(0, min(above-1, quickPoints-2))
	return u.lnLowest + u.lnStep*(float64(i)+(lnQ-u.lnLoading[i])/(u.lnLoading[i+1]-u.lnLoading[i]))
}

// lnUptake of a solution of ratio kg of water per kg of solvent, and its slope by
// ln(ratio).
func (q *quickSorption) lnUptake(ratio, shift float64) (lnQ, slope float64) {
	lnA, perRatio := q.pair.LnActivityOf(ratio, shift)
	if lnA > 0 {
		lnA, perRatio = 0, 0
	}
	lnQ, slope = q.lnLoadingAt(lnA + q.lnPsat)
	return lnQ + q.lnShare, slope * perRatio
}

// surplus of the sorbent over what is left for it at a solution of ratio exp(v), and its
// slope by v:
//
//	ln(load q(r)) - ln(take(r)),  take = (S (r_0 - r) + m q_0)/m
//
// perSorbent is S/m.
func (q *quickSorption) surplus(v, perSorbent, ratio0 float64, a *Aside, shift float64) (value, slope float64) {
	r := math.Exp(v)
	lnQ, d := q.lnUptake(r, shift)
	take := perSorbent*(ratio0-r) + a.ResidualKgPerKg
	return math.Log(a.Loading/take) + lnQ, d + perSorbent*r/take
}

// balance is the ratio below ratio0 at which the surplus is zero. ok is false where the
// sorbent is wetter than the solution. Newton's method starts where the sorbent has taken
// up all of the water and the solution is thin.
func (q *quickSorption) balance(perSorbent, ratio0 float64, a *Aside, shift float64) (ratio float64, ok bool) {
	lnHighest := math.Log(ratio0)
	gap := func(v float64) (value, slope float64) { return q.surplus(v, perSorbent, ratio0, a, shift) }
	start := q.pair.Dilute(q.lnPAt(math.Log((perSorbent*ratio0+a.ResidualKgPerKg)/a.Loading)-q.lnShare)-q.lnPsat, shift)
	lnRatio, _ := rising(gap, lnLeastWater, lnHighest, start)
	if lnHighest-lnRatio < 1e-6 {
		if f, _ := gap(lnHighest); f < 0 {
			return ratio0, false
		}
	}
	return math.Exp(lnRatio), true
}

// rising is where a rising function is zero between lo and hi, from a start, to 1e-9:
// Newton's method, and the middle where that leads out. It comes to an end of the
// range where the zero lies beyond. ok is false where it has not settled.
func rising(f func(v float64) (value, slope float64), lo, hi, start float64) (v float64, ok bool) {
	if v = start; !(v > lo && v < hi) {
		v = (lo + hi) / 2
	}
	for range 80 {
		value, slope := f(v)
		if value > 0 {
			hi = v
		} else {
			lo = v
		}
		next := v - value/slope
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-v) < 1e-9 {
			return next, true
		}
		v = next
	}
	return v, false
}

// QuickSoak is a soak over weighed beads, in one charge or in several equal ones
// after each other.
type QuickSoak struct {
	sorption                     *quickSorption
	bath                         *bath
	charges                      int
	doseKg                       float64 // of each charge
	heldKg                       float64 // of solvent, by each charge
	timeS                        float64 // of each charge
	lots                         float64 // over the charge, this one the last
	solventKgPerM3, waterKgPerM3 float64
}

// NewQuickSoak prepares a soak over n equal charges that make up doseKg, each for
// timeS, of lots about as large as feed.
func NewQuickSoak(m *thermo.Mixture, feed Lot, doseKg, timeS float64, n int, sorbent Sorbent, rig SoakRig) (*QuickSoak, error) {
	feed.SolventKg, feed.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	b, err := newBath(m, feed, sorbent, rig)
	if err != nil {
		return nil, err
	}
	n = max(1, n)
	s := &QuickSoak{
		sorption: newQuickSorption(&b.sorption), bath: b, charges: n, doseKg: doseKg / float64(n), timeS: timeS, lots: b.lots(),
		solventKgPerM3: m.Solvent.DensityKgPerM3.At(rig.TempK), waterKgPerM3: m.Water.DensityKgPerM3.At(rig.TempK),
	}
	s.heldKg = s.doseKg * sorbent.HoldUpM3PerKg * s.solventKgPerM3
	return s, nil
}

// met is a lot as it meets a charge.
type met struct {
	water, perSorbent, ratio0 float64
	left                      float64 // of the way to the equilibrium, as a share
	made                      float64 // kg/kg
	on                        Aside   // with what the lots before have left on the charge
}

func (s *QuickSoak) meet(water, solventKg float64, a *Aside) met {
	m := met{water: water, perSorbent: solventKg / s.doseKg, ratio0: water / (1 - water), on: *a}
	dose := s.doseKg / (solventKg * (1/s.solventKgPerM3 + m.ratio0/s.waterKgPerM3)) // the same beads in a smaller lot are met more often
	m.on.ResidualKgPerKg += (s.lots - 1) * m.perSorbent * m.ratio0
	m.left, m.made = math.Exp(-s.bath.rate(dose)*a.Rate*s.timeS), s.bath.made(dose, s.timeS)
	return m
}

// leave is what a charge leaves of the lot, kg/kg; ok is false where it is wetter.
func (s *QuickSoak) leave(m *met, shift float64) (water float64, ok bool) {
	ratio, ok := s.sorption.balance(m.perSorbent, m.ratio0, &m.on, shift)
	if !ok {
		return m.water, false
	}
	eq := ratio / (1 + ratio)
	return eq + (m.water-eq)*m.left + m.made, true
}

// over is the lot as it meets the last of so many charges; ok is false where one is wetter.
func (s *QuickSoak) over(charges int, water, solventKg float64, a *Aside, shift float64) (m met, ok bool) {
	m = s.meet(water, solventKg, a)
	for range charges - 1 {
		if water, ok = s.leave(&m, shift); !ok {
			return m, false
		}
		solventKg = math.Max(leastSolventKg, solventKg-s.heldKg)
		m = s.meet(water, solventKg, a)
	}
	return m, true
}

// Water is what the soak leaves of a lot with solventKg and water (kg/kg).
func (s *QuickSoak) Water(water, solventKg float64, a *Aside) float64 {
	if s.doseKg == 0 {
		return water
	}
	shift := a.Shift.At(s.sorption.tempK)
	if m, ok := s.over(s.charges, water, solventKg, a, shift); ok {
		water, _ = s.leave(&m, shift)
	} else {
		water = m.water
	}
	return water
}

// Leaves reports whether Water lies between least and most, kg/kg. The equilibrium of the
// last charge need not be found for that: it is lower than another water where the sorbent
// holds more there than is left for it.
func (s *QuickSoak) Leaves(water, solventKg float64, a *Aside, least, most float64) bool {
	shift := a.Shift.At(s.sorption.tempK)
	if s.doseKg == 0 || s.bath.rig.CondensationPerS > 0 {
		water = s.Water(water, solventKg, a)
		return water >= least && water <= most
	}
	m, ok := s.over(s.charges, water, solventKg, a, shift)
	if !ok || m.left == 1 {
		return m.water >= least && m.water <= most
	}
	drier := func(than float64) bool {
		eq := (than - m.water*m.left) / (1 - m.left)
		if eq < leastWater || eq >= m.water {
			return eq >= m.water
		}
		surplus, _ := s.sorption.surplus(math.Log(eq/(1-eq)), m.perSorbent, m.ratio0, &m.on, shift)
		return surplus >= 0
	}
	return drier(most) && !(least > 0 && drier(least))
}

const leastSolventKg = 1e-9 // of a lot that beads have soaked up

// QuickColumn is a column over the bed that was planned.
type QuickColumn struct {
	sorption *quickSorption
	bed      bed
	bedKg    float64
}

// NewQuickColumn prepares a bed for lots about as large as feed.
func NewQuickColumn(m *thermo.Mixture, feed Lot, bedKg float64, sorbent Sorbent, rig ColumnRig) (*QuickColumn, error) {
	feed.SolventKg, feed.CarrierKg = feed.SolventKg+feed.CarrierKg, 0
	b, err := newBed(m, feed, sorbent, rig)
	if err != nil {
		return nil, err
	}
	return &QuickColumn{newQuickSorption(&b.sorption), *b, bedKg}, nil
}

// Water is the mean of what leaves the column, kg/kg. ok is false where the bed is
// wetter than the lot.
func (c *QuickColumn) Water(water, solventKg float64, a *Aside) (out float64, ok bool) {
	q, b := c.sorption, c.bed
	shift := a.Shift.At(q.tempK)
	b.feed.SolventKg, b.feed.WaterKg = solventKg, solventKg*water/(1-water)
	lnFed, _ := q.lnUptake(water/(1-water), shift)
	spare := a.Loading*math.Exp(lnFed) - a.ResidualKgPerKg
	if !(spare > 0) {
		return water, false
	}
	floor, ok := q.floor(a, shift, water/(1-water))
	if !ok {
		return water, false
	}
	b.floorWater = floor / (1 + floor)
	b.volumeM3 = LotVolume(b.m, b.feed, q.tempK)
	b.stream.diffusivityM2S *= a.Rate
	b.filmMS = b.stream.film(packedSherwood(b.reynolds(), b.stream.schmidt()), b.sorbent.BeadDiameterM)
	b.insideMS = insideBead(b.stream, b.sorbent)
	b.htuM = b.velocityMS / (inSeries(b.filmMS, b.insideMS) * 6 * (1 - b.rig.VoidShare) / b.sorbent.BeadDiameterM)
	removedKg := solventKg * (water/(1-water) - floor)
	b.frontMPerM3 = removedKg / b.volumeM3 / (b.areaM2 * b.bulk() * spare)
	length := b.length(c.bedKg)
	recycled := b.recycledM3(length)
	return b.collected(length, recycled, b.volumeM3+recycled), true
}

// floor is the solution in equilibrium with what is on the sorbent already.
func (q *quickSorption) floor(a *Aside, shift, highest float64) (ratio float64, ok bool) {
	want := math.Log(a.ResidualKgPerKg / a.Loading)
	above := func(v float64) (f, slope float64) {
		lnQ, d := q.lnUptake(math.Exp(v), shift)
		return lnQ - want, d
	}
	start := q.pair.Dilute(q.lnPAt(want-q.lnShare)-q.lnPsat, shift)
	lnRatio, ok := rising(above, lnLeastWater, math.Log(highest), start)
	return math.Exp(lnRatio), ok
}
