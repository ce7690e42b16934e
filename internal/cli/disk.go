package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
	"sync"

	"github.com/natefinch/atomic"
)

// disk is what a result goes through on its way into a file. Tests put faults
// into each part of it.
type disk struct {
	force   bool // files that are there are written over
	create  func(path string) (openFile, error)
	replace func(from, to string) error // to is the old file or the new one, at any moment
	appear  func(from, to string) error // to is no file or the new one; fs.ErrExist where there is one
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
	appear:  appear,
	remove:  os.Remove,
	makeDir: func(path string) error { return os.MkdirAll(path, 0o755) },
}

// writing is held while a file is on its way.
var writing sync.Mutex

// HoldFiles waits until no file is half written, and lets none be begun after it:
// the program may then be ended at once.
func HoldFiles() { writing.Lock() }

// write puts data into a file that appears whole or not at all. A file that has
// come up since the work began is kept unless it may be written over.
func (d disk) write(path string, data []byte) error {
	writing.Lock()
	defer writing.Unlock()
	part := filepath.Join(filepath.Dir(path), fmt.Sprintf(".parch-%d-%08x%s.part", os.Getpid(), rand.Uint32(), filepath.Ext(path)))
	err := d.fill(part, data)
	if err == nil {
		err = d.place(part, path)
	}
	if errors.Is(err, fs.ErrExist) && !d.force {
		return errors.Join(misused(fmt.Sprintf("%s is there by now and was kept: another program wrote it meanwhile", path), ""), d.clear(part))
	}
	if err != nil {
		return errors.Join(fmt.Errorf("cannot write %s: %s", path, cause(err)), d.clear(part))
	}
	return nil
}

// place gives the part its name.
func (d disk) place(part, path string) error {
	if d.force {
		return d.replace(part, path)
	}
	if err := d.appear(part, path); err != nil {
		return err
	}
	return d.clear(part)
}

// appear links, because a new name for a file never takes the place of another;
// where the disk knows no links it looks first.
func appear(from, to string) error {
	err := os.Link(from, to)
	if err == nil || errors.Is(err, fs.ErrExist) {
		return err
	}
	if _, err := os.Lstat(to); err == nil {
		return fs.ErrExist
	}
	return atomic.ReplaceFile(from, to)
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
