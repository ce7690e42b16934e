package cli

import (
	"strings"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/job"
)

func (p *program) schema() *cli.Command {
	return command(cli.Command{
		Name:        "schema",
		Usage:       "print the JSON Schema of the job file",
		UsageText:   "parch schema",
		Description: "JSON Schema, draft 2020-12, for an editor that checks a file while it is written.",
		Action:      p.runSchema,
	})
}

func (p *program) runSchema(c *cli.Context) error {
	if c.Args().Present() {
		return misused("schema takes nothing, but was given: "+strings.Join(c.Args().Slice(), " "), "")
	}
	cat, err := catalog.Load()
	if err != nil {
		return failed(err)
	}
	text, err := job.Schema(cat)
	if err != nil {
		return failed(err)
	}
	_, err = p.stdout.Write(text)
	return failed(err)
}
