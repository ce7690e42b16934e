package routes

import (
	"math"
	"slices"

	"parch/internal/steps"
)

// forerunCurve tabulates the drawing off over a column of so many stages; ok is
// false where the distillate is the product.
func (f *follower) forerunCurve(stages int, waters []float64) (curve Curve, ok bool) {
	eq, err := steps.NewForerunEquilibrium(f.Mixture, f.Job.Site.PressurePa)
	if err != nil {
		return Curve{}, false
	}
	wettest := slices.Max(waters) * wetterThanSeen
	if most := f.Mixture.MassFraction(eq.Azeotrope.YWater); eq.Azeotrope.YWater > 0 {
		wettest = math.Min(wettest, math.Max(slices.Max(waters), 0.95*most))
	}
	driest := math.Min(slices.Min(waters), f.practice("trap-outlet-minimum"))
	all := filled(potNodes, waters, func(n int) []float64 { return steps.WetterWaters(driest, wettest, n) })
	nodes, ok := steps.ForerunTable(eq, f.forerunRig(stages), all)
	curve = Curve{Kind: steps.Forerun, Stages: stages}
	for _, n := range nodes {
		curve.Rows = append(curve.Rows, []float64{n.Water, n.LnLeft, n.HeatJ, n.WarmWaterJ, n.WarmSolventJ})
	}
	return curve, ok
}

func (f *follower) forerunConstants(o steps.Outcome, choice choice) Constants {
	if o.Overhead || choice.kPa > 0 {
		return nil // the curves are of a pot that is the product, at the site's pressure
	}
	r := f.forerunRules(choice)
	k := Constants{"stages": float64(choice.stages), "heel share": r.HeelShare, "driest kg/kg": r.LowestOutlet, "set-up s": r.SetUpS,
		"settle s": 0, "shut-down s": r.ShutDownS, "cold": truth(!choice.hot)}
	if choice.stages > 0 {
		k["settle s"] = r.SettleColumnS
	}
	return f.stillConstants(k)
}
