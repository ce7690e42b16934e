package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strings"

	"github.com/urfave/cli/v2"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/report"
	"parch/internal/spread"
	"parch/internal/study"
	"parch/internal/workbook"
)

const defaultWorkbook = "drying-routes.xlsx"

// Draws that are made where no other number is asked for, and the fewest that say
// anything of a twentieth.
const (
	usualDraws = spread.UsualDraws
	usualSeed  = 1
	leastDraws = 100
)

func (p *program) compare() *cli.Command {
	return command(cli.Command{
		Name:      "compare",
		Usage:     "compare the routes for the lots of a job and write the workbook",
		UsageText: "parch compare JOB | --demo [flags]",
		Description: "JOB is a job file; - reads it from standard input. The ranking is printed and the workbook\n" +
			"written, also where no route reaches a target: then the exit status is 1.",
		Flags: []cli.Flag{
			onOff("demo", "run the built-in example, whose prices are invented"),
			catalogFlag(),
			&cli.StringFlag{Name: "workbook", Value: defaultWorkbook, Usage: "write the workbook to `F`"},
			&cli.StringFlag{Name: "json", Usage: "write JSON to `F`; with -, to standard output in place of the text"},
			&cli.StringFlag{Name: "csv", Usage: "write buying.csv, bills.csv and routes.csv into the folder `DIR`"},
			&cli.StringFlag{Name: "settings-from", Usage: "take the settings from the JSON `F` of an earlier run"},
			onOff("force", "write over files that are there already"),
			&cli.UintFlag{Name: "draws", Value: usualDraws, Usage: "take the plans through `N` draws of what is not known exactly; 0: none"},
			&cli.Uint64Flag{Name: "seed", Value: usualSeed, Usage: "seed of the draws, `N`"},
			&cli.StringFlag{Name: "explain", Usage: "print how every number of `ROUTE` came about, in place of the ranking"},
			onOff("all", "print every route, not only the first of a lot"),
			onOff("quiet", "print errors only"),
		},
		Action: p.runCompare,
	})
}

// request is what a compare command asks for.
type request struct {
	job, workbook, json, csv, settings, explain string
	demo, force, all, quiet                     bool
}

func (p *program) runCompare(c *cli.Context) error {
	q := request{
		workbook: c.String("workbook"), json: c.String("json"), csv: c.String("csv"), settings: c.String("settings-from"), explain: c.String("explain"),
		demo: c.Bool("demo"), force: c.Bool("force"), all: c.Bool("all"), quiet: c.Bool("quiet"),
	}
	if err := q.complete(c); err != nil {
		return err
	}
	j, cat, jobErr := p.readJob(c, q.job, q.demo)
	opts, settingsErr := p.readSettings(q.settings)
	if err := errors.Join(q.outputsFree(), jobErr, settingsErr); err != nil {
		return err
	}
	opts.Draws, opts.Seed = int(c.Uint("draws")), c.Uint64("seed")
	done, stop := p.progressBar(q.quiet)
	opts.Progress = done
	r, err := interruptible(c.Context, func() (*study.Report, error) { return study.Compare(c.Context, j, cat, opts) })
	stop()
	if err != nil {
		return failed(err)
	}
	if known := report.Explainable(r); q.explain != "" && !slices.Contains(known, q.explain) {
		return misused(fmt.Sprintf("--explain %s: no lot has such a route", q.explain), didYouMean(q.explain, known, "compare --all prints the routes"))
	}
	if q.settings != "" && !q.quiet {
		p.tunedAnew(q.settings, opts, r)
	}
	return p.deliver(c.Context, q, r)
}

// complete takes the job from the arguments and refuses what does not fit together.
func (q *request) complete(c *cli.Context) (err error) {
	switch {
	case q.demo && c.Args().Present():
		return misused(fmt.Sprintf("compare takes a job file or --demo, not both: %s", c.Args().First()), "")
	case !q.demo:
		if q.job, err = oneArgument(c, "a job file, or --demo"); err != nil {
			return err
		}
	}
	if n := c.Uint("draws"); n > spread.MaxDraws || n > 0 && n < leastDraws {
		return misused(fmt.Sprintf("--draws %d: 0 or %d to %d are allowed", n, leastDraws, spread.MaxDraws), "")
	}
	if seed := c.Uint64("seed"); seed > math.MaxInt64 {
		return misused(fmt.Sprintf("--seed %d: 0 to %d are allowed", seed, int64(math.MaxInt64)), "")
	}
	if ext := filepath.Ext(q.workbook); !strings.EqualFold(ext, ".xlsx") {
		return misused(fmt.Sprintf("--workbook %s: the name of a workbook ends in .xlsx", q.workbook), "")
	}
	if c.IsSet("json") && q.json == "" {
		return misused("--json needs the name of a file, or -", "")
	}
	if c.IsSet("csv") && q.csv == "" {
		return misused("--csv needs the name of a folder", "")
	}
	if c.IsSet("settings-from") && q.settings == "" {
		return misused("--settings-from needs the name of a file", "")
	}
	if q.job == "-" && q.settings == "-" {
		return misused("the job and --settings-from cannot both come from standard input", "")
	}
	if q.json != "" && sameFile(q.json, q.workbook) {
		return misused(fmt.Sprintf("--json and --workbook name the same file: %s", q.json), "")
	}
	return nil
}

