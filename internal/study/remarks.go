package study

import (
	"parch/catalog"
	"parch/internal/routes"
	"parch/internal/steps"
)

// Remarks are the cautions that apply to a route on a lot, and what the lot and
// the still give to warn of, for one who runs a route without comparing it.
func Remarks(k *routes.Case, r routes.Route) (all []catalog.Caution, warnings []string) {
	var agents []string
	for _, s := range r {
		agents = append(agents, s.Agent)
	}
	warnings = append(ownWarnings(k, agents), lotWarnings(k)...)
	if anyStep(r, func(s routes.Stage) bool {
		return s.Kind == steps.Trap || s.Kind == steps.Forerun || s.Kind == steps.Reactive
	}) {
		warnings = append(warnings, stillWarnings(k)...)
	}
	return cautions(k, r), warnings
}
