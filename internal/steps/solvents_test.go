package steps_test

import (
	"testing"

	"parch/internal/steps"
	"parch/internal/thermo"
)

func curve(equation thermo.Equation, scale float64, c ...float64) thermo.Correlation {
	correlation := thermo.Correlation{Equation: equation, Scale: scale}
	copy(correlation.C[:], c)
	return correlation
}

// fromPerry is a solvent with curves of Perry's Chemical Engineers' Handbook, 8th
// ed. (2007), tables 2-8 to 2-313, and an NRTL set fitted to limiting activity
// coefficients and boiling data (the catalog's own fit).
func fromPerry(t testing.TB, key string) *thermo.Mixture {
	t.Helper()
	liquid := func(kgPerMol, meltingK float64, vapour, heat, cp, rho, mu thermo.Correlation) *thermo.Pure {
		return &thermo.Pure{Key: key, MolarMassKgPerMol: kgPerMol, MeltingK: meltingK, VapourPressurePa: vapour, HeatOfVaporizationJ: heat, HeatCapacityJPerMolK: cp, DensityKgPerM3: rho, ViscosityPaS: mu}
	}
	water := &shelf(t).Solvents["water"].Pure
	switch key {
	case "methanol":
		return &thermo.Mixture{Water: water, NRTL: thermo.BinaryNRTL(0.0432485, 253.557, 1.09486, -390.824, 0.3), Solvent: liquid(0.032042, 175.6,
			curve(thermo.DIPPR101, 1, 82.718, -6904.5, -8.8622, 7.4664e-6, 2), curve(thermo.DIPPR106, 1, 50451, 0.33594, 0, 0, 512.5),
			curve(thermo.DIPPR100, 1e-3, 105800, -362.23, 0.9379), curve(thermo.DIPPR105, 0.032042, 2326.7, 0.27073, 512.5, 0.24713),
			curve(thermo.DIPPR101, 1, -25.317, 1789.2, 2.069))}
	case "ethanol":
		return &thermo.Mixture{Water: water, NRTL: thermo.BinaryNRTL(1.56736, -15.0743, 0.112054, 36.1265, 0.47), Solvent: liquid(0.046069, 159,
			curve(thermo.DIPPR101, 1, 73.304, -7122.3, -7.1424, 2.8853e-6, 2), curve(thermo.DIPPR106, 1, 55789, 0.31245, 0, 0, 514),
			curve(thermo.DIPPR100, 1e-3, 102640, -139.63, -0.030341, 0.0020386), curve(thermo.DIPPR105, 0.046069, 1628.8, 0.27469, 514, 0.23178),
			curve(thermo.DIPPR101, 1, 7.875, 781.98, -3.0418))}
	case "2-propanol":
		return &thermo.Mixture{Water: water, NRTL: thermo.BinaryNRTL(7.65044, -1771.01, -2.69359, 900.787, 0.3), Solvent: liquid(0.060096, 185.2,
			curve(thermo.Wagner25, 1, -8.73656, 2.1624, -8.70785, 4.77927, 508.3, 4763000), curve(thermo.DIPPR106, 1, 72542, 0.79137, -0.66092, 0.34223, 508.3),
			curve(thermo.DIPPR100, 1e-3, 471710, -4172.1, 14.745, -0.0144), curve(thermo.DIPPR105, 0.060096, 1179.9, 0.2644, 508.3, 0.24653),
			curve(thermo.DIPPR101, 1, -8.8918, 2357.6, -0.91376))}
	case "dimethylformamide":
		return &thermo.Mixture{Water: water, NRTL: thermo.BinaryNRTL(1.6469, 47.0165, 0.99738, -723.553, 0.3), Solvent: liquid(0.073095, 212.9,
			curve(thermo.Wagner25, 1, -7.701769819, 1.926753463, -2.845852259, -3.172196635, 649.6, 4420000), curve(thermo.DIPPR106, 1, 59217, 0.37996, 0, 0, 649.6),
			curve(thermo.DIPPR100, 1e-3, 147900, -106, 0.384), curve(thermo.DIPPR105, 0.073095, 896.15, 0.23478, 649.6, 0.28091),
			curve(thermo.DIPPR101, 1, -20.425, 1515.5, 1.4444))}
	case "acetone":
		return &thermo.Mixture{Water: water, NRTL: thermo.BinaryNRTL(5.17193, -1145.71, -2.82062, 1135.2, 0.3), Solvent: liquid(0.05808, 178.3,
			curve(thermo.DIPPR101, 1, 69.006, -5599.6, -7.0985, 6.2237e-6, 2), curve(thermo.DIPPR106, 1, 42150, 0.3397, 0, 0, 508.2),
			curve(thermo.DIPPR100, 1e-3, 135600, -177, 0.2837, 0.000689), curve(thermo.DIPPR105, 0.05808, 1233.2, 0.25886, 508.2, 0.2913),
			curve(thermo.DIPPR101, 1, -14.918, 1023.4, 0.5961))}
	}
	t.Fatalf("no curves for %s", key)
	return nil
}

// association factors of Wilke & Chang.
var association = map[string]float64{"methanol": 1.9, "ethanol": 1.5}

func pair(t testing.TB, solvent string) *thermo.Mixture {
	switch solvent {
	case "methanol", "ethanol", "2-propanol", "dimethylformamide", "acetone":
		return fromPerry(t, solvent)
	}
	return mixture(t, solvent)
}

// stirred beads in a vessel: 5 mm/s past the beads is gentle stirring
// (assumption; the bead's own diffusion rules).
func stirred(t testing.TB, solvent string) steps.SoakRig {
	return steps.SoakRig{
		TempK: 298.15, Vessels: 1, AttendedS: 1440, WaterMolarM3: 18.9e-6, Association: association[solvent],
		Stirred: true, RelativeVelocityMS: 5e-3,
	}
}
