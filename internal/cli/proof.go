package cli

import (
	"errors"
	"fmt"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/proof"
	"parch/internal/report"
)

func (p *program) proof() *cli.Command {
	return command(cli.Command{
		Name:      "proof",
		Usage:     "hold the models against published figures, each with its source",
		UsageText: "parch proof [--json]",
		Description: "Prints every published figure of the catalog beside what the program computes for it. The exit\n" +
			"status is 1 if a published figure misses its limit without a recorded reason, or by more than the\n" +
			"reason is held to.",
		Flags:  []cli.Flag{onOff("json", "print JSON")},
		Action: p.runProof,
	})
}

func (p *program) runProof(c *cli.Context) error {
	if c.Args().Present() {
		return misused("proof takes flags only, but was given: "+strings.Join(c.Args().Slice(), " "), "")
	}
	cat, err := catalog.Load()
	checks, errChecks := catalog.LoadChecks()
	if err := errors.Join(err, errChecks); err != nil {
		return failed(err)
	}
	r, err := proof.Run(cat, checks)
	if err != nil {
		return failed(err)
	}
	if c.Bool("json") {
		err = report.ProofJSON(p.stdout, r, cat.Date)
	} else {
		err = report.ProofText(p.stdout, r, cat.Date)
	}
	if n := len(r.Failures()); err == nil && n > 0 {
		err = fmt.Errorf("%d of %d figures miss their limit without a recorded reason, or by more than it allows", n, len(r.Rows))
	}
	return failed(err)
}
