package cli

import (
	"strings"

	"github.com/urfave/cli/v2"
)

func (p *program) manual() *cli.Command {
	return command(cli.Command{
		Name:        "manual",
		Usage:       "print the manual page, made from the commands",
		UsageText:   "parch manual",
		Description: "Save it as parch.1 in a folder man1 of your manual pages.",
		Action:      p.runManual,
	})
}

func (p *program) runManual(c *cli.Context) error {
	if c.Args().Present() {
		return misused("manual takes nothing, but was given: "+strings.Join(c.Args().Slice(), " "), "")
	}
	app := p.app()
	app.Description = manualNotes
	text, err := app.ToManWithSection(1)
	if err != nil {
		return failed(err)
	}
	_, err = p.stdout.Write([]byte(text))
	return failed(err)
}

const manualNotes = `Exit status: 0 done; 1 failed, or no route reaches a target; 2 the command, the job file or a file
in the way has to be put right first.

The results support a decision, they do not make it. Site rules, safety data sheets, local codes and
licensed practice come first.`
