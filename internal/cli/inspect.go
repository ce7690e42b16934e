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
			&cli.StringFlag{Name: "carrier", Usage: "show the azeotrope of water, the solvent and carrier `C`, a solvent of parch catalog carriers"},
			catalogFlag(),
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
	cat, err := p.loadCatalog(c)
	if err != nil {
		return err
	}
	solvent, solventErr := findSolvent(cat, name)
	pressurePa, pressureErr := flagQuantity(c, "pressure", quantity.Pressure, cat.Practice["site-pressure"])
	receiverK, receiverErr := flagQuantity(c, "receiver", quantity.Temperature, cat.Practice["site-receiver"])
	carrier, carrierErr := findCarrier(c, cat, solvent)
	if err := errors.Join(solventErr, carrierErr, pressureErr, receiverErr); err != nil {
		return err
	}
	sheet, err := inspect.Solvent(cat, solvent, pressurePa, receiverK)
	if err == nil && carrier != "" {
		err = sheet.AddCarrier(cat, carrier)
	}
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

// findCarrier takes a carrier of the catalog from --carrier; "" where none is asked for.
func findCarrier(c *cli.Context, cat *catalog.Catalog, solvent *catalog.Solvent) (string, error) {
	if !c.IsSet("carrier") {
		return "", nil
	}
	typed := c.String("carrier")
	carrier, err := findSolvent(cat, typed)
	if err == nil && cat.Carriers[carrier.Key] != nil {
		if solvent != nil && carrier.Key == solvent.Key {
			return "", misused(fmt.Sprintf("--carrier: %s cannot carry water out of itself", carrier.Name), "")
		}
		return carrier.Key, nil
	}
	if wrong := cat.MistypedCAS(typed); wrong != "" {
		return "", misused("--carrier: "+wrong, "")
	}
	carriers := slices.Sorted(maps.Keys(cat.Carriers))
	hint := "carriers: " + strings.Join(carriers, ", ")
	if near := document.Nearest(typed, carriers); len(near) > 0 && err != nil {
		hint = "did you mean " + strings.Join(near, " or ") + "?"
	}
	return "", misused(fmt.Sprintf("--carrier: %q is not a carrier of the catalog", typed), hint)
}

// findSolvent finds a solvent by key, name, alias or CAS number; case does not count.
func findSolvent(cat *catalog.Catalog, name string) (*catalog.Solvent, error) {
	var known []string
	for _, key := range slices.Sorted(maps.Keys(cat.Solvents)) {
		s := cat.Solvents[key]
		if s.Water == nil {
			continue
		}
		if s.IsCalled(name) {
			return s, nil
		}
		known = append(known, s.Words()...)
	}
	if wrong := cat.MistypedCAS(name); wrong != "" {
		return nil, misused(wrong, "")
	}
	hint := "solvents: " + strings.Join(solventKeys(cat), ", ")
	if near := document.Nearest(name, known); len(near) > 0 {
		hint = "did you mean " + strings.Join(near, " or ") + "?"
	}
	if s := cat.Solvents["water"]; s != nil && s.IsCalled(name) {
		return nil, misused(`"water" is what is taken out: a solvent is wanted here`, "its own numbers: parch catalog solvents water")
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
