package steps_test

import (
	"math"
	"testing"

	"parch/internal/steps"
	"parch/internal/thermo"
)

func constant(value float64) thermo.Correlation {
	return thermo.Correlation{Equation: thermo.DIPPR100, C: [7]float64{value}, Scale: 1}
}

// ideal is a made-up mixture of constant relative volatility: both vapour
// pressures have the same slope, water's is volatility times the solvent's.
func ideal(volatility float64) *thermo.Mixture {
	liquid := func(key string, lnP, molarMass float64) *thermo.Pure {
		return &thermo.Pure{
			Key: key, MolarMassKgPerMol: molarMass, MeltingK: 200, CriticalK: 600,
			VapourPressurePa:    thermo.Correlation{Equation: thermo.DIPPR101, C: [7]float64{lnP, -4500}, Scale: 1},
			HeatOfVaporizationJ: constant(37000), HeatCapacityJPerMolK: constant(120), DensityKgPerM3: constant(900), ViscosityPaS: constant(1e-3),
		}
	}
	return &thermo.Mixture{Water: liquid("light", 23.5+math.Log(volatility), 0.018), Solvent: liquid("heavy", 23.5, 0.072), NRTL: thermo.BinaryNRTL(0, 0, 0, 0, 0.3)}
}

var drawingRules = steps.ForerunRules{
	HeelShare: 0.1, SetUpS: 1800, SettleColumnS: 1800, AttendedShare: 0.5, ShutDownS: 1800,
	CoolingFlowM3S: 2e-3 / 60, CoolingRiseK: 10,
}

func still(stages int) steps.ForerunRig {
	r := steps.ForerunRig{HeaterW: 1600, HeatShare: 0.5, RoomK: 293.15, Charges: 1, Stages: stages}
	if stages > 0 {
		r.RefluxRatio = 5
	}
	return r
}

func boiler(t testing.TB, m *thermo.Mixture, pressurePa float64) *steps.ForerunEquilibrium {
	t.Helper()
	eq, err := steps.NewForerunEquilibrium(m, pressurePa)
	if err != nil {
		t.Fatal(err)
	}
	return eq
}

// molar is a lot of one kmol with the mole fraction x of water.
func molar(m *thermo.Mixture, x float64) steps.Lot {
	return steps.Lot{WaterKg: 1e3 * x * m.Water.MolarMassKgPerMol, SolventKg: 1e3 * (1 - x) * m.Solvent.MolarMassKgPerMol}
}
