package routes

import (
	"os"
	"path/filepath"
	"regexp"
	"testing"

	"parch/catalog"
)

// Every operating fact that a route asks for stands in the catalog: a missing
// one would be taken for zero.
func TestEveryPracticeKeyExists(t *testing.T) {
	c, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	asked := regexp.MustCompile(`practice\("([^"]+)"\)`)
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	count := 0
	for _, file := range files {
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		for _, found := range asked.FindAllStringSubmatch(string(text), -1) {
			count++
			if v, ok := c.Practice[found[1]]; !ok || v.SI == 0 {
				t.Errorf("%s asks for %q, which the catalog does not give", file, found[1])
			}
		}
	}
	if count < 30 {
		t.Errorf("only %d questions found: does the pattern still match?", count)
	}
}
