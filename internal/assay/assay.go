// Package assay says how dry a solvent can be shown to be.
package assay

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

// Method is a Karl Fischer method: contents in kg/kg.
type Method struct {
	Name           string
	Repeatability  float64 // r, the 95 % limit between two results of one operator
	DetectionLimit float64
	Injections     int // whose mean is reported
}

// coverage turns a repeatability into a standard deviation: r = 1.96 sqrt(2) s
// (ISO 5725-6).
const coverage = 2.77

// Deviation is the standard deviation of the mean of the injections, kg/kg.
func (m Method) Deviation() float64 {
	return m.Repeatability / coverage / math.Sqrt(float64(m.Injections))
}

// Limit is what may be accepted.
type Limit struct {
	Uncertainty float64 // U of the mean, coverage factor 2, kg/kg
	AcceptAt    float64 // mean of the injections at or below this passes; NaN where nothing can be shown
	CannotShow  string  // why nothing can be shown, or ""
}

// Accept guards the target with the expanded uncertainty of the mean,
//
//	s = r/2.77, U = 2 s/sqrt(n), accept at or below target - U
//
// (JCGM 106:2012, guarded acceptance). Where the accepted content would lie
// below the detection limit, the target cannot be shown.
func Accept(target float64, m Method) Limit {
	u := 2 * m.Deviation()
	l := Limit{Uncertainty: u, AcceptAt: target - u}
	if l.AcceptAt < m.DetectionLimit {
		l.CannotShow = fmt.Sprintf("cannot be shown: %s less the uncertainty of %s (%s Karl Fischer, mean of %d) is below the detection limit of %s",
			quantity.FormatWater(target), quantity.FormatWater(u), m.Name, m.Injections, quantity.FormatWater(m.DetectionLimit))
		l.AcceptAt = math.NaN()
	}
	return l
}
