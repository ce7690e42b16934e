package thermo

import (
	"fmt"
	"math"
)

// Split is a pair of liquid layers in equilibrium.
type Split struct {
	Exists             bool
	XOrganic, XAqueous float64 // mole fraction of water in each layer
}

// SplitAt finds the layers of water and solvent at tK: the widest flat of the
// lower convex hull of the Gibbs energy of mixing gives the start (a hull, not a
// spinodal, so that a metastable island inside the gap is not counted), Newton's
// method on equal activities the end.
func (m *Mixture) SplitAt(tK float64) (Split, error) {
	left, right, found := m.hullGap(tK)
	if !found {
		return Split{}, nil
	}
	return m.polish(left, right, tK)
}

// hullPoints spaces mole fractions evenly in ln(x/(1-x)), from 1e-9 to 1 - 1e-9.
var hullPoints = func() (xs [hullSize]float64) {
	const edge = 20.723 // ln(1e9)
	for i := range xs {
		u := -edge + 2*edge*float64(i)/(hullSize-1)
		xs[i] = 1 / (1 + math.Exp(-u))
	}
	return xs
}()

const hullSize = 401

// hullIdeal is the Gibbs energy of ideal mixing over RT at the hullPoints.
var hullIdeal = func() (g [hullSize]float64) {
	for i, x := range &hullPoints {
		g[i] = x*math.Log(x) + (1-x)*math.Log1p(-x)
	}
	return g
}()

// gibbs is the Gibbs energy of mixing over RT, per mole, at the hullPoints: the
// excess is x1 x2 (tau21 G21/(x1 + x2 G21) + tau12 G12/(x2 + x1 G12)).
func (m *NRTL) gibbs(tK float64) (all [hullSize]float64) {
	tau, g := m.factors(tK)
	for i, x := range &hullPoints {
		y := 1 - x
		all[i] = hullIdeal[i] + x*y*(tau[1][0]*g[1][0]/(x+y*g[1][0])+tau[0][1]*g[0][1]/(y+x*g[0][1]))
	}
	return all
}

// hullGap returns the ends of the widest edge of the lower convex hull that
// skips at least one point.
func (m *Mixture) hullGap(tK float64) (left, right float64, found bool) {
	hull, n := m.NRTL.hull(tK)
	widest := 1
	for k := 1; k < n; k++ {
		if skipped := hull[k] - hull[k-1]; skipped > widest {
			widest, left, right, found = skipped, hullPoints[hull[k-1]], hullPoints[hull[k]], true
		}
	}
	return left, right, found
}

// hull returns the n points of the grid that lie on the lower convex hull of the
// Gibbs energy of mixing.
func (m *NRTL) hull(tK float64) (points [hullSize]int, n int) {
	g := m.gibbs(tK)
	for i := range hullSize {
		for n >= 2 && aboveChord(&g, points[n-2], points[n-1], i) {
			n--
		}
		points[n] = i
		n++
	}
	return points, n
}

func aboveChord(g *[hullSize]float64, a, b, c int) bool {
	xa, xb, xc := hullPoints[a], hullPoints[b], hullPoints[c]
	return (g[b]-g[a])*(xc-xa) >= (g[c]-g[a])*(xb-xa)
}

