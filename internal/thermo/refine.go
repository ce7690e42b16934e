package thermo

import "math"

// Iterations of the flash: successive substitution, from flashSubstitutions on
// Newton's method where the Gibbs energy is convex, and from flashPatience on
// damped Newton steps everywhere.
const (
	flashSubstitutions = 5
	flashPatience      = 60
	flashIterations    = 250
	flashTolerance     = 1e-10
	flashNear          = 0.05 // residual below which Newton's method starts at once
	flashRest          = 3    // substitutions after a Newton step that failed
	flashSoon          = 8    // rounds after which a feed outside the layers is given up
)

// refine solves ln K_i = ln gamma_i' - ln gamma_i" for the ratios K_i = x_i"/x_i'
// of two layers, whose amounts follow from the balance (Rachford & Rice, 1952).
// For outsideFor rounds the feed may lie outside the layers.
func (l *liquid) refine(z *Fractions, lnK Fractions, outsideFor int) (TernarySplit, error) {
	p, ok := l.layersOf(z, lnK)
	wait := flashSubstitutions
	if p.size < flashNear {
		wait = 0
	}
	var last Fractions
	for i := 0; i < flashIterations && ok; i++ {
		if p.size < flashTolerance {
			return l.accept(z, &p), nil
		}
		if largest(&p.lnK) < 1e-6 {
			return TernarySplit{}, nil // both layers have become the feed
		}
		if i > outsideFor && !(p.share > 0 && p.share < 1) {
			break // the feed lies outside the layers, and stays there
		}
		if i >= wait && p.size < finishClose {
			if end, found := l.finish(z, p); found {
				return l.accept(z, &end), nil
			}
		}
		next, better := partition{}, false
		if i >= wait {
			if next, better = l.newton(z, &p, i > flashPatience); !better {
				wait = i + flashRest
			}
		}
		if !better {
			next, ok = l.substitute(z, &p, &last)
		}
		last = p.residual
		p = next
	}
	if !ok || !(p.share > 0 && p.share < 1) {
		return TernarySplit{}, nil // the balance leaves no room for a second layer
	}
	return TernarySplit{}, &NotConverged{"the split into two layers", flashIterations, p.size}
}

// substitute takes ln K from the activities, and goes further the same way as
// long as that lowers the Gibbs energy: substitution alone crawls where the
// energy is flat.
func (l *liquid) substitute(z *Fractions, p *partition, last *Fractions) (next partition, ok bool) {
	if next, ok = l.layersOf(z, minus(&p.lnK, &p.residual)); !ok || *last == (Fractions{}) {
		return next, ok
	}
	const farther = 4
	far := p.lnK
	for i := range far {
		far[i] -= farther * p.residual[i]
	}
	if q, fine := l.layersOf(z, far); fine && q.share > 0 && q.share < 1 && l.together(&q) < l.together(&next) {
		return q, true
	}
	return next, ok
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
	l.compare(&p)
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

// newton takes one step down the Gibbs energy with the amounts v_i in the second
// layer as unknowns; its gradient is the residual. ok is false where the Hessian,
// by differences and scaled by the amounts, is not positive definite or the step
// does not lower the energy. patient damps the Hessian until one does
// (Levenberg's rule), with the finer differences that a plait point needs.
func (l *liquid) newton(z *Fractions, p *partition, patient bool) (next partition, ok bool) {
	if !(p.share > 0 && p.share < 1) {
		return next, false
	}
	var amount, scale, slope Fractions
	for i := range z {
		amount[i] = p.share * p.second[i]
		scale[i] = math.Sqrt(amount[i] * (z[i] - amount[i]) / z[i])
		slope[i] = scale[i] * p.residual[i]
	}
	hessian, ok := l.curvature(z, p, &amount, &scale, patient)
	if !ok {
		return next, false
	}
	energy := l.together(p)
	most := 0.0
	if patient {
		most = 1e6
	}
	for damping := 0.0; damping <= most; damping = math.Max(1e-8, 10*damping) {
		step, definite := solveDefinite(hessian, damping, slope)
		if !definite {
			continue
		}
		moved := amount
		for i := range moved {
			moved[i] -= scale[i] * step[i]
		}
		if next, ok = l.partitionOf(z, &moved); !ok {
			continue
		}
		if gain := energy - l.together(&next); gain > 0 || (gain > -1e-13 && next.size < 0.5*p.size) {
			return next, true
		}
	}
	return next, false
}

// curvature is the Hessian of the Gibbs energy in scaled amounts. Near a plait
// point its least eigenvalue is very small, so that only central differences do.
func (l *liquid) curvature(z *Fractions, p *partition, amount, scale *Fractions, central bool) (hessian square, ok bool) {
	h, down := 1e-6, *p
	if central {
		h = 1e-4
	}
	for j := range amount {
		shift := h * math.Min(amount[j], z[j]-amount[j])
		moved := *amount
		moved[j] += shift
		width := shift
		up, ok := l.partitionOf(z, &moved)
		if ok && central {
			moved[j] = amount[j] - shift
			width = 2 * shift
			down, ok = l.partitionOf(z, &moved)
		}
		if !ok || shift == 0 {
			return hessian, false
		}
		for i := range amount {
			hessian[i][j] = scale[i] * scale[j] * (up.residual[i] - down.residual[i]) / width
		}
	}
	return hessian, true
}

// partitionOf evaluates a split given the amounts in the second layer.
func (l *liquid) partitionOf(z, amount *Fractions) (p partition, ok bool) {
	for i := range amount {
		if !(amount[i] > 0 && amount[i] < z[i]) {
			return p, false
		}
		p.share += amount[i]
	}
	for i := range amount {
		p.second[i] = amount[i] / p.share
		p.first[i] = (z[i] - amount[i]) / (1 - p.share)
		p.lnK[i] = math.Log(p.second[i] / p.first[i])
	}
	l.compare(&p)
	return p, !math.IsNaN(p.size)
}

// compare fills in how far the activities of both layers are apart.
func (l *liquid) compare(p *partition) {
	a, b := l.lnGamma(&p.first), l.lnGamma(&p.second)
	for i := range p.lnK {
		p.residual[i] = p.lnK[i] - (a[i] - b[i])
	}
	p.size = largest(&p.residual)
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
		return TernarySplit{Exists: true, Organic: p.second, Aqueous: p.first, AqueousShare: 1 - p.share}
	}
	return TernarySplit{Exists: true, Organic: p.first, Aqueous: p.second, AqueousShare: p.share}
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

// solveDefinite solves (a + damping) x = b for a symmetric matrix by Cholesky's
// factors; definite is false where the damped matrix is not positive definite.
func solveDefinite(a square, damping float64, b Fractions) (x Fractions, definite bool) {
	var c square
	for i := range a {
		for j := 0; j <= i; j++ {
			sum := (a[i][j] + a[j][i]) / 2
			if i == j {
				sum += damping
			}
			for k := range j {
				sum -= c[i][k] * c[j][k]
			}
			if i != j {
				c[i][j] = sum / c[j][j]
				continue
			}
			if !(sum > 1e-12) {
				return x, false
			}
			c[i][i] = math.Sqrt(sum)
		}
	}
	for i := range x {
		x[i] = b[i]
		for k := range i {
			x[i] -= c[i][k] * x[k]
		}
		x[i] /= c[i][i]
	}
	for i := len(x) - 1; i >= 0; i-- {
		for k := i + 1; k < len(x); k++ {
			x[i] -= c[k][i] * x[k]
		}
		x[i] /= c[i][i]
	}
	return x, true
}
