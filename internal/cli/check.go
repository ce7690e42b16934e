package cli

import (
	"fmt"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/internal/job"
	"parch/internal/report"
)

func (p *program) check() *cli.Command {
	return command(cli.Command{
		Name:        "check",
		Usage:       "check a job file and list what was left to the catalog",
		UsageText:   "parch check JOB [--catalog FILE]",
		Description: "JOB is a job file; - reads it from standard input. All problems are listed at once.",
		Flags:       []cli.Flag{catalogFlag()},
		Action: func(c *cli.Context) error {
			path, err := oneArgument(c, "a job file")
			if err != nil {
				return err
			}
			j, _, err := p.readJob(c, path, false)
			if err != nil {
				return err
			}
			return failed(report.Check(p.stdout, j))
		},
	})
}

func (p *program) template() *cli.Command {
	return command(cli.Command{
		Name:        "new",
		Usage:       "write a job file to start from",
		UsageText:   "parch new [--solvent NAME] [--output job.yaml] [--catalog FILE]",
		Description: "An existing file is kept; the exit status is 2 then.",
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "solvent", Value: "toluene", Usage: "the `NAME` of the solvent, by key, name or alias"},
			catalogFlag(),
			&cli.StringFlag{Name: "output", Usage: "write to `FILE`; else to standard output"},
		},
		Action: p.runNew,
	})
}

func (p *program) runNew(c *cli.Context) error {
	if c.Args().Present() {
		return misused("new takes flags only, but was given: "+strings.Join(c.Args().Slice(), " "), "name a solvent with --solvent")
	}
	output := c.String("output")
	if c.IsSet("output") && output == "" {
		return misused("--output needs the name of a file", "")
	}
	if output != "" && output != "-" {
		if err := free(output, false, "name another file with --output"); err != nil {
			return err
		}
	}
	cat, err := p.loadCatalog(c)
	if err != nil {
		return err
	}
	solvent, err := findSolvent(cat, c.String("solvent"))
	if err != nil {
		return err
	}
	data := job.Template(solvent)
	if output == "" || output == "-" {
		_, err = p.stdout.Write(data)
		return failed(err)
	}
	if err := p.disk.write(output, data); err != nil {
		return failed(err)
	}
	_, err = fmt.Fprintf(p.stderr, "%s written; fill it in, then: parch check %s\n", output, output)
	return failed(err)
}
