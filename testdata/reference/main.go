//go:build unix

// Command reference solves a few problems with this program's own packages, times
// them, and prints problem, answer and time as JSON for reference.py, which solves
// the same problems by other means.
package main

import (
	"encoding/json"
	"fmt"
	"os"
	"slices"
	"syscall"

	"parch/catalog"
	"parch/internal/steps"
	"parch/internal/thermo"
)

// problem is what both sides solve, what came out here, and how long it took.
type problem struct {
	Name         string             `json:"name"`
	Input        map[string]any     `json:"input"`
	Answer       map[string]float64 `json:"answer"`
	SecondsPerOp float64            `json:"seconds_per_op"`
}

func main() {
	if err := run(); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

func run() error {
	cat, err := catalog.Load()
	if err != nil {
		return err
	}
	var all []problem
	for _, solve := range []func(*catalog.Catalog) (problem, error){trap, soak, draws, madeDraws, trapDraws, bill, book} {
		p, err := solve(cat)
		if err != nil {
			return err
		}
		all = append(all, p)
	}
	return json.NewEncoder(os.Stdout).Encode(all)
}

// seconds is the processor time of one call, in user and system mode, so that a
// busy machine does not count: the median of up to 200 rounds of a second in all.
func seconds(call func() error) (float64, error) {
	calls := 1
	var rounds []float64
	for all := 0.0; len(rounds) < 3 || all < 1 && len(rounds) < 200; {
		start := used()
		for range calls {
			if err := call(); err != nil {
				return 0, err
			}
		}
		took := used() - start
		if took < 2e-3 { // shorter than what the clock can tell
			calls *= 10
			continue
		}
		rounds, all = append(rounds, took/float64(calls)), all+took
	}
	slices.Sort(rounds)
	return rounds[len(rounds)/2], nil
}

// used is the processor time of this process so far, s.
func used() float64 {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		panic(err)
	}
	return float64(u.Utime.Nano()+u.Stime.Nano()) * 1e-9
}

// correlation is an equation as the catalog names it, with its coefficients.
func correlation(c thermo.Correlation) map[string]any {
	return map[string]any{"equation": c.Equation, "c": c.C, "scale": c.Scale}
}

func pure(p *thermo.Pure) map[string]any {
	return map[string]any{
		"molar_mass_kg_per_mol": p.MolarMassKgPerMol, "vapour_pressure_pa": correlation(p.VapourPressurePa),
		"heat_of_vaporization_j_per_mol": correlation(p.HeatOfVaporizationJ), "heat_capacity_j_per_mol_k": correlation(p.HeatCapacityJPerMolK),
		"density_kg_per_m3": correlation(p.DensityKgPerM3),
	}
}

func pair(m *thermo.Mixture) map[string]any {
	n := m.NRTL
	return map[string]any{
		"water": pure(m.Water), "solvent": pure(m.Solvent), "a12": n.A[0][1], "b12": n.B[0][1], "a21": n.A[1][0], "b21": n.B[1][0], "alpha": n.Alpha[0][1],
	}
}

const roomK = 293.15

// lot is 18 L of a solvent with water in it, kg/kg.
func lot(m *thermo.Mixture, water float64) steps.Lot {
	kg := 18e-3 / (water/m.Water.DensityKgPerM3.At(roomK) + (1-water)/m.Solvent.DensityKgPerM3.At(roomK))
	return steps.Lot{SolventKg: kg * (1 - water), WaterKg: kg * water, TempK: roomK}
}

func toluene(cat *catalog.Catalog) *thermo.Mixture {
	s := cat.Solvents["toluene"]
	return &thermo.Mixture{Water: &cat.Solvents["water"].Pure, Solvent: &s.Pure, NRTL: s.Water.NRTL}
}

