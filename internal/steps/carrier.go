package steps

import (
	"errors"
	"fmt"
	"math"

	"parch/internal/thermo"
)

// ErrNoCarrier means that a carrier cannot dry the solvent; the error says why.
var ErrNoCarrier = errors.New("this carrier does not work here")

// ErrUnsolved means that the calculation of a run did not come to its end: seen
// where the condensate hovers between one layer and two. It says nothing of the
// carrier.
var ErrUnsolved = errors.New("the calculation did not come to its end")

// CarrierEquilibrium is what pot and receiver do with water, a solvent and a
// carrier at one pressure and one receiver temperature.
type CarrierEquilibrium struct {
	Model                 *thermo.Ternary
	ReceiverK, PressurePa float64
	Organic               *thermo.OrganicLayer // water of the organic layer where it was measured; nil: nowhere
	Doubt                 CarrierDoubt
	Azeotrope             thermo.TernaryAzeotrope
	DryK                  float64 // boiling point of the dry solvent
	// CarrierVolatility is y/x of a trace of carrier in the boiling dry solvent:
	// above 1 the carrier can be stripped off.
	CarrierVolatility float64
}

// CarrierDoubt says how well the water of the organic layer is known.
type CarrierDoubt struct {
	AlcoholInHydrocarbon bool    // the pairs alone give a factor 2 to 18 too little
	FittedFactor         float64 // of a set fitted to tie-lines of the three; 0 where there is none
	PairsFactor          float64 // of the poorer of both water pairs, where the pairs alone serve; 0: not known
}

// Bands on the water of the organic layer where an alcohol and a hydrocarbon are
// computed from their pairs alone, and where the alcohol is dilute.
const (
	pairsAloneBand = 3
	diluteBand     = 10
	diluteAlcohol  = 0.05 // alcohol/(alcohol + carrier) by mass
)

// Band is the factor either way on the water of the organic layer, for a layer of
// mass fractions w.
func (eq *CarrierEquilibrium) Band(w thermo.Fractions) (factor float64, basis string) {
	r := w[thermo.InSolvent] / (w[thermo.InSolvent] + w[thermo.InCarrier])
	if _, ok := eq.Organic.Water(r, eq.ReceiverK); ok {
		return math.Max(1, eq.Organic.Factor), "measured tie-lines of the three"
	}
	switch {
	case eq.Doubt.FittedFactor > 0:
		return math.Max(1, eq.Doubt.FittedFactor), "a set fitted to tie-lines of the three"
	case !eq.Doubt.AlcoholInHydrocarbon:
		return math.Max(1, eq.Doubt.PairsFactor), "the three pairs, as no figures for the three together are known"
	case r < diluteAlcohol:
		return diluteBand, "the three pairs, with little alcohol in the layer"
	}
	return pairsAloneBand, "the three pairs"
}

// leastVolatility of a trace of carrier, at which stripping it is still a job.
const leastVolatility = 1.05

// NewCarrierEquilibrium solves for the azeotrope, or says why the carrier cannot work.
func NewCarrierEquilibrium(model *thermo.Ternary, organic *thermo.OrganicLayer, doubt CarrierDoubt, receiverK, pressurePa float64) (*CarrierEquilibrium, error) {
	whole := *model
	model = &whole
	model.FindMixing()
	eq := &CarrierEquilibrium{Model: model, Organic: organic, Doubt: doubt, ReceiverK: receiverK, PressurePa: pressurePa}
	if err := model.CheckPressure(pressurePa); err != nil {
		return nil, fmt.Errorf("%w: %w", ErrNoCarrier, err)
	}
	if err := model.CheckReceiver(receiverK); err != nil {
		return nil, fmt.Errorf("%w: %w", ErrNoCarrier, err)
	}
	var err error
	if eq.DryK, err = thermo.Boil(model.Pure[thermo.InSolvent], pressurePa); err != nil {
		return nil, err
	}
	var restless *thermo.NotConverged // the temperature is still good enough for what follows
	if eq.Azeotrope, err = model.FindAzeotrope(pressurePa); err != nil && !errors.As(err, &restless) {
		return nil, err
	}
	if receiverK >= eq.Azeotrope.TempK {
		return nil, fmt.Errorf("%w: the receiver at %.1f °C is not below the %.1f °C at which the vapour condenses at %.4g kPa",
			ErrNoCarrier, receiverK-273.15, eq.Azeotrope.TempK-273.15, pressurePa/1e3)
	}
	eq.CarrierVolatility = eq.volatility()
	if eq.CarrierVolatility < leastVolatility {
		return nil, fmt.Errorf("%w: %s does not leave %s: its vapour over the dry solvent is %.3g times as rich in it as the liquid",
			ErrNoCarrier, model.Pure[thermo.InCarrier].Called(), model.Pure[thermo.InSolvent].Called(), eq.CarrierVolatility)
	}
	return eq, nil
}

