package job

import (
	_ "embed"
	"encoding/json"
	"fmt"
	"maps"
	"slices"

	"parch/catalog"
)

// schemaText is the shape of a job file without the words that come from the
// program and its catalog.
//
//go:embed schema.json
var schemaText []byte

// Schema returns the JSON Schema (draft 2020-12) of the job file, with the keys of
// the catalog filled in.
func Schema(cat *catalog.Catalog) ([]byte, error) {
	var schema map[string]any
	if err := json.Unmarshal(schemaText, &schema); err != nil {
		return nil, fmt.Errorf("the built-in schema: %w", err)
	}
	r := &reader{cat: cat}
	var histories []string
	for _, h := range cat.Histories {
		histories = append(histories, h.Key)
	}
	for _, list := range []struct {
		words []string
		path  []string
	}{
		{Objectives, []string{"$defs", "objective", "enum"}},
		{Hazards, []string{"properties", "exclude", "properties", "hazards", "items", "enum"}},
		{storageClasses, []string{"properties", "storage limits", "items", "properties", "class", "enum"}},
		{stepKinds, []string{"properties", "exclude", "properties", "steps", "items", "enum"}},
		{r.agentKeys(), []string{"$defs", "agent", "enum"}},
		{slices.Sorted(maps.Keys(cat.Apparatus)), []string{"$defs", "apparatus", "enum"}},
		{r.solventKeys(), []string{"$defs", "lot", "properties", "solvent", "examples"}},
		{histories, []string{"$defs", "lot", "properties", "sieve history", "examples"}},
	} {
		if err := put(schema, list.path, list.words); err != nil {
			return nil, err
		}
	}
	text, err := json.MarshalIndent(schema, "", "  ")
	return append(text, '\n'), err
}

// put sets the list at the end of a path of keys.
func put(schema map[string]any, path, words []string) error {
	for _, key := range path[:len(path)-1] {
		next, ok := schema[key].(map[string]any)
		if !ok {
			return fmt.Errorf("the built-in schema has no %q of %v", key, path)
		}
		schema = next
	}
	last := path[len(path)-1]
	if _, ok := schema[last]; !ok {
		return fmt.Errorf("the built-in schema has no %q of %v", last, path)
	}
	schema[last] = words
	return nil
}
