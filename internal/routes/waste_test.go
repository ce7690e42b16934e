package routes_test

import (
	"maps"
	"slices"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

// spentBin is where a spent agent goes, by what is left of it: hydride, metals and oxide of
// phosphorus stay reactive with their surplus, potassium hydroxide is corrosive, slaked lime
// is a hydroxide that does not react with water any more, sorbents and salts are solids wet
// with solvent (safety data sheets in general, from memory).
var spentBin = map[string]string{
	"calcium-hydride": "waste-reactive", "sodium": "waste-reactive", "magnesium": "waste-reactive", "phosphorus-pentoxide": "waste-reactive",
	"potassium-hydroxide": "waste-reactive", "calcium-oxide": "waste-wet-solid",
	"sieve-3a": "waste-wet-solid", "sieve-4a": "waste-wet-solid", "sieve-5a": "waste-wet-solid", "sieve-13x": "waste-wet-solid",
	"alumina": "waste-wet-solid", "silica-gel": "waste-wet-solid",
	"magnesium-sulfate": "waste-wet-solid", "sodium-sulfate": "waste-wet-solid", "calcium-chloride": "waste-wet-solid",
	"calcium-sulfate": "waste-wet-solid", "potassium-carbonate": "waste-wet-solid",
}

// Each spent agent is billed whole to its own bin, with nothing of it in the other.
func TestSpentAgentsGoToTheirBins(t *testing.T) {
	any := caseOf(t, "toluene", "80 mg/kg", "50 mg/kg", "")
	kinds := map[string]steps.Kind{"sieve": steps.Soak, "oxide": steps.Soak, "salt": steps.Salt, "reactive": steps.Reactive}
	for key, agent := range any.Catalog.Agents {
		bin, ok := spentBin[key]
		if !ok {
			t.Errorf("%s: where it goes is not stated here", key)
			continue
		}
		kind, water, ran := kinds[agent.Kind], "80 mg/kg", false
		if kind == steps.Salt {
			water = "0.3 %"
		}
		for _, solvent := range slices.Sorted(maps.Keys(any.Catalog.Solvents)) {
			s := any.Catalog.Solvents[solvent]
			v, known := any.Catalog.Verdict(s, key)
			may := v.Allowed() || key == "sieve-13x" && v.Word == "unsuitable" // which fits no solvent and is taken by acceptance only
			if s.Water == nil || !known || !may || s.Hazards.Halogenated {
				continue
			}
			k := caseOf(t, solvent, water, "70 mg/kg", ", peroxide: {reading: 0 mg/L, date: 2026-09-28}")
			settings := routes.Settings{HandOverMgPerKg: []float64{}}
			if kind == steps.Soak {
				settings.SoakHours, settings.Stirred, settings.Sieve = []float64{24}, []bool{false}, []string{routes.Discard}
			}
			run, err := k.Run(routes.Route{{Kind: kind, Agent: key}}, settings)
			if err != nil || run.AgentKg[key] == 0 {
				continue
			}
			ran = true
			kg := map[string]float64{}
			for _, u := range run.Uses {
				if u.Head == steps.Waste {
					kg[u.Item] += u.Quantity
				}
			}
			other := "waste-wet-solid"
			if bin == other {
				other = "waste-reactive"
			}
			if kg[bin] < run.AgentKg[key] || kg[other] != 0 {
				t.Errorf("%s out of %s: %g kg charged, wasted %v", key, solvent, run.AgentKg[key], kg)
			}
			break
		}
		if !ran {
			t.Errorf("%s was not run on any solvent", key)
		}
	}
}
