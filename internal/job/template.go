package job

import (
	"bytes"
	_ "embed"
	"text/template"

	"parch/catalog"
)

//go:embed template.yaml
var starterText string

var starter = template.Must(template.New("template.yaml").Parse(starterText))

// Template returns a job file to start from, with one lot of the solvent. What is
// not needed stands in comments. A peroxide reading is never filled in: it has to
// be measured.
func Template(solvent *catalog.Solvent) []byte {
	class := solvent.Hazards.PeroxideClass
	var out bytes.Buffer
	err := starter.Execute(&out, struct {
		Key, Name string
		Peroxides bool
	}{solvent.Key, solvent.Name, class != "" && class != "none"})
	if err != nil {
		panic(err) // a buffer takes everything, and the fields are those of the template
	}
	return out.Bytes()
}
