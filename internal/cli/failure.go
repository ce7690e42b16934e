package cli

import (
	"context"
	"errors"
	"fmt"

	"github.com/urfave/cli/v2"

	"parch/internal/routes"
)

// Exit status.
const (
	statusFailed  = 1
	statusMisused = 2
)

// failure is an error with its exit status and a hint, which is printed on a
// line of its own.
type failure struct {
	status int
	err    error
	hint   string
	bare   bool // the message says itself where the problem is: no "parch:" before it
}

func (f *failure) Error() string { return f.err.Error() }

func (f *failure) Unwrap() error { return f.err }

// misused is a command line that has to be put right.
func misused(message, hint string) error {
	return &failure{status: statusMisused, err: errors.New(message), hint: hint}
}

// badFile is a list of problems in a file, each with its place.
func badFile(err error) error {
	if err == nil {
		return nil
	}
	return &failure{status: statusMisused, err: err, bare: true}
}

// failed is anything that went wrong in the work itself.
func failed(err error) error {
	if err == nil {
		return nil
	}
	if errors.Is(err, context.Canceled) {
		return &failure{status: statusFailed, err: errors.New("interrupted; nothing more was written")}
	}
	var known *failure
	if errors.As(err, &known) {
		return err
	}
	if errors.Is(err, routes.ErrSettings) {
		return &failure{status: statusMisused, err: err, hint: "take the settings from a run of the same job, or leave --settings-from out"}
	}
	return &failure{status: statusFailed, err: err}
}

// report prints an error, or each of several that were joined, and returns the
// exit status.
func (p *program) report(err error) int {
	if err == nil {
		return 0
	}
	if several, ok := err.(interface{ Unwrap() []error }); ok {
		status := 0
		for _, e := range several.Unwrap() {
			status = max(status, p.report(e))
		}
		return status
	}
	var f *failure
	if !errors.As(err, &f) {
		f = &failure{status: statusFailed, err: err}
	}
	if f.bare {
		fmt.Fprintln(p.stderr, f.err)
	} else {
		fmt.Fprintf(p.stderr, "parch: %v\n", f.err)
	}
	if f.hint != "" {
		fmt.Fprintf(p.stderr, "  %s\n", f.hint)
	}
	return f.status
}

func unknownCommand(app *cli.App, name string) error {
	var known []string
	for _, c := range app.Commands {
		known = append(known, c.Name)
	}
	return misused(fmt.Sprintf("unknown command %q", name), didYouMean(name, known, "parch --help lists the commands"))
}
