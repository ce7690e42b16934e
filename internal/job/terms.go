package job

import (
	"math"
	"time"

	"parch/internal/document"
	"parch/internal/quantity"
)

// unknownDays stands for a lead time that is not given.
const unknownDays = -1

const daySeconds = 86400

// terms reads what an offer says besides size and price.
func (r *reader) terms(f document.Fields) Terms {
	t := Terms{LeadDays: unknownDays, ValidUntil: f.Get("valid until").Date()}
	if n := f.Get("minimum order"); n != nil {
		if t.MinimumOrder = n.Int(); t.MinimumOrder < 1 || t.MinimumOrder > 100000 {
			n.Fail("%s is not a possible order; allowed: 1 to 100000 packs", quantity.Quote(n.Text()))
			t.MinimumOrder = 0
		}
	}
	if n := f.Get("lead time"); n != nil {
		seconds, _ := r.measure(n, quantity.Time, between(0, 3*366*daySeconds, "0 d to 3 yr"))
		t.LeadDays = int(math.Ceil(seconds/daySeconds - 1e-9))
	}
	if n := f.Get("shelf life"); n != nil {
		seconds, _ := r.measure(n, quantity.Time, between(daySeconds, 50*366*daySeconds, "1 d to 50 yr, after opening"))
		t.ShelfDays = int(math.Floor(seconds/daySeconds + 1e-9))
	}
	if n := f.Get("supplier"); n != nil {
		t.Supplier = r.label(n)
	}
	if n := f.Get("tax"); n != nil {
		t.Tax = r.label(n)
	}
	return t
}

// yearsAfter counts the years from one ISO date to another; 0 where one is none.
func yearsAfter(from, to string) float64 {
	a, errA := time.Parse(time.DateOnly, from)
	b, errB := time.Parse(time.DateOnly, to)
	if errA != nil || errB != nil {
		return 0
	}
	return b.Sub(a).Hours() / 24 / 365.25
}

// writeOff reads how equipment is paid for over the years.
func (r *reader) writeOff(f document.Fields) {
	r.job.WriteOff = r.orWord(f.Get("equipment costing"), "equipment costing", StraightLine,
		func(n *document.Node) string { return n.OneOf(StraightLine, Annuity) })
	if n := f.Get("interest"); n != nil {
		r.job.Interest, _ = r.measure(n, quantity.Share, between(0.001, 0.5, "0.1 % to 50 % a year"))
	} else if r.job.WriteOff == Annuity {
		f.Get("equipment costing").Fail("an annuity needs a rate of interest; write for example \"interest: 6 %%\"")
	}
}

// storageClasses are the classes that a site may limit.
var storageClasses = []string{"flammable", "halogenated", "reactive"}

// storage reads what the site may keep.
func (r *reader) storage(n *document.Node) {
	lines := map[string]int{}
	for _, entry := range listOf(n) {
		f := entry.Map("class", "item", "limit")
		limitNode := f.Need("limit")
		var limit StorageLimit
		switch class, item := f.Get("class"), f.Get("item"); {
		case (class == nil) == (item == nil):
			entry.Fail("give either a class (%s) or an item", "flammable, halogenated, reactive")
			continue
		case class != nil:
			limit.Class = class.OneOf(storageClasses...)
		default:
			limit.Item = r.known(item, r.storedItems(), "an agent or a solvent of the catalog")
		}
		if limit.Class+limit.Item == "" || !r.limit(limitNode, &limit) || r.twice(entry, limit.Class+limit.Item, lines) {
			continue
		}
		r.job.Storage = append(r.job.Storage, limit)
	}
}

// limit reads a volume or a mass.
func (r *reader) limit(n *document.Node, limit *StorageLimit) (ok bool) {
	if n.Is(quantity.Volume) {
		limit.M3, ok = r.measure(n, quantity.Volume, between(1e-6, 1000, "1 mL to 1000 m3"))
		return ok
	}
	limit.Kg, ok = r.measure(n, quantity.Mass, between(1e-3, 1e6, "1 g to 1000000 kg"))
	return ok
}