// polish solves equal activities of both components in two layers for
// u = ln x' and v = ln(1 - x”).
func (m *Mixture) polish(left, right, tK float64) (Split, error) {
	u, v := math.Log(left), math.Log1p(-right)
	residual := func(u, v float64) (water, solvent float64) {
		x1, s2 := math.Exp(u), math.Exp(v)
		w1, o1 := m.NRTL.Pair(x1, tK)
		w2, o2 := m.NRTL.Pair(1-s2, tK)
		return u + w1 - math.Log1p(-s2) - w2, math.Log1p(-x1) + o1 - v - o2
	}
	for range 100 {
		f, g := residual(u, v)
		const h = 1e-7
		fu, gu := residual(u+h, v)
		fv, gv := residual(u, v+h)
		a, b, c, d := (fu-f)/h, (fv-f)/h, (gu-g)/h, (gv-g)/h
		det := a*d - b*c
		du, dv := -(f*d-b*g)/det, -(a*g-f*c)/det
		scale := math.Min(1, 0.5/math.Max(math.Abs(du), math.Abs(dv)))
		u, v = u+scale*du, v+scale*dv
		if !(u < 0) || !(v < 0) {
			break
		}
		if math.Max(math.Abs(du), math.Abs(dv)) < 1e-12 {
			s := Split{true, math.Exp(u), -math.Expm1(v)}
			if s.XAqueous-s.XOrganic < 1e-4 {
				return Split{}, nil
			}
			return s, nil
		}
	}
	return Split{}, fmt.Errorf("water + %s at %.2f K: the layers did not converge", m.Solvent.Called(), tK)
}

// layerDensity is the density of a layer at tK in kg/m3, from additive
// volumes of the pure liquids.
func (m *Mixture) layerDensity(xWater, tK float64) float64 {
	w := m.MassFraction(xWater)
	return 1 / (w/m.Water.DensityKgPerM3.At(tK) + (1-w)/m.Solvent.DensityKgPerM3.At(tK))
}

// Returns says which layer a receiver at tK must return to the pot.
type Returns string

// The kinds of return. None: no layers, or layers too alike to settle.
const (
	Light Returns = "light"
	Heavy Returns = "heavy"
	None  Returns = "none"
)

// LeastDensityDifference is the share by which layers must differ to settle
// (common practice, no source).
const LeastDensityDifference = 0.02

// Layers are the layers in a receiver with their densities.
type Layers struct {
	Split
	OrganicKgPerM3, AqueousKgPerM3 float64
	Return                         Returns
	Reason                         string // why Return is None
}

// LayersAt splits a condensate at tK and says which layer goes back.
func (m *Mixture) LayersAt(tK float64) (Layers, error) {
	if tK <= m.Water.MeltingK {
		return Layers{Return: None, Reason: fmt.Sprintf("water freezes at the receiver's %.1f °C", tK-273.15)}, nil
	}
	if tK <= m.Solvent.MeltingK {
		return Layers{Return: None, Reason: fmt.Sprintf("%s freezes at %.1f °C, above the receiver's %.1f °C", m.Solvent.Called(), m.Solvent.MeltingK-273.15, tK-273.15)}, nil
	}
	if err := m.CheckTemperature(tK); err != nil {
		return Layers{Return: None, Reason: err.Error()}, nil
	}
	s, err := m.SplitAt(tK)
	if err != nil {
		return Layers{}, err
	}
	if !s.Exists {
		return Layers{Return: None, Reason: fmt.Sprintf("water and %s form no second layer at %.1f °C", m.Solvent.Called(), tK-273.15)}, nil
	}
	l := Layers{Split: s, OrganicKgPerM3: m.layerDensity(s.XOrganic, tK), AqueousKgPerM3: m.layerDensity(s.XAqueous, tK)}
	switch ratio := l.OrganicKgPerM3 / l.AqueousKgPerM3; {
	case math.Abs(ratio-1) < LeastDensityDifference:
		l.Return = None
		l.Reason = fmt.Sprintf("the layers' densities differ by %.1f %% only and do not settle", 100*math.Abs(ratio-1))
	case ratio < 1:
		l.Return = Light
	default:
		l.Return = Heavy
	}
	return l, nil
}

// Solubility returns the water a solvent holds at tK as a mass fraction. ok is
// false where the pair is miscible.
func (m *Mixture) Solubility(tK float64) (water float64, ok bool, err error) {
	s, err := m.SplitAt(tK)
	if err != nil || !s.Exists {
		return math.NaN(), false, err
	}
	return m.MassFraction(s.XOrganic), true, nil
}

// GammaInfinite is the activity coefficient of water at infinite dilution.
func (m *Mixture) GammaInfinite(tK float64) float64 {
	lnW, _ := m.NRTL.Pair(0, tK)
	return math.Exp(lnW)
}
