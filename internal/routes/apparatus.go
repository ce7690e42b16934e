package routes

import (
	"fmt"
	"math"
	"sort"

	"parch/catalog"
)

// pieces returns the apparatus of one kind, owned ones first, then by key.
func (c *Case) pieces(kind string) []*catalog.Apparatus {
	var all []*catalog.Apparatus
	for _, a := range c.Catalog.Apparatus {
		if a.Kind == kind {
			all = append(all, a)
		}
	}
	sort.Slice(all, func(i, j int) bool {
		a, b := all[i], all[j]
		if c.owned(a.Key) != c.owned(b.Key) {
			return c.owned(a.Key)
		}
		return a.Key < b.Key
	})
	return all
}

func (c *Case) owned(item string) bool {
	for _, e := range c.Job.Equipment {
		if e.Item == item {
			return e.Owned
		}
	}
	return false
}

// receiver is the first that returns the right layer; one made for that layer
// goes before one that is assembled for either.
func (c *Case) receiver() (*catalog.Apparatus, error) {
	want := string(c.Trap.Floor.Return)
	var either *catalog.Apparatus
	for _, a := range c.pieces("receiver") {
		switch {
		case a.Returns == want:
			if either != nil && c.owned(either.Key) && !c.owned(a.Key) {
				return either, nil
			}
			return a, nil
		case a.Returns == "either" && either == nil:
			either = a
		}
	}
	if either != nil {
		return either, nil
	}
	return nil, fmt.Errorf("no receiver returns the %s layer", want)
}

// Still is the smallest that takes the batch in one charge, or the largest.
func (c *Case) Still() (a *catalog.Apparatus, charges int) {
	return smallestThatFits(c.ownedOrAll("still"), c.volume())
}

// vessel is the smallest that takes the batch, or several of the largest.
func (c *Case) vessel() (a *catalog.Apparatus, count int) {
	return smallestThatFits(c.ownedOrAll("vessel"), c.volume())
}

// ownedOrAll are the owned pieces of a kind, or all where none is owned: what is
// at hand is used before something is bought.
func (c *Case) ownedOrAll(kind string) []*catalog.Apparatus {
	all := c.pieces(kind)
	for i, a := range all {
		if !c.owned(a.Key) {
			if i > 0 {
				return all[:i]
			}
			break
		}
	}
	return all
}

func (c *Case) volume() float64 { return c.Lot.BatchM3 + c.Lot.FreeWaterM3 }

func smallestThatFits(pieces []*catalog.Apparatus, volumeM3 float64) (*catalog.Apparatus, int) {
	var best *catalog.Apparatus
	count := math.MaxInt
	for _, a := range pieces {
		usable := a.Volume.SI
		if a.Fill != nil {
			usable *= a.Fill.SI
		}
		n := int(math.Ceil(volumeM3/usable - 1e-9))
		if n < count || n == count && a.Volume.SI < best.Volume.SI {
			best, count = a, n
		}
	}
	return best, count
}

// heaterW is the job's heater, or the still's own.
func (c *Case) heaterW(still *catalog.Apparatus) float64 {
	if c.Lot.HeaterW > 0 {
		return c.Lot.HeaterW
	}
	return still.Power.SI
}

// depth of the liquid: given, or that of a vessel as deep as it is wide.
func (c *Case) depth(vessels int) float64 {
	if c.Lot.VesselHeightM > 0 {
		return c.Lot.VesselHeightM
	}
	return math.Cbrt(4 * c.Lot.BatchM3 / float64(vessels) / math.Pi)
}
