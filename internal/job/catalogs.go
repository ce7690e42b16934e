package job

import (
	"path/filepath"
	"slices"

	"parch/catalog"
	"parch/internal/document"
	"parch/internal/quantity"
)

// Catalog returns the catalog that a job rests on: the built-in one with the files
// of over laid over it, then those that the job itself names under "catalog",
// relative to its folder. It must be asked before the job is read: solvents of
// the job may come from there. A job that cannot be parsed names no file; Read
// says what is wrong with it.
func Catalog(name string, data []byte, over []catalog.File, files func(name string) ([]byte, error)) (*catalog.Catalog, error) {
	root, err := document.Parse(name, data)
	if err != nil {
		return catalog.LoadWith(over...)
	}
	own := slices.Clone(over)
	for _, n := range catalogNames(root) {
		typed := n.Text()
		if typed == "" || files == nil {
			continue // said by Read
		}
		path := besideJob(name, typed)
		if slices.ContainsFunc(own, func(f catalog.File) bool { return sameFile(f.Name, path) }) {
			continue // also named by --catalog
		}
		content, err := files(typed)
		if err != nil {
			n.Fail("%s cannot be read: %v", quantity.Quote(typed), err)
			continue
		}
		own = append(own, catalog.File{Name: path, Data: content})
	}
	if err := root.Problems().Err(); err != nil {
		return nil, err
	}
	return catalog.LoadWith(own...)
}

// catalogNames are the values under "catalog" of a job, a list or a single name.
func catalogNames(root *document.Node) []*document.Node {
	if !root.IsMap() {
		return nil
	}
	for _, e := range root.Entries() {
		switch {
		case e.Key != "catalog":
		case e.Node.IsList():
			return e.Node.Items()
		case !e.Node.IsMap() && !e.Node.IsEmpty():
			return []*document.Node{e.Node}
		}
	}
	return nil
}

// besideJob is the path of a file that a job names, as it may be typed to open it.
func besideJob(job, file string) string {
	if filepath.IsAbs(file) {
		return file
	}
	return filepath.Join(filepath.Dir(job), file)
}

func sameFile(a, b string) bool { return filepath.Clean(a) == filepath.Clean(b) }
