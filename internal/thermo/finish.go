package thermo

import "math"

// Newton's method on the ratios themselves, for a split that is nearly found.
// Close to the edge of the two layers one of them is so small that its amounts
// are lost in rounding; its composition, and so the ratios, are not.
const (
	finishSteps     = 12
	finishShift     = 1e-7 // of ln K, for the differences
	finishClose     = 1e-3 // residual below which it is tried
	finishLongest   = 0.3  // step of ln K
	finishShrinking = 0.5  // of the residual, at most, in a step
)

// finish solves lnK - ln gamma' + ln gamma" = 0 for ln K; ok is false where it
// does not shrink the residual in every step.
func (l *liquid) finish(z *Fractions, p partition) (partition, bool) {
	for range finishSteps {
		if p.size < flashTolerance {
			return p, true
		}
		slope, ok := l.slopeOf(z, &p)
		if !ok {
			return p, false
		}
		step, ok := solve(slope, p.residual)
		if !ok || largest(&step) > finishLongest {
			return p, false
		}
		next, ok := l.layersOf(z, minus(&p.lnK, &step))
		if !ok || !(next.share > 0 && next.share < 1) || !(next.size < finishShrinking*p.size) {
			return p, false
		}
		p = next
	}
	return p, p.size < flashTolerance
}

// slopeOf is the Jacobian of the residual in ln K, by differences.
func (l *liquid) slopeOf(z *Fractions, p *partition) (slope square, ok bool) {
	for j := range p.lnK {
		lnK := p.lnK
		lnK[j] += finishShift
		moved, ok := l.layersOf(z, lnK)
		if !ok {
			return slope, false
		}
		for i := range slope {
			slope[i][j] = (moved.residual[i] - p.residual[i]) / finishShift
		}
	}
	return slope, true
}

// solve is Gauss's elimination with the largest pivots of the columns.
func solve(a square, b Fractions) (x Fractions, ok bool) {
	n := len(b)
	for k := range n {
		pivot := k
		for i := k + 1; i < n; i++ {
			if math.Abs(a[i][k]) > math.Abs(a[pivot][k]) {
				pivot = i
			}
		}
		a[k], a[pivot] = a[pivot], a[k]
		b[k], b[pivot] = b[pivot], b[k]
		if a[k][k] == 0 {
			return x, false
		}
		for i := k + 1; i < n; i++ {
			f := a[i][k] / a[k][k]
			for j := k; j < n; j++ {
				a[i][j] -= f * a[k][j]
			}
			b[i] -= f * b[k]
		}
	}
	for i := n - 1; i >= 0; i-- {
		x[i] = b[i]
		for j := i + 1; j < n; j++ {
			x[i] -= a[i][j] * x[j]
		}
		x[i] /= a[i][i]
	}
	return x, !math.IsNaN(x[0] + x[1] + x[2])
}
