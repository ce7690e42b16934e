package routes_test

import (
	"fmt"
	"strings"
	"testing"
	"time"

	"parch/internal/routes"
	"parch/internal/steps"
)

// A peroxide reading counts to the last day of its class and not a day longer, whatever is
// heated: 3 months for class A, 6 for class B, a year for slow formers, as lists of
// peroxide formers have it (from memory). An own solvent of which nothing is stated is held
// to the strictest.
func TestAPeroxideReadingGrowsOld(t *testing.T) {
	heated := map[string][]routes.Stage{
		"diisopropyl-ether": {{Kind: steps.Trap}, {Kind: steps.Reactive, Agent: "calcium-hydride"}},
		"tetrahydrofuran":   {{Kind: steps.Forerun}, {Kind: steps.Reactive, Agent: "calcium-hydride"}},
		"mtbe":              {{Kind: steps.Trap}, {Kind: steps.Reactive, Agent: "calcium-hydride"}},
	}
	for solvent, days := range map[string]int{"diisopropyl-ether": 90, "tetrahydrofuran": 180, "mtbe": 365} {
		for _, more := range []int{-1, 0, 1, 6 * 365} {
			read := time.Date(2026, 12, 1, 0, 0, 0, 0, time.UTC).AddDate(0, 0, -days-more).Format(time.DateOnly)
			k := caseOf(t, solvent, "300 mg/kg", "100 mg/kg", fmt.Sprintf(", peroxide: {reading: 0 mg/L, date: %s}", read))
			for _, stage := range heated[solvent] {
				reason, source := k.Refused(stage)
				old := strings.HasPrefix(reason, "test first: the peroxide reading of ")
				if old != (more > 0) {
					t.Errorf("%s, %s, read on %s, %d days before: %q", solvent, stage.Kind, read, days+more, reason)
				}
				if said := fmt.Sprintf("is of %s, %d days before the plan of 2026-12-01", read, days+more); old && (!strings.Contains(reason, said) || !strings.Contains(reason, fmt.Sprintf("for %d days (memory)", days)) || source != "memory") {
					t.Errorf("%s, %s: %q does not say %q, from %s", solvent, stage.Kind, reason, said, source)
				}
			}
			if reason, _ := k.Refused(routes.Stage{Kind: steps.Soak, Agent: "sieve-3a"}); reason != "" {
				t.Errorf("%s in the cold: %q", solvent, reason)
			}
		}
	}
}
