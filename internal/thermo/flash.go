package thermo

import (
	"fmt"
	"math"
)

// TernarySplit is a liquid of three components as it stands: one layer or two.
type TernarySplit struct {
	Exists           bool
	Organic, Aqueous Fractions // mole fractions; Aqueous is the layer with more water
	AqueousShare     float64   // of all moles
}

// NotConverged says how far an iteration got.
type NotConverged struct {
	What       string
	Iterations int
	Residual   float64
}

func (e *NotConverged) Error() string {
	return fmt.Sprintf("%s did not converge: residual %.2g after %d iterations", e.What, e.Residual, e.Iterations)
}

const (
	smallestFraction     = 1e-20 // a missing component, so that its logarithm exists
	leastLayerDifference = 1e-4  // in mole fraction, below which two layers are one
)

// Flash splits a liquid of overall mole fractions z at tK. Its stability is
// tested first; the layers are refined by successive substitution, then by
// Newton's method, and taken only if the balance closes, both layers exist,
// they differ and their Gibbs energy lies below that of one liquid.
func (m *Ternary) Flash(z Fractions, tK float64) (TernarySplit, error) {
	return m.FlashFrom(z, tK, TernarySplit{})
}

// FlashFrom is Flash with a neighbouring split as a first guess. The guess only
// saves time: where it leads nowhere the stability test decides.
func (m *Ternary) FlashFrom(z Fractions, tK float64, guess TernarySplit) (TernarySplit, error) {
	if err := m.CheckTemperature(tK); err != nil {
		return TernarySplit{}, err
	}
	z = lifted(z)
	l := m.at(tK)
	if guess.Exists {
		if s, err := l.refine(&z, lnRatio(&guess.Aqueous, &guess.Organic)); err == nil && s.Exists {
			return s, nil
		}
	}
	starts := l.unstable(&z)
	var failed error
	for _, trial := range starts.found[:starts.n] {
		s, err := l.refine(&z, lnRatio(&trial, &z))
		if err == nil && s.Exists {
			return s, nil
		}
		if err != nil {
			failed = fmt.Errorf("%s at %.2f K: %w", m.name(), tK, err)
		}
	}
	return TernarySplit{}, failed
}

// lifted gives a missing component a trace and makes the fractions sum to one.
func lifted(z Fractions) Fractions {
	var sum float64
	for i := range z {
		z[i] = math.Max(z[i], smallestFraction)
		sum += z[i]
	}
	for i := range z {
		z[i] /= sum
	}
	return z
}

func lnRatio(a, b *Fractions) (ln Fractions) {
	for i := range ln {
		ln[i] = math.Log(math.Max(a[i], smallestFraction) / math.Max(b[i], smallestFraction))
	}
	return ln
}

// Iterations of the flash: successive substitution alone at first, then Newton
// steps, each replaced by a substitution where it does not lower both the
// residual and the Gibbs energy. Substitution lowers the energy by itself, but
// slowly where the energy is flat.
const (
	flashSubstitutions = 8
	flashIterations    = 600
	flashTolerance     = 1e-10
)

// refine solves ln K_i = ln gamma_i' - ln gamma_i" for the ratios K_i = x_i"/x_i'
// of two layers, whose amounts follow from the balance (Rachford & Rice, 1952).
func (l *liquid) refine(z *Fractions, lnK Fractions) (TernarySplit, error) {
	p, ok := l.layersOf(z, lnK)
	for i := 0; i < flashIterations && ok; i++ {
		if p.size < flashTolerance {
			return l.accept(z, &p), nil
		}
		if largest(&p.lnK) < 1e-6 {
			return TernarySplit{}, nil // both layers have become the feed
		}
		next, better := partition{}, false
		if i >= flashSubstitutions {
			next, better = l.newton(z, &p)
		}
		if !better {
			if next, ok = l.layersOf(z, minus(&p.lnK, &p.residual)); !ok {
				break
			}
		}
		p = next
	}
	if !ok {
		return TernarySplit{}, nil // the balance leaves no room for a second layer
	}
	return TernarySplit{}, &NotConverged{"the split into two layers", flashIterations, p.size}
}

// partition is a trial split: share is the moles of the layer x" (second).
type partition struct {
	lnK, first, second, residual Fractions
	share, size                  float64
}

// layersOf evaluates a set of ratios; ok is false where no share satisfies the balance.
func (l *liquid) layersOf(z *Fractions, lnK Fractions) (p partition, ok bool) {
	p.lnK = lnK
	var k Fractions
	for i := range k {
		k[i] = math.Exp(lnK[i])
	}
	if p.share, ok = rachfordRice(z, &k); !ok {
		return p, false
	}
	for i := range z {
		p.first[i] = z[i] / (1 + p.share*(k[i]-1))
		p.second[i] = k[i] * p.first[i]
	}
	a, b := l.lnGamma(&p.first), l.lnGamma(&p.second)
	for i := range z {
		p.residual[i] = lnK[i] - (a[i] - b[i])
	}
	p.size = largest(&p.residual)
	return p, !math.IsNaN(p.size)
}

