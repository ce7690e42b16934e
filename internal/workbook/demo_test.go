package workbook

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"sync"
	"testing"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/study"
)

// usual are the options of the program when nothing else is asked for.
var usual = study.Options{Draws: 2000, Seed: 1}

var loadDemo = sync.OnceValues(func() (*study.Report, error) {
	return runDemo(nil, usual)
})

// runDemo runs the demonstration job, changed by edit.
func runDemo(edit func(*job.Job), options study.Options) (*study.Report, error) {
	name, data := job.Demo()
	return runJob(name, data, edit, options)
}

func runJob(name string, data []byte, edit func(*job.Job), options study.Options) (*study.Report, error) {
	c, err := catalog.Load()
	if err != nil {
		return nil, err
	}
	j, err := job.Read(name, data, c)
	if err != nil {
		return nil, err
	}
	if edit != nil {
		edit(j)
	}
	return study.Compare(context.Background(), j, c, options)
}

var jobReports = map[string]*study.Report{} // tests of this package run one after the other

// jobReport is the report of one of the jobs of testdata, run once.
func jobReport(t *testing.T, name string) *study.Report {
	t.Helper()
	if r := jobReports[name]; r != nil {
		return r
	}
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "jobs", name+".yaml"))
	if err != nil {
		t.Fatal(err)
	}
	r, err := runJob(name+".yaml", data, nil, usual)
	if err != nil {
		t.Fatal(err)
	}
	jobReports[name] = r
	return r
}

func demo(t *testing.T) *study.Report {
	t.Helper()
	r, err := loadDemo()
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func written(t *testing.T, r *study.Report) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, r); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}
