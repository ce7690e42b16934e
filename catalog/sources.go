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
	var all []document.Entry
	s.each(sourcesFile, func(n *document.Node) {
		for _, e := range n.Entries() {
			s.cat.Sources[e.Key] = Source{ID: e.Key, Reference: e.Node.Text(), Own: s.owning}
			all = append(all, e)
		}
	})
	for _, e := range all { // a reference is written out, so that none can point in a circle
		if other, ok := s.cat.Sources[e.Node.Text()]; ok {
			e.Node.Fail("%q is only the id of another source; write the reference out", other.ID)
		}
	}
}

// checkCitations reports references that no number rests on. With own files laid
// over the catalog only theirs are asked: they may replace what others rested on.
func (s *shelf) checkCitations() {
	s.each(sourcesFile, func(n *document.Node) {
		if len(s.own) > 0 && !s.owning {
			return
		}
		for _, e := range n.Entries() {
			if !s.cited[e.Key] {
				e.Node.Fail("no number rests on this source; cite it or remove it")
			}
		}
	})
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

// keysIn reads a list of keys of a map.
func keysIn[V any](n *document.Node, m map[string]V) []string {
	if n == nil {
		return nil
	}
	var keys []string
	for _, item := range n.Items() {
		keys = append(keys, keyOf(item, m))
	}
	return keys
}

// keyOf reads a key of a map.
func keyOf[V any](n *document.Node, m map[string]V) string {
	key := n.Text()
	if _, ok := m[key]; !ok && key != "" {
		return knownWord(n, keysOf(m))
	}
	return key
}
