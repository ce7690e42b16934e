package job_test

import (
	"encoding/json"
	"go/ast"
	"go/parser"
	"go/token"
	"maps"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"parch/catalog"
	"parch/internal/job"
)

func built(t *testing.T) *catalog.Catalog {
	t.Helper()
	cat, err := catalog.Load()
	if err != nil {
		t.Fatal(err)
	}
	return cat
}

// Every key that the reader takes stands in the schema, and no other. The keys
// are read off the calls that take them.
func TestSchemaHasTheKeysOfTheReader(t *testing.T) {
	text, err := job.Schema(built(t))
	if err != nil {
		t.Fatal(err)
	}
	var schema map[string]any
	if err := json.Unmarshal(text, &schema); err != nil {
		t.Fatal(err)
	}
	said := map[string]bool{}
	collectKeys(schema, said)
	if d := cmp.Diff(slices.Sorted(maps.Keys(keysRead(t))), slices.Sorted(maps.Keys(said))); d != "" {
		t.Errorf("keys of the reader (-) and of the schema (+):\n%s", d)
	}
}

// collectKeys finds the names of all properties.
func collectKeys(node any, into map[string]bool) {
	switch n := node.(type) {
	case map[string]any:
		if properties, ok := n["properties"].(map[string]any); ok && n["type"] == "object" {
			for key := range properties {
				into[key] = true
			}
		}
		for _, child := range n {
			collectKeys(child, into)
		}
	case []any:
		for _, child := range n {
			collectKeys(child, into)
		}
	}
}

// keysRead lists the text arguments of the calls of Map in this package, and the
// keys of a price, which a price list shares.
func keysRead(t *testing.T) map[string]bool {
	t.Helper()
	keys := map[string]bool{}
	names, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	add := func(e ast.Expr) {
		if text, ok := e.(*ast.BasicLit); ok && text.Kind == token.STRING {
			key, _ := strconv.Unquote(text.Value)
			keys[key] = true
		}
	}
	for _, name := range names {
		f, err := parser.ParseFile(token.NewFileSet(), name, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		ast.Inspect(f, func(n ast.Node) bool {
			switch n := n.(type) {
			case *ast.CallExpr:
				if s, ok := n.Fun.(*ast.SelectorExpr); ok && s.Sel.Name == "Map" {
					for _, a := range n.Args {
						add(a)
					}
				}
			case *ast.ValueSpec:
				if n.Names[0].Name == "priceKeys" {
					for _, e := range n.Values[0].(*ast.CompositeLit).Elts {
						add(e)
					}
				}
			}
			return true
		})
	}
	if len(keys) < 30 {
		t.Fatalf("only %d keys were found in the reader: %v", len(keys), strings.Join(slices.Sorted(maps.Keys(keys)), ", "))
	}
	keys["currency"] = true // of a price, beside priceKeys
	return keys
}

// The schema knows the agents of the catalog and the objectives of the program.
func TestSchemaIsFilledFromTheCatalog(t *testing.T) {
	text, err := job.Schema(built(t))
	if err != nil {
		t.Fatal(err)
	}
	for _, word := range append([]string{`"sieve-3a"`, `"still-20l"`, `"toluene"`, `"opened-tin"`, `"settle"`}, job.Objectives...) {
		if !strings.Contains(string(text), strings.Trim(word, `"`)) {
			t.Errorf("the schema does not name %s", word)
		}
	}
}
