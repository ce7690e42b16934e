package bench_test

import (
	"testing"

	"parch/catalog"
	"parch/internal/bench"
)

// No two agents of the catalog answer to one word, and each answers to all of its own.
func TestAgentsAnswerToTheirNames(t *testing.T) {
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	for key, agent := range cat.Agents {
		for _, word := range append([]string{agent.Key, agent.Name, agent.Formula}, agent.Aliases...) {
			if word == "" {
				continue
			}
			if found := bench.FindAgent(cat, word); found != agent {
				t.Errorf("%q of %s finds %v", word, key, found)
			}
		}
	}
}