func (q *request) outputsFree() error {
	problems := []error{free(q.workbook, q.force, "name another file with --workbook, or write over it with --force")}
	if q.json != "" && q.json != "-" {
		problems = append(problems, free(q.json, q.force, "name another file with --json, or write over it with --force"))
	}
	if q.csv != "" {
		problems = append(problems, q.tablesFree())
	}
	return errors.Join(problems...)
}

// readJob reads a job and the catalog that it rests on, own data included.
func (p *program) readJob(c *cli.Context, path string, demo bool) (*job.Job, *catalog.Catalog, error) {
	name, data := job.Demo()
	if !demo {
		var err error
		if name, data, err = p.read(path); err != nil {
			return nil, nil, err
		}
	}
	cat, err := p.jobCatalog(c, path, name, data)
	if err != nil {
		return nil, nil, err
	}
	j, err := job.ReadWith(name, data, cat, beside(path))
	return j, cat, badFile(err)
}

func (p *program) readSettings(path string) (study.Options, error) {
	if path == "" {
		return study.Options{}, nil
	}
	name, data, err := p.read(path)
	if err != nil {
		return study.Options{}, err
	}
	settings, err := report.Settings(name, data)
	return study.Options{Settings: settings}, badFile(err)
}

// tunedAnew names the routes for which the earlier run has no settings.
func (p *program) tunedAnew(from string, opts study.Options, r *study.Report) {
	for i := range r.Lots {
		l := &r.Lots[i]
		var missing []string
		for j := range l.Routes {
			if _, ok := opts.Settings[l.Job.Name][l.Routes[j].ID]; !ok {
				missing = append(missing, l.Routes[j].ID)
			}
		}
		if len(missing) > 0 {
			fmt.Fprintf(p.stderr, "%s has no settings for %s of %q: tuned anew\n", from, strings.Join(missing, ", "), l.Job.Name)
		}
	}
}

// deliver writes the files and prints the result. The result is printed even if
// a file cannot be written: nothing that was computed is lost.
func (p *program) deliver(ctx context.Context, q request, r *study.Report) error {
	f, err := interruptible(ctx, func() (*files, error) { return filled(r) })
	opts := report.Options{}
	if err == nil {
		d := p.disk
		d.force = q.force
		opts, err = q.writeFiles(ctx, d, f)
	}
	if errors.Is(err, context.Canceled) {
		return failed(err)
	}
	opts.All = q.all
	return errors.Join(failed(err), failed(p.print(q, r, opts, f.doc.Bytes())), unreached(r))
}

// files are what a comparison writes.
type files struct {
	book, doc bytes.Buffer
	tables    []report.Table
}

func filled(r *study.Report) (f *files, err error) {
	f = &files{}
	f.tables, err = report.Tables(r)
	return f, errors.Join(err, workbook.Write(&f.book, r.Priced()), report.JSON(&f.doc, r))
}

func (q *request) writeFiles(ctx context.Context, d disk, f *files) (opts report.Options, err error) {
	if err := ctx.Err(); err != nil {
		return opts, err
	}
	if err := d.write(q.workbook, f.book.Bytes()); err != nil {
		return opts, err
	}
	opts.Workbook = q.workbook
	if q.json != "" && q.json != "-" {
		if err := d.write(q.json, f.doc.Bytes()); err != nil {
			return opts, err
		}
		opts.JSON = q.json
	}
	if q.csv != "" {
		if err := d.writeTables(q.csv, f.tables); err != nil {
			return opts, err
		}
		opts.CSV = q.csv
	}
	return opts, nil
}

func (p *program) print(q request, r *study.Report, opts report.Options, doc []byte) error {
	if q.json == "-" {
		if !q.quiet {
			for _, w := range r.Warnings {
				fmt.Fprintln(p.stderr, w)
			}
		}
		_, err := p.stdout.Write(doc)
		return err
	}
	if q.explain != "" {
		return report.Explain(p.stdout, r, q.explain)
	}
	if q.quiet {
		return nil
	}
	return report.Text(p.stdout, r, opts)
}

// unreached is an error where a lot has no route to its target.
func unreached(r *study.Report) error {
	var lots []error
	for i := range r.Lots {
		l := &r.Lots[i]
		switch {
		case l.NothingToDo != "" || len(l.Routes) > 0 && l.Routes[0].Rank > 0:
		case l.CannotShow != "":
			lots = append(lots, failed(fmt.Errorf("%s: no route can be shown to reach the target", l.Job.Name)))
		default:
			lots = append(lots, failed(fmt.Errorf("%s: no route reaches the target", l.Job.Name)))
		}
	}
	return errors.Join(lots...)
}
