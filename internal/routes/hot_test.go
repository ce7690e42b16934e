package routes_test

import (
	"strings"
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
)

// What a solvent's pot bears holds over an agent as over nothing: dimethyl sulfoxide boils
// at 189 °C (CRC Handbook, 95th ed.) and may not be heated past 90 °C in a pot (from memory).
func TestAnAgentIsNoReasonToBoilHotter(t *testing.T) {
	for _, solvent := range []string{"dimethyl-sulfoxide", "n-n-dimethylformamide"} {
		k := caseOf(t, solvent, "400 mg/kg", "50 mg/kg", "")
		r := routes.Route{{Kind: steps.Reactive, Agent: "calcium-oxide"}}
		if _, err := k.Run(r, routes.Settings{HandOverMgPerKg: []float64{}}); err == nil || !strings.Contains(err.Error(), "the limit is") {
			t.Errorf("%s over calcium oxide: %v", solvent, err)
		}
	}
}

// A chain leaves some of its carrier in the lot: a metal must not meet the rest of a
// chlorinated one (common practice, no source).
func TestAMetalDoesNotFollowAChlorinatedCarrier(t *testing.T) {
	k := caseOf(t, "tetrahydrofuran", "2000 mg/kg", "20 mg/kg", "")
	sodium := routes.Stage{Kind: steps.Reactive, Agent: "sodium"}
	head := func(carrier string) routes.Route {
		return routes.Route{{Kind: steps.Trap, Carrier: carrier}, {Kind: steps.Forerun}}
	}
	if why := k.MayFollow(head("dichloromethane"), sodium); !strings.Contains(why, "dangerous with the dichloromethane") {
		t.Errorf("after dichloromethane: %q", why)
	}
	if why := k.MayFollow(head("cyclohexane"), sodium); why != "" {
		t.Errorf("after cyclohexane: %q", why)
	}
}
