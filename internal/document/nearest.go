package document

import (
	"sort"
	"strings"
	"unicode/utf8"

	"github.com/agnivade/levenshtein"
)

// Nearest returns up to three of the known words that are closest to what was
// typed, the closest first. Case does not count. Words that share nothing with it
// are left out.
func Nearest(typed string, known []string) []string {
	typed = strings.ToLower(strings.TrimSpace(typed))
	length := utf8.RuneCountInString(typed)
	if length == 0 || length > 60 {
		return nil
	}
	distance := map[string]int{}
	var near []string
	for _, word := range known {
		lower := strings.ToLower(word)
		d := levenshtein.ComputeDistance(typed, lower)
		close := d <= max(1, length/3)
		contained := length >= 3 && (strings.Contains(lower, typed) || len(lower) >= 3 && strings.Contains(typed, lower))
		if !close && !contained {
			continue
		}
		if _, seen := distance[word]; !seen {
			near = append(near, word)
			distance[word] = d
		}
	}
	sort.Slice(near, func(i, j int) bool {
		if a, b := distance[near[i]], distance[near[j]]; a != b {
			return a < b
		}
		return near[i] < near[j]
	})
	return near[:min(len(near), 3)]
}

// Offer is Nearest as the end of a message: `; did you mean "toluene"?`, or "".
// In a flood of problems it is left out: it would take long and nobody reads it.
func (n *Node) Offer(typed string, known []string) string {
	if n == nil || n.problems.Count() > 4*shown {
		return ""
	}
	near := Nearest(typed, known)
	if len(near) == 0 {
		return ""
	}
	return `; did you mean "` + strings.Join(near, `" or "`) + `"?`
}
