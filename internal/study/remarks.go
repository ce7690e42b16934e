package study

import (
	"parch/catalog"
	"parch/internal/routes"
	"parch/internal/steps"
)

// Remarks are the cautions that apply to a route on a lot, and what the lot and
// the still give to warn of, for one who has run a route without comparing it.
func Remarks(k *routes.Case, r routes.Route, outcomes ...steps.Outcome) (all []catalog.Caution, warnings []string) {
	var agents []string
	for _, s := range r {
		agents = append(agents, s.Agent)
	}
	warnings = append(ownWarnings(k, agents), lotWarnings(k)...)
	if anyStep(r, func(s routes.Stage) bool { return s.Kind.Heated() }) {
		warnings = append(warnings, stillWarnings(k, stillCharges(k, outcomes...))...)
	}
	return cautions(k, r, routes.Settings{}, outcomes...), warnings
}
