package cli

import (
	"fmt"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/job"
	"parch/internal/listing"
	"parch/internal/report"
)

// catalogFlag names files of the user's own data; it may be given several times.
func catalogFlag() cli.Flag {
	return &cli.StringSliceFlag{Name: "catalog", Usage: "lay the own data of `FILE` over the built-in catalog; may be given several times"}
}

// ownFiles reads the files that --catalog names.
func (p *program) ownFiles(c *cli.Context) ([]catalog.File, error) {
	var own []catalog.File
	for _, path := range c.StringSlice("catalog") {
		if path == "" {
			return nil, misused("--catalog needs the name of a file", "")
		}
		name, data, err := p.read(path)
		if err != nil {
			return nil, err
		}
		own = append(own, catalog.File{Name: name, Data: data})
	}
	return own, nil
}

// loadCatalog is the built-in catalog with the files of --catalog laid over it.
func (p *program) loadCatalog(c *cli.Context) (*catalog.Catalog, error) {
	own, err := p.ownFiles(c)
	if err != nil {
		return nil, err
	}
	cat, err := catalog.LoadWith(own...)
	if err != nil && len(own) > 0 {
		return nil, badFile(err)
	}
	return cat, failed(err)
}

// jobCatalog lays the files that a job names over those of --catalog.
func (p *program) jobCatalog(c *cli.Context, path, name string, data []byte) (*catalog.Catalog, error) {
	own, err := p.ownFiles(c)
	if err != nil {
		return nil, err
	}
	cat, err := job.Catalog(name, data, own, beside(path))
	return cat, badFile(err)
}

func (p *program) catalog() *cli.Command {
	return command(cli.Command{
		Name:      "catalog",
		Usage:     "list the catalog, with unit, range, source and confidence of every number",
		UsageText: "parch catalog [KIND [KEY]] [flags]",
		Description: "Without KIND the kinds are listed, with KIND its entries, with KEY one entry. Own data are laid\n" +
			"over the built-in catalog with --catalog and marked as such.",
		Flags:  []cli.Flag{catalogFlag(), onOff("json", "print JSON")},
		Action: p.runCatalog,
	})
}

func (p *program) runCatalog(c *cli.Context) error {
	if n := c.Args().Len(); n > 2 {
		return misused(fmt.Sprintf("catalog takes a kind and a key, but %d arguments were given", n), "a name with spaces goes between quotes")
	}
	cat, err := p.loadCatalog(c)
	if err != nil {
		return err
	}
	kinds := listing.Of(cat)
	if !c.Args().Present() {
		if c.Bool("json") {
			return failed(report.CatalogJSON(p.stdout, cat, kinds))
		}
		return failed(report.CatalogText(p.stdout, cat, kinds))
	}
	kind, ok := listing.Find(kinds, c.Args().First())
	if !ok {
		return unknownKind(kinds, c.Args().First())
	}
	if c.Args().Len() == 1 {
		if c.Bool("json") {
			return failed(report.KindJSON(p.stdout, kind))
		}
		return failed(report.KindText(p.stdout, kind))
	}
	entry, err := findEntry(cat, kind, c.Args().Get(1))
	if err != nil {
		return err
	}
	if c.Bool("json") {
		return failed(report.EntryJSON(p.stdout, cat, kind, entry))
	}
	return failed(report.EntryText(p.stdout, cat, kind, entry))
}

func unknownKind(kinds []listing.Kind, typed string) error {
	var names []string
	for _, k := range kinds {
		names = append(names, k.Name)
	}
	return misused(fmt.Sprintf("the catalog has no kind %q", typed), didYouMean(typed, names, "parch catalog lists the kinds"))
}

// findEntry finds an entry by key; a solvent by name or alias too.
func findEntry(cat *catalog.Catalog, kind listing.Kind, typed string) (listing.Entry, error) {
	if entry, ok := kind.Find(typed); ok {
		return entry, nil
	}
	if kind.Name == "solvents" {
		if s, err := findSolvent(cat, typed); err == nil {
			entry, _ := kind.Find(s.Key)
			return entry, nil
		}
	}
	if wrong := cat.MistypedCAS(typed); wrong != "" && (kind.Name == "solvents" || kind.Name == "carriers") {
		return listing.Entry{}, misused(wrong, "")
	}
	hint := "parch catalog " + kind.Name + " lists the keys"
	if near := document.Nearest(typed, kind.Keys()); len(near) > 0 {
		hint = fmt.Sprintf("did you mean %s?", near[0])
	}
	return listing.Entry{}, misused(fmt.Sprintf("%q is not among the %s of the catalog", typed, kind.Name), hint)
}
