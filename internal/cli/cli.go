// Package cli is the command line: commands, flags, messages and exit status.
//
// Results go to standard output, messages to standard error. Exit status 0 is
// done, 1 failed (no route reaches a target is a failure too), 2 a command, a
// job file or a file in the way that has to be put right first.
package cli

import (
	"context"
	"io"

	"github.com/urfave/cli/v2"
)

// program holds the streams that the commands use.
type program struct {
	stdin          io.Reader
	stdout, stderr io.Writer
	disk           disk
}

// Run carries out one command line, without the name of the program in args, and
// returns the exit status.
func Run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	p := &program{stdin: stdin, stdout: stdout, stderr: stderr, disk: realDisk}
	app := p.app()
	args, err := flagsFirst(app, args)
	if err == nil {
		err = app.RunContext(ctx, append([]string{app.Name}, args...))
	}
	return p.report(err)
}

func (p *program) app() *cli.App {
	return &cli.App{
		Name:                      "parch",
		Usage:                     "compare ways to dry bulk solvents",
		HideVersion:               true,
		HideHelpCommand:           true,
		CustomAppHelpTemplate:     appHelp,
		DisableSliceFlagSeparator: true,
		Reader:                    p.stdin,
		Writer:                    p.stdout,
		ErrWriter:                 p.stderr,
		Flags:                     []cli.Flag{onOff("version", "print the version, the commit it was built from and the date of the catalog")},
		Commands: []*cli.Command{p.compare(), p.check(), p.template(), p.step(), p.inspect(), p.catalog(), p.proof(), p.schema(),
			p.completion(), p.manual()},
		Action:         p.noCommand,
		OnUsageError:   func(_ *cli.Context, err error, _ bool) error { return flagFailure(err, nil) },
		ExitErrHandler: func(*cli.Context, error) {},
	}
}

// command fills in what all commands share.
func command(c cli.Command) *cli.Command {
	c.HideHelpCommand = true
	c.CustomHelpTemplate = commandHelp
	c.OnUsageError = func(_ *cli.Context, err error, _ bool) error { return flagFailure(err, c.Flags) }
	return &c
}

// onOff is a flag without a value.
func onOff(name, usage string) cli.Flag {
	return &cli.BoolFlag{Name: name, Usage: usage, DisableDefaultText: true}
}

// noCommand answers a command line without a known command.
func (p *program) noCommand(c *cli.Context) error {
	if c.Args().Present() {
		return unknownCommand(c.App, c.Args().First())
	}
	if c.Bool("version") {
		return failed(p.printVersion())
	}
	return misused("no command given", "parch --help lists the commands")
}

const appHelp = `parch: compare ways to dry bulk solvents

Use:
   parch COMMAND [flags]

Commands:{{range .VisibleCommands}}
   {{printf "%-9s" .Name}} {{.Usage}}{{end}}

Flags:{{range .VisibleFlags}}
   {{.}}{{end}}

"parch COMMAND --help" explains a command.
Exit status: 0 done; 1 failed, or no route reaches a target; 2 the command, the job
file or a file in the way has to be put right first.

The results support a decision, they do not make it. Site rules, safety data sheets,
local codes and licensed practice come first.
`

const commandHelp = `{{.HelpName}}: {{.Usage}}

Use:
   {{.UsageText}}
{{if .Description}}
{{.Description}}
{{end}}
Flags:{{range .VisibleFlags}}
   {{.}}{{end}}
`
