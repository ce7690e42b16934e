package cli

import (
	"errors"
	"fmt"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/bench"
	"parch/internal/report"
)

func (p *program) step() *cli.Command {
	return command(cli.Command{
		Name:      "step",
		Usage:     "answer one question at the bench: what one step does",
		UsageText: "parch step KIND --solvent S --water W [flags]",
		Description: "KIND is settle, trap, forerun, salt, soak, column or reactive. No job file and no prices. HISTORY is an\n" +
			"oven's temperature with what was done after it (\"250 C, closed hot, 30 d\", \"200 C, vacuum 1 hPa\"),\n" +
			"or a key of the catalog such as opened-tin.\n" +
			"A soak takes two of --dose, --hours and --to; with --to alone it sizes overnight, 24 h and 72 h.\n" +
			"A salt takes up to two of them; a reactive agent says whether need and surplus reach --to.\n" +
			"The exit status is 1 where the step is refused or does not reach what --to asks for.",
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "solvent", Usage: "the `NAME` of the solvent, by key, name or alias"},
			&cli.StringFlag{Name: "water", Usage: "water `W` of the lot: mg/kg, ppm (mass), % m/m, mg/L, mmol/L"},
			&cli.StringFlag{Name: "to", Usage: "water `W` wanted: solves for the dose or the time"},
			&cli.StringFlag{Name: "agent", Usage: "drying agent `A`, such as sieve-3a"},
			&cli.StringFlag{Name: "dose", Usage: "dose `D` of the agent per volume, such as \"100 g/L\", \"10 % m/v\" or \"10 % m/m\""},
			&cli.StringFlag{Name: "hours", Usage: "time `T` of a soak, a salt or a reactive reflux; of a trap an upper limit on its reflux; a bare number is hours"},
			&cli.StringFlag{Name: "charges", Usage: "number `N` of equal charges that make up the dose, one after the other, each for --hours"},
			onOff("stirred", "stir the soak; else it stands still"),
			onOff("powder", "the sieve is a powder; else it is beads"),
			&cli.StringFlag{Name: "activated", Usage: "`HISTORY` of the sieve, such as \"300 C closed hot\" or \"residual 1.5 g/100 g\""},
			&cli.StringFlag{Name: "volume", Usage: "volume `V` of the lot (default: 1 L)"},
			&cli.StringFlag{Name: "free-water", Usage: "volume `V` of free water beside the lot"},
			&cli.StringFlag{Name: "rinse", Usage: "volume `V` of fresh solvent, as wet as the lot, that rinses the cake of a salt"},
			&cli.StringFlag{Name: "height", Usage: "height `H` of the liquid (default: as deep as wide)"},
			&cli.StringFlag{Name: "temperature", Usage: "temperature `T` of the lot and the room (default: the catalog's)"},
			&cli.StringFlag{Name: "power", Usage: "power `P` of the heater (default: the still's own)"},
			&cli.StringFlag{Name: "receiver", Usage: "temperature `T` of the trap's receiver (default: the catalog's)"},
			&cli.StringFlag{Name: "returns", Usage: "the layer `L` that the trap's receiver can give back: light, heavy or either; or a receiver's key"},
			&cli.StringFlag{Name: "pressure", Usage: "absolute pressure `P`, 1 to 110 kPa, in hPa, kPa, mbar or mmHg (default: the catalog's)"},
			&cli.StringFlag{Name: "peroxide", Usage: "peroxide reading `C`, wanted before a peroxide former is heated"},
			&cli.StringFlag{Name: "reagent", Usage: "amount `N` of a reagent in the lot: water in mol % of it"},
			&cli.StringFlag{Name: "carrier", Usage: "carrier `C` that boils the water out under a trap; --dose, where it is not chosen, is of it"},
			&cli.StringFlag{Name: "stages", Usage: "equilibrium stages `N` of the column of a forerun, or of a trap with a carrier (default: 0, a simple still)"},
			catalogFlag(),
			onOff("json", "print JSON"),
		},
		Action: p.runStep,
	})
}

func (p *program) runStep(c *cli.Context) error {
	kind, err := oneArgument(c, "a step")
	if err != nil {
		return err
	}
	cat, err := p.catalogForStep(c)
	if err != nil {
		return err
	}
	var problems []error
	request := bench.Request{Kind: kind, Flags: flagsOfStep(c), Stirred: c.Bool("stirred"), Powder: c.Bool("powder")}
	if c.IsSet("solvent") {
		request.Solvent, err = findSolvent(cat, c.String("solvent"))
		problems = append(problems, err)
	} else {
		problems = append(problems, misused("step needs --solvent", "solvents: "+strings.Join(solventKeys(cat), ", ")))
	}
	question, err := bench.Read(cat, request)
	if err := errors.Join(append(problems, mistakes(err))...); err != nil {
		return err
	}
	answer, err := bench.Ask(cat, question)
	if err != nil {
		return refusedStep(cat, err)
	}
	return p.showStep(c, answer)
}

// catalogForStep is no more of the built-in catalog than one step asks for, where
// that is enough.
func (p *program) catalogForStep(c *cli.Context) (*catalog.Catalog, error) {
	if len(c.StringSlice("catalog")) == 0 && c.IsSet("solvent") {
		names := []string{c.String("solvent")}
		if c.IsSet("carrier") {
			names = append(names, c.String("carrier"))
		}
		if cat, ok := catalog.LoadFor(names...); ok {
			return cat, nil
		}
	}
	return p.loadCatalog(c)
}

// flagsOfStep are the flags that were given, by name.
func flagsOfStep(c *cli.Context) (flags map[string]string) {
	flags = map[string]string{}
	for _, f := range c.Command.Flags {
		name := f.Names()[0]
		if _, holdsOne := f.(*cli.StringFlag); !holdsOne || !c.IsSet(name) {
			continue
		}
		flags[name] = c.String(name)
	}
	return flags
}

// mistakes are those of a request, as errors of the command line.
func mistakes(err error) error {
	if several, ok := err.(interface{ Unwrap() []error }); ok {
		var all []error
		for _, e := range several.Unwrap() {
			all = append(all, mistakes(e))
		}
		return errors.Join(all...)
	}
	var m *bench.Mistake
	if errors.As(err, &m) {
		return misused(m.Message, m.Hint)
	}
	return failed(err)
}

// refusedStep is a step that is not run: with its reason, its source and what
// may be done.
func refusedStep(cat *catalog.Catalog, err error) error {
	var refusal *bench.Refusal
	if !errors.As(err, &refusal) {
		return mistakes(err)
	}
	message := refusal.Reason
	if source, ok := cat.Sources[refusal.Source]; ok {
		message += fmt.Sprintf(" [%s: %s", source.ID, source.Reference)
		if refusal.Confidence != "" {
			message += "; " + string(refusal.Confidence)
		}
		message += "]"
	}
	return &failure{status: statusFailed, err: errors.New(message), hint: refusal.Hint}
}

// showStep prints the answer. How something was read goes to standard error
// where JSON leaves no room for it.
func (p *program) showStep(c *cli.Context, a *bench.Answer) (err error) {
	if c.Bool("json") {
		for _, note := range a.Question.Notes {
			fmt.Fprintln(p.stderr, note)
		}
		err = report.StepJSON(p.stdout, a)
	} else {
		err = report.StepText(p.stdout, a)
	}
	if missed := a.Missed(); err == nil && missed != "" {
		return &failure{status: statusFailed, err: errors.New(missed), hint: a.Instead()}
	}
	return failed(err)
}
