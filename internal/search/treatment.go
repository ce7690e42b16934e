package search

import (
	"slices"

	"parch/internal/routes"
)

// How a soak's sieve meets the lots: one charge or two in sequence (a third costs
// work and gains little), and how many lots go over a charge as it is.
var (
	chargesTried = []int{1, 2}
	lotsTried    = []int{1, 2, 3, 4, 6, 8, 12}
)

// lotsOverCharge are the numbers of lots that may go over one charge: no more than
// a year brings, and no more than the site allows.
func (t *Tuner) lotsOverCharge() []int {
	most := min(float64(t.Case.Job.Site.LotsOverACharge), t.Case.Lot.BatchesPerYear)
	return slices.DeleteFunc(slices.Clone(lotsTried), func(n int) bool { return n > 1 && float64(n) > most })
}

// meeting is how the sieve of a soak meets the lots: so many over a charge, or so many
// charges for one lot.
type meeting struct{ lots, charges int }

// meetings are all of them: several charges in sequence serve one lot.
func (t *Tuner) meetings() (all []meeting) {
	for _, lots := range t.lotsOverCharge() {
		all = append(all, meeting{lots, 1})
	}
	for _, charges := range chargesTried[1:] {
		all = append(all, meeting{1, charges})
	}
	return all
}

func setCharges(s *routes.Settings, soak, n int) { s.Charges = placed(s.Charges, soak, n) }

func setLotsOverCharge(s *routes.Settings, soak, n int) {
	s.LotsOverCharge = placed(s.LotsOverCharge, soak, n)
}

// countAt is the count of one soak, as placed writes it.
func countAt(counts []int, soak int) int {
	if soak < len(counts) {
		return counts[soak]
	}
	return 1
}

// placed sets the count of one soak. Where all are one nothing is written.
func placed(counts []int, soak, n int) []int {
	for len(counts) <= soak {
		counts = append(counts, 1)
	}
	counts[soak] = n
	if slices.Max(counts) <= 1 {
		return nil
	}
	return counts
}
