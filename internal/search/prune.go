package search

import (
	"fmt"

	"parch/internal/quantity"
	"parch/internal/routes"
	"parch/internal/steps"
)

// Prune drops chains that begin with a salt where another salt leaves no more
// water for no more money, time and waste: nothing that follows
// could make up for it, and the carriers beyond the best few. It returns the routes kept and what was dropped.
func (t *Tuner) Prune(all []routes.Route) (kept []routes.Route, dropped []routes.Excluded) {
	all, dropped = t.fewCarriers(all)
	worse := t.dominatedSalts(all)
	told := map[string]bool{}
	for _, r := range all {
		agent := pretreatment(r)
		why, dominated := worse[agent]
		if agent == "" || !dominated {
			kept = append(kept, r)
			continue
		}
		if !told[agent] {
			told[agent] = true
			dropped = append(dropped, routes.Excluded{ID: "salt:" + agent + "+…", Reason: why})
		}
	}
	return kept, dropped
}

// Unbeaten leaves out the steps that Prune drops as a first step.
func (t *Tuner) Unbeaten(all []routes.Stage) (kept []routes.Stage) {
	var chains []routes.Route
	for _, s := range all {
		if s.Kind == steps.Salt {
			chains = append(chains, routes.Route{s, {Kind: steps.Buy}})
		}
	}
	worse := t.dominatedSalts(chains)
	for _, s := range all {
		if worse[s.Agent] == "" {
			kept = append(kept, s)
		}
	}
	return kept
}

// pretreatment is the salt that another step follows, or "".
func pretreatment(r routes.Route) string {
	for _, s := range r[:len(r)-1] {
		if s.Kind == steps.Salt {
			return s.Agent
		}
	}
	return ""
}

// saltResult is what a salt does to the lot by itself.
type saltResult struct {
	agent                     string
	water, cost, hours, waste float64 // kg/kg, money, h, kg; a salt needs no energy
}

func (t *Tuner) dominatedSalts(all []routes.Route) map[string]string {
	var results []saltResult
	seen := map[string]bool{"": true}
	for _, r := range all {
		agent := pretreatment(r)
		if seen[agent] {
			continue
		}
		seen[agent] = true
		alone := routes.Route{{Kind: steps.Salt, Agent: agent}, {Kind: steps.Buy}} // not as the last step: the usual dose
		run, err := t.Case.Run(alone, t.blank(alone))
		if err != nil {
			continue
		}
		run.Uses = ofStage(run.Uses, 1)
		cost, err := t.Book.PerBatchFloat(run.Uses, t.Case.Lot.BatchesPerYear)
		if err != nil || len(t.Book.Missing(run.Uses)) > 0 { // no price is not free
			continue
		}
		o := run.Outcomes[0]
		results = append(results, saltResult{agent, o.Out.Water(), cost, o.HoursTotal, o.WasteKg})
	}
	worse := map[string]string{}
	for _, a := range results {
		for _, b := range results {
			if a.agent != b.agent && dominates(b, a) {
				worse[a.agent] = fmt.Sprintf("as a first step %s leaves %s for less, %s leaves %s", b.agent, quantity.FormatWater(b.water), a.agent, quantity.FormatWater(a.water))
			}
		}
	}
	return worse
}

func dominates(a, b saltResult) bool {
	return a.water <= b.water && a.cost <= b.cost && a.hours <= b.hours && a.waste <= b.waste && a != b
}

func ofStage(uses []routes.StageUse, place int) []routes.StageUse {
	var out []routes.StageUse
	for _, u := range uses {
		if u.Stage == place {
			out = append(out, u)
		}
	}
	return out
}
