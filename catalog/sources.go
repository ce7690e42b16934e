package catalog

import (
	"maps"
	"slices"

	"parch/internal/document"
)

func (s *shelf) readDate() { s.cat.Date = s.root(dateFile).Map("date").Need("date").Date() }

// readSources comes first: every other file cites by id.
func (s *shelf) readSources() {
	s.cat.Sources = map[string]Source{}
	for _, e := range s.root(sourcesFile).Entries() {
		s.cat.Sources[e.Key] = Source{ID: e.Key, Reference: e.Node.Text()}
	}
}

// checkCitations reports references that no number rests on.
func (s *shelf) checkCitations() {
	for _, e := range s.root(sourcesFile).Entries() {
		if !s.cited[e.Key] {
			e.Node.Fail("no number rests on this source; cite it or remove it")
		}
	}
}

// keysOf lists the keys of a map, sorted.
func keysOf[V any](m map[string]V) []string { return slices.Sorted(maps.Keys(m)) }

// known reads a list of words, each of which must be one of those allowed.
func known(n *document.Node, allowed []string) []string {
	if n == nil {
		return nil
	}
	var words []string
	for _, item := range n.Items() {
		words = append(words, knownWord(item, allowed))
	}
	return words
}

// knownWord reads a word that must be one of those allowed, which may be many.
func knownWord(n *document.Node, allowed []string) string {
	word := n.Text()
	if word != "" && !slices.Contains(allowed, word) {
		n.Fail("%q is not known here%s", word, n.Offer(word, allowed))
	}
	return word
}
