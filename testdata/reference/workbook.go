//go:build unix

package main

import (
	"bytes"
	"context"
	"io"
	"os"
	"path/filepath"

	"parch/catalog"
	"parch/internal/job"
	"parch/internal/study"
	"parch/internal/workbook"
)

// book writes the workbook of the demonstration. The other side writes the cells
// of that file once more.
func book(cat *catalog.Catalog) (problem, error) {
	name, data := job.Demo()
	j, err := job.Read(name, data, cat)
	if err != nil {
		return problem{}, err
	}
	r, err := study.Compare(context.Background(), j, cat, study.Options{})
	if err != nil {
		return problem{}, err
	}
	var file bytes.Buffer
	if err := workbook.Write(&file, r.Priced()); err != nil {
		return problem{}, err
	}
	path := filepath.Join(os.TempDir(), "parch-reference.xlsx")
	if err := os.WriteFile(path, file.Bytes(), 0o644); err != nil {
		return problem{}, err
	}
	t, err := seconds(func() error { return workbook.Write(io.Discard, r.Priced()) })
	return problem{Name: "workbook", SecondsPerOp: t, Input: map[string]any{"file": path}, Answer: map[string]float64{}}, err
}
