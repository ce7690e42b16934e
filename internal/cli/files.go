package cli

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// maxInputBytes is read of an input file at most; the reader of the file refuses
// what is longer than its own limit.
const maxInputBytes = 16<<20 + 1

// read returns the content of a file, or of standard input for "-".
func (p *program) read(path string) (name string, data []byte, err error) {
	if path == "-" {
		data, err = io.ReadAll(io.LimitReader(p.stdin, maxInputBytes))
		return "standard input", data, failed(err)
	}
	f, err := os.Open(path)
	if err != nil {
		return path, nil, misused(fmt.Sprintf("cannot read %s: %s", path, cause(err)), "")
	}
	defer f.Close()
	data, err = io.ReadAll(io.LimitReader(f, maxInputBytes))
	if err != nil {
		return path, nil, misused(fmt.Sprintf("cannot read %s: %s", path, cause(err)), "")
	}
	return path, data, nil
}

// free refuses a path that cannot be written to, before any work is done.
func free(path string, force bool, hint string) error {
	info, err := os.Lstat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		dir := filepath.Dir(path)
		if parent, err := os.Stat(dir); err != nil || !parent.IsDir() {
			return misused(fmt.Sprintf("cannot write %s: there is no folder %s", path, dir), "")
		}
		return nil
	case err != nil:
		return misused(fmt.Sprintf("cannot write %s: %s", path, cause(err)), "")
	case info.Mode()&fs.ModeSymlink != 0:
		return misused(fmt.Sprintf("cannot write %s: it is a link; name the file itself", path), "")
	case !info.Mode().IsRegular():
		return misused(fmt.Sprintf("cannot write %s: it is not a file", path), "")
	case !force:
		return misused(fmt.Sprintf("%s is there already and was kept", path), hint)
	}
	return nil
}

// sameFile reports whether two paths name one file, however they are spelled.
func sameFile(a, b string) bool {
	one, errA := filepath.Abs(a)
	other, errB := filepath.Abs(b)
	return errA == nil && errB == nil && one == other
}

// cause is what went wrong without the name of the file, which the message has.
func cause(err error) string {
	var path *fs.PathError
	if errors.As(err, &path) {
		return path.Err.Error()
	}
	var link *os.LinkError
	if errors.As(err, &link) {
		return link.Err.Error()
	}
	return err.Error()
}
