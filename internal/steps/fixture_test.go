package steps_test

import (
	"testing"

	"parch/catalog"
	"parch/internal/steps"
	"parch/internal/thermo"
)

func shelf(t testing.TB) *catalog.Catalog {
	t.Helper()
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func mixture(t testing.TB, solvent string) *thermo.Mixture {
	c := shelf(t)
	s := c.Solvents[solvent]
	return &thermo.Mixture{Water: &c.Solvents["water"].Pure, Solvent: &s.Pure, NRTL: s.Water.NRTL}
}

func litres(m *thermo.Mixture, l, water float64) steps.Lot {
	const roomK = 293.15
	kg := l * 1e-3 / (water/m.Water.DensityKgPerM3.At(roomK) + (1-water)/m.Solvent.DensityKgPerM3.At(roomK))
	return steps.Lot{SolventKg: kg * (1 - water), WaterKg: kg * water, TempK: roomK}
}

var rules = steps.TrapRules{
	LowestOutlet: 20e-6, Efficiency: 0.6, EfficiencyBelow: 100e-6, ShortestRefluxS: 3600,
	SetUpS: 2700, AttendedShare: 0.5, ShutDownS: 1800, DrainingS: 300,
	VapourLossPerDay: 0.005, CoolingFlowM3S: 2e-3 / 60, CoolingRiseK: 10,
}

func rig(returns string) steps.TrapRig {
	return steps.TrapRig{HeaterW: 1600, HeatShare: 0.5, Returns: returns, FillVolumeM3: 60e-6, UsableVolumeM3: 25e-6, RoomK: 293.15, Charges: 1}
}

func sieve3A(t testing.TB, residual float64) steps.Sorbent {
	a := shelf(t).Agents["sieve-3a"]
	return steps.Sorbent{
		Key: "sieve-3a", Loading: a.Isotherm.LoadingKgPerKg, ResidualKgPerKg: residual, CapacityShare: 1,
		BeadDiameterM: a.BeadDiameter.SI, BeadKgPerM3: a.BeadDensity.SI, Porosity: a.BeadPorosity.SI, Tortuosity: a.BeadTortuosity.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI,
	}
}

func bottle(t testing.TB, solvent string, depth float64) steps.SoakRig {
	return steps.SoakRig{
		TempK: 298.15, DepthM: depth, StillRatePerS: shelf(t).Solvents[solvent].StillRate.SI, RateDepthM: 0.08,
		Vessels: 1, AttendedS: 1440, WaterMolarM3: 18.9e-6,
	}
}
