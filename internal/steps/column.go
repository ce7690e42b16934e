package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/thermo"
)

// ColumnRig is the tube the bed stands in and how the lot is pumped through it.
type ColumnRig struct {
	TempK             float64
	DiameterM         float64
	LongestM          float64 // bed that the tube takes
	VoidShare         float64 // between the beads; 0.38 for a random packing of spheres (common practice)
	FlowM3S           float64
	RecycleBedVolumes float64 // first runnings that go back to the feed
	HighestPa         float64 // pressure drop that the tube or pump bears; 0: not stated
	PumpW             float64
	SetUpS            float64 // attended: pack, wet and connect, drain
	AttendedShare     float64 // of the pump time
	WaterMolarM3      float64
	Association       float64
}

// bed is a column whose length is not yet chosen.
//
// Behind the front the beads are full; ahead of it the water falls off with the
// height of a transfer unit,
//
//	w(z) = w_floor + (w_in - w_floor) exp(-(z - z_front)/HTU)
//
// and the front moves on by the water brought over the capacity passed. In a
// column with an irreversible isotherm the front trails one HTU behind that, so
// the outlet given here is on the wet side. The length of unused bed is
//
//	LUB = HTU ln((w_in - w_floor)/(w_break - w_floor))
type bed struct {
	sorption
	rig                ColumnRig
	stream             stream
	floorWater         float64
	volumeM3           float64 // of the lot
	areaM2, velocityMS float64
	filmMS, insideMS   float64
	htuM               float64
	frontMPerM3        float64 // front's way per volume pumped
}

// ErrNoColumn means that the column as given cannot run.
var ErrNoColumn = errors.New("this column does not work")

func newBed(m *thermo.Mixture, feed Lot, sorbent Sorbent, rig ColumnRig) (*bed, error) {
	b := &bed{sorption: newSorption(m, feed, sorbent, rig.TempK), rig: rig}
	if err := errors.Join(b.check(), rig.check()); err != nil {
		return nil, err
	}
	var err error
	if b.floorWater, err = b.floor(); err != nil {
		return nil, err
	}
	spare := b.loading(feed.Water()) - sorbent.ResidualKgPerKg
	if b.floorWater >= feed.Water() || spare <= 0 {
		return nil, b.wetter()
	}
	b.volumeM3 = LotVolume(m, feed, rig.TempK)
	b.stream = streamOf(m.Solvent, rig.TempK, rig.WaterMolarM3, rig.Association)
	b.transfer()
	removedKg := feed.SolventKg * (feed.Water()/(1-feed.Water()) - b.floorWater/(1-b.floorWater))
	b.frontMPerM3 = removedKg / b.volumeM3 / (b.areaM2 * b.bulk() * spare)
	return b, nil
}

// transfer works out how the liquid meets the beads.
func (b *bed) transfer() {
	b.areaM2 = math.Pi / 4 * b.rig.DiameterM * b.rig.DiameterM
	b.velocityMS = b.rig.FlowM3S / b.areaM2
	sherwood := packedSherwood(b.reynolds(), b.stream.schmidt())
	b.filmMS, b.insideMS = b.stream.film(sherwood, b.sorbent.BeadDiameterM), insideBead(b.stream, b.sorbent)
	areaPerM3 := 6 * (1 - b.rig.VoidShare) / b.sorbent.BeadDiameterM
	b.htuM = b.velocityMS / (inSeries(b.filmMS, b.insideMS) * areaPerM3)
}

func (r ColumnRig) check() error {
	return errors.Join(
		checkAmount("a column diameter", "m", r.DiameterM, 1e-3, 3),
		checkAmount("a bed length", "m", r.LongestM, 1e-3, 20),
		checkAmount("a void share", "", r.VoidShare, 0.2, 0.7),
		checkAmount("a flow", "L/min", r.FlowM3S*60e3, 1e-6, 1e4),
		checkAmount("a recycle of bed volumes", "", r.RecycleBedVolumes, 0, 20))
}

func (b *bed) reynolds() float64 { return b.stream.reynolds(b.velocityMS, b.sorbent.BeadDiameterM) }

