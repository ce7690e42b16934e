package job_test

import (
	"bytes"
	"encoding/json"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"
	"go.yaml.in/yaml/v3"

	"parch/internal/job"
)

// What the program writes for its users keeps to its own schema, checked by a
// validator that had no part in writing it.
func TestOwnJobsKeepToTheSchema(t *testing.T) {
	cat := built(t)
	schema := compiled(t)
	_, demo := job.Demo()
	for name, text := range map[string][]byte{"demonstration": demo, "template": job.Template(cat.Solvents["tetrahydrofuran"])} {
		if err := schema.Validate(plain(t, text)); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestSchemaRefusesWhatTheReaderRefuses(t *testing.T) {
	const lot = "lots: [{solvent: toluene, batch: 18 L, water: 480 mg/kg, target: 15 mg/kg}]\n"
	schema := compiled(t)
	if err := schema.Validate(plain(t, []byte(lot))); err != nil {
		t.Fatalf("a good job: %v", err)
	}
	for name, text := range map[string]string{
		"no lots":       "title: nothing\n",
		"unknown key":   "colour: blue\n" + lot,
		"no target":     strings.Replace(lot, ", target: 15 mg/kg", "", 1),
		"bad objective": "objective: luck\n" + lot,
		"bad agent":     "exclude: {agents: [sawdust]}\n" + lot,
		"bad date":      "date: tomorrow\n" + lot,
	} {
		if schema.Validate(plain(t, []byte(text))) == nil {
			t.Errorf("%s: the schema lets it pass", name)
		}
		if _, err := job.Read("job.yaml", []byte(text), built(t)); err == nil {
			t.Errorf("%s: the reader lets it pass", name)
		}
	}
}

func compiled(t *testing.T) *jsonschema.Schema {
	t.Helper()
	text, err := job.Schema(built(t))
	if err != nil {
		t.Fatal(err)
	}
	parsed, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	c := jsonschema.NewCompiler()
	if err := c.AddResource("job.json", parsed); err != nil {
		t.Fatal(err)
	}
	schema, err := c.Compile("job.json")
	if err != nil {
		t.Fatal(err)
	}
	return schema
}

// plain is the document as JSON knows it: dates are text.
func plain(t *testing.T, text []byte) any {
	t.Helper()
	var root yaml.Node
	if err := yaml.Unmarshal(text, &root); err != nil {
		t.Fatal(err)
	}
	datesAsText(&root)
	var v any
	if err := root.Decode(&v); err != nil {
		t.Fatal(err)
	}
	encoded, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	v, err = jsonschema.UnmarshalJSON(bytes.NewReader(encoded))
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func datesAsText(n *yaml.Node) {
	if n.Tag == "!!timestamp" {
		n.Tag = "!!str"
	}
	for _, child := range n.Content {
		datesAsText(child)
	}
}
