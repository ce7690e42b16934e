package report

import (
	"testing"

	"parch/internal/routes"
	"parch/internal/steps"
	"parch/internal/study"
)

func TestScope(t *testing.T) {
	trap, buy := routes.Stage{Kind: steps.Trap}, routes.Stage{Kind: steps.Buy}
	soak3, soak4 := routes.Stage{Kind: steps.Soak, Agent: "sieve-3a"}, routes.Stage{Kind: steps.Soak, Agent: "sieve-4a"}
	l := &study.Lot{}
	for _, r := range []routes.Route{{soak3}, {soak4}, {trap, soak3}, {trap, soak4}, {trap}, {buy}} {
		l.Routes = append(l.Routes, study.Route{ID: r.ID(), Run: routes.Run{Route: r}})
	}
	for _, c := range []struct {
		want string
		ids  []string
	}{
		{"", []string{"soak:sieve-3a", "soak:sieve-4a", "trap+soak:sieve-3a", "trap+soak:sieve-4a", "trap", "buy"}},
		{" (routes with soak)", []string{"soak:sieve-3a", "soak:sieve-4a", "trap+soak:sieve-3a", "trap+soak:sieve-4a"}},
		{" (routes with sieve-4a)", []string{"soak:sieve-4a", "trap+soak:sieve-4a"}},
		{" (all but buy)", []string{"soak:sieve-3a", "soak:sieve-4a", "trap+soak:sieve-3a", "trap+soak:sieve-4a", "trap"}},
		{" (buy)", []string{"buy"}},
		{" (trap, buy)", []string{"trap", "buy"}},
	} {
		holds := map[string]bool{}
		for _, id := range c.ids {
			holds[id] = true
		}
		if got := scope(l, holds); got != c.want {
			t.Errorf("%v: got %q, want %q", c.ids, got, c.want)
		}
	}
}
