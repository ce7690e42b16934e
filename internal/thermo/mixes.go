package thermo

import "math"

// Where solvent and carrier are looked at for a gap.
const (
	mixLowestK  = 263.15
	mixHighestK = 503.15
	mixStepK    = 10.0
	mixPoints   = 100
)

// FindMixing sets MixAboveK: the lowest temperature of a row from which on the
// activity of the solvent rises with its share in the dry carrier all the way, by
// one step of the row more. It stays 0 where they do not mix even when hot.
func (m *Ternary) FindMixing() {
	m.MixAboveK = 0
	for tK := mixHighestK; tK >= mixLowestK && m.mix(tK); tK -= mixStepK {
		m.MixAboveK = tK + mixStepK
	}
}

// mix reports whether solvent and carrier mix in all shares: nowhere are they
// unstable (a gap holds an unstable stretch).
func (m *Ternary) mix(tK float64) bool {
	l := m.at(tK)
	last := math.Inf(-1)
	for i := 1; i < mixPoints; i++ {
		x := float64(i) / mixPoints
		z := Fractions{0, x, 1 - x}
		ln := l.lnGamma(&z)
		activity := math.Log(x) + ln[InSolvent]
		if activity <= last {
			return false
		}
		last = activity
	}
	return true
}
