package assay

import (
	"fmt"
	"math"

	"parch/internal/quantity"
)

// A coulometric cell is at its best with this much water, kg: 50 to 100 ug.
const (
	leastWaterKg = 50e-9
	mostWaterKg  = 100e-9
)

// Sample is how much of a solvent to inject.
type Sample struct {
	LowKg, HighKg float64
	Note          string // where the best amount is more than can be injected; "" else
}

// SampleFor says how much solvent of an expected water content (kg/kg) brings 50
// to 100 ug of water into the cell, and no more than mostKg.
func SampleFor(water, mostKg float64) Sample {
	s := Sample{LowKg: leastWaterKg / water, HighKg: mostWaterKg / water}
	if !(water > 0) || s.LowKg > mostKg {
		s.LowKg, s.HighKg = mostKg, mostKg
		s.Note = fmt.Sprintf("%s is the most that is injected: it brings %.2g ug of water, less than the 50 ug that are measured best", quantity.FormatMass(mostKg), mostKg*math.Max(0, water)*1e9)
		return s
	}
	s.HighKg = math.Min(s.HighKg, mostKg)
	return s
}

// Sources of uncertainty beside the repeatability, as standard uncertainties.
type Sources struct {
	SampleKg   float64 // injected
	DriftKg    float64 // of the water counted as drift and blank, each injection
	MoistureKg float64 // of the water picked up by syringe and septum, each injection
	Weighing   float64 // of the sample, relative
	Standard   float64 // of the check standard's value, relative
}

// Uncertainty is the expanded uncertainty of the mean of n injections, coverage
// factor 2, by the law of propagation (JCGM 100:2008, GUM, 5.1.2 and 6.2.1) for a
// content w = m_water/m_sample:
//
//	u^2 = s^2/n + (u_drift^2 + u_moisture^2)/(n m^2) + w^2 (u_weigh^2/n + u_standard^2)
//
// with s = r/2.77. The standard's own uncertainty does not fall with n. Leave out
// what the repeatability was found with; with nothing else given, U is Accept's.
func Uncertainty(water float64, m Method, s Sources) float64 {
	n := float64(m.Injections)
	repeat := m.Repeatability / coverage
	u2 := repeat*repeat/n + water*water*(s.Weighing*s.Weighing/n+s.Standard*s.Standard)
	if s.SampleKg > 0 {
		u2 += (s.DriftKg*s.DriftKg + s.MoistureKg*s.MoistureKg) / (n * s.SampleKg * s.SampleKg)
	}
	return 2 * math.Sqrt(u2)
}

// InjectionsFor is the fewest injections whose mean shows target although the
// lot holds as much as water (kg/kg). ok is false where no number up to most
// does; then nothing but a drier lot or a finer method helps.
func InjectionsFor(target, water float64, m Method, most int) (n int, ok bool) {
	for n = 1; n <= most; n++ {
		m.Injections = n
		if l := Accept(target, m); l.CannotShow == "" && water <= l.AcceptAt {
			return n, true
		}
	}
	return most, false
}

// Plan is what is tested for one batch.
type Plan struct {
	Samples       int     // such as the feed, after each step, the product
	Injections    int     // each sample
	SampleS       float64 // attended, each sample: rinse the syringe, draw, log
	InjectionS    float64 // attended, each injection
	ConditioningS float64 // the cell before the first use of the day; not attended
	SharedBy      int     // batches tested on that day; 0: 1
}

// Work is what a plan costs in tests and time.
type Work struct {
	Tests     int // injections, each with its reagent
	AttendedS float64
	TotalS    float64
}

// Work adds the plan up.
func (p Plan) Work() Work {
	tests := p.Samples * p.Injections
	attended := float64(p.Samples)*p.SampleS + float64(tests)*p.InjectionS
	return Work{Tests: tests, AttendedS: attended, TotalS: attended + p.ConditioningS/math.Max(1, float64(p.SharedBy))}
}
