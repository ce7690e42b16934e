package proof

import (
	"fmt"
	"math"

	"parch/catalog"
	"parch/internal/mixture"
	"parch/internal/thermo"
)

const zeroCelsiusK = 273.15

// checkRow computes one figure of the tables of checks.
func checkRow(cat *catalog.Catalog, c *catalog.Check) Row {
	computed, err := Compute(cat, c)
	row := Row{
		Quantity: c.Quantity, Subject: c.Subject, Partner: c.Partner, TempK: c.TempK, PressurePa: c.PressurePa,
		Published: c.Value, Computed: computed, Unit: c.Unit, Limit: c.Limit, LimitUnit: c.LimitUnit,
		Kind: c.Kind, Confidence: c.Confidence, Reason: c.Excuse, ExcusedTo: c.ExcusedTo, Source: c.Source, Place: fmt.Sprintf("checks/%s:%d", c.File, c.Line),
	}
	if c.Quantity == "azeotrope-absent" {
		row.Condition = "no azeotrope: 0; an azeotrope: 1"
	}
	return row.judge(err)
}

// computers give what the catalog's models say, in the unit of the check.
var computers = map[string]func(*catalog.Catalog, *catalog.Check) (float64, error){
	"boiling-point": pure, "vapour-pressure": pure, "density": pure, "heat-of-vaporization": pure, "heat-capacity": pure, "viscosity": pure,
	"water-solubility": solubility, "solvent-solubility": solubility,
	"azeotrope-temperature": azeotrope, "azeotrope-water": azeotrope, "azeotrope-absent": azeotrope,
	"gamma-water": gammaWater, "gamma-solvent-in-carrier": gammaPair, "gamma-carrier-in-solvent": gammaPair,
	"ternary-azeotrope-temperature": ternaryAzeotrope, "ternary-azeotrope-water": ternaryAzeotrope, "ternary-azeotrope-solvent": ternaryAzeotrope,
	"hydrate-activity": hydrateActivity, "loading": loading, "share-removed": shareRemoved,
}

// Compute returns what the catalog gives for a check, in the unit of its value.
func Compute(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	f, ok := computers[c.Quantity]
	if !ok {
		return math.NaN(), fmt.Errorf("nothing computes %q", c.Quantity)
	}
	return f(cat, c)
}

func pure(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	p := &cat.Solvents[c.Subject].Pure
	switch c.Quantity {
	case "boiling-point":
		tK, err := thermo.Boil(p, c.PressurePa)
		return tK - zeroCelsiusK, err
	case "vapour-pressure":
		return p.VapourPressurePa.At(c.TempK), nil
	case "density":
		return p.DensityKgPerM3.At(c.TempK), nil
	case "heat-of-vaporization":
		return p.HeatOfVaporizationJ.At(c.TempK) / 1e3, nil
	case "heat-capacity":
		return p.HeatCapacityJPerMolK.At(c.TempK), nil
	}
	return p.ViscosityPaS.At(c.TempK) * 1e3, nil
}

func solubility(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m := mixture.Pair(cat, cat.Solvents[c.Subject])
	s, err := m.SplitAt(c.TempK)
	switch {
	case err != nil:
		return math.NaN(), err
	case !s.Exists:
		return math.NaN(), fmt.Errorf("the model gives one layer")
	case c.Quantity == "solvent-solubility":
		return 100 * (1 - m.MassFraction(s.XAqueous)), nil
	}
	return 100 * m.MassFraction(s.XOrganic), nil
}

func azeotrope(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m := mixture.Pair(cat, cat.Solvents[c.Subject])
	a, err := m.FindAzeotrope(c.PressurePa)
	switch {
	case err != nil:
		return math.NaN(), err
	case c.Quantity == "azeotrope-absent" && a.Kind == thermo.NoAzeotrope:
		return 0, nil
	case c.Quantity == "azeotrope-absent":
		return 1, nil
	case a.Kind == thermo.NoAzeotrope:
		return math.NaN(), fmt.Errorf("the model gives no azeotrope")
	case c.Quantity == "azeotrope-water":
		return 100 * m.MassFraction(a.YWater), nil
	}
	return a.TempK - zeroCelsiusK, nil
}

func gammaWater(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	return mixture.Pair(cat, cat.Solvents[c.Subject]).GammaInfinite(c.TempK), nil
}

func gammaPair(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	pair := cat.Pairs[[2]string{c.Subject, c.Partner}]
	if pair == nil {
		return math.NaN(), fmt.Errorf("the catalog has no activity model of %s with %s", c.Subject, c.Partner)
	}
	if c.Quantity == "gamma-solvent-in-carrier" {
		ln, _ := pair.NRTL.Pair(0, c.TempK)
		return math.Exp(ln), nil
	}
	_, ln := pair.NRTL.Pair(1, c.TempK)
	return math.Exp(ln), nil
}

func ternaryAzeotrope(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	m, err := mixture.Ternary(cat, c.Subject, c.Partner)
	if err != nil {
		return math.NaN(), err
	}
	a, err := m.FindAzeotrope(c.PressurePa)
	switch {
	case err != nil:
		return math.NaN(), err
	case a.Kind == thermo.NoAzeotrope:
		return math.NaN(), fmt.Errorf("the lowest-boiling mixture of the model lacks a component")
	}
	mass := m.Mass(a.Y)
	switch c.Quantity {
	case "ternary-azeotrope-water":
		return 100 * mass[thermo.InWater], nil
	case "ternary-azeotrope-solvent":
		return 100 * mass[thermo.InSolvent], nil
	}
	return a.TempK - zeroCelsiusK, nil
}

func hydrateActivity(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	for _, h := range cat.Agents[c.Subject].Hydrates {
		if h.Pair == c.Partner {
			return h.Activity.SI, nil
		}
	}
	return math.NaN(), fmt.Errorf("the catalog has no pair %s", c.Partner)
}

func loading(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	return 100 * cat.Agents[c.Subject].Isotherm.LoadingKgPerKg(c.PressurePa, c.TempK), nil
}

// shareRemoved is of the dissolved water, by a salt in the time of the claim.
func shareRemoved(cat *catalog.Catalog, c *catalog.Check) (float64, error) {
	claim := cat.Agents[c.Subject].Claim
	if claim == nil {
		return math.NaN(), fmt.Errorf("nothing is claimed of %s", c.Subject)
	}
	return 100 * claim.Removed.SI, nil
}