// rachfordRice solves sum z_i (K_i - 1)/(1 + beta (K_i - 1)) = 0 for beta in the
// window where all amounts are positive. beta outside 0 to 1 is allowed on the
// way (Whitson & Michelsen, Fluid Phase Equilib. 53 (1989) 51).
func rachfordRice(z, k *Fractions) (beta float64, ok bool) {
	least, most := math.Min(k[0], math.Min(k[1], k[2])), math.Max(k[0], math.Max(k[1], k[2]))
	if !(least < 1 && most > 1) {
		return math.NaN(), false
	}
	lo, hi := 1/(1-most), 1/(1-least)
	beta = math.Max(lo+(hi-lo)/1e3, math.Min(hi-(hi-lo)/1e3, 0.5))
	for range 100 {
		var f, slope float64
		for i := range z {
			d := (k[i] - 1) / (1 + beta*(k[i]-1))
			f += z[i] * d
			slope -= z[i] * d * d
		}
		if f > 0 {
			lo = beta
		} else {
			hi = beta
		}
		next := beta - f/slope
		if !(next > lo && next < hi) {
			next = (lo + hi) / 2
		}
		if math.Abs(next-beta) < 1e-16+1e-15*math.Abs(beta) {
			return next, true
		}
		beta = next
	}
	return beta, true
}

// newton takes one step on the residual with a Jacobian by differences; better
// is false where the step does not reduce the residual.
func (l *liquid) newton(z *Fractions, p *partition) (next partition, better bool) {
	const h, longest = 1e-6, 1.5
	var jacobian square
	for j := range p.lnK {
		moved := p.lnK
		moved[j] += h
		q, ok := l.layersOf(z, moved)
		if !ok {
			return next, false
		}
		for i := range p.residual {
			jacobian[i][j] = (q.residual[i] - p.residual[i]) / h
		}
	}
	step, ok := solve3(jacobian, p.residual)
	if !ok {
		return next, false
	}
	if s := largest(&step); s > longest {
		for i := range step {
			step[i] *= longest / s
		}
	}
	next, ok = l.layersOf(z, minus(&p.lnK, &step))
	if !ok || !(next.size < 0.9*p.size) || !(next.share > 0 && next.share < 1) {
		return next, false
	}
	return next, p.size < 1e-4 || l.together(&next) < l.together(p)
}

// together is the Gibbs energy of mixing of both layers over RT, per mole of feed.
func (l *liquid) together(p *partition) float64 {
	return (1-p.share)*l.gibbs(&p.first) + p.share*l.gibbs(&p.second)
}

// accept turns a converged partition into layers, or into one liquid where the
// conditions of Flash are not met.
func (l *liquid) accept(z *Fractions, p *partition) TernarySplit {
	if !(p.share > 0 && p.share < 1) {
		return TernarySplit{}
	}
	var sumFirst, sumSecond, difference, imbalance float64
	for i := range z {
		sumFirst += p.first[i]
		sumSecond += p.second[i]
		difference = math.Max(difference, math.Abs(p.first[i]-p.second[i]))
		imbalance = math.Max(imbalance, math.Abs((1-p.share)*p.first[i]+p.share*p.second[i]-z[i]))
	}
	imbalance = math.Max(imbalance, math.Max(math.Abs(sumFirst-1), math.Abs(sumSecond-1)))
	if difference < leastLayerDifference || imbalance > 1e-9 {
		return TernarySplit{}
	}
	if l.gibbs(z) < l.together(p) {
		return TernarySplit{}
	}
	if p.first[InWater] > p.second[InWater] {
		return TernarySplit{true, p.second, p.first, 1 - p.share}
	}
	return TernarySplit{true, p.first, p.second, p.share}
}

func largest(v *Fractions) float64 {
	return math.Max(math.Abs(v[0]), math.Max(math.Abs(v[1]), math.Abs(v[2])))
}

func minus(a, b *Fractions) (d Fractions) {
	for i := range d {
		d[i] = a[i] - b[i]
	}
	return d
}

// solve3 solves three linear equations by elimination with row exchange.
func solve3(a square, b Fractions) (x Fractions, ok bool) {
	for c := range a {
		pivot := c
		for r := c + 1; r < len(a); r++ {
			if math.Abs(a[r][c]) > math.Abs(a[pivot][c]) {
				pivot = r
			}
		}
		a[c], a[pivot] = a[pivot], a[c]
		b[c], b[pivot] = b[pivot], b[c]
		if !(math.Abs(a[c][c]) > 1e-14) {
			return x, false
		}
		for r := c + 1; r < len(a); r++ {
			f := a[r][c] / a[c][c]
			for k := c; k < len(a); k++ {
				a[r][k] -= f * a[c][k]
			}
			b[r] -= f * b[c]
		}
	}
	for c := len(a) - 1; c >= 0; c-- {
		x[c] = b[c]
		for k := c + 1; k < len(a); k++ {
			x[c] -= a[c][k] * x[k]
		}
		x[c] /= a[c][c]
	}
	return x, true
}
