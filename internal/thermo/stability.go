package thermo

import "math"

// unstableTrials are liquids that lie below the tangent plane of a feed, lowest first.
type unstableTrials struct {
	found    [3]Fractions
	distance [3]float64
	n        int
}

// unstable tests a liquid z by the distance of trial liquids from the tangent
// plane of its Gibbs energy (Michelsen, Fluid Phase Equilib. 9 (1982) 1), from
// nearly pure water, a solvent-rich and a nearly pure carrier start. No trial
// found means that z is stable as far as these starts can tell.
func (l *liquid) unstable(z *Fractions) (t unstableTrials) {
	plane := l.lnGamma(z)
	for i := range plane {
		plane[i] += math.Log(z[i])
	}
	for start := range z {
		trial := Fractions{}
		for i := range trial {
			trial[i] = 0.01 * z[i]
		}
		trial[start] += 0.99
		if y, distance, ok := l.descend(z, &plane, trial); ok {
			t.add(y, distance)
		}
	}
	return t
}

func (t *unstableTrials) add(y Fractions, distance float64) {
	at := t.n
	for at > 0 && distance < t.distance[at-1] {
		t.found[at], t.distance[at] = t.found[at-1], t.distance[at-1]
		at--
	}
	t.found[at], t.distance[at] = y, distance
	t.n++
}

const (
	stabilityIterations = 400
	leastDistance       = 1e-10 // below the plane, in units of RT
)

// descend substitutes ln Y_i = plane_i - ln gamma_i(Y) until the trial settles;
// ok where it settles below the plane and away from the feed.
func (l *liquid) descend(z, plane *Fractions, y Fractions) (trial Fractions, distance float64, ok bool) {
	for range stabilityIterations {
		ln := l.lnGamma(&y)
		var next Fractions
		var sum float64
		for i := range next {
			next[i] = math.Exp(plane[i] - ln[i])
			sum += next[i]
		}
		var moved, apart float64
		for i := range next {
			next[i] /= sum
			moved = math.Max(moved, math.Abs(next[i]-y[i])/(y[i]+1e-6))
			apart = math.Max(apart, math.Abs(next[i]-z[i]))
		}
		y = next
		if apart < leastLayerDifference && moved < 0.1 {
			return y, 0, false // back at the feed
		}
		if moved < 1e-4 || (moved < 0.05 && sum > 1.001) {
			return y, -math.Log(sum), math.Log(sum) > leastDistance
		}
	}
	return y, 0, false
}
