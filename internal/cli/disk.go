package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"

	"github.com/natefinch/atomic"
)

// disk is what a result goes through on its way into a file. Tests put faults
// into each part of it.
type disk struct {
	create  func(path string) (openFile, error)
	replace func(from, to string) error // to is the old file or the new one, at any moment
	remove  func(path string) error
	makeDir func(path string) error
}

// openFile is a file that is being written.
type openFile interface {
	io.WriteCloser
	Sync() error
}

var realDisk = disk{
	create: func(path string) (openFile, error) {
		return os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	},
	replace: atomic.ReplaceFile,
	remove:  os.Remove,
	makeDir: func(path string) error { return os.MkdirAll(path, 0o755) },
}

// write puts data into a file that appears whole or not at all.
func (d disk) write(path string, data []byte) error {
	part := filepath.Join(filepath.Dir(path), fmt.Sprintf(".parch-%d-%08x%s.part", os.Getpid(), rand.Uint32(), filepath.Ext(path)))
	err := d.fill(part, data)
	if err == nil {
		err = d.replace(part, path)
	}
	if err != nil {
		return errors.Join(fmt.Errorf("cannot write %s: %s", path, cause(err)), d.clear(part))
	}
	return nil
}

func (d disk) fill(path string, data []byte) error {
	f, err := d.create(path)
	if err != nil {
		return err
	}
	_, err = f.Write(data)
	return errors.Join(err, f.Sync(), f.Close())
}

// clear takes the unfinished part away, if there is one.
func (d disk) clear(part string) error {
	if err := d.remove(part); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("cannot remove %s: %s", part, cause(err))
	}
	return nil
}