// trap boils 18 L of toluene from 480 to 30 mg/kg under a receiver at 15 °C.
func trap(cat *catalog.Catalog) (problem, error) {
	const receiverK, pressurePa, goal = 288.15, 101325.0, 30e-6
	m := toluene(cat)
	eq, err := steps.NewTrapEquilibrium(m, receiverK, pressurePa)
	if err != nil {
		return problem{}, err
	}
	feed := lot(m, 480e-6)
	rig := steps.TrapRig{HeaterW: 1600, HeatShare: 0.5, Returns: "light", FillVolumeM3: 60e-6, UsableVolumeM3: 25e-6, RoomK: roomK, Charges: 1}
	rules := steps.TrapRules{LowestOutlet: 20e-6, Efficiency: 0.6, EfficiencyBelow: 100e-6}
	o, err := steps.RunTrap(eq, feed, goal, rig, rules)
	if err != nil {
		return problem{}, err
	}
	// Time the whole of it, layers, azeotrope and floor included.
	t, err := seconds(func() error {
		eq, err := steps.NewTrapEquilibrium(m, receiverK, pressurePa)
		if err == nil {
			_, err = steps.RunTrap(eq, feed, goal, rig, rules)
		}
		return err
	})
	return problem{
		Name: "trap", SecondsPerOp: t,
		Input: map[string]any{
			"pair": pair(m), "solvent_kg": feed.SolventKg, "water_kg": feed.WaterKg, "goal": goal, "receiver_k": receiverK, "pressure_pa": pressurePa,
			"room_k": roomK, "net_w": rig.HeaterW * rig.HeatShare, "fill_m3": rig.FillVolumeM3, "efficiency": rules.Efficiency, "efficiency_below": rules.EfficiencyBelow,
		},
		Answer: map[string]float64{"boiled_kg": o.Figure("vapour boiled up, each charge"), "reflux_h": o.Figure("reflux, each charge"), "floor": o.Floor},
	}, err
}

// sites of a Langmuir isotherm: capacity, affinity, heat.
func sites(a *catalog.Agent) (all [][3]float64) {
	for _, s := range a.Isotherm.Sites {
		all = append(all, [3]float64{s.CapacityKgPerKg, s.B0PerPa, s.HeatJPerMol})
	}
	return all
}

// key names one of many answers.
func key(what string, i int) string { return fmt.Sprintf("%s %d", what, i) }

// soak stands 18 L of toluene over 2 kg of sieve 3A for 64 h.
func soak(cat *catalog.Catalog) (problem, error) {
	const hours, doseKgPerM3, residual = 64.0, 110.0, 0.02
	m := toluene(cat)
	a := cat.Agents["sieve-3a"]
	sieve := steps.Sorbent{
		Key: a.Key, Loading: a.Isotherm.LoadingKgPerKg, ResidualKgPerKg: residual, CapacityShare: 1,
		BeadDiameterM: a.BeadDiameter.SI, BeadKgPerM3: a.BeadDensity.SI, Porosity: a.BeadPorosity.SI, Tortuosity: a.BeadTortuosity.SI,
		HoldUpM3PerKg: a.HoldUp.SI, MaxDoseKgPerM3: a.MaxDose.SI,
	}
	rig := steps.SoakRig{
		TempK: roomK, DepthM: 0.25, StillRatePerS: cat.Solvents["toluene"].StillRate.SI, RateDepthM: 0.08,
		Vessels: 1, WaterMolarM3: 18.9e-6,
	}
	feed := lot(m, 480e-6)
	once := func() (steps.Outcome, error) { return steps.SoakOver(m, feed, doseKgPerM3, hours*3600, sieve, rig) }
	o, err := once()
	if err != nil {
		return problem{}, err
	}
	t, err := seconds(func() error { _, err := once(); return err })
	return problem{
		Name: "soak", SecondsPerOp: t,
		Input: map[string]any{
			"pair": pair(m), "sites": sites(a), "residual": residual, "dose_kg": o.AgentKg, "solvent_kg": feed.SolventKg, "water_kg": feed.WaterKg,
			"temp_k": roomK, "rate_per_h": o.Figure("rate constant K"), "hours": hours,
		},
		Answer: map[string]float64{"equilibrium": o.Figure("equilibrium at this dose") * 1e-6, "outlet": o.Out.Water()},
	}, err
}