// Layers are those of the azeotrope's condensate; a Return of None where it does not
// split or settle.
func (eq *CarrierEquilibrium) Layers() thermo.TernaryLayers {
	split, err := eq.Model.Flash(eq.Azeotrope.Y, eq.ReceiverK)
	if err != nil {
		return thermo.TernaryLayers{Return: thermo.None}
	}
	return eq.Model.Settle(split, eq.ReceiverK)
}

// volatility is gamma Psat/P of a trace of carrier in the boiling dry solvent.
func (eq *CarrierEquilibrium) volatility() float64 {
	ln := eq.Model.LnGamma(thermo.Fractions{0, 1, 0}, eq.DryK)
	return math.Exp(ln[thermo.InCarrier]) * eq.Model.Pure[thermo.InCarrier].VapourPressurePa.At(eq.DryK) / eq.PressurePa
}

// CarrierPlan is what is asked of a carrier distillation.
type CarrierPlan struct {
	DoseKg       float64 // of dry carrier to the whole lot, what fills the receiver included
	PreFilled    bool    // the receiver is filled with carrier before it starts; else from the pot
	Goal         float64 // water/(water + solvent) in the pot at which the trap stops, kg/kg
	CarrierLimit float64 // carrier left in the product, kg/kg
	LongestS     float64 // under the trap; 0: no limit
	Stages       int     // equilibrium stages of the column between pot and receiver; 0: none
	RefluxRatio  float64 // while the carrier is stripped; 0 without a column
	HeelShare    float64 // of solvent and carrier that stays in the pot, at least LeastHeel
	// OrganicWater multiplies the water of the organic layer in the receiver: 1,
	// or a bound of CarrierEquilibrium.Band.
	OrganicWater float64
	StepError    float64 // relative, of each component in a step; 0: the default
}

func (p CarrierPlan) check() error {
	if !(p.DoseKg > 0) {
		return fmt.Errorf("%w: a dose of %.3g kg", ErrNoCarrier, p.DoseKg)
	}
	if !(p.OrganicWater > 0) {
		return fmt.Errorf("%w: a factor of %.3g on the water of the organic layer", ErrNoCarrier, p.OrganicWater)
	}
	return p.checkStrip()
}

func (p CarrierPlan) checkStrip() error {
	switch {
	case p.HeelShare < LeastHeel || p.HeelShare >= 1:
		return fmt.Errorf("%w: a heel of %.3g %%; at least %.0f %% of the charge stays in the pot", ErrNoCarrier, 100*p.HeelShare, 100*LeastHeel)
	case !(p.CarrierLimit > 0 && p.CarrierLimit < 1):
		return fmt.Errorf("%w: a carrier limit of %.3g mg/kg", ErrNoCarrier, p.CarrierLimit*mgPerKg)
	case p.Stages < 0 || p.Stages > MostStages:
		return fmt.Errorf("%w: %d stages; allowed are 0 to %d", ErrNoCarrier, p.Stages, MostStages)
	case p.RefluxRatio < 0 || (p.Stages > 0 && p.RefluxRatio == 0):
		return fmt.Errorf("%w: a column of %d stages needs a reflux ratio above 0", ErrNoCarrier, p.Stages)
	}
	return nil
}

// CarrierDoses are the doses tried when none is given, as shares of the solvent's mass.
var CarrierDoses = []float64{0.05, 0.1, 0.15, 0.2, 0.3, 0.45, 0.7, 1}

// ChooseCarrierDose runs the plan with each of CarrierDoses and returns the
// outcome with the least solvent and carrier lost of those that reach the goal
// and the carrier limit, else the driest of those that reach the carrier limit,
// else the driest. A larger dose may ask for a larger still: rigFor a dose (kg).
func ChooseCarrierDose(eq *CarrierEquilibrium, feed Lot, plan CarrierPlan, rigFor func(doseKg float64) TrapRig, rules TrapRules) (Outcome, error) {
	var best Outcome
	var bestMerit [3]float64
	var failed error
	found := false
	for _, share := range CarrierDoses {
		plan.DoseKg = share * feed.SolventKg
		o, err := RunCarrier(eq, feed, plan, rigFor(plan.DoseKg), rules)
		if err != nil {
			failed = err
			continue
		}
		merit := [3]float64{0, 0, o.Balance.SolventRemovedKg + o.CarrierLostKg}
		if o.Out.Carrier() > plan.CarrierLimit*(1+1e-6) {
			merit[0] = 1
		}
		if w := o.Out.Water(); w > math.Max(plan.Goal, rules.LowestOutlet)*(1+1e-6) {
			merit[1] = w
		}
		if !found || less(merit, bestMerit) {
			best, bestMerit, found = o, merit, true
		}
	}
	if !found {
		return Outcome{}, failed
	}
	return best, nil
}

func less(a, b [3]float64) bool {
	for i := range a {
		if a[i] != b[i] {
			return a[i] < b[i]
		}
	}
	return false
}
