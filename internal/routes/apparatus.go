package routes

import (
	"fmt"
	"math"
	"slices"
	"sort"

	"parch/catalog"
	"parch/internal/steps"
	"parch/internal/thermo"
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

// receivers that return the layer of a trap, the owned ones first; ones made for
// that layer go before those for either.
func (c *Case) receivers(trap *steps.TrapEquilibrium) (all []*catalog.Apparatus) {
	return c.receiversFor(string(trap.Floor.Return))
}

// receiversFor a layer that goes back: light or heavy.
func (c *Case) receiversFor(want string) (all []*catalog.Apparatus) {
	for _, a := range c.pieces("receiver") {
		if a.Returns == want || a.Returns == "either" {
			all = append(all, a)
		}
	}
	slices.SortStableFunc(all, func(a, b *catalog.Apparatus) int {
		if c.owned(a.Key) != c.owned(b.Key) || (a.Returns == want) == (b.Returns == want) {
			return 0
		}
		if a.Returns == want {
			return -1
		}
		return 1
	})
	return all
}

// receiver is the named one, or the first that fits.
func (c *Case) receiver(trap *steps.TrapEquilibrium, key string) (*catalog.Apparatus, error) {
	all := c.receivers(trap)
	for _, a := range all {
		if key == "" || a.Key == key {
			return a, nil
		}
	}
	l := trap.Floor.Layers
	needs := needsReturn(c.Solvent.Name, trap.Floor.Return, l.OrganicKgPerM3, l.AqueousKgPerM3)
	if key == "" {
		return nil, fmt.Errorf("%s, and no receiver of the catalog returns that layer", needs)
	}
	return nil, c.wrongReceiver(needs, key)
}

// needsReturn says which layer goes back, from the densities of both.
func needsReturn(what string, layer thermo.Returns, organicKgPerM3, aqueousKgPerM3 float64) string {
	return fmt.Sprintf("%s needs a %s return (organic layer %.0f, aqueous %.0f kg/m3)", what, layer, organicKgPerM3, aqueousKgPerM3)
}

// WrongReturn is a receiver that gives back the other layer than is needed.
type WrongReturn struct{ Needs, Receiver, Returns string }

func (w *WrongReturn) Error() string {
	return fmt.Sprintf("%s, %s returns the %s layer", w.Needs, w.Receiver, w.Returns)
}

// wrongReceiver says why the receiver of that key is not used.
func (c *Case) wrongReceiver(needs, key string) error {
	if a := c.Catalog.Apparatus[key]; a != nil && a.Kind == "receiver" {
		return fmt.Errorf("%w: %w", ErrSettings, &WrongReturn{needs, key, a.Returns})
	}
	return fmt.Errorf("%w: %q is not a receiver of the catalog", ErrSettings, key)
}

// Receivers are the keys of the receivers that a trap on this lot may have, with a
// carrier or without (""). What is owned is used before another is bought.
func (c *Case) Receivers(carrier string) (keys []string) {
	var all []*catalog.Apparatus
	switch {
	case carrier != "":
		all = c.receiversFor(string(c.carrierKnown(carrier).layers.Return))
	case c.Trap != nil:
		all = c.receivers(c.Trap)
	}
	for _, a := range all {
		if c.owned(a.Key) || !c.owned(all[0].Key) {
			keys = append(keys, a.Key)
		}
	}
	return keys
}

// MadeAndAssembled are a receiver made for the layer that a trap on this lot
// returns, with a carrier or without (""), and one that is put together; "" where
// there is none.
func (c *Case) MadeAndAssembled(carrier string) (made, assembled string) {
	want := ""
	switch {
	case carrier != "":
		want = string(c.carrierKnown(carrier).layers.Return)
	case c.Trap != nil:
		want = string(c.Trap.Floor.Return)
	}
	for _, a := range c.receiversFor(want) {
		switch {
		case a.SetUp != nil && assembled == "":
			assembled = a.Key
		case a.SetUp == nil && a.Returns == want && made == "":
			made = a.Key
		}
	}
	return made, assembled
}

// ReceiverTemperatures (°C) are from the coldest in reach up to the room: a colder
// one leaves less water, a warmer one has less to reheat.
func (c *Case) ReceiverTemperatures() (all []float64) {
	const apart = 5
	room := c.Job.Site.RoomK - zeroCelsiusK
	for t := c.Job.Site.ReceiverK - zeroCelsiusK; t <= room+1e-9 || len(all) == 0; t += apart {
		all = append(all, math.Round(t*100)/100)
	}
	return all
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
