package report

import (
	"fmt"
	"slices"
	"strings"

	"parch/internal/routes"
	"parch/internal/study"
)

// scope says in few words which routes of a lot something holds for: nothing
// where it holds for all, else the step or the agent that they share, the few
// that are left out, or their names.
func scope(l *study.Lot, holds map[string]bool) string {
	var in, out []string
	for i := range l.Routes {
		if id := l.Routes[i].ID; holds[id] {
			in = append(in, id)
		} else {
			out = append(out, id)
		}
	}
	if len(out) == 0 {
		return ""
	}
	if len(in) > 1 {
		if shared := sharedStage(l, holds); shared != "" {
			return fmt.Sprintf(" (routes with %s)", shared)
		}
		if len(out) < len(in) {
			return fmt.Sprintf(" (all but %s)", strings.Join(out, ", "))
		}
	}
	return fmt.Sprintf(" (%s)", strings.Join(in, ", "))
}

// sharedStage is the kind or the agent that exactly these routes use, or "".
func sharedStage(l *study.Lot, holds map[string]bool) string {
	var words []string
	for i := range l.Routes {
		for _, s := range l.Routes[i].Run.Route {
			words = append(words, string(s.Kind), s.Agent)
		}
	}
	for _, word := range words {
		if word != "" && exactly(l, holds, word) {
			return word
		}
	}
	return ""
}

func exactly(l *study.Lot, holds map[string]bool, word string) bool {
	uses := func(s routes.Stage) bool { return string(s.Kind) == word || s.Agent == word }
	for i := range l.Routes {
		if r := &l.Routes[i]; slices.ContainsFunc(r.Run.Route, uses) != holds[r.ID] {
			return false
		}
	}
	return true
}
