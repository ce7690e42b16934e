package catalog

import (
	"embed"
	"errors"
	"io/fs"
	"runtime"
	"slices"
	"strings"
	"sync"

	"parch/internal/document"
)

//go:embed *.yaml solvents/*.yaml
var files embed.FS

var builtIn = sync.OnceValues(func() (*Catalog, error) { return Parse(files) })

// Load returns the built-in catalog, read and validated once. It is shared and
// must not be changed.
func Load() (*Catalog, error) { return builtIn() }

// Parse reads and validates a catalog laid out like the built-in one: a file for
// each kind and one for each solvent in solvents/. All problems of all files are
// reported at once, each with its file and line.
func Parse(fsys fs.FS) (*Catalog, error) {
	names, err := list(fsys)
	if err != nil {
		return nil, err
	}
	s := newShelf(names)
	s.open(fsys)
	s.readSources()
	s.readDate()
	s.readPractice()
	s.readSolvents()
	s.readAgents()
	s.readMatrix()
	s.readHistories()
	s.readApparatus()
	s.readPrices()
	s.readEmissions()
	s.readAssays()
	s.readCautions()
	s.validate()
	if err := s.err(); err != nil {
		return nil, err
	}
	return s.cat, nil
}

// The files of a catalog.
const (
	dateFile      = "catalog.yaml"
	sourcesFile   = "sources.yaml"
	practiceFile  = "practice.yaml"
	agentsFile    = "agents.yaml"
	matrixFile    = "matrix.yaml"
	historiesFile = "histories.yaml"
	apparatusFile = "apparatus.yaml"
	pricesFile    = "prices.yaml"
	emissionsFile = "emissions.yaml"
	assaysFile    = "assays.yaml"
	cautionsFile  = "cautions.yaml"
)

// list names the files to read, sorted, so that problems come in a fixed order.
func list(fsys fs.FS) ([]string, error) {
	names := []string{
		agentsFile, apparatusFile, assaysFile, cautionsFile, dateFile, emissionsFile, historiesFile,
		matrixFile, practiceFile, pricesFile, sourcesFile,
	}
	solvents, err := fs.Glob(fsys, "solvents/*.yaml")
	slices.Sort(solvents)
	return append(names, solvents...), err
}

// open parses all files, as many at a time as there are processors.
func (s *shelf) open(fsys fs.FS) {
	queue := make(chan int)
	var workers sync.WaitGroup
	for range min(runtime.GOMAXPROCS(0), len(s.files)) {
		workers.Go(func() {
			for i := range queue {
				f := &s.files[i]
				data, err := fs.ReadFile(fsys, f.name)
				if err == nil {
					f.root, err = document.Parse(f.name, data)
				}
				f.err = err
			}
		})
	}
	for i := range s.files {
		queue <- i
	}
	close(queue)
	workers.Wait()
}

// err joins the problems of all files.
func (s *shelf) err() error {
	var all []error
	for _, f := range s.files {
		all = append(all, f.err)
		if f.root != nil {
			all = append(all, f.root.Problems().Err())
		}
	}
	return errors.Join(all...)
}

// root is the top of a file, nil where the file could not be read.
func (s *shelf) root(name string) *document.Node {
	for _, f := range s.files {
		if f.name == name {
			return f.root
		}
	}
	return nil
}

// solventFiles are the tops of the solvent files with the key that each name promises.
func (s *shelf) solventFiles() (keys []string, roots []*document.Node) {
	for _, f := range s.files {
		if key, ok := strings.CutPrefix(f.name, "solvents/"); ok {
			keys = append(keys, strings.TrimSuffix(key, ".yaml"))
			roots = append(roots, f.root)
		}
	}
	return keys, roots
}
