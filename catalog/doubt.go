package catalog

import (
	"parch/internal/document"
	"parch/internal/quantity"
)

// The factors of doubt that the draws ask for.
const (
	DoubtPairA    = "pair-a"
	DoubtPairB    = "pair-b"
	DoubtPairC    = "pair-c"
	DoubtPairD    = "pair-d"
	DoubtTrend    = "pair-trend"
	DoubtSoak     = "soak-rate"
	DoubtStirred  = "stirred-rate"
	DoubtColumn   = "column-rate"
	DoubtResidual = "residual"
	DoubtSalt     = "salt-left"
	DoubtReactive = "reactive-residual"
	DoubtCarrier  = "carrier-outlet"
	DoubtQuoted   = "price-quoted"
	DoubtYear     = "price-year"
	DoubtListed   = "price-indicative"
	DoubtReading  = "water-reading"
)

var doubtKeys = []string{
	DoubtPairA, DoubtPairB, DoubtPairC, DoubtPairD, DoubtTrend, DoubtSoak, DoubtStirred, DoubtColumn, DoubtResidual,
	DoubtSalt, DoubtReactive, DoubtCarrier, DoubtQuoted, DoubtYear, DoubtListed, DoubtReading,
}

// PairDoubt is the key of the factor for a water pair of a quality; D where it is none
// of A, B and C.
func PairDoubt(quality string) string {
	switch quality {
	case "A":
		return DoubtPairA
	case "B":
		return DoubtPairB
	case "C":
		return DoubtPairC
	}
	return DoubtPairD
}

// Bounds of a factor of doubt: one within rounding of 1 has no spread.
const leastDoubt, mostDoubt = 1.001, 100

// readDoubts reads the factors within which nine cases in ten lie.
func (s *shelf) readDoubts() {
	s.cat.Doubts = map[string]Value{}
	s.each(doubtFile, func(n *document.Node) {
		f := n.Map(doubtKeys...)
		for _, key := range doubtKeys {
			entry := f.Get(key)
			if !s.owning {
				entry = f.Need(key)
			}
			if entry == nil {
				continue
			}
			v := s.value(entry, quantity.Number)
			if v.Text != "" && (v.SI < leastDoubt || v.SI > mostDoubt) {
				entry.Fail("a factor of %s has no spread or is no factor; allowed: %g to %d", v.Text, leastDoubt, mostDoubt)
			}
			s.cat.Doubts[key] = v
		}
	})
}
