package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"parch/internal/report"
)

// maxListBytes is read of a price list at most; its reader refuses what is longer
// than its own limit.
const maxListBytes = 1<<20 + 1

// beside reads files that a job names, relative to the folder of the job; to the
// folder one is in where the job comes from standard input.
func beside(job string) func(name string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		path := name
		if !filepath.IsAbs(name) && job != "-" {
			path = filepath.Join(filepath.Dir(job), name)
		}
		f, err := os.Open(path)
		if err != nil {
			return nil, errors.New(cause(err))
		}
		defer f.Close()
		data, err := io.ReadAll(io.LimitReader(f, maxListBytes))
		if err != nil {
			return nil, errors.New(cause(err))
		}
		return data, nil
	}
}

// tablesFree refuses a folder that cannot take the tables. One that is not there
// is made, if the folder around it is.
func (q *request) tablesFree() error {
	info, err := os.Stat(q.csv)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return free(q.csv, q.force, "") // says where the folder around it is missing
	case err != nil:
		return misused(fmt.Sprintf("cannot write into %s: %s", q.csv, cause(err)), "")
	case !info.IsDir():
		return misused(fmt.Sprintf("cannot write into %s: it is not a folder", q.csv), "name a folder with --csv")
	}
	var problems []error
	for _, name := range report.TableNames {
		problems = append(problems, free(filepath.Join(q.csv, name), q.force, "name another folder with --csv, or write over it with --force"))
	}
	return errors.Join(problems...)
}

func (d disk) writeTables(dir string, tables []report.Table) error {
	if err := d.makeDir(dir); err != nil {
		return fmt.Errorf("cannot write into %s: %s", dir, cause(err))
	}
	var problems []error
	for _, t := range tables {
		problems = append(problems, d.write(filepath.Join(dir, t.Name), t.Data))
	}
	return errors.Join(problems...)
}
