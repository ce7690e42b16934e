package doubt

import "parch/internal/routes"

// Sure reports whether a plan keeps to the limits in at least the share level of the
// draws. It looks at no more of them than it takes to tell.
func (l *Lot) Sure(run *routes.Run, limits Limits, level float64) (bool, error) {
	t := &tally{limits: limits, n: l.n, level: level}
	f, err := l.wet(run, t)
	if err != nil {
		return false, err
	}
	for i := t.seen; !t.done; i++ {
		t.decided(limits.Met(f.water[i]))
	}
	return t.reached(t.met), nil
}

// tally counts the draws that keep to the limits, one after the other, until the rest
// makes no difference.
type tally struct {
	limits    Limits
	n         int
	level     float64
	seen, met int
	done      bool
}

func (t *tally) reached(met int) bool { return float64(met)/float64(t.n) >= t.level }

// decided takes note of the next draw.
func (t *tally) decided(met bool) bool {
	t.seen++
	if met {
		t.met++
	}
	t.done = t.reached(t.met) || !t.reached(t.met+t.n-t.seen)
	return t.done
}
