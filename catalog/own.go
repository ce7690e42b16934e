package catalog

import (
	"fmt"

	"parch/internal/document"
)

// File is a file of the user's own, in the format of the catalog: one YAML
// document with the kinds as keys.
type File struct {
	Name string // as typed, for messages
	Data []byte
}

// ownKinds are what an own file may hold. Each has the format of the file of the
// catalog with that name; solvents stand by key.
var ownKinds = []string{
	"sources", "solvents", "agents", "matrix", "histories", "apparatus", "prices", "practice", "doubt", "emissions", "cautions",
}

// LoadWith returns the built-in catalog with the user's own files laid over it,
// in the order given: an entry with a new key is added, one with a known key
// replaces the whole entry. The same rules hold as for the catalog itself, and
// what comes from these files is marked as the user's own. All problems are
// reported at once; with any problem nothing is loaded.
func LoadWith(own ...File) (*Catalog, error) {
	if len(own) == 0 {
		return Load()
	}
	s, err := read(files, own)
	if err != nil {
		return nil, err
	}
	return s.cat, nil
}

// openOwn parses the own files.
func (s *shelf) openOwn(own []File) {
	seen := map[string]bool{}
	for _, o := range own {
		f := file{name: o.Name}
		if seen[o.Name] {
			f.err = fmt.Errorf("%s: the file is named twice", o.Name)
		} else {
			f.root, f.err = document.Parse(o.Name, o.Data)
		}
		seen[o.Name] = true
		if f.root != nil {
			f.kinds = f.root.Map(ownKinds...)
		}
		s.own = append(s.own, f)
		s.cat.Own = append(s.cat.Own, o.Name)
	}
}
