package cli

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"

	"parch/internal/report"
)

// outputs of one run: five files, long enough to break off inside.
func outputs() (book, doc []byte, tables []report.Table) {
	long := func(mark string) []byte { return bytes.Repeat([]byte(mark), 4000) }
	for i, name := range report.TableNames {
		tables = append(tables, report.Table{Name: name, Data: long(string(rune('p' + i)))})
	}
	return long("x"), long("j"), tables
}

// fault strikes at one operation of a disk.
type fault struct {
	op   string // create, write, sync, close, replace, remove or folder
	at   int    // which of its kind, from 1; 0: every one
	kept int    // bytes that a broken write still takes
	err  error
}

// faultyDisk is the real disk with one fault.
func faultyDisk(f fault) (d disk, struck *bool) {
	struck = new(bool)
	count := map[string]int{}
	fails := func(op string) bool {
		count[op]++
		hit := f.op == op && (f.at == 0 || f.at == count[op])
		*struck = *struck || hit
		return hit
	}
	d = realDisk
	d.create = func(path string) (openFile, error) {
		if fails("create") {
			return nil, &fs.PathError{Op: "open", Path: path, Err: f.err}
		}
		real, err := realDisk.create(path)
		return &faultyFile{real, fails, f}, err
	}
	d.replace = func(from, to string) error {
		if fails("replace") {
			return &os.LinkError{Op: "rename", Old: from, New: to, Err: f.err}
		}
		return realDisk.replace(from, to)
	}
	d.appear = func(from, to string) error {
		if fails("replace") {
			return &os.LinkError{Op: "link", Old: from, New: to, Err: f.err}
		}
		return realDisk.appear(from, to)
	}
	d.makeDir = func(path string) error {
		if fails("folder") {
			return &fs.PathError{Op: "mkdir", Path: path, Err: f.err}
		}
		return realDisk.makeDir(path)
	}
	return d, struck
}

type faultyFile struct {
	openFile
	fails func(op string) bool
	fault fault
}

func (f *faultyFile) Write(data []byte) (int, error) {
	if !f.fails("write") {
		return f.openFile.Write(data)
	}
	n, err := f.openFile.Write(data[:min(f.fault.kept, len(data))])
	return n, errors.Join(f.fault.err, err)
}

func (f *faultyFile) Sync() error {
	if f.fails("sync") {
		return f.fault.err
	}
	return f.openFile.Sync()
}

func (f *faultyFile) Close() error {
	err := f.openFile.Close()
	if f.fails("close") {
		return f.fault.err
	}
	return err
}

// faults lists one fault for each operation on each of the five files, with
// writes that break off at several lengths.
func faults() (all []fault) {
	for _, err := range []error{syscall.ENOSPC, syscall.EIO, syscall.EROFS} {
		all = append(all, fault{op: "folder", at: 1, err: err})
		for file := 1; file <= 5; file++ {
			for _, op := range []string{"create", "sync", "close", "replace"} {
				all = append(all, fault{op: op, at: file, err: err})
			}
			for _, kept := range []int{0, 1, 1999, 3999, 4000} {
				all = append(all, fault{op: "write", at: file, kept: kept, err: err})
			}
		}
	}
	return all
}

// Whatever fails while results are written: each file is the old one or the new
// one as a whole, nothing else stays behind, and the error names what could not
// be written and why. Files that were there and files that were not are tried.
func TestFaultsLeaveWholeFiles(t *testing.T) {
	tried := 0
	for _, old := range []bool{false, true} {
		for _, f := range faults() {
			tried++
			t.Run(fmt.Sprintf("%s %d, %d bytes, %v, old files %v", f.op, f.at, f.kept, f.err, old), func(t *testing.T) { strike(t, f, old) })
		}
	}
	if tried < 200 {
		t.Errorf("only %d faults were tried", tried)
	}
}