// bulk is the sorbent in a volume of bed, kg/m3.
func (b *bed) bulk() float64 { return (1 - b.rig.VoidShare) * b.sorbent.BeadKgPerM3 }

func (b *bed) length(kg float64) float64 { return kg / b.bulk() / b.areaM2 }

// unused is the length of unused bed when the outlet breaks through at goal.
func (b *bed) unused(goal float64) float64 {
	if goal <= b.floorWater {
		return math.Inf(1)
	}
	return math.Max(0, b.htuM*math.Log((b.feed.Water()-b.floorWater)/(goal-b.floorWater)))
}

// recycledM3 are the first runnings, at most the lot.
func (b *bed) recycledM3(lengthM float64) float64 {
	return math.Min(b.volumeM3, b.rig.RecycleBedVolumes*lengthM*b.areaM2)
}

// outlet is the water that leaves a bed when pumpedM3 have gone through.
func (b *bed) outlet(lengthM, pumpedM3 float64) float64 {
	unused := math.Max(0, lengthM-b.frontMPerM3*pumpedM3)
	return b.floorWater + (b.feed.Water()-b.floorWater)*math.Exp(-unused/b.htuM)
}

// collected is the mean of outlet between two volumes pumped.
func (b *bed) collected(lengthM, fromM3, toM3 float64) float64 {
	if !(toM3 > fromM3) {
		return b.outlet(lengthM, toM3)
	}
	full := math.Min(math.Max(lengthM/b.frontMPerM3, fromM3), toM3) // the front leaves the bed
	excess := b.feed.Water() - b.floorWater
	ahead := func(v float64) float64 { return math.Exp(-math.Max(0, lengthM-b.frontMPerM3*v) / b.htuM) }
	sum := b.htuM/b.frontMPerM3*(ahead(full)-ahead(fromM3)) + toM3 - full
	return b.floorWater + excess*sum/(toM3-fromM3)
}

// breakthroughM3 is the volume pumped until the outlet reaches goal.
func (b *bed) breakthroughM3(lengthM, goal float64) float64 {
	return math.Max(0, lengthM-b.unused(goal)) / b.frontMPerM3
}

// needed is the bed whose outlet reaches goal as the lot ends:
//
//	L = front (V + n A L) + LUB
func (b *bed) needed(goal float64) float64 {
	front, unused := b.frontMPerM3*b.volumeM3, b.unused(goal)
	longest := 2*front + unused // the first runnings are the whole lot
	growth := 1 - b.frontMPerM3*b.rig.RecycleBedVolumes*b.areaM2
	if growth <= 0 {
		return longest
	}
	return math.Min((front+unused)/growth, longest)
}

// ColumnFor pumps a lot through the shortest bed whose outlet has just reached
// goal (kg/kg) as the lot ends, or through the longest the tube takes.
func ColumnFor(m *thermo.Mixture, feed Lot, goal float64, sorbent Sorbent, rig ColumnRig) (Outcome, error) {
	if !(goal > 0 && goal < 1) {
		return Outcome{}, fmt.Errorf("%w: a goal of %g kg/kg", ErrNoSense, goal)
	}
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newBed(m, lot, sorbent, rig)
		if err != nil {
			return Outcome{}, err
		}
		if goal >= lot.Water() {
			return b.run(goal, 0), nil
		}
		return b.run(goal, math.Min(b.needed(goal), rig.LongestM)), nil
	})
}

// ColumnOver pumps a lot through a bed of bedKg. Goal (kg/kg) is where the bed is
// said to break through.
func ColumnOver(m *thermo.Mixture, feed Lot, bedKg, goal float64, sorbent Sorbent, rig ColumnRig) (Outcome, error) {
	return withCarrier(feed, func(lot Lot) (Outcome, error) {
		b, err := newBed(m, lot, sorbent, rig)
		if err != nil {
			return Outcome{}, err
		}
		length := b.length(bedKg)
		if !(length > 0 && length <= rig.LongestM) {
			return Outcome{}, fmt.Errorf("%w: %.4g kg make a bed of %.3g m; the tube takes up to %.3g m", ErrNoColumn, bedKg, length, rig.LongestM)
		}
		return b.run(goal, length), nil
	})
}
