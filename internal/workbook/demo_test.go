package workbook

import (
	"bytes"
	"context"
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
	c, err := catalog.Load()
	if err != nil {
		return nil, err
	}
	name, data := job.Demo()
	j, err := job.Read(name, data, c)
	if err != nil {
		return nil, err
	}
	if edit != nil {
		edit(j)
	}
	return study.Compare(context.Background(), j, c, options)
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