func strike(t *testing.T, f fault, old bool) {
	dir := t.TempDir()
	q := request{workbook: filepath.Join(dir, "plan.xlsx"), json: filepath.Join(dir, "plan.json"), csv: filepath.Join(dir, "tables")}
	book, doc, tables := outputs()
	want := map[string][]byte{q.workbook: book, q.json: doc}
	for _, table := range tables {
		want[filepath.Join(q.csv, table.Name)] = table.Data
	}
	const before = "of an earlier run"
	if old {
		if err := os.Mkdir(q.csv, 0o755); err != nil {
			t.Fatal(err)
		}
		for path := range want {
			if err := os.WriteFile(path, []byte(before), 0o644); err != nil {
				t.Fatal(err)
			}
		}
	}
	d, struck := faultyDisk(f)
	d.force = old
	_, err := q.writeFiles(context.Background(), d, &files{*bytes.NewBuffer(book), *bytes.NewBuffer(doc), tables})
	if !*struck {
		t.Fatal("the fault did not strike")
	}
	if err == nil || !strings.Contains(err.Error(), "cannot write") || !strings.Contains(err.Error(), f.err.Error()) {
		t.Errorf("the error is %v", err)
	}
	walk(t, dir, func(path string, data []byte) {
		switch whole, known := want[path]; {
		case !known:
			t.Errorf("%s stays behind", filepath.Base(path))
		case !bytes.Equal(data, whole) && !(old && string(data) == before):
			t.Errorf("%s is broken: %d bytes", filepath.Base(path), len(data))
		}
		delete(want, path)
	})
	if old && len(want) > 0 {
		t.Errorf("%d old files are gone", len(want))
	}
}

func walk(t *testing.T, dir string, visit func(path string, data []byte)) {
	t.Helper()
	err := filepath.WalkDir(dir, func(path string, e fs.DirEntry, err error) error {
		if err != nil || e.IsDir() {
			return err
		}
		data, err := os.ReadFile(path)
		visit(path, data)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
}

// An unfinished part that cannot be taken away is named.
func TestPartThatStaysIsNamed(t *testing.T) {
	d, _ := faultyDisk(fault{op: "sync", err: syscall.EIO})
	d.remove = func(path string) error { return &fs.PathError{Op: "remove", Path: path, Err: syscall.EROFS} }
	path := filepath.Join(t.TempDir(), "plan.xlsx")
	if err := d.write(path, []byte("x")); err == nil || !strings.Contains(err.Error(), "cannot remove") || !strings.Contains(err.Error(), ".part") {
		t.Errorf("the error is %v", err)
	}
}

// Two runs at once to the same file: the file is one of the two, whole.
func TestTwoRunsToOneFile(t *testing.T) {
	path := filepath.Join(t.TempDir(), "plan.xlsx")
	d := realDisk
	d.force = true
	contents := [][]byte{bytes.Repeat([]byte("a"), 300_000), bytes.Repeat([]byte("b"), 200_000)}
	done := make(chan error)
	const rounds = 50
	for _, data := range contents {
		go func() {
			var err error
			for range rounds {
				err = errors.Join(err, d.write(path, data))
			}
			done <- err
		}()
	}
	if err := errors.Join(<-done, <-done); err != nil {
		t.Fatal(err)
	}
	got, err := os.ReadFile(path)
	if err != nil || !bytes.Equal(got, contents[0]) && !bytes.Equal(got, contents[1]) {
		t.Errorf("%d bytes, %v", len(got), err)
	}
	walk(t, filepath.Dir(path), func(found string, _ []byte) {
		if found != path {
			t.Errorf("%s stays behind", found)
		}
	})
}

// A file that comes up while the work is done is kept unless it may be written over.
func TestFileThatComesUpMeanwhileIsKept(t *testing.T) {
	path := filepath.Join(t.TempDir(), "plan.xlsx")
	first := realDisk.write(path, []byte("first"))
	second := realDisk.write(path, []byte("second"))
	got, err := os.ReadFile(path)
	if first != nil || err != nil || string(got) != "first" {
		t.Errorf("%q, %v, %v", got, first, err)
	}
	if second == nil || !strings.Contains(second.Error(), "was kept") {
		t.Errorf("the second run says %v", second)
	}
	walk(t, filepath.Dir(path), func(found string, _ []byte) {
		if found != path {
			t.Errorf("%s stays behind", found)
		}
	})
}
