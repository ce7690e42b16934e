package thermo

import "math"

// unstableTrials are liquids that lie below the tangent plane of a feed, lowest first.
type unstableTrials struct {
	found    [trialStarts]Fractions
	distance [trialStarts]float64
	n        int
}

// unstable tests a liquid z by the distance of trial liquids from the tangent
// plane of its Gibbs energy (Michelsen, Fluid Phase Equilib. 9 (1982) 1), from
// nearly pure water, a solvent-rich and a nearly pure carrier start, and from half
// feed and half water. No trial found means that z is stable as far as these
// starts can tell.
func (l *liquid) unstable(z *Fractions) (t unstableTrials) {
	plane := l.plane(z)
	for start := range trialStarts {
		if watery(start) && plane[InWater] < lnDryActivity {
			continue
		}
		if y, distance, ok := l.descend(z, &plane, trialFrom(z, start)); ok {
			t.add(y, distance)
		}
	}
	return t
}

// isUnstable is unstable as far as the first trial found.
func (l *liquid) isUnstable(z *Fractions) bool {
	plane := l.plane(z)
	dry := plane[InWater] < lnDryActivity
	if dry && l.mix {
		return false
	}
	for start := range trialStarts {
		if dry && watery(start) {
			continue
		}
		if _, _, ok := l.descend(z, &plane, trialFrom(z, start)); ok {
			return true
		}
	}
	return false
}

func (l *liquid) plane(z *Fractions) Fractions {
	plane := l.lnGamma(z)
	for i := range plane {
		plane[i] += math.Log(z[i])
	}
	return plane
}

// trialStarts is the number of starts; those below three are the components.
const trialStarts = 4

// lnDryActivity is the logarithm of the activity of water below which no second
// layer can be a watery one, so that the watery starts are left out.
const lnDryActivity = -3

func watery(start int) bool { return start == InWater || start >= MaxComponents }

// trialFrom is a start: nearly pure in one component with some of the feed, or
// half feed and half water.
func trialFrom(z *Fractions, start int) (trial Fractions) {
	share, component := 0.99, start
	if start >= len(z) {
		share, component = 0.5, InWater
	}
	for i := range trial {
		trial[i] = (1 - share) * z[i]
	}
	trial[component] += share
	return trial
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

// extremes are the wettest and the driest trial, where they are far apart.
func (t *unstableTrials) extremes() (wet, dry Fractions, ok bool) {
	if t.n < 2 {
		return wet, dry, false
	}
	wet, dry = t.found[0], t.found[0]
	for _, f := range t.found[1:t.n] {
		if f[InWater] > wet[InWater] {
			wet = f
		}
		if f[InWater] < dry[InWater] {
			dry = f
		}
	}
	const far = 0.1
	return wet, dry, apart(&wet, &dry) > far
}

const (
	stabilityIterations = 300
	leastDistance       = 1e-10 // below the plane, in units of RT
)

// descend substitutes ln Y_i = plane_i - ln gamma_i(Y) until the trial settles,
// speeding up a steady approach; ok where it settles below the plane. A trial on
// its way back to the feed, about which the distance is a parabola, is given up
// early (Michelsen & Mollerup, Thermodynamic Models (2007), chapter 9).
func (l *liquid) descend(z, plane *Fractions, y Fractions) (trial Fractions, distance float64, ok bool) {
	var ln, last Fractions // ln Y and the step before
	for i := range y {
		ln[i] = math.Log(y[i])
	}
	for round := range stabilityIterations {
		gamma := l.lnGamma(&y)
		var step Fractions
		distance, slope, size, away := 1.0, 0.0, 0.0, 0.0
		for i := range y {
			amount := math.Exp(ln[i])
			step[i] = plane[i] - gamma[i] - ln[i]
			distance -= amount * (step[i] + 1)
			slope -= (amount - z[i]) * step[i]
			away = math.Max(away, math.Abs(amount-z[i])/z[i])
			size = math.Max(size, math.Abs(step[i])*(amount/(amount+1e-6)))
		}
		switch {
		case away < 0.3 && distance < 1e-3 && math.Abs(2*distance-slope) < 0.2*math.Abs(slope):
			return y, 0, false // back at the feed
		case size < 1e-3 && distance < -leastDistance, size < 0.05 && distance < -1e-3:
			return y, distance, apart(&y, z) > leastLayerDifference
		case size < 0.03 && distance > 0.02, size < 1e-3 && distance > 1e-4, size < 1e-9:
			return y, 0, false
		}
		gain := 1.0
		if round%3 == 2 {
			gain = stretch(&step, &last)
		}
		last = step
		var sum float64
		for i := range y {
			ln[i] += gain * step[i]
			y[i] = math.Exp(ln[i])
			sum += y[i]
		}
		for i := range y {
			y[i] /= sum
		}
	}
	return y, 0, false
}

// stretch is how far a steady approach goes, in steps: 1/(1 - share), where each
// step is a share of the one before. An approach that swings to and fro (a
// negative share) is damped by the same rule.
func stretch(step, last *Fractions) float64 {
	var along, square float64
	for i := range step {
		along += step[i] * last[i]
		square += last[i] * last[i]
	}
	const mostShare = 0.75
	return 1 / (1 - math.Max(-3, math.Min(along/square, mostShare)))
}

func apart(a, b *Fractions) float64 {
	d := minus(a, b)
	return largest(&d)
}
