package cli

import (
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/inspect"
	"parch/internal/quantity"
	"parch/internal/report"
)

func (p *program) inspect() *cli.Command {
	return command(cli.Command{
		Name:        "inspect",
		Usage:       "show boiling, azeotrope, solubility, trap floor and hazards of a solvent",
		UsageText:   "parch inspect SOLVENT [flags]",
		Description: "SOLVENT is a key, name or alias of the catalog.",
		Flags: []cli.Flag{
			&cli.StringFlag{Name: "pressure", Usage: "pressure `P`, 1 to 110 kPa, with its unit (default: the catalog's)"},
			&cli.StringFlag{Name: "receiver", Usage: "temperature `T` of the trap's receiver, with its unit (default: the catalog's)"},
			&cli.StringFlag{Name: "carrier", Usage: "not available yet"},
			onOff("json", "print JSON"),
		},
		Action: p.runInspect,
	})
}

func (p *program) runInspect(c *cli.Context) error {
	name, err := oneArgument(c, "a solvent")
	if err != nil {
		return err
	}
	if c.IsSet("carrier") {
		return misused("--carrier is not available yet", "")
	}
	cat, err := catalog.Load()
	if err != nil {
		return failed(err)
	}
	solvent, solventErr := findSolvent(cat, name)
	pressurePa, pressureErr := flagQuantity(c, "pressure", quantity.Pressure, cat.Practice["site-pressure"])
	receiverK, receiverErr := flagQuantity(c, "receiver", quantity.Temperature, cat.Practice["site-receiver"])
	if err := errors.Join(solventErr, pressureErr, receiverErr); err != nil {
		return err
	}
	sheet, err := inspect.Solvent(cat, solvent, pressurePa, receiverK)
	if err != nil {
		return misused(err.Error(), "")
	}
	if c.Bool("json") {
		return failed(report.SheetJSON(p.stdout, sheet))
	}
	return failed(report.SheetText(p.stdout, sheet))
}

// flagQuantity reads a flag that carries a unit, or takes the catalog's value.
func flagQuantity(c *cli.Context, flag string, d quantity.Dimension, otherwise catalog.Value) (float64, error) {
	if !c.IsSet(flag) {
		return otherwise.SI, nil
	}
	reading, err := quantity.Parse(c.String(flag), d)
	if err != nil {
		return 0, misused(fmt.Sprintf("--%s: %s", flag, err), "")
	}
	return reading.SI, nil
}

// findSolvent finds a solvent by key, name or alias; case does not count.
func findSolvent(cat *catalog.Catalog, name string) (*catalog.Solvent, error) {
	var known []string
	for _, key := range slices.Sorted(maps.Keys(cat.Solvents)) {
		s := cat.Solvents[key]
		if s.Water == nil {
			continue
		}
		for _, word := range slices.Concat([]string{s.Key, s.Name}, s.Aliases) {
			if strings.EqualFold(word, strings.TrimSpace(name)) {
				return s, nil
			}
			known = append(known, word)
		}
	}
	hint := "solvents: " + strings.Join(solventKeys(cat), ", ")
	if near := document.Nearest(name, known); len(near) > 0 {
		hint = "did you mean " + strings.Join(near, " or ") + "?"
	}
	return nil, misused(fmt.Sprintf("%q is not a solvent of the catalog", name), hint)
}

func solventKeys(cat *catalog.Catalog) (keys []string) {
	for _, key := range slices.Sorted(maps.Keys(cat.Solvents)) {
		if cat.Solvents[key].Water != nil {
			keys = append(keys, key)
		}
	}
	return keys
}
