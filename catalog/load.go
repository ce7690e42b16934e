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

//go:embed *.yaml *.csv solvents/*.yaml
var files embed.FS

var builtIn = sync.OnceValues(func() (*Catalog, error) { return Parse(files) })

// Load returns the built-in catalog, read and validated once. It is shared and
// must not be changed.
func Load() (*Catalog, error) { return builtIn() }

// Parse reads and validates a catalog laid out like the built-in one: a file for
// each kind and one for each solvent in solvents/. All problems of all files are
// reported at once, each with its file and line.
func Parse(fsys fs.FS) (*Catalog, error) {
	s, err := read(fsys, nil)
	if err != nil {
		return nil, err
	}
	return s.cat, nil
}

// read reads a catalog and lays the user's own files over it.
func read(fsys fs.FS, own []File) (*shelf, error) {
	names, err := list(fsys)
	if err != nil {
		return nil, err
	}
	s := newShelf(names)
	s.open(fsys)
	s.openOwn(own)
	s.readSources()
	s.readDate()
	s.readPractice()
	s.readDoubts()
	s.readSolvents()
	s.readAgents()
	s.readMatrix()
	s.readHistories()
	s.readApparatus()
	s.readPrices()
	s.readEmissions()
	s.readAssays()
	s.readCautions()
	s.readDiameters()
	s.readCarriers()
	s.readTables(fsys)
	s.validate()
	if err := s.err(); err != nil {
		return nil, err
	}
	return s, nil
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
	carriersFile  = "carriers.yaml"
	diameterFile  = "diameters.yaml"
	doubtFile     = "doubt.yaml"
	pairsFile     = "carrier-pairs.csv"
	ternaryFile   = "ternary.csv"
	layersFile    = "organic-layers.csv"
)

// list names the files to read, sorted, so that problems come in a fixed order.
func list(fsys fs.FS) ([]string, error) {
	names := []string{
		agentsFile, apparatusFile, assaysFile, carriersFile, cautionsFile, dateFile, diameterFile, doubtFile, emissionsFile, historiesFile,
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
				f.root, f.err = parse(fsys, f.name)
			}
		})
	}
	for i := range s.files {
		queue <- i
	}
	close(queue)
	workers.Wait()
}

// err joins the problems of all files, those of the user's own first.
func (s *shelf) err() error {
	var all []error
	for _, f := range slices.Concat(s.own, s.files) {
		all = append(all, f.err)
		if f.root != nil {
			all = append(all, f.root.Problems().Err())
		}
	}
	for _, t := range s.tables {
		all = append(all, t.err())
	}
	return errors.Join(all...)
}

// solventFile is the file of a solvent of the catalog itself.
func solventFile(key string) string { return "solvents/" + key + ".yaml" }

// root is the top of a file of the catalog itself, nil where it could not be read.
func (s *shelf) root(name string) *document.Node {
	for _, f := range s.files {
		if f.name == name {
			return f.root
		}
	}
	return nil
}

// each visits the file of a kind and then the same kind in the user's own files.
func (s *shelf) each(name string, visit func(n *document.Node)) {
	if root := s.root(name); root != nil {
		visit(root)
	}
	s.owning = true
	defer func() { s.owning = false }()
	for _, f := range s.own {
		if n := f.kinds.Get(strings.TrimSuffix(name, ".yaml")); n != nil {
			visit(n)
		}
	}
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

// BuiltIn is the folder that Load reads.
func BuiltIn() fs.FS { return files }
